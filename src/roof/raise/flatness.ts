/** Flatness of every panel of a raised roof, measured on the coordinates given (solved, or as written). */
import { cornerDeviation } from '../../base/geometry/corner-deviation.ts'
import { minimumZone } from '../../base/geometry/minimum-zone.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'

/** Per panel, in the unit of the coordinates (length panelCount each). */
export interface Flatness {
  readonly corner: Float64Array
  readonly zone: Float64Array
}

/**
 * Corner deviation and minimum zone of each panel at x, y, z per node, all in one unit. Each panel is measured about its
 * first corner, so a plan far from the origin loses no digits.
 */
export function* flatness(plan: Plan, x: Float64Array, y: Float64Array, z: Float64Array): Steps<Flatness> {
  const corner = new Float64Array(plan.panelCount)
  const zone = new Float64Array(plan.panelCount)
  let points = new Float64Array(3 * 16)
  for (let p = 0; p < plan.panelCount; p += 1) {
    if ((p & 4095) === 0) yield { stage: 'Measuring flatness', done: p / plan.panelCount }
    const from = plan.panelStart[p], count = plan.panelStart[p + 1] - from
    if (count === 3) continue
    if (points.length < 3 * count) points = new Float64Array(6 * count)
    const first = plan.corner[from]
    for (let k = 0; k < count; k += 1) {
      const node = plan.corner[from + k]
      points[3 * k] = x[node] - x[first]
      points[3 * k + 1] = y[node] - y[first]
      points[3 * k + 2] = z[node] - z[first]
    }
    corner[p] = cornerDeviation(points, 0, count)
    zone[p] = minimumZone(points, 0, count)
  }
  return { corner, zone }
}

/** Whether the minimum zone of every panel at these working heights is at most `tolerance` (in span units). */
export function everyPanelWithin(plan: Plan, heights: Float64Array, tolerance: number): boolean {
  let points = new Float64Array(3 * 16)
  for (let p = 0; p < plan.panelCount; p += 1) {
    const from = plan.panelStart[p], count = plan.panelStart[p + 1] - from
    if (count === 3) continue
    if (points.length < 3 * count) points = new Float64Array(6 * count)
    for (let k = 0; k < count; k += 1) {
      const node = plan.corner[from + k]
      points[3 * k] = plan.work[2 * node]
      points[3 * k + 1] = plan.work[2 * node + 1]
      points[3 * k + 2] = heights[node]
    }
    if (minimumZone(points, 0, count) > tolerance) return false
  }
  return true
}
