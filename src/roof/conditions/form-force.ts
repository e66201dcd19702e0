/**
 * Form force: the signed jump of slope across a joint. With L the panel on its left, R the one on its right and n the unit
 * normal of the joint towards L, F = (a_L - a_R) . n; > 0 a valley, < 0 a ridge. It shapes the roof and carries no load.
 *
 * Both planes meet along the joint, so a corner c of L that lies delta_c from the joint's line lies F delta_c over R's
 * plane, which three well-spread corners of R carry:
 *
 *   h_c - u h_0 - v h_1 - w h_2 = F delta_c       (u, v, w: barycentric coordinates of c)
 *
 * exact on every lift, and likewise with L and R exchanged. Tried and dropped: the corner's height over the joint's two
 * ends and one corner beside it, whose weights grow with one over the joint's length, and some joints are tiny.
 */
import { ok, type Result } from '../../base/result.ts'
import type { Plan } from '../../plan/plan.ts'
import type { FormForceCondition } from '../../plan/project/condition.ts'
import { anchors, doubleArea } from './anchors.ts'
import { flushRows } from './flush.ts'
import { jointsAt, nodesOfPanels } from './places.ts'
import type { Emit } from './rows.ts'
import type { Site } from './site.ts'

/** A joint asked to be a ridge or a valley folds by at least this slope, 0.6 degrees: the least that shows. Our own choice. */
export const leastFold = 0.01

/**
 * Emits a row per joint: of equality where the force is a number, to `signed` where its sign alone is asked, there read
 * "row . h <= value". No force at all is the condition flush. Returns the nodes of the panels beside the joints.
 */
export function formForceRows(site: Site, condition: FormForceCondition, emit: Emit, signed: Emit): Result<Int32Array> {
  const { force, at } = condition
  if (force === 0 || force === 'flush') return flushRows(site, { ...condition, kind: 'flush' }, emit)
  const joints = jointsAt(site.plan, at)
  if (!joints.ok) return joints
  const panels = new Set<number>()
  for (const joint of joints.value) {
    panels.add(site.plan.panelOf[2 * joint]).add(site.plan.panelOf[2 * joint + 1])
    const { nodes, weights, lever } = cornerOverPlane(site.plan, joint)
    if (typeof force === 'number') emit(nodes, weights, force * lever)
    else {
      // A ridge is -F <= .. turned round: F <= -leastFold; a valley -F <= -leastFold. The lever may have either sign.
      const turn = (force === 'ridge' ? 1 : -1) * Math.sign(lever)
      signed(nodes, weights.map((weight) => turn * weight), -leastFold * Math.abs(lever))
    }
  }
  return ok(nodesOfPanels(site.plan, panels))
}

/**
 * The row of a joint with weights . heights = F lever: the corner farthest from the joint, by three corners of the panel
 * across, on the side where the weights are smaller; its largest weight is 1.
 */
export function cornerOverPlane(plan: Plan, joint: number): { nodes: number[]; weights: number[]; lever: number } {
  const sides = [0, 1].map((side) => {
    const corner = farthestCorner(plan, plan.panelOf[2 * joint + side], joint)
    const carrier = anchors(plan, nodesOfPanels(plan, [plan.panelOf[2 * joint + 1 - side]]))
    const [a, b, c] = carrier
    const whole = doubleArea(plan, a, b, c)
    const u = doubleArea(plan, b, c, corner.node) / whole
    const v = doubleArea(plan, c, a, corner.node) / whole
    const w = 1 - u - v
    // Seen from R the same jump of slope has the other normal and the other sign: F delta holds with delta towards L.
    return { corner, carrier, shares: [u, v, w], lever: side === 0 ? corner.distance : -corner.distance }
  })
  const size = (shares: readonly number[]): number => Math.max(1, ...shares.map(Math.abs))
  const [left, right] = sides
  const { corner, carrier, shares, lever } = size(right.shares) / Math.abs(right.lever) < size(left.shares) / Math.abs(left.lever) ? right : left
  const largest = size(shares)
  return { nodes: [corner.node, ...carrier], weights: [1 / largest, ...shares.map((share) => -share / largest)], lever: lever / largest }
}

/** The panel's corner farthest from the joint's line, and its distance: > 0 on the joint's left. */
function farthestCorner(plan: Plan, panel: number, joint: number): { node: number; distance: number } {
  const [from, to] = [plan.origin[2 * joint], plan.origin[2 * joint + 1]]
  const length = Math.hypot(plan.work[2 * to] - plan.work[2 * from], plan.work[2 * to + 1] - plan.work[2 * from + 1])
  let best = { node: from, distance: 0 }
  for (let k = plan.panelStart[panel]; k < plan.panelStart[panel + 1]; k += 1) {
    const node = plan.corner[k]
    const distance = doubleArea(plan, from, to, node) / length
    if (Math.abs(distance) > Math.abs(best.distance)) best = { node, distance }
  }
  return best
}
