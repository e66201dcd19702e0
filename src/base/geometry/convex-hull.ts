/** Convex hull by the monotone chain (A. M. Andrew, "Another efficient algorithm for convex hulls in two dimensions", IPL 9, 1979). */
import { orientation } from './orientation.ts'

/**
 * Indices of the hull's corners, counter-clockwise from the leftmost (then lowest) point; points on a side and repeated
 * points are left out. `points` holds x0 y0 x1 y1 ... One or two indices when all points are one or lie on a line.
 */
export function convexHull(points: Float64Array): Int32Array {
  const count = points.length / 2
  const order = Array.from({ length: count }, (_, i) => i)
  order.sort((a, b) => points[2 * a] - points[2 * b] || points[2 * a + 1] - points[2 * b + 1] || a - b)
  const distinct = order.filter((i, k) => k === 0 || points[2 * i] !== points[2 * order[k - 1]] || points[2 * i + 1] !== points[2 * order[k - 1] + 1])
  if (distinct.length < 3) return Int32Array.from(distinct)
  const lower = chain(points, distinct)
  const upper = chain(points, distinct.reverse())
  return Int32Array.from([...lower.slice(0, -1), ...upper.slice(0, -1)])
}

function chain(points: Float64Array, sorted: readonly number[]): number[] {
  const out: number[] = []
  for (const i of sorted) {
    while (out.length >= 2) {
      const a = out[out.length - 2]
      const b = out[out.length - 1]
      if (orientation(points[2 * a], points[2 * a + 1], points[2 * b], points[2 * b + 1], points[2 * i], points[2 * i + 1]) > 0) break
      out.pop()
    }
    out.push(i)
  }
  return out
}
