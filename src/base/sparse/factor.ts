/**
 * L D L^T without pivoting, P A P^T = L D L^T with unit lower triangular L, by the multifrontal method (I. Duff, J. Reid, ACM
 * Trans. Math. Softw. 9, 1983; J. Liu, SIAM Review 34, 1992): dense elimination front by front, children before parents.
 *
 * A pivot that is zero, or lost in the rounding of its own diagonal (|d| <= 2^-52 |a_jj|), is counted as `zero` and
 * replaced by 2^-26 times the largest |a_ij| (static pivoting: X. Li, J. Demmel 1998; O. Schenk, K. Gaertner 2006), so that
 * the factor is finite and refinement still solves systems that have a solution.
 */
import { assert } from '../assert.ts'
import type { Steps } from '../steps.ts'
import { four, triangle, type Analysis } from './analyse.ts'
import { addBoundary, addPivotal } from './assemble.ts'
import { eliminateFour, scaleBelow, type PivotRules } from './pivots.ts'
import { newStore, type Store } from './store.ts'

export interface Factor {
  readonly analysis: Analysis
  /** L and the Schur complements as analysed, and behind them (from analysis.storeSize on) scratch room for four columns of one front. */
  readonly store: Store
  /** D by place; where a front's pivots are filled up to a multiple of four, see `pivotAt`. */
  readonly pivot: Float64Array
  /** Where front t's pivots begin in `pivot`, which holds four(p) of them. */
  readonly pivotAt: Int32Array
  /** |a_ii| of the pivots, beside them. */
  readonly scale: Float64Array
  /** Pivots that were replaced. */
  zeros: number
  /** False while a refactorisation is under way or was given up. */
  ready: boolean
}

/** Columns eliminated before the rest of the front is updated, and rows updated together, in slivers: a block of both stays in cache. */
const blockColumns = 16
const blockRows = 64


/** Below this much work the plain kernels are done before a module is set up. */
const worthwhileOperations = 3e7

/** Operations between two looks at the clock: below a millisecond. */
const operationsPerLook = 2e6
const sliceMs = 40

export interface FactorOptions {
  /** Whether to use the binary kernels; by default where they pay. The numbers are the same. */
  readonly binary?: boolean
}

/** Factors the values (one per entry of the analysed pattern). Values must be finite. */
export function* factor(analysis: Analysis, values: Float64Array, options: FactorOptions = {}): Steps<Factor> {
  const { fronts, first } = analysis
  const pivotAt = new Int32Array(fronts + 1)
  for (let t = 0; t < fronts; t++) pivotAt[t + 1] = (pivotAt[t] as number) + four((first[t + 1] as number) - (first[t] as number))
  const into: Factor = {
    analysis, pivotAt, zeros: 0, ready: true,
    store: newStore(analysis.storeSize + Math.max(16 * blockColumns, 16 * analysis.widest), options.binary ?? analysis.operations >= worthwhileOperations),
    pivot: new Float64Array(pivotAt[fronts] as number),
    scale: new Float64Array(pivotAt[fronts] as number),
  }
  yield* numeric(into, values)
  return into
}

/** Factors other values of the same pattern into the same room. Until the last step the factor is not usable. */
export function* refactor(into: Factor, values: Float64Array): Steps<void> {
  into.store.data.fill(0, 0, into.analysis.panel[into.analysis.fronts])
  yield* numeric(into, values)
}

/** The factorisation proper; the panels of the store are zero. */
function* numeric(into: Factor, values: Float64Array): Steps<void> {
  const { analysis, store: { data, update }, pivot, pivotAt, scale } = into
  const { target, fronts, first, panel, boundaryStart, schur, childStart, children } = analysis
  assert(values.length === target.length, 'one value per entry of the pattern')
  into.ready = false
  const largest = scatter(into, values)
  const rules: PivotRules = { stand: largest > 0 ? largest * 2 ** -26 : 1, zeros: 0, finite: true }
  const b = analysis.storeSize
  let turn = performance.now()
  let work = 0
  let total = 0
  for (let t = 0; t < fronts; t++) {
    const pivots = (first[t + 1] as number) - (first[t] as number)
    const S = four(pivots) >> 2
    const R = four((boundaryStart[t + 1] as number) - (boundaryStart[t] as number)) >> 2
    const base = panel[t] as number
    const below = base + triangle(S)
    const at = pivotAt[t] as number
    const complement = schur[t] as number
    for (let q = childStart[t] as number; q < (childStart[t + 1] as number); q++) addPivotal(data, analysis, children[q] as number)
    for (let from = 0; from < S; from += blockColumns) {
      const to = Math.min(S, from + blockColumns)
      for (let s = from; s < to; s++) {
        const corner = base + triangle(s)
        const depth = 4 * (s - from)
        if (depth > 0) {
          scaled(data, corner + 16 * from, pivot, at + 4 * from, b, depth)
          update(corner + 16 * from, 16 * (s + 1), 16, b, 0, corner + 16 * s, 16 * (s + 1), 16, S - s, depth, 1)
          update(below + 16 * from, 16 * S, 0, b, 0, below + 16 * s, 16 * S, 0, R, depth, 1)
        }
        eliminateFour(data, corner + 16 * s, pivot, at + 4 * s, scale, pivots - 4 * s, rules)
        scaleBelow(data, corner + 16 * s, pivot, at + 4 * s, base + triangle(s + 1) + 16 * s, 16 * (s + 2), 16, S - s - 1)
        scaleBelow(data, corner + 16 * s, pivot, at + 4 * s, below + 16 * s, 16 * S, 0, R)
      }
      const depth = 4 * (to - from)
      work += depth * depth * (S + R) * 4
      for (let s = to; s < S; s++) {
        const corner = base + triangle(s)
        scaled(data, corner + 16 * from, pivot, at + 4 * from, b, depth)
        update(corner + 16 * from, 16 * (s + 1), 16, b, 0, corner + 16 * s, 16 * (s + 1), 16, S - s, depth, 1)
        update(below + 16 * from, 16 * S, 0, b, 0, below + 16 * s, 16 * S, 0, R, depth, 1)
        work += 32 * depth * (S - s + R)
      }
      for (let low = 0; low < R; low += blockRows) {
        const high = Math.min(R, low + blockRows)
        for (let j = 0; j < high; j++) {
          const s = Math.max(j, low)
          scaled(data, below + 16 * S * j + 16 * from, pivot, at + 4 * from, b, depth)
          update(below + 16 * S * s + 16 * from, 16 * S, 0, b, 0, complement + triangle(s) + 16 * j, 16 * (s + 1), 16, high - s, depth, from)
          work += 32 * depth * (high - s)
        }
        if (work > operationsPerLook) {
          total += work
          work = 0
          if (performance.now() - turn > sliceMs) {
            yield { stage: 'Factoring', done: Math.min(1, total / analysis.operations) }
            turn = performance.now()
          }
        }
      }
    }
    for (let q = childStart[t] as number; q < (childStart[t + 1] as number); q++) addBoundary(data, analysis, children[q] as number)
    work += 1000
  }
  assert(rules.finite, 'the factor grew beyond the largest number')
  into.zeros = rules.zeros
  into.ready = true
}

/** Puts the values into the panels and |a_ii| beside the pivots; returns the largest magnitude. */
function scatter({ analysis, store: { data }, pivotAt, scale }: Factor, values: Float64Array): number {
  const { target, pattern, fronts, first, unknown } = analysis
  let largest = 0
  for (let q = 0; q < values.length; q++) {
    const a = values[q] as number
    data[target[q] as number] = a
    // Not a comparison with the largest so far: that would let NaN pass.
    const size = Math.abs(a)
    if (!(size <= largest)) {
      assert(size < Infinity, 'a matrix to factor has finite values')
      largest = size
    }
  }
  for (let t = 0; t < fronts; t++) {
    const shift = (pivotAt[t] as number) - (first[t] as number)
    for (let v = first[t] as number; v < (first[t + 1] as number); v++) {
      scale[v + shift] = Math.abs(values[pattern.start[unknown[v] as number] as number] as number)
    }
  }
  return largest
}

/** b[4 k + j] = a[4 k + j] d_k: four rows of L, ready to be multiplied from the right. */
function scaled(data: Float64Array, a: number, pivot: Float64Array, at: number, b: number, depth: number): void {
  for (let k = 0; k < depth; k++) {
    const d = pivot[at + k] as number
    data[b + 4 * k] = (data[a + 4 * k] as number) * d
    data[b + 4 * k + 1] = (data[a + 4 * k + 1] as number) * d
    data[b + 4 * k + 2] = (data[a + 4 * k + 2] as number) * d
    data[b + 4 * k + 3] = (data[a + 4 * k + 3] as number) * d
  }
}
