/** The region that a point lies in. */
import { pointInPolygon } from '../../base/geometry/point-in-polygon.ts'
import type { Cycles } from './trace-cycles.ts'
import type { Regions } from './trace-regions.ts'

/** The innermost region with the point inside; -1 when it lies outside all or on a line. */
export function regionAt({ x, y }: { x: Float64Array; y: Float64Array }, cycles: Cycles, { cycle }: Regions, px: number, py: number): number {
  let best = -1
  for (let r = 0; r < cycle.length; r += 1) {
    const from = cycles.start[cycle[r]], to = cycles.start[cycle[r] + 1]
    if (best >= 0 && cycles.area[cycle[r]] >= cycles.area[cycle[best]]) continue
    let left = true, right = true, below = true, above = true
    for (let k = from; k < to; k += 1) {
      const node = cycles.node[k]
      if (x[node] <= px) left = false
      if (x[node] >= px) right = false
      if (y[node] <= py) below = false
      if (y[node] >= py) above = false
    }
    if (left || right || below || above) continue
    const side = pointInPolygon(px, py, x, y, cycles.node, from, to)
    if (side === 0) return -1
    if (side > 0) best = r
  }
  return best
}
