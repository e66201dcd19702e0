/** Solving with a factor: L y = b, D z = y, L^T x = z; and refinement of the answer. */
import { assert } from '../assert.ts'
import { four, triangle } from './analyse.ts'
import type { Factor } from './factor.ts'
import type { SymmetricMatrix } from './matrix.ts'
import { multiply } from './multiply.ts'

/** x with A x = right for `columns` right-hand sides stored one after another (size * columns numbers); a new array. */
export function solve(factor: Factor, right: Float64Array, columns = 1): Float64Array {
  const { analysis: { pattern: { size }, place } } = factor
  assert(factor.ready, 'the factor is complete')
  assert(right.length === size * columns, 'a right-hand side has the length of the matrix')
  const result = new Float64Array(size * columns)
  const x = new Float64Array(size)
  const y = new Float64Array(largestFront(factor))
  for (let shift = 0; shift < result.length; shift += size) {
    for (let i = 0; i < size; i++) x[place[i] as number] = right[shift + i] as number
    forward(factor, x, y)
    backward(factor, x, y)
    for (let i = 0; i < size; i++) result[shift + i] = x[place[i] as number] as number
  }
  return result
}

function largestFront({ analysis: { fronts, first, boundaryStart } }: Factor): number {
  let most = 0
  for (let t = 0; t < fronts; t++) {
    most = Math.max(most, four((first[t + 1] as number) - (first[t] as number)) + four((boundaryStart[t + 1] as number) - (boundaryStart[t] as number)))
  }
  return most
}

/** x <- D^-1 L^-1 x, front by front: y is the front's share, pivots first. */
function forward({ analysis, store: { data }, pivot, pivotAt }: Factor, x: Float64Array, y: Float64Array): void {
  const { fronts, first, panel, boundaryStart, boundary } = analysis
  for (let t = 0; t < fronts; t++) {
    const begin = first[t] as number
    const pivots = (first[t + 1] as number) - begin
    const S = four(pivots) >> 2
    for (let k = 0; k < pivots; k++) y[k] = x[begin + k] as number
    for (let k = pivots; k < 4 * S; k++) y[k] = 0
    let at = panel[t] as number
    for (let s = 0; s < S; s++) {
      let y0 = y[4 * s] as number
      let y1 = y[4 * s + 1] as number
      let y2 = y[4 * s + 2] as number
      let y3 = y[4 * s + 3] as number
      for (let k = 0; k < 4 * s; k++, at += 4) {
        const yk = y[k] as number
        y0 -= (data[at] as number) * yk
        y1 -= (data[at + 1] as number) * yk
        y2 -= (data[at + 2] as number) * yk
        y3 -= (data[at + 3] as number) * yk
      }
      y1 -= (data[at + 1] as number) * y0
      y2 -= (data[at + 2] as number) * y0 + (data[at + 6] as number) * y1
      y3 -= (data[at + 3] as number) * y0 + (data[at + 7] as number) * y1 + (data[at + 11] as number) * y2
      at += 16
      y[4 * s] = y0
      y[4 * s + 1] = y1
      y[4 * s + 2] = y2
      y[4 * s + 3] = y3
    }
    const rows = boundaryStart[t + 1] as number
    for (let r = boundaryStart[t] as number; r < rows; r += 4) {
      let y0 = 0
      let y1 = 0
      let y2 = 0
      let y3 = 0
      for (let k = 0; k < 4 * S; k++, at += 4) {
        const yk = y[k] as number
        y0 += (data[at] as number) * yk
        y1 += (data[at + 1] as number) * yk
        y2 += (data[at + 2] as number) * yk
        y3 += (data[at + 3] as number) * yk
      }
      const v0 = boundary[r] as number
      x[v0] = (x[v0] as number) - y0
      if (r + 1 < rows) {
        const v1 = boundary[r + 1] as number
        x[v1] = (x[v1] as number) - y1
      }
      if (r + 2 < rows) {
        const v2 = boundary[r + 2] as number
        x[v2] = (x[v2] as number) - y2
      }
      if (r + 3 < rows) {
        const v3 = boundary[r + 3] as number
        x[v3] = (x[v3] as number) - y3
      }
    }
    const d = pivotAt[t] as number
    for (let k = 0; k < pivots; k++) x[begin + k] = (y[k] as number) / (pivot[d + k] as number)
  }
}

/** x <- L^-T x, parents before children. */
function backward({ analysis, store: { data } }: Factor, x: Float64Array, y: Float64Array): void {
  const { fronts, first, panel, boundaryStart, boundary } = analysis
  for (let t = fronts - 1; t >= 0; t--) {
    const begin = first[t] as number
    const pivots = (first[t + 1] as number) - begin
    const S = four(pivots) >> 2
    for (let k = 0; k < pivots; k++) y[k] = x[begin + k] as number
    for (let k = pivots; k < 4 * S; k++) y[k] = 0
    let at = (panel[t] as number) + triangle(S)
    const rows = boundaryStart[t + 1] as number
    for (let r = boundaryStart[t] as number; r < rows; r += 4) {
      const x0 = x[boundary[r] as number] as number
      const x1 = r + 1 < rows ? (x[boundary[r + 1] as number] as number) : 0
      const x2 = r + 2 < rows ? (x[boundary[r + 2] as number] as number) : 0
      const x3 = r + 3 < rows ? (x[boundary[r + 3] as number] as number) : 0
      for (let k = 0; k < 4 * S; k++, at += 4) {
        y[k] = (y[k] as number) - ((data[at] as number) * x0 + (data[at + 1] as number) * x1 + (data[at + 2] as number) * x2 + (data[at + 3] as number) * x3)
      }
    }
    for (let s = S - 1; s >= 0; s--) {
      at = (panel[t] as number) + triangle(s)
      const corner = at + 16 * s
      const y3 = y[4 * s + 3] as number
      const y2 = (y[4 * s + 2] as number) - (data[corner + 11] as number) * y3
      const y1 = (y[4 * s + 1] as number) - (data[corner + 6] as number) * y2 - (data[corner + 7] as number) * y3
      const y0 = (y[4 * s] as number) - (data[corner + 1] as number) * y1 - (data[corner + 2] as number) * y2 - (data[corner + 3] as number) * y3
      y[4 * s] = y0
      y[4 * s + 1] = y1
      y[4 * s + 2] = y2
      for (let k = 0; k < 4 * s; k++, at += 4) {
        y[k] = (y[k] as number) - ((data[at] as number) * y0 + (data[at + 1] as number) * y1 + (data[at + 2] as number) * y2 + (data[at + 3] as number) * y3)
      }
    }
    for (let k = 0; k < pivots; k++) x[begin + k] = y[k] as number
  }
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
