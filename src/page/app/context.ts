/** Components find the desk here. */
import { createContext, useContext } from 'react'
import { assert } from '../../base/assert.ts'
import type { Desk } from '../store/desk.ts'
import type { State } from '../store/state.ts'
import { useStore } from './useStore.ts'

export const DeskContext = createContext<Desk | null>(null)

export function useDesk(): Desk {
  const desk = useContext(DeskContext)
  assert(desk !== null, 'a component outside the desk')
  return desk
}

export function useDeskState<T>(pick: (state: State) => T): T {
  return useStore(useDesk().store, pick)
}
