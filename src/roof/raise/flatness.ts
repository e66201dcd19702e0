/** Flatness of every panel of a raised roof, measured on the coordinates given (solved, or as written). */
import { cornerDeviation } from '../../base/geometry/corner-deviation.ts'
import { leastSquaresZone } from '../../base/geometry/least-squares-plane.ts'
import { minimumZone } from '../../base/geometry/minimum-zone.ts'
import { frameInto, nearlyFlat, nearlyFlatIn, type Frames } from '../../base/geometry/nearly-flat.ts'
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
  const both = new Float64Array(2)
  const frames = yield* framesOf(plan, x, y)
  let points = new Float64Array(3 * 16)
  for (let p = 0; p < plan.panelCount; p += 1) {
    if ((p & 4095) === 0) yield { stage: 'Measuring flatness', done: p / plan.panelCount }
    const from = plan.panelStart[p], count = plan.panelStart[p + 1] - from
    if (count === 3) continue
    if (points.length < 3 * count) points = new Float64Array(6 * count)
    cornersAbout(plan, p, x, y, z, points)
    if (nearlyFlatIn(frames, from, p, points, 0, count, both)) {
      corner[p] = both[0]
      zone[p] = both[1]
    } else {
      corner[p] = cornerDeviation(points, 0, count)
      zone[p] = minimumZone(points, 0, count)
    }
  }
  return { corner, zone }
}

/** Frames of the panels of a plan as it is drawn: they serve every roof over it. */
const drawnFrames = new WeakMap<Plan, Frames>()

function* framesOf(plan: Plan, x: Float64Array, y: Float64Array): Steps<Frames> {
  const isDrawn = x === plan.x && y === plan.y
  const known = isDrawn ? drawnFrames.get(plan) : undefined
  if (known !== undefined) return known
  const frames = { e: new Float64Array(2 * plan.corner.length), r: new Float64Array(3 * plan.panelCount) }
  let points = new Float64Array(3 * 16)
  for (let p = 0; p < plan.panelCount; p += 1) {
    if ((p & 8191) === 0) yield { stage: 'Measuring flatness', done: 0 }
    const from = plan.panelStart[p], count = plan.panelStart[p + 1] - from
    if (points.length < 3 * count) points = new Float64Array(6 * count)
    cornersAbout(plan, p, x, y, x, points)
    frameInto(frames, from, p, points, 0, count)
  }
  if (isDrawn) drawnFrames.set(plan, frames)
  return frames
}

/** The corners of a panel as x y z .., measured from its first. */
function cornersAbout(plan: Plan, panel: number, x: Float64Array, y: Float64Array, z: Float64Array, points: Float64Array): void {
  const from = plan.panelStart[panel]
  const first = plan.corner[from]
  for (let k = 0; k < plan.panelStart[panel + 1] - from; k += 1) {
    const node = plan.corner[from + k]
    points[3 * k] = x[node] - x[first]
    points[3 * k + 1] = y[node] - y[first]
    points[3 * k + 2] = z[node] - z[first]
  }
}

/** Range of the vertical distances of the corners from the plane through three of them: no less than the minimum zone. */
function verticalSpread(p: Float64Array, count: number): number {
  const b = 3 * (count >> 1 === 1 ? 1 : Math.floor(count / 3)), c = 3 * (count - 1)
  const det = p[b] * p[c + 1] - p[b + 1] * p[c]
  const gx = (p[b + 2] * p[c + 1] - p[c + 2] * p[b + 1]) / det
  const gy = (p[b] * p[c + 2] - p[c] * p[b + 2]) / det
  let low = 0, high = 0
  for (let k = 3; k < 3 * count; k += 3) {
    const off = p[k + 2] - gx * p[k] - gy * p[k + 1]
    if (off < low) low = off
    else if (off > high) high = off
    // Three corners in a line have no plane of their own.
    else if (!(off <= high)) return Infinity
  }
  return high - low
}

/**
 * The largest minimum zone of all panels; once it is over `enough` the search may stop and return what it has. A panel's
 * least-squares zone is an upper bound, so only panels that could exceed the largest so far are measured in full.
 */
export function largestZone(plan: Plan, x: Float64Array, y: Float64Array, z: Float64Array, enough = Infinity): number {
  let points = new Float64Array(3 * 16)
  const plane = new Float64Array(6)
  const both = new Float64Array(2)
  let most = 0
  for (let p = 0; p < plan.panelCount && most <= enough; p += 1) {
    const from = plan.panelStart[p], count = plan.panelStart[p + 1] - from
    if (count === 3) continue
    if (points.length < 3 * count) points = new Float64Array(6 * count)
    cornersAbout(plan, p, x, y, z, points)
    if (verticalSpread(points, count) <= most) continue
    if (nearlyFlat(points, 0, count, both)) most = Math.max(most, both[1])
    else if (leastSquaresZone(points, 0, count, plane) > most) most = Math.max(most, minimumZone(points, 0, count))
  }
  return most
}
