/** Closed outlines along the edges of the arrangement, tidied: spurs without width dropped, turned counter-clockwise. */
import { signedArea } from '../../base/geometry/polygon-area.ts'
import type { Arrangement } from './arrangement.ts'
import type { Loops } from '../drawing.ts'

export interface ClosedOutlines {
  /** Half-edges of outline i, counter-clockwise: half[start[i] .. start[i + 1]); none when it has collapsed. */
  readonly start: Int32Array
  readonly half: Int32Array
  /** Area enclosed, 0 for collapsed ones. */
  readonly area: Float64Array
  /** Node that outline i passes more than once, -1 when it passes none twice. */
  readonly twice: Int32Array
}

/** `firstLine`: index of the arrangement's line that is the first side of the first loop. */
export function closedOutlines({ a, b, x, y, chainStart, chain }: Arrangement, loops: Loops, firstLine: number): ClosedOutlines {
  const count = loops.start.length - 1
  const start = new Int32Array(count + 1)
  const half = new Int32Array(chainStart[firstLine + loops.point.length] - chainStart[firstLine])
  const node = new Int32Array(half.length)
  const area = new Float64Array(count)
  const twice = new Int32Array(count).fill(-1)
  const seenBy = new Int32Array(x.length).fill(-1)
  const origin = (h: number): number => ((h & 1) === 0 ? a[h >> 1] : b[h >> 1])
  for (let i = 0; i < count; i += 1) {
    const from = start[i]
    let to = from
    for (let k = chainStart[firstLine + loops.start[i]]; k < chainStart[firstLine + loops.start[i + 1]]; k += 1) {
      if (to > from && half[to - 1] === (chain[k] ^ 1)) to -= 1
      else half[to++] = chain[k]
    }
    let lead = from
    while (to - lead >= 2 && half[lead] === (half[to - 1] ^ 1)) {
      lead += 1
      to -= 1
    }
    if (lead > from) half.copyWithin(from, lead, to)
    to -= lead - from
    for (let k = from; k < to; k += 1) {
      node[k] = origin(half[k])
      if (seenBy[node[k]] === i && twice[i] < 0) twice[i] = node[k]
      seenBy[node[k]] = i
    }
    area[i] = signedArea(x, y, node, from, to)
    if (area[i] < 0) {
      area[i] = -area[i]
      // Reversed, but still from the corner with which the file begins.
      half.subarray(from, to).reverse()
      for (let k = from; k < to; k += 1) half[k] ^= 1
    }
    start[i + 1] = to
  }
  return { start, half: half.slice(0, start[count]), area, twice }
}
