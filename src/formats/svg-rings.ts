/**
 * Which rings of one filled path bound holes. A ring lies inside another when its box and a point inside it do. By the
 * rule evenodd, a ring inside an odd number of others bounds a hole; by nonzero, it does when the windings of itself and
 * of all round it add up to zero (SVG 2, section 13.4.2).
 */
import { pointInPolygon } from '../base/geometry/point-in-polygon.ts'
import { signedArea } from '../base/geometry/polygon-area.ts'
import type { Steps } from '../base/steps.ts'

/** Rings inside one another beyond this are no drawing. */
export const deepestRings = 64

/** Boxes and coordinates that are looked at between two turns: about a millisecond. */
const slice = 1 << 16

/** Rings as runs of points: ring i has the points from[i] .. to[i] - 1, the first not repeated. */
export interface Rings {
  readonly x: Float64Array
  readonly y: Float64Array
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
  const { x, y, from, to } = rings
  const point = Int32Array.from(x.keys())
  let looked = 0
  const boxes: Box[] = []
  const area = new Float64Array(count)
  for (let ring = 0; ring < count; ring += 1) {
    boxes.push(box(rings, ring))
    area[ring] = signedArea(x, y, point, from[ring], to[ring])
    looked += to[ring] - from[ring]
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
      looked += to[other] - from[other]
      if (pointInPolygon(inside[0], inside[1], x, y, point, from[other], to[other]) !== 1) continue
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

function box({ x, y, from, to }: Rings, ring: number): Box {
  let [left, low, right, high] = [Infinity, Infinity, -Infinity, -Infinity]
  for (let i = from[ring]; i < to[ring]; i += 1) {
    left = Math.min(left, x[i])
    right = Math.max(right, x[i])
    low = Math.min(low, y[i])
    high = Math.max(high, y[i])
  }
  return [left, low, right, high]
}

const within = (inner: Box, outer: Box): boolean =>
  inner[0] >= outer[0] && inner[1] >= outer[1] && inner[2] <= outer[2] && inner[3] <= outer[3]

/** A point inside: the middle of the first piece inside of a level line that passes through no corner. */
function pointInside({ x, y, from, to }: Rings, ring: number): readonly [number, number] {
  const levels = y.slice(from[ring], to[ring]).sort()
  let widest = 0
  let level = levels[0]
  for (let i = 1; i < levels.length; i += 1) {
    if (levels[i] - levels[i - 1] <= widest) continue
    widest = levels[i] - levels[i - 1]
    level = (levels[i] + levels[i - 1]) / 2
  }
  const cuts: number[] = []
  for (let i = from[ring], j = to[ring] - 1; i < to[ring]; j = i, i += 1) {
    if (y[i] > level !== y[j] > level) cuts.push(x[i] + ((level - y[i]) / (y[j] - y[i])) * (x[j] - x[i]))
  }
  cuts.sort((a, b) => a - b)
  return cuts.length < 2 ? [x[from[ring]], y[from[ring]]] : [(cuts[0] + cuts[1]) / 2, level]
}
