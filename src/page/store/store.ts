/** A value with listeners. Updates are functions from one immutable state to the next. */

export interface Store<S> {
  readonly state: () => S
  readonly update: (change: (state: S) => S) => void
  readonly subscribe: (listener: () => void) => () => void
}

export function createStore<S>(initial: S): Store<S> {
  let state = initial
  const listeners = new Set<() => void>()
  return {
    state: () => state,
    update(change) {
      const next = change(state)
      if (next === state) return
      state = next
      for (const listener of [...listeners]) listener()
    },
    subscribe(listener) {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
  }
}
