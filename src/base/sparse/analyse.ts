/**
 * Symbolic analysis: everything about the factor that the values do not change. The pieces of the dissection, the small ones
 * merged, are the fronts of a multifrontal factorisation (I. Duff, J. Reid, ACM Trans. Math. Softw. 9, 1983; J. Liu, SIAM
 * Review 34, 1992): a front eliminates its own unknowns (pivots) and hands what is left on its boundary to its parent.
 *
 * The boundary of a front is found from the rows: row v of L is not zero in exactly those fronts that lie on the ways up the
 * tree from v's neighbours to v's own front (J. Liu, SIAM J. Matrix Anal. Appl. 11, 1990). Taking v in elimination order
 * yields every boundary sorted, every place of a matrix entry and every child-to-parent map in one pass without a sort.
 */
import { assert } from '../assert.ts'
import { amalgamation } from './amalgamate.ts'
import type { Pattern } from './matrix.ts'
import type { Ordering } from './order.ts'

/**
 * Storage: a front with p pivots and b boundary rows, both rounded up to a multiple of four, keeps its rows in slivers of four:
 * entry (row 4 s + r, column k) of a sliver lies at 4 k + r. First the p/4 slivers of the pivot rows, sliver s with the
 * columns 0 .. 4 s + 3 only, then the b/4 slivers of the boundary rows with all p columns. So a sliver is contiguous, four
 * numbers of a column are adjacent, and the kernels need neither packing nor edge cases. What is left on the boundary (the
 * Schur complement) is kept likewise as a triangle of slivers.
 */
export interface Analysis {
  readonly pattern: Pattern
  readonly ordering: Ordering
  /** place[i]: where unknown i is eliminated (the order of `ordering`, up to the order of independent pieces); unknown: its inverse. */
  readonly place: Int32Array
  readonly unknown: Int32Array
  readonly fronts: number
  /** Front t eliminates places first[t] .. first[t + 1). */
  readonly first: Int32Array
  /** parent[t] > t, -1 for roots; children[childStart[t] .. childStart[t + 1]) come in ascending order. */
  readonly parent: Int32Array
  readonly childStart: Int32Array
  readonly children: Int32Array
  /** Boundary of front t: places boundary[boundaryStart[t] .. boundaryStart[t + 1]), ascending. */
  readonly boundaryStart: Int32Array
  readonly boundary: Int32Array
  /** Beside each boundary entry: its row in the parent's front, where boundary rows are counted on from the rounded pivots. */
  readonly inParent: Int32Array
  /** Front t's entries of L are numbers panel[t] .. panel[t + 1) of the store. */
  readonly panel: Int32Array
  /** Where front t's Schur complement begins in the store. */
  readonly schur: Int32Array
  /** Numbers in the store in all: L, then the two stacks of Schur complements. */
  readonly storeSize: number
  /** target[q]: where value q of the pattern goes in the store. */
  readonly target: Int32Array
  /** The most rows of any front, in slivers. */
  readonly widest: number
  /** Multiplications and additions of the factorisation. */
  readonly operations: number
}

/** `count` rounded up to a multiple of four. */
export const four = (count: number): number => (count + 3) & ~3

/** Where sliver s begins in a triangle of slivers; also the size of s slivers. */
export const triangle = (s: number): number => 8 * s * (s + 1)

/** The analysis of a pattern in a given order; reused for any values. */
export function analyse(pattern: Pattern, ordering: Ordering): Analysis {
  const { size } = pattern
  const rows = lowerNeighbours(pattern, ordering.rank)
  const tree = amalgamation(ordering, boundarySizes(ordering, rows))
  const { fronts, parent, first, boundaryStart, frontOfRank, placeOfRank } = tree

  const panel = new Int32Array(fronts + 1)
  let operations = 0
  let numbers = 0
  let widest = 0
  for (let t = 0; t < fronts; t++) {
    const p = four((first[t + 1] as number) - (first[t] as number))
    const b = four((boundaryStart[t + 1] as number) - (boundaryStart[t] as number))
    numbers += triangle(p >> 2) + p * b
    panel[t + 1] = numbers
    widest = Math.max(widest, (p + b) >> 2)
    operations += (p * (p + 1) * (2 * p + 1)) / 6 + p * p * b + p * b * b
  }
  const stacks = schurPlaces(fronts, parent, boundaryStart, numbers)
  assert(stacks.end < 2 ** 31, 'a factor of more than 16 gigabytes')

  const boundary = new Int32Array(boundaryStart[fronts] as number)
  const inParent = new Int32Array(boundary.length)
  const target = new Int32Array(pattern.row.length)
  const fill = boundaryStart.slice(0, fronts)
  const seen = new Int32Array(fronts).fill(-1)
  const rankOfPlace = new Int32Array(size)
  for (let r = 0; r < size; r++) rankOfPlace[placeOfRank[r] as number] = r
  for (let v = 0; v < size; v++) {
    const r = rankOfPlace[v] as number
    const own = frontOfRank[r] as number
    const ownRow = v - (first[own] as number)
    const ownBase = (panel[own] as number) + triangle(ownRow >> 2) + (ownRow & 3)
    seen[own] = v
    const to = rows.start[r + 1] as number
    for (let q = rows.start[r] as number; q < to; q++) {
      const lower = rows.lower[q] as number
      const home = frontOfRank[lower] as number
      for (let t = home; seen[t] !== v; ) {
        seen[t] = v
        const at = fill[t] as number
        boundary[at] = v
        fill[t] = at + 1
        const up = parent[t] as number
        if (up === own) inParent[at] = ownRow
        else {
          // The parent's entry for v is its last one, or the next one to come.
          const index = (fill[up] as number) - (boundaryStart[up] as number) - (seen[up] === v ? 1 : 0)
          inParent[at] = four((first[up + 1] as number) - (first[up] as number)) + index
        }
        t = up
      }
      const column = (placeOfRank[lower] as number) - (first[home] as number)
      if (home === own) target[rows.source[q] as number] = ownBase + 4 * column
      else {
        const p = four((first[home + 1] as number) - (first[home] as number))
        const index = (fill[home] as number) - 1 - (boundaryStart[home] as number)
        target[rows.source[q] as number] = (panel[home] as number) + triangle(p >> 2) + (index >> 2) * 4 * p + (index & 3) + 4 * column
      }
    }
  }
  const place = new Int32Array(size)
  const unknown = new Int32Array(size)
  for (let i = 0; i < size; i++) {
    const v = placeOfRank[ordering.rank[i] as number] as number
    place[i] = v
    unknown[v] = i
    const own = frontOfRank[ordering.rank[i] as number] as number
    const row = v - (first[own] as number)
    const diagonal = pattern.start[i] as number
    assert(pattern.row[diagonal] === i, 'every column of a pattern begins with its diagonal')
    target[diagonal] = (panel[own] as number) + triangle(row >> 2) + (row & 3) + 4 * row
  }
  return {
    pattern, ordering, place, unknown, fronts, first, parent, ...childLists(fronts, parent), boundaryStart, boundary, inParent,
    panel, schur: stacks.schur, storeSize: stacks.end, target, widest, operations,
  }
}

/** By rank r: the ranks below r of its neighbours, lower[start[r] .. start[r + 1]), and the pattern entry of each. */
interface Rows {
  readonly start: Int32Array
  readonly lower: Int32Array
  readonly source: Int32Array
}

function lowerNeighbours({ size, start, row }: Pattern, rank: Int32Array): Rows {
  const first = new Int32Array(size + 2)
  for (let j = 0; j < size; j++) {
    const rj = rank[j] as number
    const to = start[j + 1] as number
    for (let p = (start[j] as number) + 1; p < to; p++) {
      const ri = rank[row[p] as number] as number
      const high = (ri > rj ? ri : rj) + 2
      first[high] = (first[high] as number) + 1
    }
  }
  for (let r = 2; r < size + 2; r++) first[r] = (first[r] as number) + (first[r - 1] as number)
  const lower = new Int32Array(first[size + 1] as number)
  const source = new Int32Array(lower.length)
  for (let j = 0; j < size; j++) {
    const rj = rank[j] as number
    const to = start[j + 1] as number
    for (let p = (start[j] as number) + 1; p < to; p++) {
      const ri = rank[row[p] as number] as number
      const high = (ri > rj ? ri : rj) + 1
      const at = first[high] as number
      lower[at] = ri > rj ? rj : ri
      source[at] = p
      first[high] = at + 1
    }
  }
  return { start: first, lower, source }
}

/** The number of boundary unknowns of each piece of the dissection. */
function boundarySizes({ first, parent, rank }: Ordering, rows: Rows): Int32Array {
  const pieces = parent.length
  const sizes = new Int32Array(pieces)
  const seen = new Int32Array(pieces).fill(-1)
  const pieceOf = new Int32Array(rank.length)
  for (let t = 0; t < pieces; t++) pieceOf.fill(t, first[t] as number, first[t + 1] as number)
  for (let r = 0; r < rank.length; r++) {
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

/**
 * Places for the Schur complements on two stacks, one for even and one for odd depths in the tree: when a front is assembled,
 * its children's are on top of the other stack, so its own is made in place while theirs are read, and none is ever moved.
 * (One stack needs a copy of every complement: 6e7 numbers on 100,000 panels.)
 */
function schurPlaces(fronts: number, parent: Int32Array, boundaryStart: Int32Array, begin: number): { schur: Int32Array; end: number } {
  const odd = new Uint8Array(fronts)
  for (let t = fronts - 1; t >= 0; t--) odd[t] = (parent[t] as number) < 0 ? 0 : 1 - (odd[parent[t] as number] as number)
  const schur = new Int32Array(fronts)
  const waiting = new Float64Array(fronts)
  const top = [0, 0]
  const peak = [0, 0]
  for (let t = 0; t < fronts; t++) {
    const side = odd[t] as number
    const size = triangle(four((boundaryStart[t + 1] as number) - (boundaryStart[t] as number)) >> 2)
    schur[t] = top[side] as number
    top[side] = (top[side] as number) + size
    peak[side] = Math.max(peak[side] as number, top[side] as number)
    top[1 - side] = (top[1 - side] as number) - (waiting[t] as number)
    if ((parent[t] as number) >= 0) waiting[parent[t] as number] = (waiting[parent[t] as number] as number) + size
    else top[side] = (top[side] as number) - size
  }
  for (let t = 0; t < fronts; t++) schur[t] = (schur[t] as number) + begin + (odd[t] === 1 ? (peak[0] as number) : 0)
  return { schur, end: begin + (peak[0] as number) + (peak[1] as number) }
}

function childLists(fronts: number, parent: Int32Array): { childStart: Int32Array; children: Int32Array } {
  const childStart = new Int32Array(fronts + 2)
  for (const t of parent) if (t >= 0) childStart[t + 2] = (childStart[t + 2] as number) + 1
  for (let t = 2; t < fronts + 2; t++) childStart[t] = (childStart[t] as number) + (childStart[t - 1] as number)
  const children = new Int32Array(childStart[fronts + 1] as number)
  for (let t = 0; t < fronts; t++) {
    const up = parent[t] as number
    if (up < 0) continue
    const at = childStart[up + 1] as number
    children[at] = t
    childStart[up + 1] = at + 1
  }
  return { childStart: childStart.subarray(0, fronts + 1), children }
}
