/**
 * minimise max_k |A_k . b - r_k| by Lawson's iteratively reweighted least squares (C. L. Lawson, thesis, UCLA 1961; Rice, Usow,
 * Math. Comp. 22 (1968)): w_k <- w_k |e_k|, normalised to sum 1. The weighted least-squares value sqrt(sum w e^2) of any such
 * weights is a lower bound of the optimum, so each step certifies how far it is from it.
 */
export interface Minimax {
  /** Unknowns (length `columns`). */
  readonly b: Float64Array
  readonly largest: number
  /** No b has a largest error below this. */
  readonly least: number
  readonly weights: Float64Array
}

/** The gap between largest and least at which the steps end, as a share. */
const closeEnough = 1e-3
/** Towards `anchor`, of the mean square of A: it settles what the largest errors leave open and costs the bound 1e-6. */
const settling = 1e-9

/** `a`: rows A_k one after another; `anchor`: the b to be near to where the errors leave it open; `weights`: where to start, null: even. */
export function minimax(
  a: Float64Array, right: Float64Array, columns: number, anchor: Float64Array, weights: Float64Array | null, mostSteps: number,
): Minimax {
  const rows = right.length
  let w = weights ?? new Float64Array(rows).fill(1 / rows)
  const square = a.reduce((sum, value) => sum + value * value, 0) / Math.max(1, rows * columns)
  let best: Minimax | null = null
  let least = 0
  for (let step = 0; step < mostSteps; step += 1) {
    const b = weighted(a, right, columns, anchor, w, settling * square)
    const error = new Float64Array(rows)
    let largest = 0, sum = 0
    for (let k = 0; k < rows; k += 1) {
      let e = -right[k]
      for (let i = 0; i < columns; i += 1) e += a[k * columns + i] * b[i]
      error[k] = Math.abs(e)
      largest = Math.max(largest, error[k])
      sum += w[k] * e * e
    }
    least = Math.max(least, Math.min(Math.sqrt(sum), largest))
    if (best === null || largest < best.largest) best = { b, largest, least, weights: w }
    if (!(best.largest - least > closeEnough * best.largest)) break
    const total = error.reduce((s, e, k) => s + w[k] * e, 0)
    if (!(total > 0)) break
    w = w.map((weight, k) => (weight * error[k]) / total)
  }
  return best === null ? { b: anchor, largest: 0, least: 0, weights: w } : { ...best, least }
}

/**
 * Of all b with |A_k . b - r_k| <= most the one nearest to `anchor`: a penalty on what is over, its active rows found by Newton
 * steps on the piecewise quadratic (Pinar, Zenios, SIAM J. Optim. 4 (1994)); what stays over is about 1 / `firm` of a row's pull.
 */
export function nearestWithin(a: Float64Array, right: Float64Array, columns: number, anchor: Float64Array, start: Float64Array, most: number): Float64Array {
  const rows = right.length
  const square = a.reduce((sum, value) => sum + value * value, 0) / Math.max(1, rows * columns)
  let b = start
  let before = ''
  for (let step = 0; step < mostNewtonSteps; step += 1) {
    const w = new Float64Array(rows)
    const goal = right.slice()
    for (let k = 0; k < rows; k += 1) {
      let e = -right[k]
      for (let i = 0; i < columns; i += 1) e += a[k * columns + i] * b[i]
      // Rows at the bound are held to it; at the start, where all lie within, the largest ones are.
      if (Math.abs(e) < most * (step === 0 ? heldShare : 1 - 1e-12)) continue
      w[k] = firm
      goal[k] = right[k] + Math.sign(e) * most
    }
    const active = w.join()
    if (step > 0 && active === before) break
    before = active
    b = weighted(a, goal, columns, anchor, w, square)
  }
  return b
}

const firm = 1e7
const heldShare = 0.999
const mostNewtonSteps = 40

/** (A^T W A + eta I) b = A^T W r + eta anchor, by Cholesky. */
function weighted(a: Float64Array, right: Float64Array, n: number, anchor: Float64Array, w: Float64Array, eta: number): Float64Array {
  const m = new Float64Array(n * n)
  const x = anchor.map((value) => eta * value)
  for (let k = 0; k < right.length; k += 1) {
    if (w[k] === 0) continue
    const row = k * n
    for (let i = 0; i < n; i += 1) {
      const f = w[k] * a[row + i]
      x[i] += f * right[k]
      for (let j = 0; j <= i; j += 1) m[i * n + j] += f * a[row + j]
    }
  }
  for (let i = 0; i < n; i += 1) {
    m[i * n + i] += eta
    for (let j = 0; j <= i; j += 1) {
      let sum = m[i * n + j]
      for (let l = 0; l < j; l += 1) sum -= m[i * n + l] * m[j * n + l]
      m[i * n + j] = i === j ? Math.sqrt(Math.max(sum, 1e-300)) : sum / m[j * n + j]
    }
  }
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < i; j += 1) x[i] -= m[i * n + j] * x[j]
    x[i] /= m[i * n + i]
  }
  for (let i = n - 1; i >= 0; i -= 1) {
    x[i] /= m[i * n + i]
    for (let j = 0; j < i; j += 1) x[j] -= m[i * n + j] * x[i]
  }
  return x
}
