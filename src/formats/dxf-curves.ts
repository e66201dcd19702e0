/** Curves of DXF entities: made from their codes, and carried along with a block. */
import type { Arc, Curve } from './chords.ts'
import { placedPoint, placedVector, turn, type Placing, type Vector } from './dxf-placing.ts'

/** The image of a curve under an affine map is a curve of the same kind. */
export function placedCurve(m: Placing, curve: Curve): Curve {
  switch (curve.kind) {
    case 'arc': return { ...curve, centre: placedPoint(m, ...curve.centre), a: placedVector(m, curve.a), b: placedVector(m, curve.b) }
    case 'bow': return { ...curve, start: placedPoint(m, ...curve.start), u: placedVector(m, curve.u), v: placedVector(m, curve.v) }
    case 'bezier': return { ...curve, points: placedPoints(m, curve.points) }
  }
}

/** The images of points x y z .. */
export function placedPoints(m: Placing, points: readonly number[]): number[] {
  const out: number[] = []
  for (let i = 0; i < points.length; i += 3) out.push(...placedPoint(m, points[i], points[i + 1], points[i + 2]))
  return out
}

/**
 * The piece of a polyline with a bulge: bulge = tan(sweep / 4), positive to the left (the arc then lies to the right of
 * its chord). Null where the piece is straight. `from`, `to`: corners in the polyline's own plane.
 */
export function bulged(from: Vector, to: Vector, bulge: number): Curve | null {
  const u: Vector = [to[0] - from[0], to[1] - from[1], to[2] - from[2]]
  if (bulge === 0 || (u[0] === 0 && u[1] === 0)) return null
  return { kind: 'bow', start: from, u, v: [-u[1], u[0], 0], sweep: 4 * Math.atan(bulge) }
}

/** Point of the ellipse centre + cos a + sin b at degrees (exact at quarters). */
export function pointAtDegrees({ centre, a, b }: Arc, degrees: number): [x: number, y: number, z: number] {
  const [c, s] = turn(degrees)
  return [centre[0] + c * a[0] + s * b[0], centre[1] + c * a[1] + s * b[1], centre[2] + c * a[2] + s * b[2]]
}

/** The same at an angle in radians. */
export function pointAtAngle({ centre, a, b }: Arc, t: number): [x: number, y: number, z: number] {
  const c = Math.cos(t)
  const s = Math.sin(t)
  return [centre[0] + c * a[0] + s * b[0], centre[1] + c * a[1] + s * b[1], centre[2] + c * a[2] + s * b[2]]
}
