/** The two sweeps of a solve for one right-hand side: bound by reading L once each, so plain loops over its slivers serve. */
import type { Factor } from './factor.ts'
import { four, triangle } from './layout.ts'

/** x <- D^-1 L^-1 x for front t; x by place, y room for the widest front's pivots. */
export function forward({ analysis, store: { data }, pivot, pivotAt }: Factor, x: Float64Array, y: Float64Array, t: number): void {
  const { first, panel, boundaryStart, boundary } = analysis
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

/** x <- L^-T x for front t, after those above it. */
export function backward({ analysis, store: { data } }: Factor, x: Float64Array, y: Float64Array, t: number): void {
  const { first, panel, boundaryStart, boundary } = analysis
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
