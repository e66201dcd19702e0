/**
 * Which region each figure of a drawing lies in, when its lines are joined to nothing around it: from the leftmost node of
 * every connected component the first line to the left is looked up in the grid.
 */
import { disjointSets } from '../../base/disjoint-sets.ts'
import { bin } from '../../base/geometry/grid-index.ts'
import { orientation } from '../../base/geometry/orientation.ts'
import type { LineIndex } from './cuts.ts'
import type { Cycles } from './trace-cycles.ts'
import type { Graph } from './trace-graph.ts'

export interface Nested {
  /** Per connected component: its outer (clockwise) cycle. */
  readonly outer: Int32Array
  /** The counter-clockwise cycle of another component that holds it, -1 when it lies in the open. */
  readonly within: Int32Array
  /** Its leftmost node. */
  readonly node: Int32Array
}

export function nestedComponents(graph: Graph, cycles: Cycles, index: LineIndex): Nested {
  const component = components(graph)
  const { x, y, origin } = graph
  const leftmostOf = new Int32Array(x.length).fill(-1)
  for (let node = 0; node < x.length; node += 1) {
    if (graph.degree[node] === 0) continue
    const known = leftmostOf[component[node]]
    if (known < 0 || x[node] < x[known] || (x[node] === x[known] && y[node] < y[known])) leftmostOf[component[node]] = node
  }
  const leftmost: [component: number, node: number][] = []
  leftmostOf.forEach((node, id) => { if (node >= 0) leftmost.push([id, node]) })
  const outerOf = new Map<number, number>()
  for (let c = 0; c < cycles.area.length; c += 1) if (!(cycles.area[c] > 0)) outerOf.set(component[cycles.node[cycles.start[c]]], c)

  // From left to right: whatever is hit has been placed before.
  const list = leftmost.sort(([, m], [, n]) => x[m] - x[n] || y[m] - y[n])
  const placed = new Map<number, number>()
  if (list.length > 1) {
    for (const [id, node] of list) {
      const half = firstToTheLeft(graph, index, node)
      const cycle = half < 0 ? -1 : cycles.of[half]
      placed.set(id, cycle < 0 ? -1 : cycles.area[cycle] > 0 ? cycle : (placed.get(component[origin[half]]) ?? -1))
    }
  }
  return {
    outer: Int32Array.from(list, ([id]) => outerOf.get(id) ?? -1),
    within: Int32Array.from(list, ([id]) => placed.get(id) ?? -1),
    node: Int32Array.from(list, ([, node]) => node),
  }
}

/** Whether lines connect everything. */
export function isOneFigure(graph: Graph): boolean {
  const component = components(graph)
  let first = -1
  for (let node = 0; node < component.length; node += 1) {
    if (graph.degree[node] === 0) continue
    if (first >= 0 && component[node] !== first) return false
    first = component[node]
  }
  return true
}

/** A number per node, equal where lines connect them. */
function components({ x, origin, alive, edgeCount }: Graph): Int32Array {
  const sets = disjointSets(x.length)
  for (let e = 0; e < edgeCount; e += 1) if (alive[e] !== 0) sets.join(origin[2 * e], origin[2 * e + 1])
  return Int32Array.from({ length: x.length }, (_, node) => sets.root(node))
}

/** The half-edge, with the node on its left, that a ray from the node to the left meets first; -1 when it meets none. */
function firstToTheLeft({ x, y, origin, alive }: Graph, { grid, edges }: LineIndex, node: number): number {
  const row = bin(grid.rowBorder, y[node])
  let best = -1
  let bestX = -Infinity
  for (let column = bin(grid.columnBorder, x[node]); column >= 0; column -= 1) {
    const cell = row * grid.columns + column
    for (let k = edges.start[cell]; k < edges.start[cell + 1]; k += 1) {
      const e = edges.item[k]
      if (alive[e] === 0) continue
      const p = origin[2 * e], q = origin[2 * e + 1]
      // The lower end counts, the upper one does not, so that a ray through a node meets one side of it.
      if ((y[p] <= y[node]) === (y[q] <= y[node])) continue
      const [low, high] = y[p] < y[q] ? [p, q] : [q, p]
      if (low === node || orientation(x[low], y[low], x[high], y[high], x[node], y[node]) >= 0) continue
      const hitX = x[low] + ((y[node] - y[low]) / (y[high] - y[low])) * (x[high] - x[low])
      const half = origin[2 * e] === high ? 2 * e : 2 * e + 1
      if (best < 0 || (hitX > bestX && half !== best) || (hitX === bestX && isRightOf(x, y, origin, half, best))) {
        best = half
        bestX = hitX
      }
    }
    // Whatever crosses this level farther right has been seen in a column before.
    if (best >= 0 && (column === 0 || bestX >= grid.columnBorder[column - 1])) return best
  }
  return best
}

/** Two downward half-edges that meet the ray in one point: whether the first runs to the right of the second above it. */
function isRightOf(x: Float64Array, y: Float64Array, origin: Int32Array, first: number, second: number): boolean {
  const low = origin[second ^ 1], high = origin[second]
  const top = origin[first]
  return orientation(x[low], y[low], x[high], y[high], x[top], y[top]) < 0
}
