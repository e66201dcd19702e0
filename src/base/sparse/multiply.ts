/** Products with a symmetric matrix of which the lower triangle is kept. */
import { assert } from '../assert.ts'
import type { SymmetricMatrix } from './matrix.ts'

/** A x for `columns` vectors stored one after another; x and the result have size * columns numbers. */
export function multiply(matrix: SymmetricMatrix, x: Float64Array, columns = 1): Float64Array {
  const { pattern: { size, start, row }, values } = matrix
  assert(x.length === size * columns, 'a vector has the length of the matrix')
  const y = new Float64Array(size * columns)
  for (let shift = 0; shift < y.length; shift += size) {
    for (let j = 0; j < size; j++) {
      const from = start[j] as number
      const to = start[j + 1] as number
      const xj = x[shift + j] as number
      let sum = 0
      let p = from
      if (p < to && row[p] === j) sum = (values[p++] as number) * xj
      for (; p < to; p++) {
        const i = shift + (row[p] as number)
        const a = values[p] as number
        sum += a * (x[i] as number)
        y[i] = (y[i] as number) + a * xj
      }
      y[shift + j] = (y[shift + j] as number) + sum
    }
  }
  return y
}

/** max |b - A x| / (max row sum of |A| * max |x| + max |b|), the normwise backward error (Rigal, Gaches 1967); 0 when all is zero. */
export function residual(matrix: SymmetricMatrix, x: Float64Array, b: Float64Array): number {
  const product = multiply(matrix, x)
  let worst = 0
  let largestX = 0
  let largestB = 0
  for (let i = 0; i < product.length; i++) {
    const error = Math.abs((b[i] as number) - (product[i] as number))
    // A comparison that is false for NaN would hide it.
    if (!(error <= worst)) worst = error
    largestX = Math.max(largestX, Math.abs(x[i] as number))
    largestB = Math.max(largestB, Math.abs(b[i] as number))
  }
  const scale = rowSum(matrix) * largestX + largestB
  return worst === 0 ? 0 : worst / scale
}

/** The largest sum of magnitudes in a row: the maximum norm of A, an upper bound of its eigenvalues (Gershgorin 1931). */
export function rowSum({ pattern: { size, start, row }, values }: SymmetricMatrix): number {
  const sum = new Float64Array(size)
  for (let j = 0; j < size; j++) {
    for (let p = start[j] as number; p < (start[j + 1] as number); p++) {
      const i = row[p] as number
      const a = Math.abs(values[p] as number)
      sum[i] = (sum[i] as number) + a
      if (i !== j) sum[j] = (sum[j] as number) + a
    }
  }
  let largest = 0
  for (const s of sum) if (!(s <= largest)) largest = s
  return largest
}
