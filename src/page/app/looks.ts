/** How the drawings are looked at, beside what the desk knows: nothing here is asked of the roof or undone. */
import type { Axis } from '../../plan/axes.ts'
import { axesOfPlan } from '../../plan/axes.ts'
import type { Plan } from '../../plan/plan.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import { createStore } from '../store/store.ts'
import { useStore } from './useStore.ts'

export interface Looks {
  /** Building axes stand beside the plan. */
  readonly axes: boolean
  /** Moves of nodes since the drawing was accepted are drawn over the plan. */
  readonly moves: boolean
  /** A chain line runs from the selected panel of the roof up into the plan. */
  readonly chained: boolean
  /** Which of its places the chosen repair is shown at, and how often it was asked to be zoomed to. */
  readonly place: number
  readonly zooms: number
}

export const looks = createStore<Looks>({ axes: true, moves: true, chained: false, place: 0, zooms: 0 })

export const useLooks = <T>(pick: (state: Looks) => T): T => useStore(looks, pick)

const axesKept = new WeakMap<Plan, readonly Axis[]>()

/** The axes that the drawing names, else those of the plan's own lines, worked out once. */
export function axesFor({ plan, axes }: Pick<ReadPlan, 'plan' | 'axes'>): readonly Axis[] {
  if (axes !== undefined && axes.length > 0) return axes
  const known = axesKept.get(plan)
  if (known !== undefined) return known
  const made = axesOfPlan(plan)
  axesKept.set(plan, made)
  return made
}
