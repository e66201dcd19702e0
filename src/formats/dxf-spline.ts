/**
 * SPLINE of a DXF: by knots (40), control points (10) and weights (41), or, where it has fit points (11) only, the cubic
 * through them, closed where bit 1 of code 70 says so, its ends as 12 and 13 direct them or of no curvature.
 *
 * Source: DXF reference, ENTITIES section, SPLINE.
 */
import type { Bezier, Curve } from './chords.ts'
import { bezierPieces, cubicThrough, highestDegree } from './chords-spline.ts'
import { head } from './dxf-head.ts'
import type { DxfRecords } from './dxf-records.ts'
import type { Path } from './dxf-shapes.ts'

export function splineShape(record: DxfRecords): Path {
  const controls = points(record, 10)
  const fit = points(record, 11)
  const flags = record.integer(70, 0)
  const pieces = controls.length > 0 ? byKnots(record, controls) : throughPoints(record, fit, (flags & 1) === 1)
  const corners: number[] = []
  for (const piece of pieces) corners.push(piece.points[0], piece.points[1], piece.points[2])
  const last = pieces[pieces.length - 1]
  const closed = (flags & 1) === 1 && controls.length === 0 && fit.length > 6
  if (last !== undefined && !closed) corners.push(...last.points.slice(-3))
  const curves: Curve[] = pieces
  const heights = corners.some((value, i) => i % 3 === 2 && value !== 0)
  return { shape: 'path', ...head(record), points: corners, curves, closed, heights }
}

function byKnots(record: DxfRecords, controls: readonly number[]): Bezier[] {
  const degree = record.integer(71, 3)
  const knots = numbers(record, 40)
  const weights = numbers(record, 41)
  const count = controls.length / 3
  const wrong = record.problem === null ? fault(degree, knots, weights, count) : null
  if (wrong !== null) record.refuse('bad-spline', wrong, 'draw it anew or leave it out')
  if (record.problem !== null) return []
  return bezierPieces(degree, knots, controls, weights.every((w) => w === 1) ? null : weights)
}

/** What is wrong with the spline, as a clause, or null. */
function fault(degree: number, knots: readonly number[], weights: readonly number[], count: number): string | null {
  if (degree < 1 || degree > highestDegree) return `its degree is ${degree}; degrees 1 to ${highestDegree} are read`
  if (count < degree + 1) return `it has ${count} control points; degree ${degree} takes at least ${degree + 1}`
  const take = count + degree + 1
  if (knots.length !== take) return `it has ${knots.length} knots; ${count} control points of degree ${degree} take ${take}`
  if (knots.some((knot, i) => i > 0 && knot < knots[i - 1])) return 'its knots are out of order'
  if (!(knots[count] > knots[degree])) return 'its knots leave it no length'
  if (weights.length !== 0 && weights.length !== count) return `it has ${weights.length} weights for ${count} control points`
  if (weights.some((weight) => !(weight > 0))) return 'it has a weight that is not positive'
  return null
}

function throughPoints(record: DxfRecords, fit: readonly number[], closed: boolean): Bezier[] {
  const distinct: number[] = []
  const same = (i: number, j: number): boolean => fit[i] === fit[j] && fit[i + 1] === fit[j + 1] && fit[i + 2] === fit[j + 2]
  for (let i = 0; i < fit.length; i += 3) if (i === 0 || !same(i, i - 3)) distinct.push(fit[i], fit[i + 1], fit[i + 2])
  const ends = distinct.length - 3
  if (closed && ends > 3 && [0, 1, 2].every((k) => distinct[k] === distinct[ends + k])) distinct.length = ends
  if (distinct.length < 6) {
    record.refuse('bad-spline', 'it has neither control points nor two different fit points', 'leave it out')
    return []
  }
  return cubicThrough(distinct, closed && distinct.length > 6, { start: record.point(12), end: record.point(13) })
}

/** All points of a code, x y z .. */
function points(record: DxfRecords, code: number): number[] {
  const out: number[] = []
  for (let i = 0; i < record.count; i += 1) {
    if (record.codes[i] === code) out.push(record.numberAt(i), 0, 0)
    else if (record.codes[i] === code + 10 && out.length > 0) out[out.length - 2] = record.numberAt(i)
    else if (record.codes[i] === code + 20 && out.length > 0) out[out.length - 1] = record.numberAt(i)
  }
  return out
}

function numbers(record: DxfRecords, code: number): number[] {
  const out: number[] = []
  for (let i = 0; i < record.count; i += 1) if (record.codes[i] === code) out.push(record.numberAt(i))
  return out
}
