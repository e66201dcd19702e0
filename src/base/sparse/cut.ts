/**
 * Where to cut a piece of the plan in two: across its longer side, at the best of a few positions about the middle, with the
 * smallest set of unknowns that leaves no connection across (`cover.ts`).
 *
 * For most positions the size of that set is only estimated, by counting the unknowns on one side that have a neighbour on
 * the other, for all positions in one scan; the best few are then solved exactly.
 *
 * Tried and dropped: exact covers at all of 48 positions (4 times the time of ordering, 1 percent fewer operations); smallest
 * vertex cuts in a wide band about the middle by maximum flow (on cell plans the straight cut was already smallest, in bands
 * of up to 32 panels).
 */
import { Cover } from './cover.ts'
import type { Pattern } from './matrix.ts'
import { neighbours, type Neighbours } from './neighbours.ts'
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
const mostPositions = 12
/** Positions solved exactly. Pieces below `plainSize` are cut in the middle: their separators cost little either way. */
const tries = 2
const plainSize = 100

/** An uneven cut must save this much: a cut off the middle by a share u counts (1 + unevenness u^2) times its size. */
const unevenness = 6

export class Cuts {
  readonly graph: Neighbours
  readonly axes: readonly [Axis, Axis]
  /** The piece an unknown is in. */
  readonly label: Int32Array
  /** The cut chosen last: its axis and the place from which on unknowns are on the right side; the separator is separator[0 .. count). */
  axis = 0
  threshold = 0
  count = 0
  readonly separator: Int32Array
  private readonly cover: Cover
  private readonly position = new Int32Array(mostPositions)
  private readonly size = new Float64Array(mostPositions)
  private readonly leftSize = new Int32Array(mostPositions)
  private readonly rightSize = new Int32Array(mostPositions)

  constructor(pattern: Pattern, private readonly coordinates: Float64Array) {
    this.graph = neighbours(pattern)
    this.axes = [reaches(this.graph, coordinates, 0), reaches(this.graph, coordinates, 1)]
    this.label = new Int32Array(pattern.size)
    this.separator = new Int32Array(pattern.size)
    this.cover = new Cover(pattern.size)
  }

  /** Chooses a cut of piece `piece`, which has the segment [from, to) on both axes. */
  choose(piece: number, from: number, to: number): void {
    this.axis = this.span(1, from, to) > this.span(0, from, to) ? 1 : 0
    const half = from + ((to - from) >> 1)
    const count = to - from < plainSize ? 1 : this.positions(from, to)
    if (count === 1) {
      this.threshold = this.thresholdAt(half)
      this.separate(piece, from, this.threshold)
      this.count = this.cover.count
      this.separator.set(this.cover.members.subarray(0, this.count))
      return
    }
    let best = Infinity
    for (let round = 0; round < tries; round++) {
      let c = 0
      for (let d = 1; d < count; d++) if ((this.size[d] as number) < (this.size[c] as number)) c = d
      this.size[c] = Infinity
      const threshold = this.thresholdAt(this.position[c] as number)
      this.separate(piece, from, threshold)
      const size = this.cover.count * uneven(((this.position[c] as number) - half) / (to - from))
      if (size >= best) continue
      best = size
      this.threshold = threshold
      this.count = this.cover.count
      for (let m = 0; m < this.count; m++) this.separator[m] = this.cover.members[m] as number
    }
  }

  private span(axis: 0 | 1, from: number, to: number): number {
    const { sorted } = this.axes[axis]
    const c = (k: number): number => this.coordinates[2 * (sorted[k] as number) + axis] as number
    const span = c(to - 1) - c(from)
    return Number.isFinite(span) ? span : 0
  }

  private thresholdAt(position: number): number {
    const { sorted, place } = this.axes[this.axis] as Axis
    return place[sorted[position] as number] as number
  }

  /** Fills position[0 .. n) with positions about the middle and size[] with estimates of their separators; returns n. */
  private positions(from: number, to: number): number {
    const { sorted, place, low, high } = this.axes[this.axis] as Axis
    const { position, leftSize, rightSize, size } = this
    const half = from + ((to - from) >> 1)
    const reach = Math.floor(reachShare * (to - from))
    const first = this.firstLimit
    for (let c = 0; c < mostPositions; c++) {
      const at = half - reach + Math.round((2 * reach * c) / (mostPositions - 1))
      position[c] = at
      first[c] = place[sorted[at] as number] as number
      leftSize[c] = 0
      rightSize[c] = 0
    }
    // Only unknowns near the window are counted: long connections from far off are missed, and met when the cut is solved.
    const end = Math.min(to, half + 2 * reach)
    let passed = 0
    for (let k = Math.max(from, half - 2 * reach); k < end; k++) {
      const v = sorted[k] as number
      while (passed < mostPositions && (position[passed] as number) <= k) passed++
      const highest = high[v] as number
      for (let c = passed; c < mostPositions && (first[c] as number) <= highest; c++) leftSize[c] = (leftSize[c] as number) + 1
      const lowest = low[v] as number
      for (let c = passed - 1; c >= 0 && (first[c] as number) > lowest; c--) rightSize[c] = (rightSize[c] as number) + 1
    }
    for (let c = 0; c < mostPositions; c++) {
      size[c] = Math.min(leftSize[c] as number, rightSize[c] as number) * uneven(((position[c] as number) - half) / (to - from))
    }
    return mostPositions
  }

  private readonly firstLimit = new Int32Array(mostPositions)

  /** The smallest separator of the piece between places below and from `threshold` on, in this.cover. */
  private separate(piece: number, from: number, threshold: number): void {
    const { sorted, place, high } = this.axes[this.axis] as Axis
    const { cover, label, graph: { start, other } } = this
    cover.clear()
    for (let k = from; ; k++) {
      const v = sorted[k] as number
      if ((place[v] as number) >= threshold) break
      if ((high[v] as number) < threshold) continue
      const begin = start[v] as number
      const end = start[v + 1] as number
      const open = cover.open(end - begin)
      const { edge } = cover
      let at = open
      for (let p = begin; p < end; p++) {
        const u = other[p] as number
        if (label[u] === piece && (place[u] as number) >= threshold) edge[at++] = u
      }
      if (at > open) cover.close(v, at)
    }
    cover.solve()
  }
}

const uneven = (share: number): number => 1 + unevenness * share * share

function reaches({ start, other }: Neighbours, coordinates: Float64Array, axis: 0 | 1): Axis {
  const { sorted, place } = places(coordinates, axis)
  const low = new Int32Array(sorted.length)
  const high = new Int32Array(sorted.length)
  for (let v = 0; v < sorted.length; v++) {
    let lowest = place[v] as number
    let highest = lowest
    const end = start[v + 1] as number
    for (let p = start[v] as number; p < end; p++) {
      const at = place[other[p] as number] as number
      if (at < lowest) lowest = at
      if (at > highest) highest = at
    }
    low[v] = lowest
    high[v] = highest
  }
  return { sorted, place, low, high }
}
