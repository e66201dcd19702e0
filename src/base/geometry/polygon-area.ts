/** Area and centroid of polygons given as point indices. */

/**
 * Signed area of the polygon with the corners corner[from .. to): positive when counter-clockwise.
 * 2 A = sum (p_k - p_0) x (p_k+1 - p_0); taking differences first keeps the digits far from the origin.
 */
export function signedArea(x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number): number {
  if (to - from < 3) return 0
  const x0 = x[corner[from]]
  const y0 = y[corner[from]]
  let twice = 0
  let px = x[corner[from + 1]] - x0
  let py = y[corner[from + 1]] - y0
  for (let k = from + 2; k < to; k += 1) {
    const qx = x[corner[k]] - x0
    const qy = y[corner[k]] - y0
    twice += px * qy - py * qx
    px = qx
    py = qy
  }
  return twice / 2
}

/**
 * Centroid of the polygon's area, into out[0], out[1]; the mean of its corners when it has none.
 * c = p_0 + sum (u + v)/3 (u x v) / sum (u x v) with u, v the corners' offsets from p_0.
 */
export function polygonCentroid(x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number, out: Float64Array): void {
  const x0 = x[corner[from]]
  const y0 = y[corner[from]]
  let twice = 0, sx = 0, sy = 0, mx = 0, my = 0
  let px = 0, py = 0
  for (let k = from + 1; k < to; k += 1) {
    const qx = x[corner[k]] - x0
    const qy = y[corner[k]] - y0
    const cross = px * qy - py * qx
    twice += cross
    sx += (px + qx) * cross
    sy += (py + qy) * cross
    mx += qx
    my += qy
    px = qx
    py = qy
  }
  out[0] = twice === 0 ? x0 + mx / (to - from) : x0 + sx / (3 * twice)
  out[1] = twice === 0 ? y0 + my / (to - from) : y0 + sy / (3 * twice)
}
