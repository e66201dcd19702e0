/**
 * Where the numbers of a factor lie. A front with p pivots and b boundary rows, both rounded up to a multiple of four, keeps
 * its rows in slivers of four: entry (row 4 s + r, column k) of sliver s lies at 4 k + r from the sliver's beginning. First the
 * p/4 slivers of the pivot rows, sliver s with the columns 0 .. 4 s + 3 only, then the b/4 slivers of the boundary rows with
 * all p columns. So a sliver is contiguous, four numbers of a column are adjacent, and the kernels need neither packing nor
 * edge cases; the price is rounding up, 7 percent of the numbers on 100,000 panels. What is left on the boundary (the Schur
 * complement) is kept likewise as a triangle of slivers.
 */
import type { Fronts } from './amalgamate.ts'

/** `count` rounded up to a multiple of four. */
export const four = (count: number): number => (count + 3) & ~3

/** Where sliver s begins in a triangle of slivers; also the size of s slivers. */
export const triangle = (s: number): number => 8 * s * (s + 1)

export interface Layout {
  /** Front t's entries of L are numbers panel[t] .. panel[t + 1) of the store. */
  readonly panel: Int32Array
  /** Where front t's Schur complement begins. */
  readonly schur: Int32Array
  readonly storeSize: number
}

export function layout({ fronts, parent, first, boundaryStart }: Fronts): Layout {
  const panel = new Int32Array(fronts + 1)
  let numbers = 0
  for (let t = 0; t < fronts; t++) {
    const p = four((first[t + 1] as number) - (first[t] as number))
    const b = four((boundaryStart[t + 1] as number) - (boundaryStart[t] as number))
    numbers += triangle(p >> 2) + p * b
    panel[t + 1] = numbers
  }
  return { panel, ...schurPlaces(fronts, parent, boundaryStart, numbers) }
}

/**
 * Places for the Schur complements on two stacks, one for even and one for odd depths in the tree: when a front is assembled,
 * its children's are on top of the other stack, so its own is made in place while theirs are read, and none is ever moved.
 * (One stack needs a copy of every complement: 6e7 numbers on 100,000 panels.)
 */
function schurPlaces(fronts: number, parent: Int32Array, boundaryStart: Int32Array, begin: number): Pick<Layout, 'schur' | 'storeSize'> {
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
  return { schur, storeSize: begin + (peak[0] as number) + (peak[1] as number) }
}
