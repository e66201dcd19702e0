/** The job "adjust": the nearest plan that lifts as asked, its roof, and what moved; or why there is none. */
import { conversion } from '../base/length.ts'
import { assert } from '../base/assert.ts'
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Plan } from '../plan/plan.ts'
import type { Options } from '../plan/project/options.ts'
import { wishesOf, type Wishes } from '../plan/project/wishes.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import type { AdjustFacts } from '../roof/answer/adjust-facts.ts'
import type { Verdict } from '../roof/answer/answer.ts'
import { conditionRows } from '../roof/conditions/condition-rows.ts'
import { eliminate } from '../roof/conditions/eliminate.ts'
import { homogeneous } from '../roof/conditions/homogeneous.ts'
import { rowCount } from '../roof/conditions/rows.ts'
import type { PlanKeeps } from '../roof/cures/adjust/adjust.ts'
import { movedWithin } from '../roof/cures/move/move-within.ts'
import type { Moved, MoveOutcome, MoveQuestion } from '../roof/cures/move/move-nodes.ts'
import { flatness } from '../roof/raise/flatness.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import { liftSpace, nothingHeld } from '../roof/stress/lift-space.ts'
import { panelBases } from '../roof/stress/panel-bases.ts'
import { tiltDimension } from '../roof/stress/tilts.ts'
import { answerTo, questionOf, type Checked } from './check.ts'
import { keepsOf } from './keeps.ts'
import { defaultPlanTolerance_mm } from './plan-tolerance.ts'
import { planQuestion, withoutTolerance } from './question.ts'
import type { Request } from './request.ts'
import { targetOf } from './target.ts'
import { shiftsOf } from './shifts.ts'

export interface AdjustAnswer {
  /** The plan as drawn. */
  readonly drawn: Plan
  /** The answer on the adjusted plan, or on the plan as drawn where nothing moved. */
  readonly after: Checked
  /** Move of each node of the plan, mm (length nodeCount each). */
  readonly dx_mm: Float64Array
  readonly dy_mm: Float64Array
  readonly facts: AdjustFacts
}

/** Moves below this, in mm, are none that anybody could set out. */
const counted_mm = 1

/** Reads, checks, adjusts and checks again. */
export function* adjust(request: Request, version: string, sha256: string): Steps<Result<AdjustAnswer>> {
  const asked = yield* planQuestion(request, version, sha256)
  if (!asked.ok) return asked
  const { options } = asked.value.request
  // The tolerance is asked of the plan that is found, not of the one as drawn; the drawing is read with it.
  const question = withoutTolerance(asked.value)
  const { read, brief, target = null } = question
  const wishes = wishesOf(brief, options, read.plan.unit)
  if (!wishes.ok) return wishes
  const keeps = keepsOf(read.plan, options, brief)
  if (!keeps.ok) return keeps
  const glance = yield* liftsNowhere(read.plan, wishes.value)
  if (!glance.ok) return glance
  const full = (plan: Plan): Steps<Result<Checked>> => answerTo({ ...question, read: { ...read, plan }, space: glance.value?.space ?? null })
  let before: Checked | null = null
  if (glance.value === null) {
    const made = yield* full(read.plan)
    if (!made.ok) return made
    before = made.value
    if (before.answer.summary.verdict === 'lifts') return ok(unmoved(before, 'lifts', null))
  }
  const under = glance.value ?? before?.under
  assert(under !== undefined, 'the plan was looked at')
  const outcome = yield* moveOutcome(question.request, read, target, { wishes: wishes.value, under }, keeps.value)
  if (!outcome.ok) return outcome
  if (outcome.value.kind !== 'moved') {
    const drawn = before === null ? yield* full(read.plan) : ok(before)
    return drawn.ok ? ok(unmoved(drawn.value, outcome.value.kind, outcome.value)) : drawn
  }
  const { moved } = outcome.value
  const after = yield* full(moved.plan)
  if (!after.ok) return after
  return ok(yield* answerOf(read.plan, before?.answer.summary.verdict ?? null, after.value, moved, options))
}

/**
 * What moving nodes needs to know of a plan on which no joint folds in any roof: found by one factor, without frozen joints, gap
 * and near roof. null: some joint may fold, so that the whole answer is wanted.
 */
function* liftsNowhere(plan: Plan, wishes: Wishes): Steps<Result<MoveQuestion['under'] | null>> {
  const rows = conditionRows(plan, wishes.conditions, wishes.datum ?? 0)
  if (!rows.ok) return rows
  const { hard } = rows.value
  if (wishes.pitch !== null || plan.jointCount === 0 || !homogeneous(hard)) return ok(null)
  const held = rowCount(hard) === 0 ? null : eliminate(hard, plan.nodeCount, wishes.conditions.map(({ name }) => name))
  const space = yield* liftSpace(plan, panelBases(plan), held?.elimination ?? nothingHeld(plan.nodeCount))
  return ok(space.dimension > tiltDimension(plan, held === null ? null : hard) ? null : { space, rowClashes: held?.clashes ?? [] })
}

/** The cure "move nodes" for a plan that was read and checked. `byHand`: heights set by hand, as `answerTo` takes them. */
export function* moveOutcome(
  request: Request, read: ReadPlan, byHand: Float64Array | null,
  { wishes, under }: { readonly wishes: Wishes; readonly under: MoveQuestion['under'] }, keeps: PlanKeeps,
): Steps<Result<MoveOutcome>> {
  const { plan } = read
  const target = yield* targetOf(request, wishes, read, byHand)
  if (!target.ok) return target
  const rows = conditionRows(plan, wishes.conditions, wishes.datum ?? 0)
  if (!rows.ok) return rows
  const wish = questionOf(plan, wishes, rows.value, target.value.heights)
  return ok(yield* movedWithin({ plan, rows: rows.value, conditions: wishes.conditions, under, areas: nodeAreas(plan), wish, keeps }, wishes.datum ?? 0))
}

function unmoved(before: Checked, outcome: 'lifts' | 'refused' | 'failed', found: MoveOutcome | null): AdjustAnswer {
  const { plan, summary } = before.answer
  const why = found === null || found.kind === 'moved' ? null
    : found.kind === 'refused' ? found.refusal : found
  const corner = summary.roof?.cornerMax_mm ?? null
  return {
    drawn: plan, after: before, dx_mm: new Float64Array(plan.nodeCount), dy_mm: new Float64Array(plan.nodeCount),
    facts: {
      outcome, code: why?.code ?? null, reason: why?.message ?? null, cure: why?.cure ?? null, planVerdict: summary.verdict,
      largest_mm: 0, rms_mm: 0, count: 0, cornerBefore_mm: corner, cornerAfter_mm: corner, heightError: summary.roof?.heightError ?? null, held: null, iterations: 0,
    },
  }
}

/** `verdict`: on the plan as drawn; null: no joint of it folds, and whether a near roof would do was not asked. */
function* answerOf(plan: Plan, verdict: Verdict | null, after: Checked, moved: Moved, options: Options): Steps<AdjustAnswer> {
  const { dx_mm, dy_mm, largest, rms, count } = shiftsOf(plan, moved.plan.x, moved.plan.y, counted_mm)
  const noFold = verdict === null || verdict === 'does not lift' || verdict === 'lifts within tolerance'
  const within = noFold && after.answer.summary.verdict === 'lifts' && largest <= (options.planTolerance_mm ?? defaultPlanTolerance_mm)
  // What the same heights would have been on the plan as drawn.
  const asDrawn = yield* flatness(plan, plan.x, plan.y, moved.adjustment.state.heights.map((height) => height * plan.frame.span))
  const { fixedCount, slidingCount, straightCount, bayCount, mirrorCount, shapeCount, active, iterations } = moved.adjustment
  return {
    drawn: plan, after, dx_mm, dy_mm,
    facts: {
      outcome: 'moved', code: null, reason: null, cure: null, planVerdict: within ? 'lifts within plan tolerance' : verdict,
      largest_mm: largest, rms_mm: rms, count,
      cornerBefore_mm: asDrawn.corner.reduce((most, corner) => Math.max(most, corner), 0) * conversion(plan.unit, 'mm'),
      cornerAfter_mm: after.answer.summary.roof?.cornerMax_mm ?? null,
      heightError: moved.heightError * plan.frame.span,
      held: { fixed: fixedCount, sliding: slidingCount, byConditions: moved.placed, straight: straightCount, limits: active.length, bays: bayCount, mirrorLines: mirrorCount, shapes: shapeCount }, iterations,
    },
  }
}
