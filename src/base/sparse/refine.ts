/** Iterative refinement: what a factor loses to rounding, residuals win back. */
import type { Factor } from './factor.ts'
import type { SymmetricMatrix } from './matrix.ts'
import { multiply } from './multiply.ts'
import { solve } from './solve.ts'

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
