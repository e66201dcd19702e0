/**
 * For each panel an orthonormal basis of the affine functions over its corners: the vectors 1/sqrt(k), e1, e2 of length k
 * span {1, x, y}. What is left of the heights after projecting them out is the panel's out-of-flatness, unsquared, and the
 * same basis gives the least-squares plane, so one record serves the flatness form, the residual and the gradients.
 */
import type { Plan } from '../../plan/plan.ts'

export interface PanelBases {
  /** e1, e2 of each corner: e[2 c], e[2 c + 1] for c in the plan's corner order (length 2 * corners). */
  readonly e: Float64Array
  /**
   * X = r11 e1 and Y = r12 e1 + r22 e2 for the centred working coordinates X, Y of the corners: r11, r12, r22 of each
   * panel (length 3 * panelCount).
   */
  readonly r: Float64Array
  /** Mean of each panel's corners in working coordinates (length 2 * panelCount). */
  readonly middle: Float64Array
}

/** Gram-Schmidt, orthogonalised twice: on slivers once is not enough (Giraud, Langou, Rozloznik 2005). */
export function panelBases(plan: Plan): PanelBases {
  const { panelStart, corner, work, panelCount } = plan
  const e = new Float64Array(2 * corner.length)
  const r = new Float64Array(3 * panelCount)
  const middle = new Float64Array(2 * panelCount)
  for (let p = 0; p < panelCount; p += 1) {
    const from = panelStart[p], to = panelStart[p + 1]
    let mx = 0, my = 0
    for (let c = from; c < to; c += 1) {
      mx += work[2 * corner[c]]
      my += work[2 * corner[c] + 1]
    }
    mx /= to - from
    my /= to - from
    middle[2 * p] = mx
    middle[2 * p + 1] = my
    let xx = 0
    for (let c = from; c < to; c += 1) xx += (work[2 * corner[c]] - mx) ** 2
    const r11 = Math.sqrt(xx)
    for (let c = from; c < to; c += 1) {
      e[2 * c] = (work[2 * corner[c]] - mx) / r11
      e[2 * c + 1] = work[2 * corner[c] + 1] - my
    }
    let r12 = 0
    for (let pass = 0; pass < 2; pass += 1) {
      let dot = 0, sum = 0
      for (let c = from; c < to; c += 1) {
        dot += e[2 * c] * e[2 * c + 1]
        sum += e[2 * c + 1]
      }
      for (let c = from; c < to; c += 1) e[2 * c + 1] -= dot * e[2 * c] + sum / (to - from)
      r12 += dot
    }
    let yy = 0
    for (let c = from; c < to; c += 1) yy += e[2 * c + 1] ** 2
    const r22 = Math.sqrt(yy)
    for (let c = from; c < to; c += 1) e[2 * c + 1] /= r22
    r[3 * p] = r11
    r[3 * p + 1] = r12
    r[3 * p + 2] = r22
  }
  return { e, r, middle }
}

/**
 * |N^T h|^2 summed over the panels, each term from the unsquared residual, so that a lift of exact coordinates gives
 * about (1e-16 |h|)^2 and not the rounding of Q.
 */
export function squaredResidual(plan: Plan, bases: PanelBases, heights: Float64Array): number {
  const { panelStart, corner, panelCount } = plan
  const { e } = bases
  let total = 0
  for (let p = 0; p < panelCount; p += 1) {
    const from = panelStart[p], to = panelStart[p + 1]
    if (to - from === 3) continue
    let mean = 0, a1 = 0, a2 = 0
    for (let c = from; c < to; c += 1) mean += heights[corner[c]]
    mean /= to - from
    for (let c = from; c < to; c += 1) {
      const h = heights[corner[c]] - mean
      a1 += e[2 * c] * h
      a2 += e[2 * c + 1] * h
    }
    for (let c = from; c < to; c += 1) total += (heights[corner[c]] - mean - a1 * e[2 * c] - a2 * e[2 * c + 1]) ** 2
  }
  return total
}

/**
 * Q h: each panel's residual added back to its corners (length nodeCount). The affine part is taken out twice: what is left
 * is then orthogonal to affine functions to the rounding of the residual itself, not of the heights, so Q h has nothing of a
 * lift in it that a solve near singularity could blow up.
 */
export function applyForm(plan: Plan, bases: PanelBases, heights: Float64Array): Float64Array {
  const { panelStart, corner, panelCount } = plan
  const { e } = bases
  const out = new Float64Array(plan.nodeCount)
  let left = new Float64Array(16)
  for (let p = 0; p < panelCount; p += 1) {
    const from = panelStart[p], count = panelStart[p + 1] - from
    if (count === 3) continue
    if (left.length < count) left = new Float64Array(2 * count)
    for (let k = 0; k < count; k += 1) left[k] = heights[corner[from + k]]
    for (let pass = 0; pass < 2; pass += 1) {
      let mean = 0, a1 = 0, a2 = 0
      for (let k = 0; k < count; k += 1) mean += left[k]
      mean /= count
      for (let k = 0; k < count; k += 1) {
        left[k] -= mean
        a1 += e[2 * (from + k)] * left[k]
        a2 += e[2 * (from + k) + 1] * left[k]
      }
      for (let k = 0; k < count; k += 1) left[k] -= a1 * e[2 * (from + k)] + a2 * e[2 * (from + k) + 1]
    }
    for (let k = 0; k < count; k += 1) out[corner[from + k]] += left[k]
  }
  return out
}

/** Gradient of each panel's least-squares plane, gx gy gx gy .. (length 2 * panelCount), and its height at `middle`. */
export function panelPlanes(plan: Plan, bases: PanelBases, heights: Float64Array): { gradient: Float64Array; level: Float64Array } {
  const { panelStart, corner, panelCount } = plan
  const { e, r } = bases
  const gradient = new Float64Array(2 * panelCount)
  const level = new Float64Array(panelCount)
  for (let p = 0; p < panelCount; p += 1) {
    const from = panelStart[p], to = panelStart[p + 1]
    let mean = 0, a1 = 0, a2 = 0
    for (let c = from; c < to; c += 1) mean += heights[corner[c]]
    mean /= to - from
    for (let c = from; c < to; c += 1) {
      const h = heights[corner[c]] - mean
      a1 += e[2 * c] * h
      a2 += e[2 * c + 1] * h
    }
    const gy = a2 / r[3 * p + 2]
    gradient[2 * p] = (a1 - gy * r[3 * p + 1]) / r[3 * p]
    gradient[2 * p + 1] = gy
    level[p] = mean
  }
  return { gradient, level }
}
