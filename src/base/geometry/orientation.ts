/**
 * Which way three points turn, exactly: adaptive arithmetic, so the sign is right for any doubles that neither overflow
 * nor underflow (J. R. Shewchuk, "Adaptive precision floating-point arithmetic and fast robust geometric predicates",
 * Discrete Comput. Geom. 18, 1997).
 */
import { orient2d } from 'robust-predicates'

/**
 * Twice the signed area of the triangle abc, with y up: > 0 when c lies left of the line from a to b, < 0 right of it,
 * 0 exactly on it. The sign is exact, the value is rounded.
 */
export function orientation(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  // The package counts y downwards.
  return -orient2d(ax, ay, bx, by, cx, cy)
}
