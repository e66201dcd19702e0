/**
 * Sylvester's law of inertia: the signs of the pivots of L D L^T are the signs of the eigenvalues, so the negative pivots of
 * A - t I count the eigenvalues of A below t.
 */
import { assert } from '../assert.ts'
import type { Factor } from './factor.ts'

export interface Inertia {
  readonly negative: number
  /** Pivots that were zero or lost in rounding: when there are any, the other two counts are not decided. */
  readonly zero: number
  readonly positive: number
}

export function inertia(factor: Factor): Inertia {
  const size = factor.analysis.pattern.size
  assert(factor.ready, 'the factor is complete')
  let negative = 0
  // Replaced pivots and those that fill up a front are positive.
  for (const d of factor.pivot) if (d < 0) negative++
  return { negative, zero: factor.zeros, positive: size - negative - factor.zeros }
}
