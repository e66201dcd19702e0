/** Crossings of two segments: the decision is exact, the point is rounded at the size of the segments. */
import { orientation } from './orientation.ts'

/** Whether the segments ab and cd cross in one point that is an end of neither. Exact. */
export function crossProperly(
  ax: number, ay: number, bx: number, by: number, cx: number, cy: number, dx: number, dy: number,
): boolean {
  const c = orientation(ax, ay, bx, by, cx, cy)
  const d = orientation(ax, ay, bx, by, dx, dy)
  if (!((c > 0 && d < 0) || (c < 0 && d > 0))) return false
  const a = orientation(cx, cy, dx, dy, ax, ay)
  const b = orientation(cx, cy, dx, dy, bx, by)
  return (a > 0 && b < 0) || (a < 0 && b > 0)
}

/**
 * The point where the lines ab and cd meet, into out[0], out[1]; NaN when they are parallel.
 *
 * ab is divided in the ratio of the areas cda : cdb, cd in that of abc : abd; both give the point. Its x is taken from
 * the steeper line and its y from the flatter one, so that a line along an axis gives its own coordinate unrounded.
 */
export function crossingPoint(
  ax: number, ay: number, bx: number, by: number, cx: number, cy: number, dx: number, dy: number, out: Float64Array,
): void {
  const a = orientation(cx, cy, dx, dy, ax, ay)
  const b = orientation(cx, cy, dx, dy, bx, by)
  const c = orientation(ax, ay, bx, by, cx, cy)
  const d = orientation(ax, ay, bx, by, dx, dy)
  if (a === b || c === d) {
    out[0] = NaN
    out[1] = NaN
    return
  }
  const first = a / (a - b)
  const second = c / (c - d)
  const abSteeper = Math.abs((bx - ax) * (dy - cy)) <= Math.abs((dx - cx) * (by - ay))
  out[0] = abSteeper ? between(ax, bx, first) : between(cx, dx, second)
  out[1] = abSteeper ? between(cy, dy, second) : between(ay, by, first)
}

/** The value at `share` of the way from one to other, measured from the nearer end so that the ends come out exactly. */
function between(one: number, other: number, share: number): number {
  return share <= 0.5 ? one + share * (other - one) : other - (1 - share) * (other - one)
}
