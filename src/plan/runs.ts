/** Runs of a plan: edges that go on from node to node without a turn that anybody would draw on purpose. */
import { runSine, turnsByChance, widerTurns } from '../base/geometry/tolerance.ts'
import type { Steps } from '../base/steps.ts'
import type { Plan } from './plan.ts'

/** Run r has the nodes node[start[r] .. start[r + 1]) in order, three or more; a closed ring has no run. */
export interface Runs {
  /** Whether turns gather near 0, as drawn runs make them; in free plans some are near 0 by chance. */
  readonly areMeant: boolean
  readonly start: Int32Array
  readonly node: Int32Array
}

/** Where more edges meet than this no run goes on: a hub has no bars that run through it. */
const mostEdges = 64

/** Nodes between two yields. */
const nodesPerStep = 10_000

/** At every node edges are paired by the smaller turn first, each edge with one other at most. */
export function* runsOf(plan: Plan): Steps<Runs> {
  const { work, origin, edgeCount, nodeCount } = plan
  const { first, leaving } = leavingEdges(plan)
  let within = 0, beyond = 0
  // Half-edge that leaves a node -> the one that leaves it straight on, -1: none.
  const opposite = new Int32Array(origin.length).fill(-1)
  for (let n = 0; n < nodeCount; n += 1) {
    if (n % nodesPerStep === 0) yield { stage: 'Looking for straight runs', done: n / nodeCount }
    if (first[n + 1] - first[n] > mostEdges) continue
    const pairs: { readonly g: number; readonly h: number; readonly turn: number }[] = []
    for (let i = first[n]; i < first[n + 1]; i += 1) {
      for (let j = first[n]; j < i; j += 1) {
        const turn = turnAt(work, origin, leaving[j], leaving[i])
        if (turn <= widerTurns * runSine) pairs.push({ g: leaving[j], h: leaving[i], turn })
      }
    }
    if (pairs.length > 1) pairs.sort((p, q) => p.turn - q.turn || p.g - q.g || p.h - q.h)
    const taken = new Set<number>()
    for (const { g, h, turn } of pairs) {
      if (taken.has(g) || taken.has(h)) continue
      taken.add(g).add(h)
      if (turn > runSine) {
        beyond += 1
        continue
      }
      within += 1
      opposite[g] = h
      opposite[h] = g
    }
  }
  const seen = new Uint8Array(edgeCount)
  const start = [0]
  const node: number[] = []
  for (let h = 0; h < origin.length; h += 1) {
    // Runs begin where nothing goes on behind.
    if (opposite[h] >= 0 || seen[h >> 1] === 1) continue
    const from = node.length
    node.push(origin[h])
    for (let at = h; at >= 0; at = opposite[at ^ 1]) {
      seen[at >> 1] = 1
      node.push(origin[at ^ 1])
    }
    if (node.length - from > 2) start.push(node.length)
    else node.length = from
  }
  return { areMeant: beyond <= turnsByChance * within, start: Int32Array.from(start), node: Int32Array.from(node) }
}

/** Half-edges that leave each node n: leaving[first[n] .. first[n + 1]). */
export function leavingEdges({ origin, nodeCount }: Plan): { readonly first: Int32Array; readonly leaving: Int32Array } {
  const first = new Int32Array(nodeCount + 1)
  for (const node of origin) first[node + 1] += 1
  for (let n = 0; n < nodeCount; n += 1) first[n + 1] += first[n]
  const fill = first.slice(0, nodeCount)
  const leaving = new Int32Array(origin.length)
  for (let h = 0; h < origin.length; h += 1) leaving[fill[origin[h]]++] = h
  return { first, leaving }
}

/** Sine of the turn from arriving against g to leaving along h; infinite for turns of a right angle and more. */
function turnAt(work: Float64Array, origin: Int32Array, g: number, h: number): number {
  const n = origin[g], a = origin[g ^ 1], b = origin[h ^ 1]
  const ux = work[2 * n] - work[2 * a], uy = work[2 * n + 1] - work[2 * a + 1]
  const vx = work[2 * b] - work[2 * n], vy = work[2 * b + 1] - work[2 * n + 1]
  if (ux * vx + uy * vy <= 0) return Infinity
  return Math.abs(ux * vy - uy * vx) / Math.sqrt((ux * ux + uy * uy) * (vx * vx + vy * vy))
}
