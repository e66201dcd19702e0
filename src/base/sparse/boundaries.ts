/**
 * The boundaries of the fronts, from the rows: row v of L is not zero in exactly those fronts that lie on the ways up the tree
 * from v's neighbours to v's own front (J. Liu, SIAM J. Matrix Anal. Appl. 11, 1990). Taking v in elimination order yields
 * every boundary sorted, every child-to-parent map and every place of a matrix entry in one pass without a sort or a search.
 */
import type { Fronts } from './amalgamate.ts'
import { four, triangle } from './layout.ts'
import type { Steps } from '../steps.ts'
import type { Pattern } from './matrix.ts'
import type { Rows } from './rows.ts'

export interface Boundaries {
  /** Boundary of front t: places boundary[boundaryStart[t] .. boundaryStart[t + 1]), ascending. */
  readonly boundary: Int32Array
  /** Beside each: its row in the parent's front, where boundary rows are counted on from the rounded pivots. */
  readonly inParent: Int32Array
  /** target[q]: where value q of the pattern goes in the store. */
  readonly target: Int32Array
}

/** Rows between two yields: some 10 ms. */
const rowsPerStep = 16384

export function* boundaries(pattern: Pattern, rank: Int32Array, rows: Rows, tree: Fronts, panel: Int32Array): Steps<Boundaries> {
  const { fronts, first, boundaryStart, frontOfRank, placeOfRank } = tree
  const entries = boundaryStart[fronts] as number
  const into = { boundary: new Int32Array(entries), inParent: new Int32Array(entries), target: new Int32Array(pattern.row.length) }
  const rankOfPlace = new Int32Array(rank.length)
  for (let r = 0; r < rank.length; r++) rankOfPlace[placeOfRank[r] as number] = r
  const next = boundaryStart.slice(0, fronts)
  const seen = new Int32Array(fronts).fill(-1)
  for (let v = 0; v < rank.length; v += rowsPerStep) {
    yield { stage: 'Analysing', done: 0.4 + (0.6 * v) / rank.length }
    climb(into, rankOfPlace, rows, tree, panel, next, seen, v, Math.min(rank.length, v + rowsPerStep))
  }
  for (let i = 0; i < rank.length; i++) {
    const r = rank[i] as number
    const own = frontOfRank[r] as number
    const row = (placeOfRank[r] as number) - (first[own] as number)
    into.target[pattern.start[i] as number] = pivotRow(panel[own] as number, row) + 4 * row
  }
  return into
}

const pivotRow = (panel: number, row: number): number => panel + triangle(row >> 2) + (row & 3)

/** All but the diagonal, of the rows of places `from` .. `to`; next[t]: the next entry of front t's boundary, seen[t]: the last row there. */
function climb(
  { boundary, inParent, target }: Boundaries, rankOfPlace: Int32Array, rows: Rows, tree: Fronts, panel: Int32Array,
  next: Int32Array, seen: Int32Array, from: number, to: number,
): void {
  const { parent, first, boundaryStart, frontOfRank, placeOfRank } = tree
  for (let v = from; v < to; v++) {
    const r = rankOfPlace[v] as number
    const own = frontOfRank[r] as number
    const ownRow = v - (first[own] as number)
    const ownAt = pivotRow(panel[own] as number, ownRow)
    seen[own] = v
    const end = rows.start[r + 1] as number
    for (let q = rows.start[r] as number; q < end; q++) {
      const lower = rows.lower[q] as number
      const home = frontOfRank[lower] as number
      for (let t = home; seen[t] !== v; ) {
        seen[t] = v
        const at = next[t] as number
        boundary[at] = v
        next[t] = at + 1
        const up = parent[t] as number
        if (up === own) inParent[at] = ownRow
        else {
          // The parent's entry for v is its last one, or the next one to come.
          const index = (next[up] as number) - (boundaryStart[up] as number) - (seen[up] === v ? 1 : 0)
          inParent[at] = four((first[up + 1] as number) - (first[up] as number)) + index
        }
        t = up
      }
      const column = (placeOfRank[lower] as number) - (first[home] as number)
      if (home === own) target[rows.source[q] as number] = ownAt + 4 * column
      else {
        const p = four((first[home + 1] as number) - (first[home] as number))
        const index = (next[home] as number) - 1 - (boundaryStart[home] as number)
        target[rows.source[q] as number] = (panel[home] as number) + triangle(p >> 2) + (index >> 2) * 4 * p + (index & 3) + 4 * column
      }
    }
  }
}
