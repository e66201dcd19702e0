/** The two sweeps of a solve for one right-hand side: bound by reading L once each, so plain loops over its slivers serve. */
import type { Factor } from './factor.ts'
import { four, triangle } from './layout.ts'

/** x <- D^-1 L^-1 x for front t; x by place, y room for the widest front's pivots. */
export function forward({ analysis, store: { data }, pivot, pivotAt }: Factor, x: Float64Array, y: Float64Array, t: number): void {
  const { first, panel, boundaryStart, boundary } = analysis
  const begin = first[t] as number
  const pivots = (first[t + 1] as number) - begin
  const p = four(pivots)
  const l = panel[t] as number
  take(x, begin, pivots, y, p)
  forwardPivots(data, l, y, p)
  forwardBoundary(data, l + triangle(p >> 2), y, p, x, boundary, boundaryStart[t] as number, boundaryStart[t + 1] as number)
  const d = pivotAt[t] as number
  for (let k = 0; k < pivots; k++) x[begin + k] = (y[k] as number) / (pivot[d + k] as number)
}

/** x <- L^-T x for front t, after those above it. */
export function backward({ analysis, store: { data } }: Factor, x: Float64Array, y: Float64Array, t: number): void {
  const { first, panel, boundaryStart, boundary } = analysis
  const begin = first[t] as number
  const pivots = (first[t + 1] as number) - begin
  const p = four(pivots)
  const l = panel[t] as number
  take(x, begin, pivots, y, p)
  backwardBoundary(data, l + triangle(p >> 2), y, p, x, boundary, boundaryStart[t] as number, boundaryStart[t + 1] as number)
  backwardPivots(data, l, y, p)
  for (let k = 0; k < pivots; k++) x[begin + k] = y[k] as number
}

/** The front's share of x, filled up with zeros. */
function take(x: Float64Array, begin: number, pivots: number, y: Float64Array, p: number): void {
  for (let k = 0; k < pivots; k++) y[k] = x[begin + k] as number
  for (let k = pivots; k < p; k++) y[k] = 0
}

/** y <- L11^-1 y, a sliver at a time. */
function forwardPivots(data: Float64Array, at: number, y: Float64Array, p: number): void {
  for (let i = 0; i < p; i += 4) {
    let y0 = y[i] as number
    let y1 = y[i + 1] as number
    let y2 = y[i + 2] as number
    let y3 = y[i + 3] as number
    for (let k = 0; k < i; k++, at += 4) {
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
    y[i] = y0
    y[i + 1] = y1
    y[i + 2] = y2
    y[i + 3] = y3
  }
}

/** x2 <- x2 - L21 y for the boundary rows [from, to). */
function forwardBoundary(
  data: Float64Array, at: number, y: Float64Array, p: number, x: Float64Array, boundary: Int32Array, from: number, to: number,
): void {
  for (let r = from; r < to; r += 4) {
    let y0 = 0
    let y1 = 0
    let y2 = 0
    let y3 = 0
    for (let k = 0; k < p; k++, at += 4) {
      const yk = y[k] as number
      y0 += (data[at] as number) * yk
      y1 += (data[at + 1] as number) * yk
      y2 += (data[at + 2] as number) * yk
      y3 += (data[at + 3] as number) * yk
    }
    subtract(x, boundary, r, y0)
    if (r + 1 < to) subtract(x, boundary, r + 1, y1)
    if (r + 2 < to) subtract(x, boundary, r + 2, y2)
    if (r + 3 < to) subtract(x, boundary, r + 3, y3)
  }
}

function subtract(x: Float64Array, boundary: Int32Array, r: number, value: number): void {
  const v = boundary[r] as number
  x[v] = (x[v] as number) - value
}

/** y <- y - L21^T x2, two slivers at a time where there are two: y is then read and written half as often. */
function backwardBoundary(
  data: Float64Array, at: number, y: Float64Array, p: number, x: Float64Array, boundary: Int32Array, from: number, to: number,
): void {
  let r = from
  for (; r + 8 <= to; r += 8) {
    subtractEight(
      data, at, at + 4 * p, y, p,
      x[boundary[r] as number] as number, x[boundary[r + 1] as number] as number,
      x[boundary[r + 2] as number] as number, x[boundary[r + 3] as number] as number,
      x[boundary[r + 4] as number] as number, x[boundary[r + 5] as number] as number,
      x[boundary[r + 6] as number] as number, x[boundary[r + 7] as number] as number,
    )
    at += 8 * p
  }
  for (; r < to; r += 4) {
    const x0 = x[boundary[r] as number] as number
    const x1 = r + 1 < to ? (x[boundary[r + 1] as number] as number) : 0
    const x2 = r + 2 < to ? (x[boundary[r + 2] as number] as number) : 0
    const x3 = r + 3 < to ? (x[boundary[r + 3] as number] as number) : 0
    subtractRows(data, at, y, p, x0, x1, x2, x3)
    at += 4 * p
  }
}

/** y[k] <- y[k] - sum of the eight rows' entries in column k times their x: two slivers, `at` and `next`. */
function subtractEight(
  data: Float64Array, at: number, next: number, y: Float64Array, count: number,
  x0: number, x1: number, x2: number, x3: number, x4: number, x5: number, x6: number, x7: number,
): void {
  for (let k = 0; k < count; k++, at += 4, next += 4) {
    const one = (data[at] as number) * x0 + (data[at + 1] as number) * x1 + (data[at + 2] as number) * x2 + (data[at + 3] as number) * x3
    const other = (data[next] as number) * x4 + (data[next + 1] as number) * x5 + (data[next + 2] as number) * x6 + (data[next + 3] as number) * x7
    y[k] = (y[k] as number) - (one + other)
  }
}

/** y <- L11^-T y, from the last sliver back. */
function backwardPivots(data: Float64Array, l: number, y: Float64Array, p: number): void {
  for (let i = p - 4; i >= 0; i -= 4) {
    const at = l + triangle(i >> 2)
    const corner = at + 4 * i
    const y3 = y[i + 3] as number
    const y2 = (y[i + 2] as number) - (data[corner + 11] as number) * y3
    const y1 = (y[i + 1] as number) - (data[corner + 6] as number) * y2 - (data[corner + 7] as number) * y3
    const y0 = (y[i] as number) - (data[corner + 1] as number) * y1 - (data[corner + 2] as number) * y2 - (data[corner + 3] as number) * y3
    y[i] = y0
    y[i + 1] = y1
    y[i + 2] = y2
    subtractRows(data, at, y, i, y0, y1, y2, y3)
  }
}

/** y[k] <- y[k] - sum of the four rows' entries in column k times their x, k < count. */
function subtractRows(
  data: Float64Array, at: number, y: Float64Array, count: number, x0: number, x1: number, x2: number, x3: number,
): void {
  for (let k = 0; k < count; k++, at += 4) {
    const sum = (data[at] as number) * x0 + (data[at + 1] as number) * x1 + (data[at + 2] as number) * x2 + (data[at + 3] as number) * x3
    y[k] = (y[k] as number) - sum
  }
}
