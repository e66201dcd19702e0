/**
 * The closure conditions A s = 0: a stress lifts exactly when carrying a plane from panel to panel does not depend on the
 * route. Two conditions a node inside (its forces balance), three a void (forces and moment of all joints that leave its
 * rim), one a further fan of panels at a pinch node (the node has one height).
 *
 * The solver works on heights, not on A; A is the other road to the same numbers, for the count, for tests and for naming
 * what a stress violates. Three conditions per independent loop: Karpenkov, B. Servatius, H. Servatius, "Liftings of
 * surfaces in the plane" (2025).
 */
import { collinearSine } from '../../base/geometry/tolerance.ts'
import { interiorNodeCount, voidCount, type Plan } from '../../plan/plan.ts'

/** Sparse rows over the joints: row r is sum value[k] * s[joint[k]] for k in [start[r], start[r + 1]). */
export interface Closure {
  readonly start: Int32Array
  readonly joint: Int32Array
  readonly value: Float64Array
}

/** The rows of A for a plan of one part, or of parts that share no node; pinch rows as described above. */
export function closure(plan: Plan): Closure {
  const { work, origin, jointCount } = plan
  const rows: Map<number, number>[] = []
  const add = (row: Map<number, number>, joint: number, value: number): void => {
    row.set(joint, (row.get(joint) ?? 0) + value)
  }
  const jointsAt = halfEdgesByOrigin(plan)

  /** Adds half-edge h, seen from its origin, to the rows of force x, force y and moment about (cx, cy). */
  const act = (x: Map<number, number>, y: Map<number, number>, moment: Map<number, number> | null, half: number, cx: number, cy: number): void => {
    if (half >> 1 >= jointCount) return
    const a = origin[half], b = origin[half ^ 1]
    const dx = work[2 * b] - work[2 * a], dy = work[2 * b + 1] - work[2 * a + 1]
    add(x, half >> 1, dx)
    add(y, half >> 1, dy)
    if (moment !== null) add(moment, half >> 1, (work[2 * a] - cx) * dy - (work[2 * a + 1] - cy) * dx)
  }

  for (let node = 0; node < plan.nodeCount; node += 1) {
    if (plan.rimPasses[node] > 0) continue
    const x = new Map<number, number>(), y = new Map<number, number>()
    for (let k = jointsAt.start[node]; k < jointsAt.start[node + 1]; k += 1) act(x, y, null, jointsAt.half[k], 0, 0)
    rows.push(x, y)
  }
  for (let loop = 0; loop < plan.rimIsVoid.length; loop += 1) {
    if (plan.rimIsVoid[loop] === 0) continue
    const x = new Map<number, number>(), y = new Map<number, number>(), moment = new Map<number, number>()
    for (let k = plan.rimStart[loop]; k < plan.rimStart[loop + 1]; k += 1) for (const half of fan(plan, plan.rimHalf[k])) act(x, y, moment, half, 0, 0)
    rows.push(x, y, moment)
  }
  for (const row of pinchRows(plan)) rows.push(row)

  const start = new Int32Array(rows.length + 1)
  rows.forEach((row, r) => (start[r + 1] = start[r] + row.size))
  return {
    start,
    joint: Int32Array.from(rows.flatMap((row) => [...row.keys()])),
    value: Float64Array.from(rows.flatMap((row) => [...row.values()])),
  }
}

/** Half-edges that leave each node, bucketed by node. */
function halfEdgesByOrigin(plan: Plan): { start: Int32Array; half: Int32Array } {
  const start = new Int32Array(plan.nodeCount + 1)
  for (const node of plan.origin) start[node + 1] += 1
  for (let i = 0; i < plan.nodeCount; i += 1) start[i + 1] += start[i]
  const fill = start.slice(0, plan.nodeCount)
  const half = new Int32Array(plan.origin.length)
  plan.origin.forEach((node, h) => (half[fill[node]++] = h))
  return { start, half }
}

/**
 * The joints crossed while turning, inside one fan of panels, from the rim half-edge that arrives at a node to the one
 * that leaves it: half-edges that leave the node.
 */
function fan(plan: Plan, rimHalf: number): number[] {
  const found: number[] = []
  let half = rimHalf ^ 1
  for (;;) {
    // `half` leaves the node with a panel on its left; its panel's previous half-edge arrives at the node.
    const out = previousHalf(plan, half) ^ 1
    if (plan.panelOf[out] < 0) return found
    found.push(out)
    half = out
  }
}

function previousHalf(plan: Plan, half: number): number {
  let at = half
  while (plan.next[at] !== half) at = plan.next[at]
  return at
}

/**
 * One row for each further fan at a pinch node: carrying the plane from a panel of the first fan to one of the next along
 * any route, both planes agree at the node: sum over the joints crossed of s times the moment of d about the node is 0.
 * Fans in different parts give no row (their tilts are tied instead).
 */
function pinchRows(plan: Plan): Map<number, number>[] {
  const rows: Map<number, number>[] = []
  const { work, origin } = plan
  for (let node = 0; node < plan.nodeCount; node += 1) {
    if (plan.rimPasses[node] < 2) continue
    const fans: number[] = []
    for (let k = 0; k < plan.rimHalf.length; k += 1) {
      const half = plan.rimHalf[k]
      if (origin[half ^ 1] === node) fans.push(plan.panelOf[half ^ 1])
    }
    const leaders: number[] = []
    for (const panel of fans) {
      const leader = leaders.find((other) => plan.partOf[other] === plan.partOf[panel])
      if (leader === undefined) {
        leaders.push(panel)
        continue
      }
      const row = new Map<number, number>()
      for (const half of route(plan, leader, panel)) {
        const a = origin[half], b = origin[half ^ 1]
        const dx = work[2 * b] - work[2 * a], dy = work[2 * b + 1] - work[2 * a + 1]
        const moment = (work[2 * a] - work[2 * node]) * dy - (work[2 * a + 1] - work[2 * node + 1]) * dx
        row.set(half >> 1, (row.get(half >> 1) ?? 0) + moment)
      }
      rows.push(row)
    }
  }
  return rows
}

/** Half-edges crossed from one panel to another, each with the panel left behind on its left; breadth first. */
function route(plan: Plan, from: number, to: number): number[] {
  const cameBy = new Int32Array(plan.panelCount).fill(-1)
  const seen = new Uint8Array(plan.panelCount)
  seen[from] = 1
  const queue = [from]
  for (let at = 0; at < queue.length; at += 1) {
    const panel = queue[at]
    if (panel === to) break
    for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
      const half = plan.cornerHalf[c]
      const other = plan.panelOf[half ^ 1]
      if (other < 0 || seen[other] === 1) continue
      seen[other] = 1
      cameBy[other] = half
      queue.push(other)
    }
  }
  const path: number[] = []
  for (let panel = to; panel !== from; panel = plan.panelOf[cameBy[panel]]) path.push(cameBy[panel])
  return path
}

/**
 * What counting alone expects of the freedom: joints - 2 interior nodes - 3 voids, each interior node of two collinear
 * joints merged away first (one joint fewer, one node fewer). In special position the truth is larger; may be negative.
 */
export function bareCount(plan: Plan): number {
  return plan.jointCount - 2 * interiorNodeCount(plan) - 3 * voidCount(plan) + collinearTwoJointNodes(plan)
}

function collinearTwoJointNodes(plan: Plan): number {
  const { origin, work } = plan
  const valence = new Int32Array(plan.nodeCount)
  const dx = new Float64Array(2 * plan.nodeCount), dy = new Float64Array(2 * plan.nodeCount)
  for (let half = 0; half < 2 * plan.edgeCount; half += 1) {
    const node = origin[half], far = origin[half ^ 1]
    const slot = valence[node]++
    if (slot > 1) continue
    dx[2 * node + slot] = work[2 * far] - work[2 * node]
    dy[2 * node + slot] = work[2 * far + 1] - work[2 * node + 1]
  }
  let count = 0
  for (let node = 0; node < plan.nodeCount; node += 1) {
    if (plan.rimPasses[node] > 0 || valence[node] !== 2) continue
    const ax = dx[2 * node], ay = dy[2 * node], bx = dx[2 * node + 1], by = dy[2 * node + 1]
    const cross = Math.abs(ax * by - ay * bx)
    if (cross <= collinearSine * Math.hypot(ax, ay) * Math.hypot(bx, by)) count += 1
  }
  return count
}
