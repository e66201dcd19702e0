/**
 * No ponding: no node, and no nodes at one level that hang together along edges, lie lower than or level with all their
 * neighbours inside the roof; water on them has somewhere to go. At the rim it runs off.
 *
 * That is no convex condition. At each roof every pond gets an outlet, and the node of the pond there is held above it by a
 * fall of one in a thousand; outlets once chosen are kept. The outlet is a neighbour that is fewer edges from the rim, of
 * these the one towards which the pond rises least: so no two ponds drain into each other.
 */
import { clashHeight } from '../../base/geometry/tolerance.ts'
import { ok, type Result } from '../../base/result.ts'
import type { Plan } from '../../plan/plan.ts'
import type { NoPondingCondition } from '../../plan/project/condition.ts'
import type { BentRows } from './bent.ts'
import { nodesOfPanels, panelsAt } from './places.ts'
import type { Site } from './site.ts'

/** Fall from a node to its outlet: one in a thousand, the least that is set out. Our own choice. */
export const leastRun = 1e-3

export interface Pond {
  /** Nodes at one level, ascending. */
  readonly nodes: readonly number[]
  /** Edge to the outlet. */
  readonly from: number
  readonly to: number
  /** How much higher that neighbour is per length. */
  readonly rise: number
}

export function noPondingRows(site: Site, { at }: NoPondingCondition): Result<{ nodes: Int32Array; bent: BentRows }> {
  const panels = panelsAt(site.plan, at)
  if (!panels.ok) return panels
  const nodes = nodesOfPanels(site.plan, panels.value)
  const bent: BentRows = {
    at(heights, _hint, _keep, gather) {
      for (const { from, to } of ponds(site.plan, heights, nodes)) gather([to, from], [1, -1], -leastRun * lengthOf(site.plan, from, to))
    },
    misses(heights) {
      let worst: Pond | null = null
      for (const pond of ponds(site.plan, heights, nodes)) if (worst === null || pond.rise > worst.rise) worst = pond
      return worst === null ? null : { panel: -1, node: worst.from, by: worst.rise }
    },
  }
  return ok({ nodes, bent })
}

/** The ponds that have a node of the list in them. */
export function ponds(plan: Plan, heights: Float64Array, among: Int32Array): Pond[] {
  const asked = new Uint8Array(plan.nodeCount)
  for (const node of among) asked[node] = 1
  const neighbours = neighboursOf(plan)
  const away = edgesFromRim(plan, neighbours)
  const seen = new Uint8Array(plan.nodeCount)
  const found: Pond[] = []
  for (let first = 0; first < plan.nodeCount; first += 1) {
    if (seen[first] === 1) continue
    seen[first] = 1
    const group = [first]
    let drains = false
    let best: Pond | null = null
    for (let k = 0; k < group.length; k += 1) {
      const node = group[k]
      if (plan.rimPasses[node] > 0) drains = true
      for (const other of neighbours[node]) {
        const up = heights[other] - heights[node]
        if (Math.abs(up) <= clashHeight) {
          if (seen[other] === 0) {
            seen[other] = 1
            group.push(other)
          }
        } else if (up < 0) drains = true
        else if (away[other] < away[node]) {
          const rise = up / lengthOf(plan, node, other)
          if (best === null || rise < best.rise) best = { nodes: group, from: node, to: other, rise }
        }
      }
    }
    if (!drains && best !== null && group.some((node) => asked[node] === 1)) found.push({ ...best, nodes: [...group].sort((a, b) => a - b) })
  }
  return found
}

function neighboursOf(plan: Plan): number[][] {
  const neighbours: number[][] = Array.from({ length: plan.nodeCount }, () => [])
  for (let half = 0; half < plan.origin.length; half += 1) neighbours[plan.origin[half]].push(plan.origin[half ^ 1])
  return neighbours
}

/** Fewest edges from each node to a rim. */
function edgesFromRim(plan: Plan, neighbours: readonly number[][]): Int32Array {
  const away = new Int32Array(plan.nodeCount).fill(-1)
  const queue = [...plan.rimPasses.keys()].filter((node) => plan.rimPasses[node] > 0)
  for (const node of queue) away[node] = 0
  for (let k = 0; k < queue.length; k += 1) {
    for (const other of neighbours[queue[k]]) {
      if (away[other] >= 0) continue
      away[other] = away[queue[k]] + 1
      queue.push(other)
    }
  }
  return away
}

const lengthOf = ({ work }: Plan, a: number, b: number): number => Math.hypot(work[2 * b] - work[2 * a], work[2 * b + 1] - work[2 * a + 1])
