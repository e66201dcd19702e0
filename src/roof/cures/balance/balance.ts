/**
 * Balancing a plan by force densities: the outer rim stays, every other node i goes where the forces of its edges balance,
 *
 *   sum_j s_ij (p_j - p_i) = 0      (Tutte 1963; the force density method, Schek 1974, in plan)
 *
 * one sparse system for x and y. Voids count as flat faces: their rim edges bear stress and their nodes balance like others.
 * The plan that comes out is in equilibrium by construction, so it lifts, with exactly these stresses. With densities of one
 * sign on a convex rim nothing crosses (Tutte); otherwise panels may turn inside out, which is found and named.
 */
import { orientation } from '../../../base/geometry/orientation.ts'
import { analyse } from '../../../base/sparse/analyse.ts'
import { cliquePattern } from '../../../base/sparse/cliques.ts'
import { factor } from '../../../base/sparse/factor.ts'
import { inertia } from '../../../base/sparse/inertia.ts'
import { dissection } from '../../../base/sparse/order.ts'
import { solve } from '../../../base/sparse/solve.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'

export interface Balanced {
  /** Working coordinates of all nodes, x y x y .. */
  readonly work: Float64Array
  /** Panels that turn inside out or cross themselves, ascending. */
  readonly crossed: Int32Array
}

/** 1 for each node that moves: all but those on outer rims (length nodeCount). */
export function movingNodes(plan: Plan): Uint8Array {
  const moving = new Uint8Array(plan.nodeCount).fill(1)
  for (let loop = 0; loop < plan.rimIsVoid.length; loop += 1) {
    if (plan.rimIsVoid[loop] === 1) continue
    for (let k = plan.rimStart[loop]; k < plan.rimStart[loop + 1]; k += 1) moving[plan.origin[plan.rimHalf[k]]] = 0
  }
  return moving
}

/** Edges that bear stress while balancing: joints and the rims of voids, ascending. */
export function bearingEdges(plan: Plan): Int32Array {
  const edges = new Set<number>(Array.from({ length: plan.jointCount }, (_, joint) => joint))
  for (let loop = 0; loop < plan.rimIsVoid.length; loop += 1) {
    if (plan.rimIsVoid[loop] === 0) continue
    for (let k = plan.rimStart[loop]; k < plan.rimStart[loop + 1]; k += 1) edges.add(plan.rimHalf[k] >> 1)
  }
  return Int32Array.from(edges).sort()
}

/** `density`: of each edge (length edgeCount), 0 where it bears none. null: the densities leave some node without a place. */
export function* balanced(plan: Plan, density: Float64Array): Steps<Balanced | null> {
  const { origin, work, nodeCount } = plan
  const moving = movingNodes(plan)
  const unknown = new Int32Array(nodeCount).fill(-1)
  const nodes: number[] = []
  for (let n = 0; n < nodeCount; n += 1) if (moving[n] === 1) unknown[n] = nodes.push(n) - 1
  const out = work.slice()
  if (nodes.length > 0) {
    const edges = [...bearingEdges(plan)].filter((edge) => density[edge] !== 0)
    const start = [0], index: number[] = []
    for (const edge of edges) {
      for (const node of [origin[2 * edge], origin[2 * edge + 1]]) if (unknown[node] >= 0) index.push(unknown[node])
      start.push(index.length)
    }
    const cliques = cliquePattern(nodes.length, Int32Array.from(start), Int32Array.from(index))
    const values = new Float64Array(cliques.pattern.row.length)
    const right = new Float64Array(2 * nodes.length)
    let at = 0
    edges.forEach((edge, k) => {
      const s = density[edge]
      const size = start[k + 1] - start[k]
      // Of an edge between two moving nodes [s -s; -s s], lower triangle by columns; of one to the rim [s].
      for (const value of size === 2 ? [s, -s, s] : size === 1 ? [s] : []) values[cliques.position[at++]] += value
      const [a, b] = [origin[2 * edge], origin[2 * edge + 1]]
      for (const [from, to] of [[a, b], [b, a]]) {
        if (unknown[from] < 0 || unknown[to] >= 0) continue
        right[unknown[from]] += s * work[2 * to]
        right[nodes.length + unknown[from]] += s * work[2 * to + 1]
      }
    })
    const coordinates = Float64Array.from(nodes.flatMap((n) => [work[2 * n], work[2 * n + 1]]))
    const factored = yield* factor(analyse(cliques.pattern, yield* dissection(cliques.pattern, coordinates)), values)
    if (inertia(factored).zero > 0) return null
    const solved = solve(factored, right, 2)
    if (!solved.every(Number.isFinite)) return null
    nodes.forEach((n, u) => {
      out[2 * n] = solved[u]
      out[2 * n + 1] = solved[nodes.length + u]
    })
  }
  return { work: out, crossed: crossedPanels(plan, out) }
}

/** Panels whose corners turn the wrong way round or whose edges cross each other. A plan without them has no crossings. */
export function crossedPanels(plan: Plan, work: Float64Array): Int32Array {
  const turn = (a: number, b: number, c: number): number => orientation(work[2 * a], work[2 * a + 1], work[2 * b], work[2 * b + 1], work[2 * c], work[2 * c + 1])
  const found: number[] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    const corners = plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1])
    let area = 0
    corners.forEach((a, k) => {
      const b = corners[(k + 1) % corners.length]
      area += work[2 * a] * work[2 * b + 1] - work[2 * a + 1] * work[2 * b]
    })
    if (!(area > 0) || crossesItself(corners, turn)) found.push(p)
  }
  return Int32Array.from(found)
}

function crossesItself(corners: Int32Array, turn: (a: number, b: number, c: number) => number): boolean {
  const k = corners.length
  for (let i = 0; i < k; i += 1) {
    for (let j = i + 2; j < k; j += 1) {
      if (i === 0 && j === k - 1) continue
      const [a, b, c, d] = [corners[i], corners[(i + 1) % k], corners[j], corners[(j + 1) % k]]
      if (turn(a, b, c) * turn(a, b, d) < 0 && turn(c, d, a) * turn(c, d, b) < 0) return true
    }
  }
  return false
}
