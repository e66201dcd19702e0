/**
 * Whether overlapping outlines merely lie one inside another (a perimeter round its panels) or cut across each other.
 * Taken from the largest to the smallest, each outline must lie inside one and the same outline throughout.
 */
import type { ClosedOutlines } from './outlines-closed.ts'
import type { Cycles } from './trace-cycles.ts'
import type { Graph } from './trace-graph.ts'
import type { Nested } from './trace-nesting.ts'
import { regionsInside, regionsOf } from './trace-regions.ts'

/** Two outlines that cut across each other and a node of the second; null when none do. */
export function outlinesCross(
  graph: Graph, cycles: Cycles, nested: Nested, outlines: ClosedOutlines, panels: readonly number[],
): readonly [one: number, other: number, node: number] | null {
  const regions = regionsOf(cycles, nested)
  const innermost = new Int32Array(regions.cycle.length).fill(-1)
  const bySize = [...panels].sort((i, j) => outlines.area[j] - outlines.area[i] || i - j)
  for (const i of bySize) {
    const chain = outlines.half.subarray(outlines.start[i], outlines.start[i + 1])
    const inside = regionsInside(regions, chain)
    for (const region of inside) {
      if (innermost[region] !== innermost[inside[0]]) {
        return [Math.max(innermost[region], innermost[inside[0]]), i, graph.origin[cycles.half[cycles.start[regions.cycle[region]]]]]
      }
    }
    for (const region of inside) innermost[region] = i
  }
  return null
}
