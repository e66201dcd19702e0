/**
 * The lift nearest to a wish in area-weighted least squares, under the conditions: minimise (h - t)^T M (h - t) over
 * h = h0 + T y with Q h = 0, M = diag of the node areas.
 *
 * First a roof that meets the conditions at all, by proximal steps on the one factor,
 *     K y <- -T^T Q h0 - tau T^T (t - h0),        error tau / lambda a step;
 * then conjugate gradients inside the lifts with the projection as constraint preconditioner (Gould, Hribar, Nocedal, SIAM
 * J. Sci. Comput. 23 (2001)): at most dim(lifts) steps, in practice few, since node areas differ little.
 * Tried and dropped: a factor of Q - tau M (area in the shift): a second factor, and its count is wrong on graded plans.
 */
import { nearestShare, tau } from '../../base/geometry/tolerance.ts'
import { solve } from '../../base/sparse/solve.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import { expand, projected, reduce, type LiftSpace } from '../stress/lift-space.ts'
import { applyForm } from '../stress/panel-bases.ts'
import type { Metric } from './soft.ts'

/** Plan area that belongs to each node (an equal share of its panels), scaled to mean 1 (length nodeCount). */
export function nodeAreas(plan: Plan): Float64Array {
  const areas = new Float64Array(plan.nodeCount)
  const { panelStart, corner, work } = plan
  for (let p = 0; p < plan.panelCount; p += 1) {
    const from = panelStart[p], to = panelStart[p + 1]
    const x0 = work[2 * corner[from]], y0 = work[2 * corner[from] + 1]
    let twice = 0
    for (let c = from + 1; c + 1 < to; c += 1) {
      const a = corner[c], b = corner[c + 1]
      twice += (work[2 * a] - x0) * (work[2 * b + 1] - y0) - (work[2 * a + 1] - y0) * (work[2 * b] - x0)
    }
    for (let c = from; c < to; c += 1) areas[corner[c]] += twice / (to - from)
  }
  const mean = areas.reduce((sum, area) => sum + area, 0) / plan.nodeCount
  return areas.map((area) => area / mean)
}

/** The heights under the conditions that come nearest to flat panels, and of these those near the wish (length nodeCount). */
export function* roofUnderConditions(space: LiftSpace, wish: Float64Array): Steps<Float64Array> {
  const { elimination, plan, bases } = space
  const h0 = elimination.particular
  const force = reduce(elimination, applyForm(plan, bases, h0))
  let h = wish
  for (let step = 0; step < 4; step += 1) {
    yield { stage: 'Raising', done: step / 8 }
    const pull = reduce(elimination, h.map((value, i) => value - h0[i]))
    const right = force.map((value, u) => -value - tau * pull[u])
    const y = solve(space.factor, right)
    h = expand(elimination, y)
    for (let i = 0; i < h.length; i += 1) h[i] += h0[i]
  }
  return h
}

/**
 * From a roof that meets the conditions to the one nearest to the wish and to the soft conditions; `pull` is the right-hand
 * side M t (see `soft.ts`). With no freedom it is the roof given.
 */
export function* nearestLift(space: LiftSpace, roof: Float64Array, metric: Metric, pull: Float64Array): Steps<Float64Array> {
  if (space.dimension === 0) return roof
  const n = roof.length
  const h = roof.slice()
  const residual = metric.apply(h).map((value, i) => pull[i] - value)
  let g = projected(space, residual)
  const direction = g.slice()
  let size = dot(residual, g)
  const first = dot(pull, projected(space, pull))
  const most = Math.min(space.dimension + 3, mostSteps)
  for (let step = 0; step < most && size > nearestShare ** 2 * first; step += 1) {
    yield { stage: 'Raising', done: 0.5 + (0.5 * step) / most }
    const turned = metric.apply(direction)
    const curvature = dot(direction, turned)
    if (!(curvature > 0)) break
    const length = dot(residual, direction) / curvature
    for (let i = 0; i < n; i += 1) {
      h[i] += length * direction[i]
      residual[i] -= length * turned[i]
    }
    g = projected(space, residual)
    const sizeNow = dot(residual, g)
    const share = sizeNow / size
    for (let i = 0; i < n; i += 1) direction[i] = g[i] + share * direction[i]
    size = sizeNow
  }
  return h
}

/** Node areas of a plan with panels of 1:1000 need some hundred steps; usual plans take under twenty. */
const mostSteps = 400

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0
  for (let i = 0; i < a.length; i += 1) sum += a[i] * b[i]
  return sum
}
