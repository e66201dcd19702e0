/**
 * Heights less their tilt: in each part the least-squares plane is taken away, so that what is left says how much a roof
 * rises and folds and not how it leans. A node that parts share counts with the part of its first panel.
 */
import type { Plan } from '../../plan/plan.ts'

/** h - (best affine function of each part) (length nodeCount); `areas` weighs the nodes. */
export function lessTilt(plan: Plan, heights: Float64Array, areas: Float64Array): Float64Array {
  const partOfNode = new Int32Array(plan.nodeCount).fill(-1)
  for (let p = plan.panelCount - 1; p >= 0; p -= 1) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) partOfNode[plan.corner[c]] = plan.partOf[p]
  }
  const { work } = plan
  // Per part: sums of m, mx, my, mz, then centred mxx, mxy, myy, mxz, myz.
  const sums = new Float64Array(9 * plan.partCount)
  for (let i = 0; i < plan.nodeCount; i += 1) {
    const at = 9 * partOfNode[i], m = areas[i]
    sums[at] += m
    sums[at + 1] += m * work[2 * i]
    sums[at + 2] += m * work[2 * i + 1]
    sums[at + 3] += m * heights[i]
  }
  for (let part = 0; part < plan.partCount; part += 1) for (let k = 1; k < 4; k += 1) sums[9 * part + k] /= sums[9 * part]
  for (let i = 0; i < plan.nodeCount; i += 1) {
    const at = 9 * partOfNode[i], m = areas[i]
    const x = work[2 * i] - sums[at + 1], y = work[2 * i + 1] - sums[at + 2], z = heights[i] - sums[at + 3]
    sums[at + 4] += m * x * x
    sums[at + 5] += m * x * y
    sums[at + 6] += m * y * y
    sums[at + 7] += m * x * z
    sums[at + 8] += m * y * z
  }
  return heights.map((height, i) => {
    const at = 9 * partOfNode[i]
    const det = sums[at + 4] * sums[at + 6] - sums[at + 5] ** 2
    const gx = (sums[at + 7] * sums[at + 6] - sums[at + 8] * sums[at + 5]) / det
    const gy = (sums[at + 8] * sums[at + 4] - sums[at + 7] * sums[at + 5]) / det
    return height - sums[at + 3] - gx * (work[2 * i] - sums[at + 1]) - gy * (work[2 * i + 1] - sums[at + 2])
  })
}
