/** The boundary cycles of a planar graph: counter-clockwise ones bound a region from outside, clockwise ones go round a component. */
import { Integers } from '../../base/growing.ts'
import { signedArea } from '../../base/geometry/polygon-area.ts'
import type { Graph } from './trace-graph.ts'

export interface Cycles {
  /** Cycle that each half-edge lies on, -1 for edges taken out. */
  readonly of: Int32Array
  /** Half-edges of cycle c: half[start[c] .. start[c + 1]). */
  readonly start: Int32Array
  readonly half: Int32Array
  /** Nodes of the cycles, in step with `half`: where each half-edge starts. */
  readonly node: Int32Array
  /** Signed area of each cycle. */
  readonly area: Float64Array
}

export function cyclesOf(graph: Graph): Cycles {
  const { next, origin, alive } = graph
  const of = new Int32Array(next.length).fill(-1)
  const half = new Int32Array(next.length)
  const start = new Integers(1 + (next.length >> 3))
  start.push(0)
  let filled = 0
  for (let h = 0; h < next.length; h += 1) {
    if (of[h] >= 0 || alive[h >> 1] === 0) continue
    const cycle = start.length - 1
    let at = h
    do {
      of[at] = cycle
      half[filled++] = at
      at = next[at]
    } while (at !== h)
    start.push(filled)
  }
  const starts = start.view()
  const node = new Int32Array(filled)
  for (let k = 0; k < filled; k += 1) node[k] = origin[half[k]]
  const area = new Float64Array(starts.length - 1)
  for (let c = 0; c < area.length; c += 1) area[c] = signedArea(graph.x, graph.y, node, starts[c], starts[c + 1])
  return { of, start: starts, half: half.subarray(0, filled), node, area }
}
