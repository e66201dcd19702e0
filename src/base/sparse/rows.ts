/** The rows of the matrix in elimination order, and what they tell of the pieces. */
import { assert } from '../assert.ts'
import type { Pattern } from './matrix.ts'
import type { Ordering } from './order.ts'

/** By rank r: the ranks below r of its neighbours, lower[start[r] .. start[r + 1]), and the pattern entry of each. */
export interface Rows {
  readonly start: Int32Array
  readonly lower: Int32Array
  readonly source: Int32Array
}

export function lowerNeighbours(pattern: Pattern, rank: Int32Array): Rows {
  const start = new Int32Array(pattern.size + 2)
  countLower(pattern, rank, start)
  for (let r = 2; r < start.length; r++) start[r] = (start[r] as number) + (start[r - 1] as number)
  const lower = new Int32Array(start[pattern.size + 1] as number)
  const source = new Int32Array(lower.length)
  listLower(pattern, rank, start, lower, source)
  return { start, lower, source }
}

/** Counts two places on, so that listing moves each start to where it belongs. */
function countLower({ size, start, row }: Pattern, rank: Int32Array, count: Int32Array): void {
  for (let j = 0; j < size; j++) {
    const rj = rank[j] as number
    const to = start[j + 1] as number
    for (let p = (start[j] as number) + 1; p < to; p++) {
      const ri = rank[row[p] as number] as number
      const high = (ri > rj ? ri : rj) + 2
      count[high] = (count[high] as number) + 1
    }
  }
}

function listLower({ size, start, row }: Pattern, rank: Int32Array, next: Int32Array, lower: Int32Array, source: Int32Array): void {
  for (let j = 0; j < size; j++) {
    const rj = rank[j] as number
    const to = start[j + 1] as number
    for (let p = (start[j] as number) + 1; p < to; p++) {
      const ri = rank[row[p] as number] as number
      const high = (ri > rj ? ri : rj) + 1
      const at = next[high] as number
      lower[at] = ri > rj ? rj : ri
      source[at] = p
      next[high] = at + 1
    }
  }
}

/**
 * The number of boundary unknowns of each piece of the dissection: row r of L is not zero in exactly those pieces that lie on
 * the ways up the tree from r's neighbours to r's own piece (J. Liu, SIAM J. Matrix Anal. Appl. 11, 1990).
 */
export function boundarySizes({ first, parent }: Ordering, rows: Rows): Int32Array {
  const pieceOf = new Int32Array(first[parent.length] as number)
  for (let t = 0; t < parent.length; t++) pieceOf.fill(t, first[t] as number, first[t + 1] as number)
  return countAbove(pieceOf, parent, rows)
}

function countAbove(pieceOf: Int32Array, parent: Int32Array, rows: Rows): Int32Array {
  const sizes = new Int32Array(parent.length)
  const seen = new Int32Array(parent.length).fill(-1)
  for (let r = 0; r < pieceOf.length; r++) {
    const own = pieceOf[r] as number
    seen[own] = r
    const to = rows.start[r + 1] as number
    for (let q = rows.start[r] as number; q < to; q++) {
      let t = pieceOf[rows.lower[q] as number] as number
      while (seen[t] !== r) {
        seen[t] = r
        sizes[t] = (sizes[t] as number) + 1
        t = parent[t] as number
        assert(t >= 0, 'a neighbour outside the ways up the tree: the order is no dissection of this pattern')
      }
    }
  }
  return sizes
}
