import { useSyncExternalStore } from 'react'
import type { Store } from '../store/store.ts'

/** The part of the state that `pick` returns; the component renders anew when it is another value. */
export function useStore<S, T>(store: Store<S>, pick: (state: S) => T): T {
  return useSyncExternalStore(store.subscribe, () => pick(store.state()))
}
