/**
 * Geometric nested dissection: the plan is cut in two across its longer side, the unknowns on the cut come last, and each
 * half is cut again. O(n log n) fill and O(n^1.5) operations on planar graphs (A. George, SIAM J. Numer. Anal. 10, 1973;
 * R. Lipton, D. Rose, R. Tarjan, SIAM J. Numer. Anal. 16, 1979; J. Gilbert, R. Tarjan, Numer. Math. 50, 1986).
 *
 * Any coordinates give a valid order: where they say nothing (all equal, not finite) unknowns go by their number.
 */
import { assert } from '../assert.ts'
import type { Steps } from '../steps.ts'
import { Cuts, type Axis } from './cut.ts'
import type { Pattern } from './matrix.ts'

/** An elimination order with the tree of pieces it came from; children come before their parents, subtrees are contiguous. */
export interface Ordering {
  /** rank[i]: place of unknown i in the elimination. */
  readonly rank: Int32Array
  /** Piece t eliminates the unknowns of rank first[t] .. first[t + 1), possibly none. */
  readonly first: Int32Array
  /** parent[t] > t: the piece whose cut made piece t; -1 at the root. */
  readonly parent: Int32Array
}

/** Pieces of at most this many unknowns are not cut further; smaller ones would be merged again. */
const smallPiece = 12

const sliceMs = 40

/** The elimination order of a pattern whose unknown i lies at (coordinates[2 i], coordinates[2 i + 1]). */
export function* dissection(pattern: Pattern, coordinates: Float64Array): Steps<Ordering> {
  const { size } = pattern
  assert(coordinates.length === 2 * size, 'two coordinates an unknown')
  let turn = performance.now()
  const cuts = new Cuts(pattern, coordinates)
  const rank = new Int32Array(size)
  const spare = new Int32Array(size)
  // Piece t: its segment from[t] .. to[t] on both axes, the rank after its last, its parent, and how many it keeps.
  const from = [0]
  const to = [size]
  const end = [size]
  const parentOf = [-1]
  const own: number[] = []
  // In preorder with the right half first, so that reading backwards gives children before parents and ascending ranks.
  const preorder: number[] = []
  const waiting = [0]
  let ranked = 0
  for (;;) {
    const t = waiting.pop()
    if (t === undefined) break
    preorder.push(t)
    const a = from[t] as number
    const b = to[t] as number
    const last = end[t] as number
    if (b - a <= smallPiece) {
      keepWhole(cuts, a, b, rank, last)
      own[t] = b - a
      ranked += b - a
      continue
    }
    cuts.choose(t, a, b)
    const left = from.length
    const lefts = divide(cuts, a, b, left, rank, last, spare)
    const kept = cuts.count
    own[t] = kept
    ranked += kept
    const rights = b - a - kept - lefts
    from.push(a, a + lefts)
    to.push(a + lefts, a + lefts + rights)
    end.push(last - kept - rights, last - kept)
    parentOf.push(t, t)
    waiting.push(left, left + 1)
    if (performance.now() - turn > sliceMs) {
      yield { stage: 'Ordering', done: ranked / size }
      turn = performance.now()
    }
  }
  return { rank, ...backwards(preorder, own, parentOf) }
}

function keepWhole(cuts: Cuts, a: number, b: number, rank: Int32Array, last: number): void {
  const { sorted } = cuts.axes[0]
  for (let k = a; k < b; k++) rank[sorted[k] as number] = last - b + k
}

const separated = -1

/**
 * Carries out the chosen cut of the segment [a, b): labels the halves `left` and left + 1, moves their segments side by side
 * on both axes, and ranks the separator, in order along the cut, before `last`. Returns the size of the left half.
 */
function divide(cuts: Cuts, a: number, b: number, left: number, rank: Int32Array, last: number, spare: Int32Array): number {
  const { label, separator, count, position } = cuts
  const along = cuts.axes[cuts.axis] as Axis
  const across = cuts.axes[1 - cuts.axis] as Axis
  for (let m = 0; m < count; m++) label[separator[m] as number] = separated
  const middle = close(along.sorted, a, position, a, label, left)
  const end = close(along.sorted, position, b, middle, label, left + 1)
  split(across.sorted, a, b, label, left, rank, last - count, spare)
  across.sorted.set(spare.subarray(0, end - middle), middle)
  return middle - a
}

/** Moves the unknowns of [from, to) that are not separated to `at` and onwards, labels them, and returns where they end. */
function close(sorted: Int32Array, from: number, to: number, at: number, label: Int32Array, name: number): number {
  for (let k = from; k < to; k++) {
    const v = sorted[k] as number
    if (label[v] === separated) continue
    label[v] = name
    sorted[at++] = v
  }
  return at
}

/** Moves the unknowns of [a, b) labelled `left` to the front, those labelled left + 1 to `spare`, and ranks the others. */
function split(
  sorted: Int32Array, a: number, b: number, label: Int32Array, left: number, rank: Int32Array, next: number, spare: Int32Array,
): void {
  let l = a
  let r = 0
  for (let k = a; k < b; k++) {
    const v = sorted[k] as number
    const side = label[v] as number
    if (side === left) sorted[l++] = v
    else if (side === separated) rank[v] = next++
    else spare[r++] = v
  }
}

/** The tree in the order of ranks: the preorder read backwards. */
function backwards(preorder: readonly number[], own: readonly number[], parentOf: readonly number[]): Pick<Ordering, 'first' | 'parent'> {
  const pieces = preorder.length
  const number = new Int32Array(pieces)
  for (let k = 0; k < pieces; k++) number[preorder[k] as number] = pieces - 1 - k
  const first = new Int32Array(pieces + 1)
  const parent = new Int32Array(pieces)
  for (let k = 0; k < pieces; k++) {
    const t = preorder[pieces - 1 - k] as number
    first[k + 1] = (first[k] as number) + (own[t] as number)
    parent[k] = t === 0 ? -1 : (number[parentOf[t] as number] as number)
  }
  return { first, parent }
}
