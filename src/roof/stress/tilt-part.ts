/**
 * Heights less their tilt: in each part the least-squares plane is taken away, so that what is left says how much a roof
 * rises and folds and not how it leans. A node that parts share counts with the part of its first panel.
 */
import { collinearSine } from '../../base/geometry/tolerance.ts'
import type { Plan } from '../../plan/plan.ts'

/** h - (best affine function of each part) (length nodeCount); `areas` weighs the nodes. */
export function lessTilt(plan: Plan, heights: Float64Array, areas: Float64Array): Float64Array {
  const { nodes, parts } = nodesOf(plan)
  const planes = partPlanes(plan, heights, nodes, parts, areas)
  const out = heights.slice()
  for (let i = 0; i < out.length; i += 1) out[i] -= at(planes, plan, parts[i], i)
  return out
}

/** Its 2-norm, the squares weighed by the areas. */
export function sizeLessTilt(plan: Plan, heights: Float64Array, areas: Float64Array): number {
  const { nodes, parts } = nodesOf(plan)
  const planes = partPlanes(plan, heights, nodes, parts, areas)
  let sum = 0
  for (let i = 0; i < heights.length; i += 1) {
    const off = heights[i] - at(planes, plan, parts[i], i)
    sum += areas[i] * off * off
  }
  return Math.sqrt(sum)
}

interface Listed {
  readonly nodes: Int32Array
  readonly parts: Int32Array
}

const nodesOfPlan = new WeakMap<Plan, Listed>()
const cornersOfPlan = new WeakMap<Plan, Listed>()

/** All nodes, each with the part of its first panel; found once a plan. */
function nodesOf(plan: Plan): Listed {
  const known = nodesOfPlan.get(plan)
  if (known !== undefined) return known
  const parts = new Int32Array(plan.nodeCount).fill(-1)
  for (let p = plan.panelCount - 1; p >= 0; p -= 1) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) parts[plan.corner[c]] = plan.partOf[p]
  }
  const nodes = new Int32Array(plan.nodeCount)
  for (let i = 0; i < nodes.length; i += 1) nodes[i] = i
  nodesOfPlan.set(plan, { nodes, parts })
  return { nodes, parts }
}

/** All corners, each with the part of its panel; found once a plan. */
function cornersOf(plan: Plan): Listed {
  const known = cornersOfPlan.get(plan)
  if (known !== undefined) return known
  const parts = new Int32Array(plan.corner.length)
  for (let p = 0; p < plan.panelCount; p += 1) parts.fill(plan.partOf[p], plan.panelStart[p], plan.panelStart[p + 1])
  cornersOfPlan.set(plan, { nodes: plan.corner, parts })
  return { nodes: plan.corner, parts }
}

/** Whether the corners of each part, shared nodes too, lie within `tolerance` of one plane: then no joint folds. */
export function isTilt(plan: Plan, heights: Float64Array, tolerance: number): boolean {
  const { nodes, parts } = cornersOf(plan)
  const planes = partPlanes(plan, heights, nodes, parts, null)
  for (let c = 0; c < nodes.length; c += 1) if (!(Math.abs(heights[nodes[c]] - at(planes, plan, parts[c], nodes[c])) <= tolerance)) return false
  return true
}

/** Mean x, mean y, mean height, gx, gy of each part (length 5 * partCount). */
type Planes = Float64Array

function at(planes: Planes, plan: Plan, part: number, node: number): number {
  const { work } = plan
  return planes[5 * part + 2] + planes[5 * part + 3] * (work[2 * node] - planes[5 * part]) + planes[5 * part + 4] * (work[2 * node + 1] - planes[5 * part + 1])
}

/** Least-squares planes through the heights of the nodes listed, each with its part; `areas` by node, null: all alike. */
function partPlanes(plan: Plan, heights: Float64Array, nodes: Int32Array, parts: Int32Array, areas: Float64Array | null): Planes {
  const { work, partCount } = plan
  const planes = new Float64Array(5 * partCount)
  const weight = new Float64Array(partCount)
  for (let k = 0; k < nodes.length; k += 1) {
    const part = parts[k], i = nodes[k], m = areas === null ? 1 : areas[i]
    weight[part] += m
    planes[5 * part] += m * work[2 * i]
    planes[5 * part + 1] += m * work[2 * i + 1]
    planes[5 * part + 2] += m * heights[i]
  }
  // A part without a node of its own has no plane; nothing asks for it.
  for (let part = 0; part < partCount; part += 1) for (let k = 0; k < 3; k += 1) planes[5 * part + k] /= weight[part] || 1
  // Centred xx, xy, yy, xz, yz per part.
  const sums = new Float64Array(5 * partCount)
  for (let k = 0; k < nodes.length; k += 1) {
    const part = parts[k], i = nodes[k], m = areas === null ? 1 : areas[i]
    const x = work[2 * i] - planes[5 * part], y = work[2 * i + 1] - planes[5 * part + 1], z = heights[i] - planes[5 * part + 2]
    sums[5 * part] += m * x * x
    sums[5 * part + 1] += m * x * y
    sums[5 * part + 2] += m * y * y
    sums[5 * part + 3] += m * x * z
    sums[5 * part + 4] += m * y * z
  }
  for (let part = 0; part < partCount; part += 1) {
    const [xx, xy, yy, xz, yz] = sums.subarray(5 * part, 5 * part + 5)
    planes.set(gradient(xx, xy, yy, xz, yz), 5 * part + 3)
  }
  return planes
}

/**
 * The least gradient that solves (xx xy; xy yy) g = (xz, yz). A part whose other nodes all count with its neighbours may be
 * left with nodes in a line (then g runs along it) or with one (then g = 0).
 */
function gradient(xx: number, xy: number, yy: number, xz: number, yz: number): readonly [gx: number, gy: number] {
  const trace = xx + yy
  const det = xx * yy - xy * xy
  if (det > collinearSine ** 2 * trace * trace) return [(xz * yy - yz * xy) / det, (yz * xx - xz * xy) / det]
  return trace > 0 ? [xz / trace, yz / trace] : [0, 0]
}
