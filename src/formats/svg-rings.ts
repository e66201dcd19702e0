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

/**
 * For each ring (x y x y .., the first point not repeated) 1 when it bounds a hole, 0 when it bounds what is filled;
 * null when rings are nested more than `deepestRings` deep.
 */
export function* holes(rings: readonly Float64Array[], evenOdd: boolean): Steps<Uint8Array | null> {
  const out = new Uint8Array(rings.length)
  if (rings.length < 2) return out
  const boxes = rings.map(box)
  // Along the longer side of the whole, so that few boxes lie side by side.
  const whole = boxes.reduce((a, b) => [Math.min(a[0], b[0]), Math.min(a[1], b[1]), Math.max(a[2], b[2]), Math.max(a[3], b[3])])
  const axis = whole[2] - whole[0] >= whole[3] - whole[1] ? 0 : 1
  const order = rings.map((_, i) => i).sort((a, b) => boxes[a][axis] - boxes[b][axis] || boxes[b][axis + 2] - boxes[a][axis + 2] || a - b)
  const area = rings.map(signedArea)
  let active: number[] = []
  let looked = 0
  for (const ring of order) {
    const own = boxes[ring]
    active = active.filter((other) => boxes[other][axis + 2] > own[axis])
    let depth = 0
    let winding = Math.sign(area[ring])
    let inside: readonly [number, number] | null = null
    for (const other of active) {
      looked += 1
      if (looked > slice) {
        looked = 0
        yield { stage: 'Reading', done: 0.5 }
      }
      if (!within(own, boxes[other]) || Math.abs(area[other]) <= Math.abs(area[ring])) continue
      inside ??= pointInside(rings[ring])
      looked += rings[other].length
      if (!contains(rings[other], inside[0], inside[1])) continue
      depth += 1
      winding += Math.sign(area[other])
      if (depth > deepestRings) return null
    }
    active.push(ring)
    out[ring] = (evenOdd ? depth % 2 === 1 : depth > 0 && winding === 0) ? 1 : 0
  }
  return out
}

type Box = readonly [left: number, low: number, right: number, high: number]

function box(ring: Float64Array): Box {
  let [left, low, right, high] = [Infinity, Infinity, -Infinity, -Infinity]
  for (let i = 0; i < ring.length; i += 2) {
    left = Math.min(left, ring[i])
    right = Math.max(right, ring[i])
    low = Math.min(low, ring[i + 1])
    high = Math.max(high, ring[i + 1])
  }
  return [left, low, right, high]
}

const within = (inner: Box, outer: Box): boolean =>
  inner[0] >= outer[0] && inner[1] >= outer[1] && inner[2] <= outer[2] && inner[3] <= outer[3]

/** Half the sum of the cross products, from the first corner so that far coordinates do not cancel; > 0 counter-clockwise. */
function signedArea(ring: Float64Array): number {
  let twice = 0
  for (let i = 2; i + 3 < ring.length; i += 2) {
    twice += (ring[i] - ring[0]) * (ring[i + 3] - ring[1]) - (ring[i + 2] - ring[0]) * (ring[i + 1] - ring[1])
  }
  return twice / 2
}

/** Crossing rule on the ray to the right. */
function contains(ring: Float64Array, x: number, y: number): boolean {
  let odd = false
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    if (ring[i + 1] > y === ring[j + 1] > y) continue
    if (x < ring[i] + ((y - ring[i + 1]) / (ring[j + 1] - ring[i + 1])) * (ring[j] - ring[i])) odd = !odd
  }
  return odd
}

/** A point inside: the middle of the first piece inside of a level line that passes through no corner. */
function pointInside(ring: Float64Array): readonly [number, number] {
  const levels = Array.from({ length: ring.length / 2 }, (_, i) => ring[2 * i + 1]).sort((a, b) => a - b)
  let widest = 0
  let y = ring[1]
  for (let i = 1; i < levels.length; i += 1) {
    if (levels[i] - levels[i - 1] <= widest) continue
    widest = levels[i] - levels[i - 1]
    y = (levels[i] + levels[i - 1]) / 2
  }
  const cuts: number[] = []
  for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
    if (ring[i + 1] > y !== ring[j + 1] > y) cuts.push(ring[i] + ((y - ring[i + 1]) / (ring[j + 1] - ring[i + 1])) * (ring[j] - ring[i]))
  }
  cuts.sort((a, b) => a - b)
  return cuts.length < 2 ? [ring[0], ring[1]] : [(cuts[0] + cuts[1]) / 2, y]
}
