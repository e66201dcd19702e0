/**
 * Geometric nested dissection: the plan is cut in two across its longer side, the unknowns on the cut come last, and each
 * half is cut again. O(n log n) fill and O(n^1.5) operations on planar graphs (A. George, SIAM J. Numer. Anal. 10, 1973;
 * R. Lipton, D. Rose, R. Tarjan, SIAM J. Numer. Anal. 16, 1979).
 */
import { assert } from '../assert.ts'
import type { Steps } from '../steps.ts'
import type { Pattern } from './matrix.ts'

export interface Ordering {
  /** rank[i]: place of unknown i in the elimination. */
  readonly rank: Int32Array
}

/** Pieces of at most this many unknowns are not cut further. */
const smallPiece = 24

/** The elimination order of a pattern whose unknown i lies at (coordinates[2 i], coordinates[2 i + 1]). */
export function* dissection(pattern: Pattern, coordinates: Float64Array): Steps<Ordering> {
  const { size } = pattern
  assert(coordinates.length === 2 * size, 'two coordinates an unknown')
  const rank = new Int32Array(size)
  const { start, row } = neighbours(pattern)
  const side = new Int32Array(size).fill(-1)
  const pieces: { piece: Int32Array; last: number }[] = [{ piece: Int32Array.from({ length: size }, (_, i) => i), last: size }]
  let mark = 0
  let ranked = 0
  let turn = performance.now()
  for (;;) {
    const next = pieces.pop()
    if (next === undefined) break
    const { piece, last } = next
    if (piece.length <= smallPiece) {
      piece.forEach((i, k) => (rank[i] = last - piece.length + k))
      ranked += piece.length
      continue
    }
    let [x0, x1, y0, y1] = [Infinity, -Infinity, Infinity, -Infinity]
    for (const i of piece) {
      x0 = Math.min(x0, coordinates[2 * i] as number)
      x1 = Math.max(x1, coordinates[2 * i] as number)
      y0 = Math.min(y0, coordinates[2 * i + 1] as number)
      y1 = Math.max(y1, coordinates[2 * i + 1] as number)
    }
    const axis = x1 - x0 >= y1 - y0 ? 0 : 1
    piece.sort((a, b) => (coordinates[2 * a + axis] as number) - (coordinates[2 * b + axis] as number) || a - b)
    const half = piece.length >> 1
    const right = ++mark
    for (let k = half; k < piece.length; k++) side[piece[k] as number] = right
    const separator: number[] = []
    const left: number[] = []
    for (let k = 0; k < half; k++) {
      const i = piece[k] as number
      let touches = false
      for (let p = start[i] as number; p < (start[i + 1] as number); p++) touches ||= side[row[p] as number] === right
      if (touches) separator.push(i)
      else left.push(i)
    }
    separator.forEach((i, k) => (rank[i] = last - separator.length + k))
    ranked += separator.length
    pieces.push({ piece: Int32Array.from(left), last: last - separator.length - (piece.length - half) })
    pieces.push({ piece: piece.slice(half), last: last - separator.length })
    if (performance.now() - turn > 40) {
      yield { stage: 'Ordering', done: ranked / size }
      turn = performance.now()
    }
  }
  return { rank }
}

/** Both triangles without the diagonal, by unknowns. */
function neighbours({ size, start, row }: Pattern): { start: Int32Array; row: Int32Array } {
  const count = new Int32Array(size + 2)
  for (let j = 0; j < size; j++) {
    for (let p = start[j] as number; p < (start[j + 1] as number); p++) {
      const i = row[p] as number
      if (i === j) continue
      count[i + 2] = (count[i + 2] as number) + 1
      count[j + 2] = (count[j + 2] as number) + 1
    }
  }
  for (let i = 2; i < count.length; i++) count[i] = (count[i] as number) + (count[i - 1] as number)
  const both = new Int32Array(count[size + 1] as number)
  for (let j = 0; j < size; j++) {
    for (let p = start[j] as number; p < (start[j + 1] as number); p++) {
      const i = row[p] as number
      if (i === j) continue
      both[count[i + 1] as number] = j
      count[i + 1] = (count[i + 1] as number) + 1
      both[count[j + 1] as number] = i
      count[j + 1] = (count[j + 1] as number) + 1
    }
  }
  return { start: count.subarray(0, size + 1), row: both }
}
