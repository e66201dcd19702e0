/**
 * The two sweeps for four right-hand sides at once: L is read once for all four, by the same kernels as the factorisation.
 *
 * x holds four numbers a place (column c of place v at 4 v + c). A front works on its share Y, laid out likewise, in the
 * scratch room of the store: Y is the left factor of each product, a sliver of L the right one.
 */
import type { Factor } from './factor.ts'
import { four, triangle } from './layout.ts'

/** x <- D^-1 L^-1 x for front t. */
export function forwardFour({ analysis, store: { data, update }, pivot, pivotAt }: Factor, x: Float64Array, t: number): void {
  const { first, panel, boundaryStart, boundary } = analysis
  const begin = first[t] as number
  const pivots = (first[t + 1] as number) - begin
  const S = four(pivots) >> 2
  const y = analysis.storeSize
  take(data, x, 4 * begin, y, 4 * pivots, 16 * S)
  for (let s = 0; s < S; s++) {
    const l = (panel[t] as number) + triangle(s)
    const own = y + 16 * s
    if (s > 0) update(y, 0, 0, l, 0, own, 0, 0, 1, 4 * s, 1)
    const corner = l + 16 * s
    for (let c = own; c < own + 4; c++) {
      const y0 = data[c] as number
      const y1 = (data[c + 4] as number) - (data[corner + 1] as number) * y0
      const y2 = (data[c + 8] as number) - (data[corner + 2] as number) * y0 - (data[corner + 6] as number) * y1
      data[c + 4] = y1
      data[c + 8] = y2
      data[c + 12] = (data[c + 12] as number) - (data[corner + 3] as number) * y0 - (data[corner + 7] as number) * y1
        - (data[corner + 11] as number) * y2
    }
  }
  const from = boundaryStart[t] as number
  const rows = (boundaryStart[t + 1] as number) - from
  const below = y + 16 * S
  if (rows > 0) update(y, 0, 0, (panel[t] as number) + triangle(S), 16 * S, below, 16, 0, four(rows) >> 2, 4 * S, 0)
  for (let r = 0; r < rows; r++) {
    const to = 4 * (boundary[from + r] as number)
    for (let c = 0; c < 4; c++) x[to + c] = (x[to + c] as number) + (data[below + 4 * r + c] as number)
  }
  for (let k = 0; k < pivots; k++) {
    const d = pivot[(pivotAt[t] as number) + k] as number
    for (let c = 0; c < 4; c++) x[4 * (begin + k) + c] = (data[y + 4 * k + c] as number) / d
  }
}

/** x <- L^-T x for front t, after those above it. */
export function backwardFour({ analysis, store: { data, mirror } }: Factor, x: Float64Array, t: number): void {
  const { first, panel, boundaryStart, boundary } = analysis
  const begin = first[t] as number
  const pivots = (first[t + 1] as number) - begin
  const S = four(pivots) >> 2
  const y = analysis.storeSize
  take(data, x, 4 * begin, y, 4 * pivots, 16 * S)
  const from = boundaryStart[t] as number
  const rows = (boundaryStart[t + 1] as number) - from
  const below = y + 16 * S
  for (let r = 0; r < rows; r++) {
    const at = 4 * (boundary[from + r] as number)
    for (let c = 0; c < 4; c++) data[below + 4 * r + c] = x[at + c] as number
  }
  data.fill(0, below + 4 * rows, below + 4 * four(rows))
  const l = (panel[t] as number) + triangle(S)
  for (let r = 0; r < rows; r += 4) mirror(below + 4 * r, l + 4 * S * r, y, S)
  for (let s = S - 1; s >= 0; s--) {
    const at = (panel[t] as number) + triangle(s)
    const corner = at + 16 * s
    const own = y + 16 * s
    for (let c = own; c < own + 4; c++) {
      const y3 = data[c + 12] as number
      const y2 = (data[c + 8] as number) - (data[corner + 11] as number) * y3
      const y1 = (data[c + 4] as number) - (data[corner + 6] as number) * y2 - (data[corner + 7] as number) * y3
      data[c + 8] = y2
      data[c + 4] = y1
      data[c] = (data[c] as number) - (data[corner + 1] as number) * y1 - (data[corner + 2] as number) * y2
        - (data[corner + 3] as number) * y3
    }
    mirror(own, at, y, s)
  }
  for (let k = 0; k < 4 * pivots; k++) x[4 * begin + k] = data[y + k] as number
}

/** data[y ..) <- x[at ..), `count` numbers, filled up with zeros to `room`. */
function take(data: Float64Array, x: Float64Array, at: number, y: number, count: number, room: number): void {
  for (let k = 0; k < count; k++) data[y + k] = x[at + k] as number
  for (let k = count; k < room; k++) data[y + k] = 0
}
