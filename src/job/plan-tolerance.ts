/** Whether a plan lifts within its own tolerance: all its panels flat, once nodes move by no more than the drawing is exact to. */
import { conversion } from '../base/length.ts'
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Plan } from '../plan/plan.ts'
import type { Brief } from '../plan/project/brief.ts'
import type { Options } from '../plan/project/options.ts'
import type { Wishes } from '../plan/project/wishes.ts'
import type { ConditionRows } from '../roof/conditions/condition-rows.ts'
import { movedWithin } from '../roof/cures/move/move-within.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import type { Raised, RaiseQuestion } from '../roof/raise/raise.ts'
import { keepsOf } from './keeps.ts'

/** A plan whose nodes move by less lifts within its tolerance: what a drawing is exact to. Our own choice. */
export const defaultPlanTolerance_mm = 1

/** The shift that the tolerance covers. */
export interface WithinPlan {
  readonly largest_mm: number
  readonly rms_mm: number
}

/** The shift by which a plan with no roof that folds lifts after all; null: it folds already, or the shift is over the tolerance. */
export function* withinPlan(
  plan: Plan, result: Raised, wishes: Wishes, rows: ConditionRows, question: RaiseQuestion, options: Options, brief: Brief,
): Steps<Result<WithinPlan | null>> {
  const tolerance_mm = options.planTolerance_mm ?? defaultPlanTolerance_mm
  const folds = result.verdict === 'lifts' || result.verdict === 'lifts in part'
  if (folds || tolerance_mm === 0 || plan.jointCount === 0) return ok(null)
  const keeps = keepsOf(plan, options, brief)
  if (!keeps.ok) return keeps
  const mm = conversion(plan.unit, 'mm')
  const found = yield* movedWithin({
    plan, rows, conditions: wishes.conditions, under: result.under, areas: nodeAreas(plan), wish: question, keeps: keeps.value,
    farBeyond: tolerance_mm / mm / plan.frame.span,
  }, wishes.datum ?? 0)
  if (found.kind !== 'moved') return ok(null)
  let largest = 0, squares = 0
  for (let n = 0; n < plan.nodeCount; n += 1) {
    const shift = Math.hypot(found.moved.plan.x[n] - plan.x[n], found.moved.plan.y[n] - plan.y[n]) * mm
    largest = Math.max(largest, shift)
    squares += shift * shift
  }
  return ok(largest > tolerance_mm ? null : { largest_mm: largest, rms_mm: Math.sqrt(squares / plan.nodeCount) })
}
