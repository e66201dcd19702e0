/**
 * L D L^T without pivoting, row by row (up-looking; T. A. Davis, "Direct Methods for Sparse Linear Systems", SIAM 2006,
 * chapter 4): P A P^T = L D L^T with unit lower triangular L.
 *
 * A pivot that is zero, or lost in the rounding of its own diagonal (|d| <= 2^-52 |a_jj|), is counted as `zero` and
 * replaced by 2^-26 times the largest |a_ij| (static pivoting: X. Li, J. Demmel 1998; O. Schenk, K. Gaertner 2006), so that
 * the factor is finite and refinement still solves systems that have a solution.
 */
import { assert } from '../assert.ts'
import { finish, type Steps } from '../steps.ts'
import type { Analysis } from './analyse.ts'

export interface Factor {
  readonly analysis: Analysis
  /** Row indices and values of L by columns, places as in analysis.columnStart. */
  readonly row: Int32Array
  readonly lower: Float64Array
  readonly pivot: Float64Array
  /** Pivots that were replaced. */
  zeros: number
  /** Room for refactoring. */
  readonly work: { readonly x: Float64Array; readonly next: Int32Array; readonly seen: Int32Array; readonly stack: Int32Array; readonly lost: Uint8Array }
}

/** Factors the values (one per entry of the analysed pattern). Values must be finite. */
export function* factor(analysis: Analysis, values: Float64Array): Steps<Factor> {
  const { size } = analysis.pattern
  const entries = analysis.columnStart[size] as number
  const into: Factor = {
    analysis,
    row: new Int32Array(entries),
    lower: new Float64Array(entries),
    pivot: new Float64Array(size),
    zeros: 0,
    work: {
      x: new Float64Array(size), next: new Int32Array(size), seen: new Int32Array(size), stack: new Int32Array(size), lost: new Uint8Array(size),
    },
  }
  yield* refactor(into, values)
  return into
}

/** Factors other values of the same pattern into the same room. Until the last step the factor is not usable. */
export function* refactor(into: Factor, values: Float64Array): Steps<void> {
  const { analysis: { pattern: { size }, upStart, up, source, parent, columnStart }, row, lower, pivot } = into
  const { x, next, seen, stack, lost } = into.work
  assert(values.length === source.length, 'one value per entry of the pattern')
  let largest = 0
  for (const a of values) {
    assert(Number.isFinite(a), 'a matrix to factor has finite values')
    largest = Math.max(largest, Math.abs(a))
  }
  const stand = largest > 0 ? largest * 2 ** -26 : 1
  x.fill(0)
  seen.fill(-1)
  next.set(columnStart.subarray(0, size))
  into.zeros = 0
  let turn = performance.now()
  for (let k = 0; k < size; k++) {
    let top = size
    let diagonal = 0
    seen[k] = k
    for (let p = upStart[k] as number; p < (upStart[k + 1] as number); p++) {
      let i = up[p] as number
      const a = values[source[p] as number] as number
      if (i === k) diagonal = a
      else x[i] = (x[i] as number) + a
      let depth = 0
      for (; seen[i] !== k; i = parent[i] as number) {
        stack[depth++] = i
        seen[i] = k
      }
      while (depth > 0) stack[--top] = stack[--depth] as number
    }
    let d = diagonal
    for (; top < size; top++) {
      const j = stack[top] as number
      const y = x[j] as number
      x[j] = 0
      const to = next[j] as number
      for (let p = columnStart[j] as number; p < to; p++) {
        const i = row[p] as number
        x[i] = (x[i] as number) - (lower[p] as number) * y
      }
      const l = y / (pivot[j] as number)
      d -= l * y
      row[to] = k
      lower[to] = l
      next[j] = to + 1
    }
    const isLost = !(Math.abs(d) > Number.EPSILON * Math.abs(diagonal))
    assert(Number.isFinite(d), 'the factor grew beyond the largest number')
    lost[k] = isLost ? 1 : 0
    if (isLost) {
      into.zeros++
      d = stand
    }
    pivot[k] = d
    if ((k & 63) === 0 && performance.now() - turn > 40) {
      yield { stage: 'Factoring', done: k / size }
      turn = performance.now()
    }
  }
}

/** Both at once, without a break. */
export function factored(analysis: Analysis, values: Float64Array): Factor {
  return finish(factor(analysis, values))
}
