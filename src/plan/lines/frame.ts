/** The points of a drawing in working position, and the distance within which they are joined. */
import { epsilon, farthest_m, roundingSteps, silentShare, smallest_m, snapShare } from '../../base/geometry/tolerance.ts'
import { fail, ok, type Place, type Result } from '../../base/result.ts'
import type { Drawing, Loops } from '../drawing.ts'
import { millimetresPer, type DrawingUnit } from '../unit-of-drawing.ts'
import { likelyUnit, longest_m } from '../unit-question.ts'

export interface LineFrame {
  /** Per point of the drawing: plan coordinates .. */
  readonly planX: Float64Array
  readonly planY: Float64Array
  /** .. and the same less the centre. */
  readonly x: Float64Array
  readonly y: Float64Array
  readonly centreX: number
  readonly centreY: number
  /** Points nearer than this become one node; in the plan's unit, as all that follows. */
  readonly snap: number
  /** Moves up to this are no repair. */
  readonly silent: number
  /** What rounding leaves of the largest coordinate. */
  readonly rounding: number
}

/**
 * Fails with "not-a-number", "too-far", "no-extent", "bad-snap", or "no-panels" when there are no lines at all. Only
 * points that lines use are judged.
 */
export function lineFrame(drawing: Drawing, drawn: DrawingUnit, snap_mm: number | null, tolerance_mm: number): Result<LineFrame> {
  const { points, outlines, holes, segments } = drawing
  const { unit, factor } = drawn
  const mmPerUnit = millimetresPer(unit)
  if (snap_mm !== null && !(snap_mm >= 0 && Number.isFinite(snap_mm))) {
    return fail('bad-snap', `a snap distance of ${snap_mm} mm cannot be`, null, 'give a length of 0 or more')
  }
  const count = points.length / 3
  const planX = new Float64Array(count)
  const planY = new Float64Array(count)
  for (let i = 0; i < count; i += 1) {
    planX[i] = points[3 * i] * factor
    planY[i] = points[3 * i + 1] * factor
  }
  let [left, right, low, high] = [Infinity, -Infinity, Infinity, -Infinity]
  const farthest = (farthest_m * 1000) / mmPerUnit
  let bad = -1
  for (const list of [outlines.point, holes.point, segments]) {
    for (const i of list) {
      if (!(Math.abs(planX[i]) <= farthest && Math.abs(planY[i]) <= farthest) && bad < 0) bad = i
      if (planX[i] < left) left = planX[i]
      if (planX[i] > right) right = planX[i]
      if (planY[i] < low) low = planY[i]
      if (planY[i] > high) high = planY[i]
    }
  }
  if (bad >= 0) {
    const where = placeOfPoint(drawing, bad)
    return Number.isFinite(planX[bad]) && Number.isFinite(planY[bad])
      ? fail('too-far', 'a coordinate lies farther away than any building', { ...where, at: [planX[bad], planY[bad]] }, 'correct it')
      : fail('not-a-number', 'a coordinate is not a number', where, 'correct it')
  }
  if (left === Infinity) return fail('no-panels', 'there are no lines and no faces to make panels of', null, 'draw the panels as closed outlines, faces or lines')
  const smallest = (smallest_m * 1000) / mmPerUnit
  if (Math.max(right - left, high - low) < smallest) return fail('no-extent', 'the whole drawing is one point', { at: [left, low] }, 'check its unit and scale')

  const centreX = centreOf(left, right)
  const centreY = centreOf(low, high)
  const x = new Float64Array(count)
  const y = new Float64Array(count)
  for (let i = 0; i < count; i += 1) {
    x[i] = planX[i] - centreX
    y[i] = planY[i] - centreY
  }
  const size = { extent: Math.max(right - left, high - low), lines: outlines.point.length + holes.point.length + segments.length / 2 }
  const rounding = roundingSteps * epsilon * Math.max(Math.abs(left), Math.abs(right), Math.abs(low), Math.abs(high))
  const snap = Math.max(rounding, snap_mm === null ? defaultSnap(edgeLengths(drawing, x, y), drawn, tolerance_mm, size) : snap_mm / mmPerUnit)
  return ok({ planX, planY, x, y, centreX, centreY, snap, silent: Math.max(rounding, silentShare * snap), rounding })
}

/**
 * The coordinate to subtract: the middle of the range when the range lies far from 0, else none. Far away the difference
 * of two doubles is exact, so subtracting and adding lose nothing; near 0 there is nothing to gain.
 */
function centreOf(low: number, high: number): number {
  const middle = low + (high - low) / 2
  return Math.abs(middle) > 2 * (high - low) ? middle : 0
}

/**
 * The plan tolerance, but at most a share of the shorter edges. Where the user states no unit the tolerance is that of the
 * unit which the lengths suggest: ends that miss by 0.3 are 0.3 mm where edges are 1500 long. A file's own unit is only
 * doubted when its lines would lie too far apart for panels even if half of them ran each way from end to end; their
 * lengths alone say nothing, since bars may be drawn through.
 */
function defaultSnap(lengths: Float64Array, { unit, statedBy }: DrawingUnit, tolerance_mm: number, { extent, lines }: { extent: number; lines: number }): number {
  const apart_m = ((2 * extent) / lines) * millimetresPer(unit) / 1000
  const isOpen = statedBy === 'nobody' || (statedBy === 'file' && apart_m > longest_m)
  const middle = lengths.subarray(lengths.length >> 1, (lengths.length >> 1) + 1)
  // Where short mitres and ends of bars abound the middle length alone tells.
  const likely = isOpen ? (likelyUnit(lengths, unit) ?? likelyUnit(middle, unit) ?? unit) : unit
  const short = lengths.length === 0 ? Infinity : lengths[Math.floor(lengths.length / 4)]
  return Math.min(tolerance_mm / millimetresPer(likely), snapShare * short)
}

/** Lengths looked at, evenly through the file: enough for quantiles. */
const sampleSize = 20_000

/** Lengths of drawn edges, sorted; of large drawings a sample. */
function edgeLengths({ outlines, holes, segments }: Drawing, x: Float64Array, y: Float64Array): Float64Array {
  const stride = Math.ceil((segments.length / 2 + outlines.point.length + holes.point.length) / sampleSize)
  const lengths: number[] = []
  const note = (p: number, q: number): void => {
    const length = Math.hypot(x[q] - x[p], y[q] - y[p])
    if (length > 0) lengths.push(length)
  }
  for (let i = 0; i < segments.length; i += 2 * stride) note(segments[i], segments[i + 1])
  for (const { start, point } of [outlines, holes]) {
    let loop = 0
    for (let k = 0; k < point.length; k += stride) {
      while (start[loop + 1] <= k) loop += 1
      note(point[k], point[k + 1 < start[loop + 1] ? k + 1 : start[loop]])
    }
  }
  return Float64Array.from(lengths).sort()
}

function placeOfPoint({ outlines, holes, segments, segmentLine }: Drawing, point: number): Place | null {
  const inLoops = ({ start, point: corner, line }: Loops): number => {
    const k = corner.indexOf(point)
    if (k < 0) return 0
    let loop = 0
    while (start[loop + 1] <= k) loop += 1
    return line[loop]
  }
  const k = segments.indexOf(point)
  const line = inLoops(outlines) || inLoops(holes) || (k >= 0 ? segmentLine[k >> 1] : 0)
  return line > 0 ? { line } : null
}
