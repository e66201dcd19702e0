/**
 * Where to cut a piece of the plan in two: across its longer side, at the best of a few positions about the middle, with the
 * smallest set of unknowns that leaves no connection across (`cover.ts`).
 *
 * For most positions the size of that set is only estimated, by counting the unknowns on one side that have a neighbour on
 * the other, for all positions in one scan; the best two are then solved exactly.
 *
 * Tried and dropped: a graph with both directions of every connection (11 MB and 60 ms at 200,000 unknowns, where the pattern
 * itself serves); exact covers at all of 48 positions (4 times the time of ordering, 1 percent fewer operations); smallest
 * vertex cuts in a wide band about the middle by maximum flow (on cell plans the straight cut was already smallest, in bands
 * of up to 32 panels).
 */
import { Cover } from './cover.ts'
import type { Pattern } from './matrix.ts'
import { places } from './places.ts'

/** The unknowns along one axis; the segment [from, to) of `sorted` is one piece's, in ascending place. */
export interface Axis {
  readonly sorted: Int32Array
  readonly place: Int32Array
  /** Lowest and highest place among an unknown and its neighbours, wherever these are. */
  readonly low: Int32Array
  readonly high: Int32Array
}

/** Positions looked at are within this share of the unknowns about the middle. */
const reachShare = 0.1
const mostPositions = 33
/** Pieces smaller than this are cut in the middle: their separators cost little either way. */
const plainSize = 100

/** An uneven cut must save this much: a cut off the middle by a share u counts (1 + unevenness u^2) times its size. */
const unevenness = 15

export class Cuts {
  readonly axes: readonly [Axis, Axis]
  /** The piece an unknown is in. */
  readonly label: Int32Array
  /** The cut chosen last: its axis, the position from which on unknowns are on the right side, and separator[0 .. count). */
  axis = 0
  position = 0
  count = 0
  readonly separator: Int32Array
  private readonly cover: Cover
  /** Positions in the segment, the places they stand for, unknowns with neighbours across on either side. */
  private readonly positions = new Int32Array(mostPositions)
  private readonly limit = new Int32Array(mostPositions)
  private readonly leftSize = new Int32Array(mostPositions)
  private readonly rightSize = new Int32Array(mostPositions)
  private best = Infinity
  /** Unknowns that may have a neighbour across one of the cuts to be solved: near[0 .. nearCount). */
  private readonly near: Int32Array
  private nearCount = 0

  constructor(private readonly pattern: Pattern, private readonly coordinates: Float64Array) {
    this.axes = [reaches(pattern, coordinates, 0), reaches(pattern, coordinates, 1)]
    this.label = new Int32Array(pattern.size)
    this.separator = new Int32Array(pattern.size)
    this.near = new Int32Array(pattern.size)
    this.cover = new Cover(pattern.size)
  }

  /** Chooses a cut of piece `piece`, which has the segment [from, to) on both axes. */
  choose(piece: number, from: number, to: number): void {
    this.axis = this.span(1, from, to) > this.span(0, from, to) ? 1 : 0
    const size = to - from
    const half = from + (size >> 1)
    this.best = Infinity
    if (size < plainSize) {
      this.gather(from, to, half, half)
      this.solve(piece, from, to, half)
      return
    }
    // The best of coarse positions, then of fine ones about it: a gap or a neck is narrow.
    const reach = Math.floor(reachShare * size)
    const coarse = this.estimate(from, to, half, reach)
    const spacing = Math.ceil((2 * reach) / (mostPositions - 1))
    const fine = this.estimate(from, to, coarse, Math.min(spacing, coarse - from - 1, to - coarse - 1))
    this.gather(from, to, Math.min(coarse, fine), Math.max(coarse, fine))
    this.solve(piece, from, to, coarse)
    if (fine !== coarse) this.solve(piece, from, to, fine)
  }

  /** Solves the cut at a position and keeps it if it is the best so far. */
  private solve(piece: number, from: number, to: number, position: number): void {
    const { cover, separator } = this
    this.separate(piece, position)
    const size = cover.count * this.uneven(from, to, position)
    if (size >= this.best) return
    this.best = size
    this.position = position
    this.count = cover.count
    for (let m = 0; m < cover.count; m++) separator[m] = cover.members[m] as number
  }

  private uneven(from: number, to: number, position: number): number {
    const share = (position - from) / (to - from) - 0.5
    return 1 + unevenness * share * share
  }

  private span(axis: 0 | 1, from: number, to: number): number {
    const { sorted } = this.axes[axis]
    const c = (k: number): number => this.coordinates[2 * (sorted[k] as number) + axis] as number
    const span = c(to - 1) - c(from)
    return Number.isFinite(span) ? span : 0
  }

  /** The position within `reach` of `middle` whose separator seems smallest. */
  private estimate(from: number, to: number, middle: number, reach: number): number {
    const axis = this.axes[this.axis] as Axis
    const { sorted, place } = axis
    const { positions, limit, leftSize, rightSize } = this
    const half = (mostPositions - 1) / 2
    for (let c = 0; c < mostPositions; c++) {
      positions[c] = middle + Math.round((reach * (c - half)) / half)
      limit[c] = place[sorted[positions[c] as number] as number] as number
    }
    leftSize.fill(0)
    rightSize.fill(0)
    // Only unknowns near the window are counted: long connections from far off are missed, and met when the cut is solved.
    const margin = reach + Math.ceil(6 * Math.sqrt(to - from))
    countAcross(axis, Math.max(from, middle - margin), Math.min(to, middle + margin), positions, limit, leftSize, rightSize)
    return this.smallest(from, to)
  }

  private smallest(from: number, to: number): number {
    const { positions, leftSize, rightSize } = this
    let best = Infinity
    let choice = 0
    for (let c = 0; c < mostPositions; c++) {
      const size = Math.min(leftSize[c] as number, rightSize[c] as number) * this.uneven(from, to, positions[c] as number)
      if (size >= best) continue
      best = size
      choice = positions[c] as number
    }
    return choice
  }

  /** Lists the unknowns of the segment with a neighbour, inside or outside, beyond one of the positions low <= high or between them. */
  private gather(from: number, to: number, low: number, high: number): void {
    const { near } = this
    const { sorted, place, low: lowest, high: highest } = this.axes[this.axis] as Axis
    const left = reachingUp(sorted, highest, from, low, place[sorted[low] as number] as number, near)
    near.set(sorted.subarray(low, high), left)
    const right = left + high - low
    this.nearCount = reachingDown(sorted, lowest, high, to, place[sorted[high] as number] as number, near, right)
  }

  /** The smallest separator between the piece's unknowns before and from `position` on, in this.cover. */
  private separate(piece: number, position: number): void {
    const { sorted, place } = this.axes[this.axis] as Axis
    const { cover, label, near, pattern: { start, row } } = this
    const threshold = place[sorted[position] as number] as number
    // Every connection is kept once in the pattern, with either of its ends: both sides are looked through.
    for (let k = 0; k < this.nearCount; k++) {
      const v = near[k] as number
      const isLeft = (place[v] as number) < threshold
      const end = start[v + 1] as number
      for (let p = (start[v] as number) + 1; p < end; p++) {
        const u = row[p] as number
        if (label[u] !== piece || (place[u] as number) < threshold === isLeft) continue
        if (isLeft) cover.add(v, u)
        else cover.add(u, v)
      }
    }
    cover.solve()
  }
}

/** For each of the ascending positions: the unknowns of [from, to) before it that reach it, and those from it on that reach below. */
function countAcross(
  { sorted, low, high }: Axis, from: number, to: number,
  positions: Int32Array, limit: Int32Array, leftSize: Int32Array, rightSize: Int32Array,
): void {
  let passed = 0
  for (let k = from; k < to; k++) {
    const v = sorted[k] as number
    while (passed < mostPositions && (positions[passed] as number) <= k) passed++
    const highest = high[v] as number
    for (let c = passed; c < mostPositions && (limit[c] as number) <= highest; c++) leftSize[c] = (leftSize[c] as number) + 1
    const lowest = low[v] as number
    for (let c = passed - 1; c >= 0 && (limit[c] as number) > lowest; c--) rightSize[c] = (rightSize[c] as number) + 1
  }
}

function reachingUp(sorted: Int32Array, highest: Int32Array, from: number, to: number, limit: number, near: Int32Array): number {
  let count = 0
  for (let k = from; k < to; k++) {
    const v = sorted[k] as number
    if ((highest[v] as number) >= limit) near[count++] = v
  }
  return count
}

function reachingDown(
  sorted: Int32Array, lowest: Int32Array, from: number, to: number, limit: number, near: Int32Array, count: number,
): number {
  for (let k = from; k < to; k++) {
    const v = sorted[k] as number
    if ((lowest[v] as number) < limit) near[count++] = v
  }
  return count
}

function reaches({ size, start, row }: Pattern, coordinates: Float64Array, axis: 0 | 1): Axis {
  const { sorted, place } = places(coordinates, axis)
  const low = place.slice()
  const high = place.slice()
  for (let v = 0; v < size; v++) {
    const at = place[v] as number
    let lowest = low[v] as number
    let highest = high[v] as number
    const end = start[v + 1] as number
    for (let p = (start[v] as number) + 1; p < end; p++) {
      const u = row[p] as number
      const there = place[u] as number
      if (there < lowest) lowest = there
      if (there > highest) highest = there
      if (at < (low[u] as number)) low[u] = at
      if (at > (high[u] as number)) high[u] = at
    }
    low[v] = lowest
    high[v] = highest
  }
  return { sorted, place, low, high }
}
