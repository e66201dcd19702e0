/**
 * Corner deviation and minimum zone of corners that lie within a millionth of their width of one plane, as those of a flat
 * panel with rounded coordinates do: exact but for the square of that share, at a tenth of the cost of the general measures.
 *
 * With r the vertical residuals of the least-squares plane z = g . p + c and h the leverages (diagonal of the hat matrix):
 *   without corner k the plane is off it by r_k / (1 - h_k) vertically, and its slope changes by what that residual moves
 *   (D. Cook, Technometrics 19, 1977); corner deviation is the largest of these times the cosine of the plane's slope;
 *   the least largest vertical distance t of any plane is the largest, over four corners with sum w = 0 and sum w p = 0, of
 *   |sum w r| / sum |w| (E. Stiefel, Numer. Math. 1, 1959; the dual of the linear program), and the zone 2 t times the cosine.
 */

/** Out-of-flatness over width up to which the plane's slope is known well enough. */
const nearlyFlatShare = 1e-6

/** Up to this many corners all fours are tried: 12 corners make 495. */
const mostCorners = 12

/** Without a corner of more leverage than this the others are nearly in a line: then digits are lost here, or it is to be skipped. */
const mostLeverage = 0.98

/** Areas of less than this share of the width squared are rounding. */
const noArea = 2 ** -44

const x = new Float64Array(mostCorners)
const y = new Float64Array(mostCorners)
const r = new Float64Array(mostCorners)
const e1 = new Float64Array(mostCorners)
const e2 = new Float64Array(mostCorners)
/** area[12 (12 i + j) + k] of corners i < j < k: twice the signed area in plan. */
const area = new Float64Array(mostCorners ** 3)

/**
 * Corner deviation and minimum zone of `count` corners x y z .. from `offset` into out[0], out[1]; false where the corners are
 * not nearly flat, too many, or in a line, and the general measures are to be taken.
 */
export function nearlyFlat(points: Float64Array, offset: number, count: number, out: Float64Array): boolean {
  if (count < 4 || count > mostCorners) return false
  let mx = 0, my = 0, mz = 0
  for (let k = 0; k < count; k += 1) {
    mx += points[offset + 3 * k]
    my += points[offset + 3 * k + 1]
    mz += points[offset + 3 * k + 2]
  }
  mx /= count
  my /= count
  mz /= count
  // x = r11 e1, y = r12 e1 + r22 e2.
  let xx = 0
  for (let k = 0; k < count; k += 1) {
    x[k] = points[offset + 3 * k] - mx
    y[k] = points[offset + 3 * k + 1] - my
    r[k] = points[offset + 3 * k + 2] - mz
    xx += x[k] * x[k]
  }
  const r11 = Math.sqrt(xx)
  if (!(r11 > 0)) return false
  let r12 = 0
  for (let k = 0; k < count; k += 1) {
    e1[k] = x[k] / r11
    r12 += e1[k] * y[k]
  }
  let yy = 0
  for (let k = 0; k < count; k += 1) {
    e2[k] = y[k] - r12 * e1[k]
    yy += e2[k] * e2[k]
  }
  const r22 = Math.sqrt(yy)
  const width = Math.min(r11, r22)
  if (!(width > 1e-3 * Math.max(r11, Math.abs(r12)))) return false
  let a1 = 0, a2 = 0
  for (let k = 0; k < count; k += 1) {
    e2[k] /= r22
    a1 += e1[k] * r[k]
    a2 += e2[k] * r[k]
  }
  let most = 0
  for (let k = 0; k < count; k += 1) {
    r[k] -= a1 * e1[k] + a2 * e2[k]
    most = Math.max(most, Math.abs(r[k]))
  }
  if (!(most <= nearlyFlatShare * width)) return false

  let corner = 0
  for (let k = 0; k < count; k += 1) {
    const leverage = 1 / count + e1[k] * e1[k] + e2[k] * e2[k]
    if (leverage > mostLeverage) return false
    const off = r[k] / (1 - leverage)
    corner = Math.max(corner, Math.abs(off) * cosine(a1 - e1[k] * off, a2 - e2[k] * off, r11, r12, r22))
  }
  out[0] = corner
  const level = worstFour(count, (r11 * r11 + r22 * r22) * noArea)
  levelledSlope(level)
  const gy = a2 / r22
  const gx = (a1 - gy * r12) / r11
  out[1] = (2 * level) / Math.sqrt(1 + (gx + slope[0]) ** 2 + (gy + slope[1]) ** 2)
  return true
}

/** Cosine of the slope of the plane with coefficients a1, a2 on e1, e2. */
function cosine(a1: number, a2: number, r11: number, r12: number, r22: number): number {
  const gy = a2 / r22
  const gx = (a1 - gy * r12) / r11
  return 1 / Math.sqrt(1 + gx * gx + gy * gy)
}

/** The four corners that decide, their weights with the sign of the sum, and the slope that their plane adds to the best one. */
const four = new Int32Array(4)
const w = new Float64Array(4)
const slope = new Float64Array(2)

/** The least largest vertical distance: over all fours of corners the largest |sum w r| / sum |w|. Sets `four` and `w`. */
function worstFour(count: number, least: number): number {
  for (let i = 0; i < count; i += 1) {
    for (let j = i + 1; j < count; j += 1) {
      const ux = x[j] - x[i], uy = y[j] - y[i]
      for (let k = j + 1; k < count; k += 1) area[144 * i + 12 * j + k] = ux * (y[k] - y[i]) - uy * (x[k] - x[i])
    }
  }
  let most = 0
  w.fill(0)
  for (let i = 0; i < count; i += 1) {
    for (let j = i + 1; j < count; j += 1) {
      for (let k = j + 1; k < count; k += 1) {
        const ijk = area[144 * i + 12 * j + k]
        for (let l = k + 1; l < count; l += 1) {
          const jkl = area[144 * j + 12 * k + l], ikl = area[144 * i + 12 * k + l], ijl = area[144 * i + 12 * j + l]
          const weight = Math.abs(jkl) + Math.abs(ikl) + Math.abs(ijl) + Math.abs(ijk)
          const sum = jkl * r[i] - ikl * r[j] + ijl * r[k] - ijk * r[l]
          if (!(Math.abs(sum) > most * weight && weight > least)) continue
          most = Math.abs(sum) / weight
          const sign = Math.sign(sum)
          four[0] = i
          four[1] = j
          four[2] = k
          four[3] = l
          w[0] = sign * jkl
          w[1] = -sign * ikl
          w[2] = sign * ijl
          w[3] = -sign * ijk
        }
      }
    }
  }
  return most
}

/** Slope of the plane off which the four corners are by `level` with the signs of their weights, into `slope`. */
function levelledSlope(level: number): void {
  let out = 0
  for (let m = 1; m < 4; m += 1) if (Math.abs(w[m]) > Math.abs(w[out])) out = m
  // Without the corner of the largest weight the other three make the largest triangle.
  const i = out === 0 ? 1 : 0, j = out <= 1 ? 2 : 1, k = out === 3 ? 2 : 3
  const ri = r[four[i]] - Math.sign(w[i]) * level
  const ux = x[four[j]] - x[four[i]], uy = y[four[j]] - y[four[i]], uz = r[four[j]] - Math.sign(w[j]) * level - ri
  const vx = x[four[k]] - x[four[i]], vy = y[four[k]] - y[four[i]], vz = r[four[k]] - Math.sign(w[k]) * level - ri
  const det = ux * vy - uy * vx
  slope[0] = det === 0 ? 0 : (uz * vy - vz * uy) / det
  slope[1] = det === 0 ? 0 : (ux * vz - vx * uz) / det
}
