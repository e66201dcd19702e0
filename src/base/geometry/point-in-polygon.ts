/** Where a point lies with respect to a polygon; exact, by counting the sides that pass to its right. */
import { orientation } from './orientation.ts'

/**
 * 1 when the point lies inside the polygon corner[from .. to), 0 on its boundary, -1 outside. Even-odd for polygons that
 * cross themselves. A side counts when it spans the point's level, lower end included, upper end not.
 */
export function pointInPolygon(
  px: number, py: number, x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number,
): 1 | 0 | -1 {
  let inside = false
  let ax = x[corner[to - 1]]
  let ay = y[corner[to - 1]]
  for (let k = from; k < to; k += 1) {
    const bx = x[corner[k]]
    const by = y[corner[k]]
    if ((ay <= py) !== (by <= py)) {
      const side = orientation(ax, ay, bx, by, px, py)
      if (side === 0) return 0
      if ((side > 0) === (by > ay)) inside = !inside
    } else if (ay === py && by === py && (ax <= px) !== (bx < px)) {
      return 0
    } else if (bx === px && by === py) {
      return 0
    }
    ax = bx
    ay = by
  }
  return inside ? 1 : -1
}
