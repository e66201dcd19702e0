/** The order of panels traced from lines: in rows from the top left, as one reads. */
import { polygonCentroid } from '../../base/geometry/polygon-area.ts'

/** Polygons as nodes: polygon p is node[start[p] .. start[p + 1]). */
export interface Polygons {
  readonly start: Int32Array
  readonly node: Int32Array
}

/** Centroids this share of a row's height apart are level with each other: above rounding, below what one sees. */
const levelShare = 1e-6

/**
 * The polygons in rows from the top, each row from the left, each polygon from its corner at the top left (the largest
 * y - x). A row holds the polygons whose centroids lie less than half the median polygon height below its highest one;
 * in a row, of centroids one above the other the higher comes first.
 */
export function inRows(x: Float64Array, y: Float64Array, polygons: Polygons): Polygons {
  const count = polygons.start.length - 1
  const centre = new Float64Array(2 * count)
  const heights = new Float64Array(count)
  const out = new Float64Array(2)
  for (let p = 0; p < count; p += 1) {
    polygonCentroid(x, y, polygons.node, polygons.start[p], polygons.start[p + 1], out)
    centre[2 * p] = out[0]
    centre[2 * p + 1] = out[1]
    let low = Infinity, high = -Infinity
    for (let k = polygons.start[p]; k < polygons.start[p + 1]; k += 1) {
      low = Math.min(low, y[polygons.node[k]])
      high = Math.max(high, y[polygons.node[k]])
    }
    heights[p] = high - low
  }
  const median = heights.slice().sort()[count >> 1] ?? 0
  const level = levelShare * median
  const order = Int32Array.from({ length: count }, (_, p) => p).sort((p, q) => centre[2 * q + 1] - centre[2 * p + 1] || p - q)
  for (let from = 0; from < count; ) {
    let to = from + 1
    while (to < count && centre[2 * order[from] + 1] - centre[2 * order[to] + 1] < median / 2) to += 1
    const row = order.subarray(from, to).sort((p, q) => centre[2 * p] - centre[2 * q] || p - q)
    for (let k = 0; k < row.length; ) {
      let end = k + 1
      while (end < row.length && centre[2 * row[end]] - centre[2 * row[end - 1]] <= level) end += 1
      if (end - k > 1) row.subarray(k, end).sort((p, q) => centre[2 * q + 1] - centre[2 * p + 1] || p - q)
      k = end
    }
    from = to
  }

  const start = new Int32Array(count + 1)
  const node = new Int32Array(polygons.node.length)
  for (let p = 0; p < count; p += 1) {
    const from = polygons.start[order[p]]
    const size = polygons.start[order[p] + 1] - from
    let first = 0
    for (let k = 1; k < size; k += 1) {
      const a = polygons.node[from + k], b = polygons.node[from + first]
      const ahead = y[a] - x[a] - (y[b] - x[b])
      if (ahead > level || (ahead >= -level && y[a] > y[b] + level)) first = k
    }
    for (let k = 0; k < size; k += 1) node[start[p] + k] = polygons.node[from + ((first + k) % size)]
    start[p + 1] = start[p] + size
  }
  return { start, node }
}
