/** Angles of a plane z = a . p + c, in degrees, from its gradient a. */
import { levelSlope } from '../../base/geometry/tolerance.ts'
import { norm } from './norm.ts'

const degrees = 180 / Math.PI

/** Slope against the horizontal: atan |a|. */
export const slopeDegrees = (gx: number, gy: number): number => Math.atan(norm(gx, gy)) * degrees

/**
 * Bearing of the way down, -a, clockwise from +y, in [0, 360). NaN for a level plane, which has none.
 */
export function fallDegrees(gx: number, gy: number): number {
  if (norm(gx, gy) < levelSlope) return NaN
  const bearing = Math.atan2(-gx, -gy) * degrees
  const turned = bearing < 0 ? bearing + 360 : bearing
  return turned >= 360 ? 0 : turned
}

/**
 * Angle between the normals (-a, 1) of two planes. From the cross and the dot product together, so that it is as exact
 * near 0 as elsewhere: tan(fold) = |n x m| / n . m.
 */
export function foldDegrees(ax: number, ay: number, bx: number, by: number): number {
  const cross = norm(ax - bx, ay - by, ax * by - ay * bx)
  return Math.atan2(cross, 1 + ax * bx + ay * by) * degrees
}
