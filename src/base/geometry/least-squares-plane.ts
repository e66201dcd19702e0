/** The plane with the least sum of squared distances to corners in space. */

/** In the place of a corner to skip: none is. */
export const noCorner = -1

/** Iterations of the normal; panels take three to five, only sets as thick as wide need more. */
const mostIterations = 200

/**
 * Writes middle x y z and unit normal x y z of the total least-squares plane of `count` corners x y z .. from `offset`,
 * without corner `skip`, into `plane` (length 6).
 *
 * The normal is the eigenvector of the least eigenvalue of the 3 x 3 covariance C, by power iteration on its adjugate
 * (which is C^-1 up to a factor, without the division that a flat panel forbids): the error shrinks by
 * lambda_min / lambda_mid a step. Tried and dropped: Jacobi rotations, exact as well and ten times slower.
 */
export function leastSquaresPlane(points: Float64Array, offset: number, count: number, skip: number, plane: Float64Array): void {
  let mx = 0, my = 0, mz = 0
  const m = skip < 0 ? count : count - 1
  for (let k = 0; k < count; k += 1) {
    if (k === skip) continue
    mx += points[offset + 3 * k]
    my += points[offset + 3 * k + 1]
    mz += points[offset + 3 * k + 2]
  }
  mx /= m
  my /= m
  mz /= m
  let xx = 0, xy = 0, xz = 0, yy = 0, yz = 0, zz = 0
  for (let k = 0; k < count; k += 1) {
    if (k === skip) continue
    const x = points[offset + 3 * k] - mx, y = points[offset + 3 * k + 1] - my, z = points[offset + 3 * k + 2] - mz
    xx += x * x
    xy += x * y
    xz += x * z
    yy += y * y
    yz += y * z
    zz += z * z
  }
  const a = yy * zz - yz * yz, b = xz * yz - xy * zz, c = xy * yz - xz * yy
  const d = xx * zz - xz * xz, e = xy * xz - xx * yz, f = xx * yy - xy * xy
  // The longest column of the adjugate is nearest to the normal.
  let nx = c, ny = e, nz = f
  if (a > d && a > f) [nx, ny, nz] = [a, b, c]
  else if (d > f) [nx, ny, nz] = [b, d, e]
  for (let step = 0; step < mostIterations; step += 1) {
    const length = Math.sqrt(nx * nx + ny * ny + nz * nz)
    // All corners in one line: every plane through it is as good; a level one is as good as any.
    if (!(length > 0)) {
      nx = 0
      ny = 0
      nz = 1
      break
    }
    nx /= length
    ny /= length
    nz /= length
    const px = a * nx + b * ny + c * nz, py = b * nx + d * ny + e * nz, pz = c * nx + e * ny + f * nz
    const scale = Math.sqrt(px * px + py * py + pz * pz)
    if (!(scale > 0)) break
    const change = Math.abs(px / scale - nx) + Math.abs(py / scale - ny) + Math.abs(pz / scale - nz)
    nx = px / scale
    ny = py / scale
    nz = pz / scale
    if (change < 1e-15) break
  }
  plane[0] = mx
  plane[1] = my
  plane[2] = mz
  plane[3] = nx
  plane[4] = ny
  plane[5] = nz
}

/** Distance between the planes parallel to the least-squares plane that enclose the corners: never below the minimum zone. */
export function leastSquaresZone(points: Float64Array, offset: number, count: number, plane: Float64Array): number {
  leastSquaresPlane(points, offset, count, noCorner, plane)
  let low = Infinity, high = -Infinity
  for (let k = 0; k < count; k += 1) {
    const at = offset + 3 * k
    const t = (points[at] - plane[0]) * plane[3] + (points[at + 1] - plane[1]) * plane[4] + (points[at + 2] - plane[2]) * plane[5]
    if (t < low) low = t
    if (t > high) high = t
  }
  return high - low
}
