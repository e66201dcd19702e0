/** Takes out of a graph what bounds no region: loose ends, and lines that only link two figures. */
import { cyclesOf, type Cycles } from './trace-cycles.ts'
import type { Graph } from './trace-graph.ts'
import { Places } from './words.ts'

export interface Trimmed {
  readonly cycles: Cycles
  /** One place and the total length for each connected run of lines taken out. */
  readonly loose: Places
  /** Slivers merged with a neighbour, each with its mean width. */
  readonly slivers: Places
}

/**
 * Trims until every edge has two different regions beside it, then removes the longest edge of regions whose mean width
 * (2 area / perimeter) is below `width`, and trims again.
 */
export function trim(graph: Graph, width: number): Trimmed {
  const taken: number[] = []
  let cycles = trimLooseEnds(graph, taken)
  const loose = looseRuns(graph, taken)
  const slivers = new Places()
  // What a merged sliver leaves loose belongs to it and is not counted again.
  while (mergeSlivers(graph, cycles, width, slivers)) cycles = trimLooseEnds(graph, [])
  return { cycles, loose, slivers }
}

function trimLooseEnds(graph: Graph, taken: number[]): Cycles {
  const { origin, alive, degree, next } = graph
  const cut = (edge: number): void => {
    graph.remove(edge)
    taken.push(edge)
  }
  for (let e = 0; e < graph.edgeCount; e += 1) {
    if (alive[e] === 0) continue
    // Walk inwards from a free end as long as nothing else joins.
    for (const side of [0, 1]) {
      let half = 2 * e + side
      while (alive[half >> 1] === 1 && degree[origin[half]] === 1) {
        const onward = next[half]
        cut(half >> 1)
        if (onward === (half ^ 1)) break
        half = onward
      }
    }
  }
  let cycles = cyclesOf(graph)
  let bridges = 0
  for (let e = 0; e < graph.edgeCount; e += 1) {
    if (alive[e] === 1 && cycles.of[2 * e] === cycles.of[2 * e + 1]) {
      cut(e)
      bridges += 1
    }
  }
  if (bridges > 0) cycles = cyclesOf(graph)
  return cycles
}

function mergeSlivers(graph: Graph, cycles: Cycles, width: number, slivers: Places): boolean {
  let merged = false
  for (let c = 0; c < cycles.area.length; c += 1) {
    if (cycles.area[c] < 0) continue
    const from = cycles.start[c], to = cycles.start[c + 1]
    let perimeter = 0, longest = -1, longestLength = -1, whole = true
    for (let k = from; k < to; k += 1) {
      const edge = cycles.half[k] >> 1
      whole &&= graph.alive[edge] === 1
      const length = graph.length(edge)
      perimeter += length
      if (length > longestLength) {
        longest = edge
        longestLength = length
      }
    }
    // A neighbour merged in this sweep may have taken an edge: the next sweep looks again.
    if (!whole || 2 * cycles.area[c] >= width * perimeter) continue
    const a = graph.origin[2 * longest], b = graph.origin[2 * longest + 1]
    slivers.note((graph.x[a] + graph.x[b]) / 2, (graph.y[a] + graph.y[b]) / 2, (2 * cycles.area[c]) / perimeter)
    graph.remove(longest)
    merged = true
  }
  return merged
}

/** Groups the edges taken out by the nodes that nothing else uses any more. */
function looseRuns(graph: Graph, taken: readonly number[]): Places {
  const { x, y, origin, degree } = graph
  const parent = new Map<number, number>()
  const root = (node: number): number => {
    let at = node
    while (parent.get(at) !== undefined && parent.get(at) !== at) at = parent.get(at) ?? at
    return at
  }
  for (const edge of taken) {
    const a = origin[2 * edge], b = origin[2 * edge + 1]
    if (degree[a] === 0 && degree[b] === 0) parent.set(root(a), root(b))
  }
  const run = new Map<number | string, { length: number; at: number }>()
  for (const edge of taken) {
    const a = origin[2 * edge], b = origin[2 * edge + 1]
    const free = degree[a] === 0 ? a : b
    const key = degree[free] === 0 ? root(free) : `edge ${edge}`
    const known = run.get(key)
    if (known === undefined) run.set(key, { length: graph.length(edge), at: free })
    else known.length += graph.length(edge)
  }
  const places = new Places()
  for (const { length, at } of run.values()) places.note(x[at], y[at], length)
  return places
}
