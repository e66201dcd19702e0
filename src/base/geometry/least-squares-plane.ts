/** The plane with the least sum of squared distances to corners in space. */

/** In the place of a corner to skip: none is. */
export const noCorner = -1

export interface Plane {
  readonly middle: readonly [number, number, number]
  readonly normal: readonly [number, number, number]
}

/** Total least-squares plane of `count` corners x y z .. from `offset`, without corner `skip`: the eigenvector of the least eigenvalue of the 3 x 3 covariance, by Jacobi rotations. */
export function leastSquaresPlane(points: Float64Array, offset: number, count: number, skip: number): Plane {
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
  const c = [0, 0, 0, 0, 0, 0]
  for (let k = 0; k < count; k += 1) {
    if (k === skip) continue
    const x = points[offset + 3 * k] - mx, y = points[offset + 3 * k + 1] - my, z = points[offset + 3 * k + 2] - mz
    c[0] += x * x
    c[1] += x * y
    c[2] += x * z
    c[3] += y * y
    c[4] += y * z
    c[5] += z * z
  }
  const { values, vectors } = jacobi(c)
  const v = values.indexOf(Math.min(...values))
  return {
    middle: [mx, my, mz],
    normal: [vectors[0][v], vectors[1][v], vectors[2][v]],
  }
}

/** Eigenvalues and vectors (in columns) of the symmetric matrix [c0 c1 c2; c1 c3 c4; c2 c4 c5] (Jacobi 1846). */
function jacobi(c: readonly number[]): { values: number[]; vectors: number[][] } {
  const a = [[c[0], c[1], c[2]], [c[1], c[3], c[4]], [c[2], c[4], c[5]]]
  const v = [[1, 0, 0], [0, 1, 0], [0, 0, 1]]
  for (let sweep = 0; sweep < 30; sweep += 1) {
    if (Math.abs(a[0][1]) + Math.abs(a[0][2]) + Math.abs(a[1][2]) <= 1e-300) break
    for (const [p, q] of [[0, 1], [0, 2], [1, 2]]) {
      if (a[p][q] === 0) continue
      const theta = (a[q][q] - a[p][p]) / (2 * a[p][q])
      const t = (theta >= 0 ? 1 : -1) / (Math.abs(theta) + Math.hypot(theta, 1))
      const cos = 1 / Math.hypot(t, 1), sin = t * cos
      for (let k = 0; k < 3; k += 1) {
        const kp = a[k][p], kq = a[k][q]
        a[k][p] = cos * kp - sin * kq
        a[k][q] = sin * kp + cos * kq
      }
      for (let k = 0; k < 3; k += 1) {
        const pk = a[p][k], qk = a[q][k]
        a[p][k] = cos * pk - sin * qk
        a[q][k] = sin * pk + cos * qk
        const kp = v[k][p], kq = v[k][q]
        v[k][p] = cos * kp - sin * kq
        v[k][q] = sin * kp + cos * kq
      }
    }
  }
  return { values: [a[0][0], a[1][1], a[2][2]], vectors: v }
}
