/** How far heights are off others. */

/** The node that is farthest off, and by how much; NaN in `target`: nothing asked there. */
export function farthestOff(heights: Float64Array, target: Float64Array): { node: number; by: number } {
  let node = -1
  let by = 0
  for (let i = 0; i < heights.length; i += 1) {
    const off = Math.abs(heights[i] - target[i])
    if (off > by || (node < 0 && !Number.isNaN(off))) {
      node = i
      by = off
    }
  }
  return { node, by }
}
