/**
 * Which rings of one filled path bound holes. A ring lies inside another when its box and a point inside it do. By the
 * rule evenodd, a ring inside an odd number of others bounds a hole; by nonzero, it does when the windings of itself and
 * of all round it add up to zero (SVG 2, section 13.4.2).
 */
import type { Steps } from '../base/steps.ts'

/** Rings inside one another beyond this are no drawing. */
export const deepestRings = 64

/** Boxes and coordinates that are looked at between two turns: about a millisecond. */
const slice = 1 << 16

/** Points x y x y .. of rings, each from `from` to `to`, the first point not repeated. */
export interface Rings {
  readonly xy: Float64Array
  readonly from: readonly number[]
  readonly to: readonly number[]
}

/**
 * For each ring 1 when it bounds a hole, 0 when it bounds what is filled; null when rings are nested more than
 * `deepestRings` deep. A sweep along the longer side of the whole: the boxes under the line lie in buckets by the other
 * coordinate, and leave them when they are next met.
 *
 * Tried and dropped: one list of all boxes under the line (n^1.5 even for rings side by side).
 */
export function* holes(rings: Rings, evenOdd: boolean): Steps<Uint8Array | null> {
  const count = rings.from.length
  const out = new Uint8Array(count)
  if (count < 2) return out
  let looked = 0
  const boxes: Box[] = []
  const area = new Float64Array(count)
  for (let ring = 0; ring < count; ring += 1) {
    boxes.push(box(rings, ring))
    area[ring] = signedArea(rings, ring)
    looked += rings.to[ring] - rings.from[ring]
    if (looked > slice) {
      looked = 0
      yield { stage: 'Reading', done: 0.5 }
    }
  }
  const whole: [number, number, number, number] = [...boxes[0]]
  for (const each of boxes) {
    for (let side = 0; side < 4; side += 1) whole[side] = side < 2 ? Math.min(whole[side], each[side]) : Math.max(whole[side], each[side])
  }
  const along = whole[2] - whole[0] >= whole[3] - whole[1] ? 0 : 1
  const across = 1 - along
  const bucketCount = Math.ceil(2 * Math.sqrt(count))
  const width = (whole[across + 2] - whole[across]) / bucketCount
  const bucketOf = (value: number): number => (width > 0 ? Math.min(bucketCount - 1, Math.floor((value - whole[across]) / width)) : 0)
  const buckets = Array.from({ length: bucketCount }, (): number[] => [])
  const order = boxes.map((_, i) => i)
  order.sort((a, b) => boxes[a][along] - boxes[b][along] || boxes[b][along + 2] - boxes[a][along + 2] || a - b)
  yield { stage: 'Reading', done: 0.5 }

  for (const ring of order) {
    const own = boxes[ring]
    const bucket = buckets[bucketOf(own[across])]
    let depth = 0
    let winding = Math.sign(area[ring])
    let inside: readonly [number, number] | null = null
    let kept = 0
    for (const other of bucket) {
      looked += 1
      if (boxes[other][along + 2] <= own[along]) continue
      bucket[kept++] = other
      if (!within(own, boxes[other]) || Math.abs(area[other]) <= Math.abs(area[ring])) continue
      inside ??= pointInside(rings, ring)
      looked += rings.to[other] - rings.from[other]
      if (!contains(rings, other, inside[0], inside[1])) continue
      depth += 1
      winding += Math.sign(area[other])
      if (depth > deepestRings) return null
    }
    bucket.length = kept
    for (let b = bucketOf(own[across]); b <= bucketOf(own[across + 2]); b += 1) {
      buckets[b].push(ring)
      looked += 1
    }
    out[ring] = (evenOdd ? depth % 2 === 1 : depth > 0 && winding === 0) ? 1 : 0
    if (looked > slice) {
      looked = 0
      yield { stage: 'Reading', done: 0.5 }
    }
  }
  return out
}

type Box = readonly [left: number, low: number, right: number, high: number]

function box({ xy, from, to }: Rings, ring: number): Box {
  let [left, low, right, high] = [Infinity, Infinity, -Infinity, -Infinity]
  for (let i = from[ring]; i < to[ring]; i += 2) {
    left = Math.min(left, xy[i])
    right = Math.max(right, xy[i])
    low = Math.min(low, xy[i + 1])
    high = Math.max(high, xy[i + 1])
  }
  return [left, low, right, high]
}

const within = (inner: Box, outer: Box): boolean =>
  inner[0] >= outer[0] && inner[1] >= outer[1] && inner[2] <= outer[2] && inner[3] <= outer[3]

/** Half the sum of the cross products, from the first corner so that far coordinates do not cancel; > 0 counter-clockwise. */
function signedArea({ xy, from, to }: Rings, ring: number): number {
  const first = from[ring]
  let twice = 0
  for (let i = first + 2; i + 3 < to[ring]; i += 2) {
    twice += (xy[i] - xy[first]) * (xy[i + 3] - xy[first + 1]) - (xy[i + 2] - xy[first]) * (xy[i + 1] - xy[first + 1])
  }
  return twice / 2
}

/** Where the side from corner j to corner i (places in `xy`) meets the level y; NaN where it does not. */
function crossing(xy: Float64Array, i: number, j: number, y: number): number {
  if (xy[i + 1] > y === xy[j + 1] > y) return NaN
  return xy[i] + ((y - xy[i + 1]) / (xy[j + 1] - xy[i + 1])) * (xy[j] - xy[i])
}

/** Crossing rule on the ray to the right. */
function contains({ xy, from, to }: Rings, ring: number, x: number, y: number): boolean {
  let odd = false
  for (let i = from[ring], j = to[ring] - 2; i < to[ring]; j = i, i += 2) if (x < crossing(xy, i, j, y)) odd = !odd
  return odd
}

/** A point inside: the middle of the first piece inside of a level line that passes through no corner. */
function pointInside({ xy, from, to }: Rings, ring: number): readonly [number, number] {
  const levels: number[] = []
  for (let i = from[ring]; i < to[ring]; i += 2) levels.push(xy[i + 1])
  levels.sort((a, b) => a - b)
  let widest = 0
  let y = levels[0]
  for (let i = 1; i < levels.length; i += 1) {
    if (levels[i] - levels[i - 1] <= widest) continue
    widest = levels[i] - levels[i - 1]
    y = (levels[i] + levels[i - 1]) / 2
  }
  const cuts: number[] = []
  for (let i = from[ring], j = to[ring] - 2; i < to[ring]; j = i, i += 2) {
    const cut = crossing(xy, i, j, y)
    if (!Number.isNaN(cut)) cuts.push(cut)
  }
  cuts.sort((a, b) => a - b)
  return cuts.length < 2 ? [xy[from[ring]], xy[from[ring] + 1]] : [(cuts[0] + cuts[1]) / 2, y]
}
