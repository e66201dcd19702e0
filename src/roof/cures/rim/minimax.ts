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
const closeEnough = 2e-3
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
 * Of all b with |A_k . b - r_k| <= most the one nearest to `anchor`, near enough: minimise
 *     |b - anchor|^2 + firm * sum (|e_k| - most)_+^2
 * by Newton steps with halving on the piecewise quadratic, `firm` rising (Pinar, Zenios, SIAM J. Optim. 4 (1994)).
 * Returns `start`, which keeps the bound, where the steps do not come within `over` of it.
 */
export function nearestWithin(a: Float64Array, right: Float64Array, columns: number, anchor: Float64Array, start: Float64Array, most: number): Float64Array {
  const rows = right.length
  const errors = (b: Float64Array): Float64Array => right.map((r, k) => {
    let e = -r
    for (let i = 0; i < columns; i += 1) e += a[k * columns + i] * b[i]
    return e
  })
  const value = (b: Float64Array, e: Float64Array, firm: number): number =>
    b.reduce((sum, x, i) => sum + (x - anchor[i]) ** 2, 0) + firm * e.reduce((sum, each) => sum + Math.max(0, Math.abs(each) - most) ** 2, 0)
  let b = start
  let e = errors(b)
  for (const firm of firmness) {
    let now = value(b, e, firm)
    for (let step = 0; step < mostNewtonSteps; step += 1) {
      const w = new Float64Array(rows)
      const goal = right.slice()
      e.forEach((each, k) => {
        if (Math.abs(each) <= most) return
        w[k] = firm
        goal[k] = right[k] + Math.sign(each) * most
      })
      const full = weighted(a, goal, columns, anchor, w, 1)
      let share = 1
      let next = full, nextErrors = errors(next), then = value(next, nextErrors, firm)
      while (then > now && share > 1e-3) {
        share /= 2
        next = b.map((x, i) => x + share * (full[i] - x))
        nextErrors = errors(next)
        then = value(next, nextErrors, firm)
      }
      if (!(then < now * (1 - 1e-9))) break
      b = next
      e = nextErrors
      now = then
    }
  }
  return e.every((each) => Math.abs(each) <= (1 + over) * most) ? b : start
}

const firmness = [1e2, 1e4, 1e6]
const mostNewtonSteps = 8
const over = 3e-3

/** Weights below this count for nothing: they fall by a share a step and would cost as much as the others. */
const idle = 1e-9

/** (A^T W A + eta I) b = A^T W r + eta anchor, by Cholesky. */
function weighted(a: Float64Array, right: Float64Array, n: number, anchor: Float64Array, w: Float64Array, eta: number): Float64Array {
  const m = new Float64Array(n * n)
  const x = anchor.map((value) => eta * value)
  for (let k = 0; k < right.length; k += 1) {
    if (w[k] < idle) continue
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
