/**
 * L D L^T without pivoting, P A P^T = L D L^T with unit lower triangular L, by the multifrontal method (I. Duff, J. Reid, ACM
 * Trans. Math. Softw. 9, 1983; J. Liu, SIAM Review 34, 1992): dense elimination front by front, children before parents.
 *
 * A pivot that is zero, or lost in the rounding of its own diagonal (|d| <= 2^-52 |a_jj|), is counted as `zero` and
 * replaced by 2^-26 times the largest |a_ij| (static pivoting: X. Li, J. Demmel 1998; O. Schenk, K. Gaertner 2006), so that
 * the factor is finite and refinement still solves systems that have a solution. Where any were replaced, the signs of the
 * others decide nothing.
 *
 * Where the time goes on 100,000 cells (200,000 unknowns, 4.9e9 operations, 19e6 numbers of L): of a refactorisation the
 * update kernel takes three quarters, spreading the values and clearing a tenth, adding children to parents a tenth. A first
 * factorisation takes as long again where fresh memory is dear (150 MB, 38,000 pages of 4 kB): refactor where you can.
 *
 * Tried and dropped: an up-looking factor by rows (10 s on the same plan); one stack for the Schur complements (a copy of every
 * one); filling each complement with zeros before its children are added (one more pass over 6e7 numbers: it is written as a
 * product first and added to afterwards).
 */
import { assert } from '../assert.ts'
import type { Steps } from '../steps.ts'
import type { Analysis } from './analyse.ts'
import { Elimination, scratchNumbers, type Rooms } from './front.ts'
import { four } from './layout.ts'
import type { PivotRules } from './pivots.ts'
import { newStore } from './store.ts'

/** The factor of one set of values; its rooms are used again by `refactor`. */
export interface Factor extends Rooms {
  /** Pivots that were replaced. */
  zeros: number
  /** False while a refactorisation is under way or was given up. */
  ready: boolean
}

/** Below this much work the plain kernels are done before a module is set up. */
const worthwhileOperations = 3e6

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
    store: newStore(
      analysis.storeSize + Math.max(scratchNumbers, 16 * analysis.widest),
      options.binary ?? analysis.operations >= worthwhileOperations,
    ),
    pivot: new Float64Array(pivotAt[fronts] as number),
    scale: new Float64Array(pivotAt[fronts] as number),
  }
  yield { stage: 'Factoring', done: 0 }
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
  const { analysis } = into
  assert(values.length === analysis.target.length, 'one value per entry of the pattern')
  into.ready = false
  let largest = 0
  for (let q = 0; q < values.length; q += valuesPerStep) {
    // The first values go into memory that is new.
    if (q > 0) yield { stage: 'Factoring', done: 0 }
    largest = scatter(into, values, largest, q, Math.min(values.length, q + valuesPerStep))
  }
  takeScales(into, values)
  const rules: PivotRules = { stand: largest > 0 ? largest * 2 ** -26 : 1, zeros: 0, finite: true }
  const elimination = new Elimination(into, rules)
  let turn = performance.now()
  let work = 0
  let total = 0
  // The loop only counts and looks at the clock: engines optimise generators late, so the work is in plain functions.
  for (let t = 0; t < analysis.fronts; t++) {
    elimination.begin(t)
    for (let part = 0; part !== -1; ) {
      part = elimination.advance(part)
      work += elimination.work
      if (work < operationsPerLook) continue
      total += work
      work = 0
      if (performance.now() - turn > sliceMs) {
        yield { stage: 'Factoring', done: Math.min(1, total / analysis.operations) }
        turn = performance.now()
      }
    }
    elimination.end()
  }
  assert(rules.finite, 'the factor grew beyond the largest number')
  into.zeros = rules.zeros
  into.ready = true
}

/** Values put into the panels between two yields: some 10 ms, 20 where memory is new. */
const valuesPerStep = 1 << 17

/** Puts values [from, to) into the panels; returns the largest magnitude. */
function scatter({ analysis: { target }, store: { data } }: Factor, values: Float64Array, before: number, from: number, to: number): number {
  let largest = before
  for (let q = from; q < to; q++) {
    const a = values[q] as number
    data[target[q] as number] = a
    // Not a comparison with the largest so far: that would let NaN pass.
    const size = Math.abs(a)
    if (!(size <= largest)) {
      assert(size < Infinity, 'a matrix to factor has finite values')
      largest = size
    }
  }
  return largest
}

/** Puts |a_ii| beside the pivots. */
function takeScales({ analysis: { pattern, fronts, first, unknown }, pivotAt, scale }: Factor, values: Float64Array): void {
  for (let t = 0; t < fronts; t++) {
    const shift = (pivotAt[t] as number) - (first[t] as number)
    for (let v = first[t] as number; v < (first[t + 1] as number); v++) {
      scale[v + shift] = Math.abs(values[pattern.start[unknown[v] as number] as number] as number)
    }
  }
}
