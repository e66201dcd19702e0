/** The straight sides of panes: runs of edges in line are one side, wherever other lines end on them. */
import { Doubles, Integers } from '../../base/growing.ts'
import type { Polygons } from './trace-order.ts'

export interface Sides {
  /** Side s runs from (ax, ay) to (bx, by) with its pane on the left. */
  readonly ax: Float64Array
  readonly ay: Float64Array
  readonly bx: Float64Array
  readonly by: Float64Array
  /** Pane of each side; -1 for edges between bars and what lies outside them. */
  readonly pane: Int32Array
  /** Sides of pane p, in order: start[p] .. start[p + 1). Those of no pane follow. */
  readonly start: Int32Array
}

/**
 * Sides of the panes given as polygons of nodes (counter-clockwise); a node nearer than `within` to the line between its
 * neighbours that stay is no corner. `rest`: pairs of nodes, edges with the outside on their left.
 */
export function sidesOf(x: Float64Array, y: Float64Array, panes: Polygons, rest: readonly number[], within: number): Sides {
  const ends = [new Doubles(), new Doubles(), new Doubles(), new Doubles()] as const
  const pane = new Integers()
  const start = new Int32Array(panes.start.length)
  const add = (a: number, b: number, owner: number): void => {
    ends[0].push(x[a])
    ends[1].push(y[a])
    ends[2].push(x[b])
    ends[3].push(y[b])
    pane.push(owner)
  }
  for (let p = 0; p + 1 < panes.start.length; p += 1) {
    const corners = cornersOf(x, y, panes.node.subarray(panes.start[p], panes.start[p + 1]), within)
    corners.forEach((node, k) => { add(node, corners[(k + 1) % corners.length], p) })
    start[p + 1] = pane.length
  }
  for (let k = 0; k < rest.length; k += 2) add(rest[k], rest[k + 1], -1)
  return { ax: ends[0].view(), ay: ends[1].view(), bx: ends[2].view(), by: ends[3].view(), pane: pane.view(), start }
}

/**
 * Corners of a closed polygon without those in line, by D. Douglas, T. Peucker (Cartographica 10, 1973) on its two halves
 * between the farthest corners; the first of them is the first in the polygon's own order.
 */
function cornersOf(x: Float64Array, y: Float64Array, ring: Int32Array, within: number): number[] {
  const count = ring.length
  const far = (from: number): number => {
    let best = from, bestSquare = -1
    for (let k = 0; k < count; k += 1) {
      const square = (x[ring[k]] - x[ring[from]]) ** 2 + (y[ring[k]] - y[ring[from]]) ** 2
      if (square > bestSquare) {
        best = k
        bestSquare = square
      }
    }
    return best
  }
  const p = far(0)
  const q = far(p)
  const keep = new Uint8Array(count)
  keep[p] = keep[q] = 1
  const spans: [number, number][] = [[Math.min(p, q), Math.max(p, q)], [Math.max(p, q), Math.min(p, q) + count]]
  for (let span = spans.pop(); span !== undefined; span = spans.pop()) {
    const [from, to] = span
    const a = ring[from % count], b = ring[to % count]
    const ux = x[b] - x[a], uy = y[b] - y[a]
    const length = Math.hypot(ux, uy)
    let worst = -1, worstOff = within
    for (let k = from + 1; k < to; k += 1) {
      const node = ring[k % count]
      const vx = x[node] - x[a], vy = y[node] - y[a]
      const share = length === 0 ? 0 : Math.max(0, Math.min(1, (ux * vx + uy * vy) / (length * length)))
      const off = Math.hypot(vx - share * ux, vy - share * uy)
      if (off > worstOff) {
        worst = k
        worstOff = off
      }
    }
    if (worst < 0) continue
    keep[worst % count] = 1
    spans.push([from, worst], [worst, to])
  }
  return Array.from(ring).filter((_, k) => keep[k] === 1)
}
