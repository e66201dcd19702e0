/** Heights that the drawing gives, per node of the plan. */
import { heightsAgree_mm } from '../../base/geometry/tolerance.ts'
import { counted, inMillimetres } from '../lines/words.ts'

export interface NodeHeights {
  /** In the plan's unit; NaN where none is given or where those given contradict each other; null when none is given. */
  readonly heights: Float64Array | null
  readonly notices: readonly string[]
}

/**
 * A node's height is the mean of those of its points; where they lie farther apart than `heightsAgree_mm` it has none.
 * `nodeOf` gives each point's node (-1: none), `z` each point's height in the plan's unit.
 */
export function heightsOfNodes(nodeCount: number, nodeOf: Int32Array, z: (point: number) => number, hasHeight: Uint8Array, mmPerUnit: number): NodeHeights {
  const low = new Float64Array(nodeCount).fill(Infinity)
  const high = new Float64Array(nodeCount).fill(-Infinity)
  const sum = new Float64Array(nodeCount)
  const times = new Int32Array(nodeCount)
  let any = false
  for (let i = 0; i < nodeOf.length; i += 1) {
    const node = nodeOf[i]
    if (node < 0 || hasHeight[i] === 0) continue
    const height = z(i)
    if (!Number.isFinite(height)) continue
    any = true
    if (height < low[node]) low[node] = height
    if (height > high[node]) high[node] = height
    sum[node] += height
    times[node] += 1
  }
  if (!any) return { heights: null, notices: [] }
  let contradictions = 0
  let widest = 0
  const heights = new Float64Array(nodeCount)
  for (let node = 0; node < nodeCount; node += 1) {
    const range = high[node] - low[node]
    // A height that all points agree on is kept to the last digit.
    heights[node] = times[node] === 0 ? NaN : range === 0 ? low[node] : sum[node] / times[node]
    if (range * mmPerUnit > heightsAgree_mm) {
      heights[node] = NaN
      contradictions += 1
      widest = Math.max(widest, range * mmPerUnit)
    }
  }
  const notices = contradictions === 0 ? [] : [
    `${counted(contradictions, 'node has', 'nodes have')} heights in the file that differ by up to ${inMillimetres(widest)}; ${contradictions === 1 ? 'it counts' : 'they count'} as having none.`,
  ]
  return { heights, notices }
}
