/** Undo is an array of older documents: functions from state to state. */
import type { State, Step } from './state.ts'

/** A step taken: undone steps after it are overwritten. */
export function taken(state: State, step: Step): State {
  const steps = [...state.steps.slice(0, state.at + 1), step]
  return { ...state, steps, at: steps.length - 1, doc: step.doc, inHand: null, fresh: false }
}

/** An edit in hand, which the next one replaces and `taken` makes a step. */
export function held(state: State, step: Step): State {
  return { ...state, inHand: step, doc: step.doc, fresh: false, before: state.before ?? state.answer }
}

/** Puts down what is in hand: as a step, or without a trace. */
export function putDown(state: State, keep: boolean): State {
  if (state.inHand === null) return state
  if (keep) return { ...taken(state, state.inHand), before: null }
  return { ...state, inHand: null, before: null, doc: state.steps[state.at]?.doc ?? null, fresh: false }
}

/** To another step: back for undo, forward for redo. */
export function gone(state: State, to: number): State {
  const step = state.steps[to]
  return step === undefined || to === state.at ? state : { ...state, at: to, doc: step.doc, inHand: null, before: null, fresh: false }
}

export const canUndo = (state: State): boolean => state.at > 0
export const canRedo = (state: State): boolean => state.at < state.steps.length - 1
