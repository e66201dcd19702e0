/** Balancing while the hand changes densities: the balanced plan and its heights, without the answer about them. */
import { conversion } from '../base/length.ts'
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { panelName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import type { Brief } from '../plan/project/brief.ts'
import { noOptions } from '../plan/project/options.ts'
import { wishesOf } from '../plan/project/wishes.ts'
import { balancedPlan, densityOf } from './balance.ts'

export interface LiveDensities {
  readonly from: 'uniform' | 'length' | 'fit'
  /** Joints whose density is typed, over those above. */
  readonly typed: readonly { readonly joint: number; readonly density: number }[]
}

export interface LiveBalance {
  /** null: panels would turn inside out or cross. */
  readonly next: { readonly plan: Plan; readonly heights: Float64Array } | null
  readonly crossed: readonly string[]
  /** Density of each edge (length edgeCount), 0 on the outer rim. */
  readonly density: Float64Array
  readonly largest_mm: number
  readonly rms_mm: number
}

export function* liveBalance(plan: Plan, brief: Brief, { from, typed }: LiveDensities): Steps<Result<LiveBalance>> {
  const wishes = wishesOf(brief, noOptions, plan.unit)
  if (!wishes.ok) return wishes
  const made = yield* densityOf(plan, from)
  if (!made.ok) return made
  const density = made.value.slice()
  for (const { joint, density: value } of typed) density[joint] = value
  const found = yield* balancedPlan(plan, density, wishes.value)
  if (!found.ok) return found
  const { next, crossed } = found.value
  let largest = 0, squares = 0
  for (let n = 0; next !== null && n < plan.nodeCount; n += 1) {
    const shift = Math.hypot(next.plan.x[n] - plan.x[n], next.plan.y[n] - plan.y[n])
    largest = Math.max(largest, shift)
    squares += shift * shift
  }
  const mm = conversion(plan.unit, 'mm')
  return ok({ next, crossed: Array.from(crossed, panelName), density, largest_mm: largest * mm, rms_mm: Math.sqrt(squares / plan.nodeCount) * mm })
}
