/**
 * The roof that rises as asked and breaks the flatness of as few panels as can be: c_d, the fold along diagonal d, is kept
 * sparse by minimising
 *     sum |c_d|^p      subject to  N^T (h0 + T y) = V c,   b . y = 1   (b: what the wish asks beyond the lifts)
 * by iteratively reweighted least squares, p = 1 first and 1/2 then: c^T diag(1 / w) c with w_d = (c_d^2 + eps^2)^(1 - p/2)
 * and eps falling (Daubechies, DeVore, Fornasier, Gunturk, Comm. Pure Appl. Math. 63 (2010); Chartrand, Yin, ICASSP 2008).
 * Eliminating c leaves K y = b with W_p = (V diag(w) V^T)^-1 for each panel: a factor of values and a solve a step.
 *
 * Why not diagonal by diagonal: on a grid with a level rim the first three corner diagonals gain nothing, so nothing that
 * ranks single ones (their gain, the self-stress that they unlock) finds the four.
 */
import { factor, refactor, type Factor } from '../../../base/sparse/factor.ts'
import { solve } from '../../../base/sparse/solve.ts'
import type { Steps } from '../../../base/steps.ts'
import { expand, reduce, type LiftSpace } from '../../stress/lift-space.ts'
import type { DividedForm } from './diagonals-form.ts'

/** Steps with p = 1 and with p = 1/2: past these the order of the folds hardly changes (bays and cells, 70 to 2,000 panels). */
const convexSteps = 4
const sparseSteps = 9
/** eps falls by this a step. */
const narrowing = 1 / 4
/** Folds below this share of the largest are none: it bounds the weights, and with them the condition of K. */
const leastShare = 1e-4
/** What keeps K regular over the lifts that are there already, in spans: far below any W. */
const regular = 1e-12

/** |c_d| of every diagonal of every panel, in the order of `form.panels`. */
export interface SparseFolds {
  readonly folds: readonly Float64Array[]
}

/**
 * `pull`: b = T^T t'' by heights (length nodeCount), null: no rise is asked and h0 alone forces the folds. null comes back as
 * soon as the folds are spread over more than `most` diagonals.
 */
export function* sparseFolds(space: LiftSpace, form: DividedForm, pull: Float64Array | null, most: number): Steps<SparseFolds | null> {
  const { elimination, analysis } = space
  const { panels } = form
  let folds: Float64Array[] = panels.map(({ diagonals }) => new Float64Array(diagonals.length).fill(1))
  let factored: Factor | null = null
  let eps = 1
  const steps = convexSteps + sparseSteps
  for (let step = 0; step < steps; step += 1) {
    yield { stage: 'Looking for diagonals', done: step / steps }
    const p = step < convexSteps ? 1 : 0.5
    const widths = folds.map((list) => list.map((c) => (c * c + eps * eps) ** (1 - p / 2)))
    const weights = panels.map((panel, k) => inverse(gram(panel.allowed, widths[k], panel.corners - 3), panel.corners - 3))
    const values = form.values((place) => weights[place], regular)
    if (factored === null) factored = yield* factor(analysis, values)
    else yield* refactor(factored, values)
    const right = pull === null
      ? reduce(elimination, form.apply((place) => weights[place], elimination.particular)).map((value) => -value)
      : reduce(elimination, pull)
    const heights = expand(elimination, solve(factored, right))
    if (pull === null) for (let n = 0; n < heights.length; n += 1) heights[n] += elimination.particular[n]
    let largest = 0
    folds = panels.map((panel, k) => {
      const m = panel.corners - 3
      const r = form.misfit(k, heights)
      const turned = new Float64Array(m)
      for (let i = 0; i < m; i += 1) for (let j = 0; j < m; j += 1) turned[i] += weights[k][i * m + j] * r[j]
      return widths[k].map((w, d) => {
        let c = 0
        for (let i = 0; i < m; i += 1) c += panel.allowed[d * m + i] * turned[i]
        largest = Math.max(largest, Math.abs(w * c))
        return Math.abs(w * c)
      })
    })
    if (!(largest > 0)) break
    folds = folds.map((list) => list.map((c) => c / largest))
    eps = Math.max(eps * narrowing, leastShare)
    if (step >= convexSteps + 2 && spread(folds) > most) return null
  }
  return { folds }
}

/** Over how many the folds are spread: (sum c)^2 / sum c^2. */
function spread(folds: readonly Float64Array[]): number {
  let sum = 0, squares = 0
  for (const list of folds) {
    for (const c of list) {
      sum += c
      squares += c * c
    }
  }
  return squares > 0 ? (sum * sum) / squares : 0
}

/** V diag(w) V^T (m x m). */
function gram(allowed: Float64Array, width: Float64Array, m: number): Float64Array {
  const out = new Float64Array(m * m)
  width.forEach((w, d) => {
    for (let i = 0; i < m; i += 1) for (let j = 0; j < m; j += 1) out[i * m + j] += w * allowed[d * m + i] * allowed[d * m + j]
  })
  return out
}

/** Inverse of a small positive definite matrix (Gauss and Jordan without pivoting); what is singular to rounding counts as held. */
function inverse(matrix: Float64Array, m: number): Float64Array {
  const a = matrix.slice()
  const out = new Float64Array(m * m)
  let scale = 0
  for (let i = 0; i < m; i += 1) {
    out[i * m + i] = 1
    scale = Math.max(scale, a[i * m + i])
  }
  for (let i = 0; i < m; i += 1) {
    const pivot = Math.max(a[i * m + i], 1e-14 * scale)
    for (let j = 0; j < m; j += 1) {
      a[i * m + j] /= pivot
      out[i * m + j] /= pivot
    }
    for (let k = 0; k < m; k += 1) {
      if (k === i) continue
      const f = a[k * m + i]
      if (f === 0) continue
      for (let j = 0; j < m; j += 1) {
        a[k * m + j] -= f * a[i * m + j]
        out[k * m + j] -= f * out[i * m + j]
      }
    }
  }
  return out
}
