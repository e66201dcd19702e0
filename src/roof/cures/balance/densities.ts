/**
 * Densities to balance a plan with: the same for all edges, by length (the same force in each), or fitted to the plan: those
 * of one sign that come nearest to balancing it where it stands,
 *
 *   minimise   sum over moving nodes |sum_j s_ij d_ij|^2 / (sum_j 1 / |d_ij|)^2 + share * sum (|d| s - 1)^2 / edges,  s >= least
 *
 * the second term being small: where the plan lifts, the first vanishes and the plan comes back. Densities that would turn
 * negative are held at the least, a few rounds of it (an active set that only grows).
 */
import { analyse } from '../../../base/sparse/analyse.ts'
import { cliquePattern } from '../../../base/sparse/cliques.ts'
import { factor, refactor, type Factor } from '../../../base/sparse/factor.ts'
import { dissection } from '../../../base/sparse/order.ts'
import { solve } from '../../../base/sparse/solve.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'
import { bearingEdges, movingNodes } from './balance.ts'

/** Weight of staying near to equal forces: below what a millimetre of shift counts, above the rounding of the squares. */
const equalShare = 1e-10

/** The least force of an edge beside the mean: less, and its panels could slide through each other. */
const leastForce = 0.02

const mostRounds = 12

/** Density of each edge (length edgeCount): 1 on edges that bear stress. */
export function uniformDensities(plan: Plan): Float64Array {
  const density = new Float64Array(plan.edgeCount)
  for (const edge of bearingEdges(plan)) density[edge] = 1
  return density
}

/** One over the length of each edge that bears stress, their mean 1. */
export function lengthDensities(plan: Plan): Float64Array {
  const density = new Float64Array(plan.edgeCount)
  const edges = bearingEdges(plan)
  for (const edge of edges) density[edge] = 1 / edgeLength(plan, edge)
  const mean = edges.reduce((sum, edge) => sum + density[edge], 0) / Math.max(1, edges.length)
  return density.map((value) => value / (mean || 1))
}

export function* fittedDensities(plan: Plan): Steps<Float64Array> {
  const { work, origin } = plan
  const edges = bearingEdges(plan)
  const moving = movingNodes(plan)
  const numberOf = new Int32Array(plan.edgeCount).fill(-1)
  edges.forEach((edge, k) => (numberOf[edge] = k))
  const lengths = Float64Array.from(edges, (edge) => edgeLength(plan, edge))
  // Unknowns are forces f = s |d|. Cliques: the edges at each moving node.
  const at: { edge: number; x: number; y: number }[][] = Array.from({ length: plan.nodeCount }, () => [])
  edges.forEach((edge, k) => {
    const [a, b] = [origin[2 * edge], origin[2 * edge + 1]]
    const [x, y] = [(work[2 * b] - work[2 * a]) / lengths[k], (work[2 * b + 1] - work[2 * a + 1]) / lengths[k]]
    if (moving[a] === 1) at[a].push({ edge: k, x, y })
    if (moving[b] === 1) at[b].push({ edge: k, x: -x, y: -y })
  })
  const stars = at.filter((star) => star.length > 0)
  const start = [0], index: number[] = []
  for (const star of stars) {
    index.push(...star.map(({ edge }) => edge))
    start.push(index.length)
  }
  const cliques = cliquePattern(edges.length, Int32Array.from(start), Int32Array.from(index))
  const middle = Float64Array.from([...edges].flatMap((edge) => [0, 1].map((axis) => (work[2 * origin[2 * edge] + axis] + work[2 * origin[2 * edge + 1] + axis]) / 2)))
  const analysis = analyse(cliques.pattern, yield* dissection(cliques.pattern, middle))
  const held = new Uint8Array(edges.length)
  let factored: Factor | null = null
  let force = new Float64Array(edges.length).fill(1)
  for (let round = 0; round < mostRounds; round += 1) {
    yield { stage: 'Fitting densities', done: round / mostRounds }
    const values = new Float64Array(cliques.pattern.row.length)
    const right = new Float64Array(edges.length)
    let place = 0
    for (const star of stars) {
      const stiff = star.reduce((sum, { edge }) => sum + 1 / lengths[edge], 0) ** -2
      for (let a = 0; a < star.length; a += 1) {
        for (let b = a; b < star.length; b += 1) {
          const [p, q] = [star[a], star[b]]
          const value = stiff * (p.x * q.x + p.y * q.y)
          const slot = cliques.position[place++]
          if (held[p.edge] === 0 && held[q.edge] === 0) values[slot] += value
          else if (held[p.edge] === 0) right[p.edge] -= value * leastForce
          else if (held[q.edge] === 0) right[q.edge] -= value * leastForce
        }
      }
    }
    for (let k = 0; k < edges.length; k += 1) {
      const diagonal = cliques.pattern.start[k]
      values[diagonal] = held[k] === 1 ? 1 : values[diagonal] + equalShare
      right[k] = held[k] === 1 ? leastForce : right[k] + equalShare
    }
    if (factored === null) factored = yield* factor(analysis, values)
    else yield* refactor(factored, values)
    force = solve(factored, right) as Float64Array<ArrayBuffer>
    let isNew = false
    force.forEach((value, k) => {
      if (held[k] === 1 || value >= leastForce) return
      held[k] = 1
      isNew = true
    })
    if (!isNew) break
  }
  const density = new Float64Array(plan.edgeCount)
  edges.forEach((edge, k) => (density[edge] = Math.max(force[k], leastForce) / lengths[k]))
  return density
}

function edgeLength({ origin, work }: Plan, edge: number): number {
  const [a, b] = [origin[2 * edge], origin[2 * edge + 1]]
  return Math.hypot(work[2 * b] - work[2 * a], work[2 * b + 1] - work[2 * a + 1])
}
