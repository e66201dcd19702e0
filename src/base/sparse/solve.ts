/** Solving with a factor: L y = b, D z = y, L^T x = z; and refinement of the answer. */
import { assert } from '../assert.ts'
import type { Factor } from './factor.ts'
import type { SymmetricMatrix } from './matrix.ts'
import { multiply } from './multiply.ts'

/** x with A x = right for `columns` right-hand sides stored one after another (size * columns numbers); a new array. */
export function solve(factor: Factor, right: Float64Array, columns = 1): Float64Array {
  const { analysis: { pattern: { size }, ordering: { rank }, columnStart }, row, lower, pivot } = factor
  assert(right.length === size * columns, 'a right-hand side has the length of the matrix')
  const x = new Float64Array(size * columns)
  const y = new Float64Array(size)
  for (let shift = 0; shift < x.length; shift += size) {
    for (let i = 0; i < size; i++) y[rank[i] as number] = right[shift + i] as number
    for (let k = 0; k < size; k++) {
      const yk = y[k] as number
      for (let p = columnStart[k] as number; p < (columnStart[k + 1] as number); p++) {
        const i = row[p] as number
        y[i] = (y[i] as number) - (lower[p] as number) * yk
      }
    }
    for (let k = size - 1; k >= 0; k--) {
      let sum = (y[k] as number) / (pivot[k] as number)
      for (let p = columnStart[k] as number; p < (columnStart[k + 1] as number); p++) sum -= (lower[p] as number) * (y[row[p] as number] as number)
      y[k] = sum
    }
    for (let i = 0; i < size; i++) x[shift + i] = y[rank[i] as number] as number
  }
  return x
}

/**
 * Solves and refines: x <- x + A^-1 (b - A x), until the largest |b - A x| stops halving, at most `rounds` times
 * (N. Higham, "Accuracy and Stability of Numerical Algorithms", SIAM 2002, chapter 12). One right-hand side.
 */
export function refined(factor: Factor, matrix: SymmetricMatrix, right: Float64Array, rounds = 3): Float64Array {
  let x = solve(factor, right)
  let gap = difference(right, multiply(matrix, x))
  for (let round = 0; round < rounds; round++) {
    const correction = solve(factor, gap.vector)
    const next = x.map((value, i) => value + (correction[i] as number))
    const nextGap = difference(right, multiply(matrix, next))
    if (!(nextGap.largest < gap.largest)) break
    const slow = nextGap.largest > gap.largest / 2
    x = next
    gap = nextGap
    if (slow || gap.largest === 0) break
  }
  return x
}

function difference(a: Float64Array, b: Float64Array): { vector: Float64Array; largest: number } {
  let largest = 0
  const vector = a.map((value, i) => {
    const d = value - (b[i] as number)
    largest = Math.max(largest, Math.abs(d))
    return d
  })
  return { vector, largest }
}
