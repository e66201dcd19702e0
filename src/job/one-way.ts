/** The question "can these joints all fold one way?" about a plan that was checked: names to joints, the answer to the record. */
import { ok, fail, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { indexOfName, jointName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import type { Options } from '../plan/project/options.ts'
import type { OneWayFacts } from '../roof/answer/answer.ts'
import { rowCount } from '../roof/conditions/rows.ts'
import type { LinearSolver } from '../roof/cures/folds/linear-program.ts'
import { oneWay } from '../roof/cures/folds/one-way.ts'
import { outerRimNodes, riseOf, springing } from '../roof/raise/rise.ts'
import type { Checked } from './check.ts'

/**
 * The answer with `oneWay` in its summary. Hard conditions are kept where a roof that keeps them keeps them at any scale
 * (levels at the datum, straight and equal runs, flush joints); else the rim is free, and the record says so.
 */
export function* withOneWay(checked: Checked, asked: NonNullable<Options['oneWay']>, solver: LinearSolver): Steps<Result<Checked>> {
  const { answer, free, under, rows } = checked
  const { plan } = answer
  const joints = namedJoints(plan, asked)
  if (!joints.ok) return joints
  const held = rowCount(rows.hard) > 0 && under.scaleFree && under.start !== null
  const found = held
    ? yield* oneWay(under.space, under.tilts, under.frozen, joints.value, solver)
    : yield* oneWay(free.space, free.tilts, free.frozen, joints.value, solver)
  const { margin, heights, certificate, givenUpAfter } = found
  const facts: OneWayFacts = {
    margin, on: 'force', joints: joints.value.length, held,
    certificate: certificate === null ? [] : Array.from(certificate.joints, (joint, k) => ({ joint: jointName(joint), weight: certificate.weights[k] })),
    decided: margin > 0 || certificate !== null,
    ...(givenUpAfter === null ? {} : { steps: givenUpAfter }),
  }
  const { caution, ...summary } = answer.summary
  return ok({ ...checked, answer: { ...answer, summary: { ...summary, oneWay: facts, caution }, oneWayHeights: heights === null ? null : standing(checked, heights, held) } })
}

function namedJoints(plan: Plan, asked: NonNullable<Options['oneWay']>): Result<Int32Array> {
  if (plan.jointCount === 0) return fail('no-joints', 'the plan has one panel and no joints', { field: '--one-way' })
  if (asked === 'all') return ok(Int32Array.from({ length: plan.jointCount }, (_, joint) => joint))
  const joints = asked.map((name) => indexOfName(name, 'J'))
  const wrong = joints.findIndex((joint) => joint < 0 || joint >= plan.jointCount)
  if (wrong < 0) return ok(Int32Array.from(new Set(joints)))
  return fail('no-such-joint', `there is no joint "${asked[wrong]}"`, { field: '--one-way' }, `the plan has joints ${jointName(0)} to ${jointName(plan.jointCount - 1)}`)
}

/** The roof in the plan's unit: at the rise that was gone for, its springing at the datum unless conditions place it. */
function standing({ answer, wishes }: Checked, heights: Float64Array, held: boolean): Float64Array {
  const { plan, summary } = answer
  const rim = outerRimNodes(plan)
  const rule = { down: false, datum: held ? 0 : null }
  const rise = riseOf(heights, rim, rule)
  const asked = summary.roof?.riseAsked ?? summary.roof?.rise ?? 0
  const scale = rise > 0 && asked > 0 ? asked / rise : plan.frame.span
  const level = springing(heights, rim, rule)
  return heights.map((height) => (height - level) * scale + (wishes.datum ?? 0))
}
