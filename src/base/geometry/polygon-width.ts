/** How wide a polygon is, for telling strips from panels. */
import { signedArea } from './polygon-area.ts'

/** Mean width of the polygon: 2 A / perimeter, which is the width of a long strip; 0 when all corners are one point. */
export function meanWidth(x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number): number {
  let perimeter = 0
  for (let k = from, before = to - 1; k < to; before = k, k += 1) {
    const dx = x[corner[k]] - x[corner[before]], dy = y[corner[k]] - y[corner[before]]
    perimeter += Math.sqrt(dx * dx + dy * dy)
  }
  return perimeter === 0 ? 0 : (2 * Math.abs(signedArea(x, y, corner, from, to))) / perimeter
}

/**
 * Whether the polygon is a strip: its mean width and the distance of every corner from its long axis (through the corner
 * farthest from the first and the one farthest from that) are below `width`. A bow-tie without net area is none.
 */
export function isStrip(x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number, width: number): boolean {
  if (meanWidth(x, y, corner, from, to) >= width) return false
  const p = farthest(x, y, corner, from, to, corner[from])
  const q = farthest(x, y, corner, from, to, p)
  const ux = x[q] - x[p], uy = y[q] - y[p]
  const length = Math.sqrt(ux * ux + uy * uy)
  for (let k = from; k < to; k += 1) {
    if (Math.abs(ux * (y[corner[k]] - y[p]) - uy * (x[corner[k]] - x[p])) > width * length) return false
  }
  return true
}

function farthest(x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number, point: number): number {
  let best = point
  let bestSquare = 0
  for (let k = from; k < to; k += 1) {
    const square = (x[corner[k]] - x[point]) ** 2 + (y[corner[k]] - y[point]) ** 2
    if (square > bestSquare) {
      best = corner[k]
      bestSquare = square
    }
  }
  return best
}
