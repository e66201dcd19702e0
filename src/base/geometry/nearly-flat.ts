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

/** Vertical residuals of the corners. */
const r = new Float64Array(mostCorners)
/** area[12 (12 i + j) + k] of corners i < j < k: twice the signed area in the frame. */
const area = new Float64Array(mostCorners ** 3)

/** The corners of panels in plan as x = r11 e1, y = r12 e1 + r22 e2 about their mean, e1 and e2 of length 1. */
export interface Frames {
  /** e1, e2 of each corner, one panel after another. */
  readonly e: Float64Array
  /** r11, r12, r22 of each panel; r11 = 0: it has no frame that serves. */
  readonly r: Float64Array
}

const own: Frames = { e: new Float64Array(2 * mostCorners), r: new Float64Array(3) }

/**
 * The frame of `count` corners x y z .. from `offset` into e[2 at ..) and r[3 panel ..); r11 = 0 where the corners are too
 * few, too many, or in a line.
 */
export function frameInto({ e, r: sides }: Frames, at: number, panel: number, points: Float64Array, offset: number, count: number): void {
  sides[3 * panel] = 0
  if (count < 4 || count > mostCorners) return
  let mx = 0, my = 0
  for (let k = offset; k < offset + 3 * count; k += 3) {
    mx += points[k]
    my += points[k + 1]
  }
  mx /= count
  my /= count
  let xx = 0
  for (let k = 0; k < count; k += 1) xx += (points[offset + 3 * k] - mx) ** 2
  const r11 = Math.sqrt(xx)
  if (!(r11 > 0)) return
  let r12 = 0
  for (let k = 0; k < count; k += 1) {
    const e1 = (points[offset + 3 * k] - mx) / r11
    e[2 * (at + k)] = e1
    r12 += e1 * (points[offset + 3 * k + 1] - my)
  }
  let yy = 0
  for (let k = 0; k < count; k += 1) {
    const e2 = points[offset + 3 * k + 1] - my - r12 * e[2 * (at + k)]
    e[2 * (at + k) + 1] = e2
    yy += e2 * e2
  }
  const r22 = Math.sqrt(yy)
  if (!(Math.min(r11, r22) > 1e-3 * Math.max(r11, Math.abs(r12)))) return
  for (let k = at; k < at + count; k += 1) {
    e[2 * k + 1] /= r22
    // Without a corner of so much leverage the others are nearly in a line.
    if (1 / count + e[2 * k] ** 2 + e[2 * k + 1] ** 2 > mostLeverage) return
  }
  sides[3 * panel] = r11
  sides[3 * panel + 1] = r12
  sides[3 * panel + 2] = r22
}

/**
 * Corner deviation and minimum zone of `count` corners x y z .. from `offset` into out[0], out[1]; false where the corners are
 * not nearly flat, too many, or in a line, and the general measures are to be taken.
 */
export function nearlyFlat(points: Float64Array, offset: number, count: number, out: Float64Array): boolean {
  frameInto(own, 0, 0, points, offset, count)
  return nearlyFlatIn(own, 0, 0, points, offset, count, out)
}

/** The same in a frame that is known. */
export function nearlyFlatIn({ e, r: sides }: Frames, at: number, panel: number, points: Float64Array, offset: number, count: number, out: Float64Array): boolean {
  const r11 = sides[3 * panel], r12 = sides[3 * panel + 1], r22 = sides[3 * panel + 2]
  if (r11 === 0) return false
  let mz = 0
  for (let k = offset + 2; k < offset + 3 * count; k += 3) mz += points[k]
  mz /= count
  let a1 = 0, a2 = 0
  for (let k = 0; k < count; k += 1) {
    r[k] = points[offset + 3 * k + 2] - mz
    a1 += e[2 * (at + k)] * r[k]
    a2 += e[2 * (at + k) + 1] * r[k]
  }
  let most = 0
  for (let k = 0; k < count; k += 1) {
    r[k] -= a1 * e[2 * (at + k)] + a2 * e[2 * (at + k) + 1]
    most = Math.max(most, Math.abs(r[k]))
  }
  if (!(most <= nearlyFlatShare * Math.min(r11, r22))) return false

  let corner = 0
  for (let k = 0; k < count; k += 1) {
    const e1 = e[2 * (at + k)], e2 = e[2 * (at + k) + 1]
    const off = r[k] / (1 - 1 / count - e1 * e1 - e2 * e2)
    const gy = (a2 - e2 * off) / r22
    const gx = (a1 - e1 * off - gy * r12) / r11
    corner = Math.max(corner, Math.abs(off) / Math.sqrt(1 + gx * gx + gy * gy))
  }
  out[0] = corner
  const level = worstFour(e, at, count, (r11 / r22 + r22 / r11) * noArea)
  levelledSlope(e, at, level)
  const gy = (a2 + slope[1]) / r22
  const gx = (a1 + slope[0] - gy * r12) / r11
  out[1] = (2 * level) / Math.sqrt(1 + gx * gx + gy * gy)
  return true
}

/** The four corners that decide, their weights with the sign of the sum, and the slope in the frame that their plane adds to the best one. */
const four = new Int32Array(4)
const w = new Float64Array(4)
const slope = new Float64Array(2)

/** The least largest vertical distance: over all fours of corners the largest |sum w r| / sum |w|. Sets `four` and `w`. */
function worstFour(e: Float64Array, at: number, count: number, least: number): number {
  for (let i = 0; i < count; i += 1) {
    const xi = e[2 * (at + i)], yi = e[2 * (at + i) + 1]
    for (let j = i + 1; j < count; j += 1) {
      const ux = e[2 * (at + j)] - xi, uy = e[2 * (at + j) + 1] - yi
      for (let k = j + 1; k < count; k += 1) area[144 * i + 12 * j + k] = ux * (e[2 * (at + k) + 1] - yi) - uy * (e[2 * (at + k)] - xi)
    }
  }
  let most = 0
  w.fill(0)
  // Where nothing is off the plane, any four corners of this panel do.
  for (let m = 0; m < 4; m += 1) four[m] = m
  for (let i = 0; i < count; i += 1) {
    const ri = r[i]
    for (let j = i + 1; j < count; j += 1) {
      const rj = r[j]
      for (let k = j + 1; k < count; k += 1) {
        const ijk = area[144 * i + 12 * j + k], rk = r[k]
        for (let l = k + 1; l < count; l += 1) {
          const jkl = area[144 * j + 12 * k + l], ikl = area[144 * i + 12 * k + l], ijl = area[144 * i + 12 * j + l]
          const weight = Math.abs(jkl) + Math.abs(ikl) + Math.abs(ijl) + Math.abs(ijk)
          const sum = jkl * ri - ikl * rj + ijl * rk - ijk * r[l]
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
function levelledSlope(e: Float64Array, at: number, level: number): void {
  let out = 0
  for (let m = 1; m < 4; m += 1) if (Math.abs(w[m]) > Math.abs(w[out])) out = m
  // Without the corner of the largest weight the other three make the largest triangle.
  const i = out === 0 ? 1 : 0, j = out <= 1 ? 2 : 1, k = out === 3 ? 2 : 3
  const ri = r[four[i]] - Math.sign(w[i]) * level
  const pi = 2 * (at + four[i]), pj = 2 * (at + four[j]), pk = 2 * (at + four[k])
  const ux = e[pj] - e[pi], uy = e[pj + 1] - e[pi + 1], uz = r[four[j]] - Math.sign(w[j]) * level - ri
  const vx = e[pk] - e[pi], vy = e[pk + 1] - e[pi + 1], vz = r[four[k]] - Math.sign(w[k]) * level - ri
  const det = ux * vy - uy * vx
  slope[0] = det === 0 ? 0 : (uz * vy - vz * uy) / det
  slope[1] = det === 0 ? 0 : (ux * vz - vx * uz) / det
}
