/** The job "balance": the rim stays, the other nodes go where their edges balance, and the plan lifts by construction. */
import { fail, ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { densitiesFromCsv, type ListedDensity } from '../formats/densities-csv.ts'
import { decodedText } from '../formats/text-encoding.ts'
import { jointName, nodeName, panelName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import type { NamedFile } from '../plan/project/options.ts'
import { wishesOf, type Wishes } from '../plan/project/wishes.ts'
import type { BalanceFacts } from '../roof/answer/balance-facts.ts'
import { balanced, bearingEdges } from '../roof/cures/balance/balance.ts'
import { fittedDensities, lengthDensities, uniformDensities } from '../roof/cures/balance/densities.ts'
import { coordinatesOf, movedPlan } from '../roof/cures/move/moved-plan.ts'
import { integrate } from '../roof/raise/integrate.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import { outerRimNodes, riseOf } from '../roof/raise/rise.ts'
import { shapeHeights } from '../roof/raise/shapes.ts'
import { dualWalk } from '../roof/stress/dual-walk.ts'
import { lessTilt } from '../roof/stress/tilt-part.ts'
import { answerTo, type Checked } from './check.ts'
import { planQuestion, withoutTolerance } from './question.ts'
import type { Request } from './request.ts'
import { shiftsOf } from './shifts.ts'

export type Densities = 'uniform' | 'fit' | 'length' | NamedFile

export interface BalanceAnswer {
  readonly drawn: Plan
  /** The answer on the balanced plan, or on the plan as drawn where balancing threw panels over each other. */
  readonly after: Checked
  readonly dx_mm: Float64Array
  readonly dy_mm: Float64Array
  readonly facts: BalanceFacts
}

/** Moves below this, in mm, are none that anybody could set out. */
const counted_mm = 1

export function* balance(request: Request, densities: Densities, version: string, sha256: string): Steps<Result<BalanceAnswer>> {
  const asked = yield* planQuestion(request, version, sha256)
  if (!asked.ok) return asked
  // Whether the plan as balanced lifts is measured as it stands.
  const question = withoutTolerance(asked.value)
  const { plan } = question.read
  const { options } = question.request
  const wishes = wishesOf(question.brief, options, plan.unit)
  if (!wishes.ok) return wishes
  const density = yield* densityOf(plan, densities)
  if (!density.ok) return density
  const kind = typeof densities === 'string' ? densities : 'typed'
  const found = yield* balancedPlan(plan, density.value, wishes.value)
  if (!found.ok) return found
  const { next } = found.value
  if (next === null) {
    const after = yield* answerTo({ ...question, target: null })
    if (!after.ok) return after
    const crossed = Array.from(found.value.crossed, panelName)
    const zero = new Float64Array(plan.nodeCount)
    return ok({ drawn: plan, after: after.value, dx_mm: zero, dy_mm: zero, facts: { outcome: 'crossed', densities: kind, crossed, largest_mm: 0, rms_mm: 0, count: 0 } })
  }
  const { x, y } = next.plan
  const after = yield* answerTo({
    ...question, request: { ...question.request, options: { ...options, shape: null, target: null } },
    read: { ...question.read, plan: next.plan }, brief: { ...question.brief, shape: null }, target: next.heights,
  })
  if (!after.ok) return after
  const { dx_mm, dy_mm, largest, rms, count } = shiftsOf(plan, x, y, counted_mm)
  return ok({
    drawn: plan, after: after.value, dx_mm, dy_mm,
    facts: { outcome: 'balanced', densities: kind, crossed: [], largest_mm: largest, rms_mm: rms, count },
  })
}

export interface BalancedPlan {
  /** The plan, and the heights in its unit that its stresses raise; null: panels would turn inside out or cross. */
  readonly next: { readonly plan: Plan; readonly heights: Float64Array } | null
  readonly crossed: Int32Array
}

/** The plan that these densities (length edgeCount) balance, with the roof they raise. Fails where a node has no place. */
export function* balancedPlan(plan: Plan, density: Float64Array, wishes: Wishes): Steps<Result<BalancedPlan>> {
  const found = yield* balanced(plan, density)
  if (found === null) return fail('no-balance', 'these densities leave a node without a place', null, 'use densities of one sign, or others')
  const { x, y } = coordinatesOf(plan, found.work)
  const next = found.crossed.length === 0 ? movedPlan(plan, x, y) : null
  if (next === null || !next.ok) return ok({ next: null, crossed: found.crossed })
  return ok({ next: { plan: next.value, heights: heightsOf(next.value, density, wishes) }, crossed: found.crossed })
}

export function* densityOf(plan: Plan, densities: Densities): Steps<Result<Float64Array>> {
  if (densities === 'uniform') return ok(uniformDensities(plan))
  if (densities === 'length') return ok(lengthDensities(plan))
  if (densities === 'fit') return ok(yield* fittedDensities(plan))
  const text = decodedText(densities)
  if (!text.ok) return text
  const listed = densitiesFromCsv(text.value, densities.name)
  return listed.ok ? typedDensities(plan, listed.value, densities.name) : listed
}

/** Densities as typed, later rows over earlier ones; edges that no row names bear 1. */
function typedDensities(plan: Plan, listed: readonly ListedDensity[], file: string): Result<Float64Array> {
  const density = uniformDensities(plan)
  const bearing = bearingEdges(plan)
  for (const { line, of, density: value } of listed) {
    if (of === 'all' || of === 'voids') {
      for (const edge of bearing) if (of === 'all' || edge >= plan.jointCount) density[edge] = value
    } else if ('nodes' in of) {
      const [a, b] = of.nodes
      const edge = bearing.find((each) => (plan.origin[2 * each] === a && plan.origin[2 * each + 1] === b) || (plan.origin[2 * each] === b && plan.origin[2 * each + 1] === a))
      if (edge === undefined) {
        return fail('no-such-edge', `no joint and no edge of a void runs from ${nodeName(a)} to ${nodeName(b)}`, { file, line }, 'outer rim edges bear nothing; panewise raise lists the nodes')
      }
      density[edge] = value
    } else {
      const [from, to] = of.joints
      const wrong = of.joints.find((joint) => joint >= plan.jointCount)
      if (wrong !== undefined) {
        return fail('no-such-joint', `there is no joint "${jointName(wrong)}"`, { file, line }, `the plan has joints ${jointName(0)} to ${jointName(plan.jointCount - 1)}`)
      }
      for (let joint = from; joint <= to; joint += 1) density[joint] = value
    }
  }
  return ok(density)
}

/** Heights in the plan's unit that these stresses raise, at the asked rise, the way that is asked for (up, or hanging). */
function heightsOf(plan: Plan, density: Float64Array, wishes: Wishes): Float64Array {
  const { heights } = integrate(plan, density.subarray(0, plan.jointCount), dualWalk(plan), new Float64Array(3 * plan.partCount))
  const level = lessTilt(plan, heights, nodeAreas(plan))
  const rim = outerRimNodes(plan)
  // Densities > 0 are valleys: turned over they are a dome.
  const way = level.map((height) => (wishes.down ? height : -height))
  const rise = riseOf(way, rim, { down: wishes.down, datum: null })
  const asked = wishes.rise ?? (shapeHeights(plan, 'dome').shorterSide * plan.frame.span) / 10
  const low = rim.reduce((least, node) => (wishes.down ? Math.max(least, way[node]) : Math.min(least, way[node])), wishes.down ? -Infinity : Infinity)
  return way.map((height) => (rise > 0 ? ((height - low) * asked) / rise : 0) + (wishes.datum ?? 0))
}
