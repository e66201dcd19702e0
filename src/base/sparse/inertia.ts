/**
 * Sylvester's law of inertia: the signs of the pivots of L D L^T are the signs of the eigenvalues, so the negative pivots of
 * A - t I count the eigenvalues of A below t.
 */
import type { Factor } from './factor.ts'

export interface Inertia {
  readonly negative: number
  /** Pivots that were zero or lost in rounding: when there are any, the other two counts are not decided. */
  readonly zero: number
  readonly positive: number
}

export function inertia(factor: Factor): Inertia {
  let negative = 0
  for (const d of factor.pivot) if (d < 0) negative++
  // A replaced pivot is positive.
  return { negative, zero: factor.zeros, positive: factor.pivot.length - negative - factor.zeros }
}
