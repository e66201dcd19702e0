/**
 * The cure "remove joints": joints that no roof folds are left out, and the panels they part become one.
 *
 * It can never add a roof. A roof of the joined plan gives, with the joint drawn in again, a roof of the plan as it was in which
 * that joint has stress 0; so the roofs of the joined plan are exactly those of the drawn plan that leave the joint unfolded, and
 * joining panels only takes roofs away. Where a joint is frozen it takes none: the roofs stay the same, and the drawing says what
 * is true. So frozen joints are all that is ever offered: afterwards every joint that is drawn folds.
 *
 * Panels of a flat group grow into one as long as they share one unbroken chain of edges with it, so that a panel has no hole and
 * touches itself nowhere; nodes at which a condition holds stay, with the joints that lead to them.
 */
import { collinearSine } from '../../../base/geometry/tolerance.ts'
import { ok, type Result } from '../../../base/result.ts'
import type { Plan } from '../../../plan/plan.ts'
import { planFromFaces } from '../../../plan/subdivision.ts'
import type { ChangedPlan } from './diagonals-plan.ts'

export interface RemovedJoints extends ChangedPlan {
  /** Joints of the old plan that are left out. */
  readonly joints: readonly number[]
}

/** `keep`: 1 at nodes that have to stay (length nodeCount). null where nothing can be left out. */
export function withoutFrozen(plan: Plan, frozen: Uint8Array, keep: Uint8Array): Result<RemovedJoints | null> {
  const groups = grownPanels(plan, frozen, keep)
  const groupOf = new Int32Array(plan.panelCount)
  groups.forEach((members, g) => members.forEach((p) => (groupOf[p] = g)))
  const joints = [...frozen.keys()].filter((j) => groupOf[plan.panelOf[2 * j]] === groupOf[plan.panelOf[2 * j + 1]])
  if (joints.length === 0) return ok(null)
  const loops = groups.map((members, g) => outline(plan, members, (p) => p >= 0 && groupOf[p] === g))
  const straight = straightNodes(plan, loops, keep)
  const corners = loops.map((loop) => loop.filter((n) => straight[n] === 0))
  const start = Int32Array.from([0, ...corners.map((loop) => loop.length)])
  for (let k = 1; k < start.length; k += 1) start[k] += start[k - 1]
  const made = planFromFaces({ unit: plan.unit, x: plan.x, y: plan.y, start, corner: Int32Array.from(corners.flat()) })
  if (!made.ok) return made
  return ok({ plan: made.value.plan, nodeFrom: made.value.pointOfNode, panelsFrom: groups, joints })
}

/** Sets of panels that become one, in the order of their first panels. */
function grownPanels(plan: Plan, frozen: Uint8Array, keep: Uint8Array): number[][] {
  const setOf = new Int32Array(plan.panelCount).fill(-1)
  const sets: number[][] = []
  const inSet = new Int32Array(plan.nodeCount).fill(-1)
  for (let first = 0; first < plan.panelCount; first += 1) {
    if (setOf[first] >= 0) continue
    const at = sets.length
    const members = [first]
    sets.push(members)
    setOf[first] = at
    const mark = (p: number): void => {
      for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) inSet[plan.corner[c]] = at
    }
    mark(first)
    // Panels that did not fit yet are tried again as long as the set grows.
    for (let grew = true; grew; ) {
      grew = false
      for (let m = 0; m < members.length; m += 1) {
        for (let c = plan.panelStart[members[m]]; c < plan.panelStart[members[m] + 1]; c += 1) {
          const half = plan.cornerHalf[c]
          const next = plan.panelOf[half ^ 1]
          if (next < 0 || setOf[next] >= 0 || frozen[half >> 1] === 0 || !fits(plan, next, at, setOf, inSet, frozen, keep)) continue
          setOf[next] = at
          members.push(next)
          mark(next)
          grew = true
        }
      }
    }
    members.sort((a, b) => a - b)
  }
  return sets
}

/** Whether the panel shares one chain of edges with the set, nothing else of it touches the set, and no kept node lies inside the chain. */
function fits(plan: Plan, panel: number, set: number, setOf: Int32Array, inSet: Int32Array, frozen: Uint8Array, keep: Uint8Array): boolean {
  const from = plan.panelStart[panel], k = plan.panelStart[panel + 1] - from
  const shared = Array.from({ length: k }, (_, c) => {
    const half = plan.cornerHalf[from + c]
    const beyond = plan.panelOf[half ^ 1]
    return beyond >= 0 && setOf[beyond] === set
  })
  let chains = 0
  for (let c = 0; c < k; c += 1) {
    const before = shared[(c + k - 1) % k]
    const node = plan.corner[from + c]
    if (shared[c] && frozen[plan.cornerHalf[from + c] >> 1] === 0) return false
    if (shared[c] && !before) chains += 1
    if (shared[c] && before && (keep[node] === 1 || plan.rimPasses[node] > 0)) return false
    if (!shared[c] && !before && inSet[node] === set) return false
  }
  return chains === 1
}

/** Corners of the set's outline, counter-clockwise. */
function outline(plan: Plan, members: readonly number[], isIn: (panel: number) => boolean): number[] {
  if (members.length === 1) return Array.from(plan.corner.subarray(plan.panelStart[members[0]], plan.panelStart[members[0] + 1]))
  const nextOf = new Map<number, number>()
  let first = -1
  for (const p of members) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const half = plan.cornerHalf[c]
      if (isIn(plan.panelOf[half ^ 1])) continue
      if (first < 0) first = plan.origin[half]
      nextOf.set(plan.origin[half], plan.origin[half ^ 1])
    }
  }
  const loop = [first]
  for (let node = nextOf.get(first) ?? first; node !== first; node = nextOf.get(node) ?? first) loop.push(node)
  return loop
}

/** 1 at nodes inside the plan that are left between two panels on a straight edge: no corner of anything. */
function straightNodes(plan: Plan, loops: readonly (readonly number[])[], keep: Uint8Array): Uint8Array {
  const uses = new Int32Array(plan.nodeCount)
  const bent = new Uint8Array(plan.nodeCount)
  for (const loop of loops) {
    loop.forEach((node, k) => {
      const a = loop[(k + loop.length - 1) % loop.length], b = loop[(k + 1) % loop.length]
      uses[node] += 1
      const dx = plan.work[2 * node] - plan.work[2 * a], dy = plan.work[2 * node + 1] - plan.work[2 * a + 1]
      const ex = plan.work[2 * b] - plan.work[2 * node], ey = plan.work[2 * b + 1] - plan.work[2 * node + 1]
      if (Math.abs(dx * ey - dy * ex) > collinearSine * Math.hypot(dx, dy) * Math.hypot(ex, ey)) bent[node] = 1
    })
  }
  return uses.reduce((out, count, node) => {
    if (count === 2 && bent[node] === 0 && keep[node] === 0 && plan.rimPasses[node] === 0) out[node] = 1
    return out
  }, new Uint8Array(plan.nodeCount))
}
