/**
 * The lift nearest to a wish in area-weighted least squares, under the conditions: minimise (h - t)^T M (h - t) over
 * h = h0 + T y with Q h = 0, M = diag of the node areas.
 *
 * First a roof that meets the conditions at all (`roofUnderConditions`),
 * then conjugate gradients inside the lifts with the projection as constraint preconditioner (Gould, Hribar, Nocedal, SIAM
 * J. Sci. Comput. 23 (2001)): at most dim(lifts) steps, in practice few, since node areas differ little.
 * Tried and dropped: a factor of Q - tau M (area in the shift): a second factor, and its count is wrong on graded plans.
 */
import { dot } from '../../base/dot.ts'
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

/**
 * Heights under the conditions, as flat as they can be, near the wish (length nodeCount): one proximal step
 * K y = -T^T Q h0 - tau T^T (t - h0), then what is left unflat is taken out, a factor tau / lambda a step (3e-4 at 100,000
 * panels).
 */
export function* roofUnderConditions(space: LiftSpace, wish: Float64Array): Steps<Float64Array> {
  const { elimination, plan, bases } = space
  const h0 = elimination.particular
  const force = reduce(elimination, applyForm(plan, bases, h0))
  const pull = reduce(elimination, wish.map((height, i) => height - h0[i]))
  const y = solve(space.factor, force.map((value, u) => -value - tau * pull[u]))
  const h = expand(elimination, y)
  return yield* broughtFlat(space, h.map((height, i) => height + h0[i]), 3)
}

/** The same roof with what is unflat in it taken out `steps` times. */
export function* broughtFlat(space: LiftSpace, heights: Float64Array, steps: number): Steps<Float64Array> {
  let h = heights
  for (let step = 0; step < steps; step += 1) {
    yield { stage: 'Raising', done: step / (2 * steps) }
    const unflat = unflatPart(space, h)
    if (unflat !== null) h = h.map((height, i) => height - unflat[i])
  }
  return h
}

/**
 * What is unflat in the heights; null where it is lost among the lifts' own residuals. U = T K^-1 T^T Q gives back what is not
 * a lift (to 1 + tau / lambda), and of a lift x / (x - 1) with x = lambda / tau: nothing where the plan is exact, but a fifth
 * at x = 0.18, which a plan with coordinates to 10 um has. Applied again the former stays and the latter shrinks.
 */
function unflatPart(space: LiftSpace, heights: Float64Array): Float64Array | null {
  let part = unflat(space, heights)
  for (let pass = 0; pass < mostPasses; pass += 1) {
    const again = unflat(space, part)
    let change = 0, size = 0
    for (let i = 0; i < part.length; i += 1) {
      change = Math.max(change, Math.abs(again[i] - part[i]))
      size = Math.max(size, Math.abs(again[i]))
    }
    part = again
    if (change <= settledShare * size) return part
  }
  return null
}

const unflat = (space: LiftSpace, heights: Float64Array): Float64Array =>
  expand(space.elimination, solve(space.factor, reduce(space.elimination, applyForm(space.plan, space.bases, heights))))

const mostPasses = 4
const settledShare = 1e-2

/**
 * From a roof that meets the conditions to the one nearest to the wish and to the soft conditions (`zeroSoft`: their values
 * taken as 0). With no freedom it is the roof given.
 */
export function* nearestLift(space: LiftSpace, roof: Float64Array, metric: Metric, wish: Float64Array, zeroSoft: boolean): Steps<Float64Array> {
  if (space.dimension === 0) return roof
  const n = roof.length
  const pull = metric.pull(wish, zeroSoft)
  // The nearest in plain least squares is a good start: areas differ little.
  const begin = projected(space, wish.map((height, i) => height - roof[i]))
  const h = roof.map((height, i) => height + begin[i])
  const kept = metric.apply(h)
  let residual = kept.map((value, i) => pull[i] - value)
  let g = projected(space, residual)
  const direction = g.slice()
  let size = dot(residual, g)
  const whole = dot(h, kept)
  const most = Math.min(2 * space.dimension + 10, mostSteps)
  for (let step = 0; step < most && size > nearestShare ** 2 * whole && isProjection(g, size); step += 1) {
    yield { stage: 'Raising', done: 0.5 + (0.5 * step) / most }
    const turned = metric.apply(direction)
    const curvature = dot(direction, turned)
    if (!(curvature > 0)) break
    const length = dot(residual, direction) / curvature
    const before = residual
    residual = before.map((value, i) => value - length * turned[i])
    for (let i = 0; i < n; i += 1) h[i] += length * direction[i]
    g = projected(space, residual)
    // Polak and Ribiere's share: the projection is good to 1e-3 only, and this form forgives it.
    const share = (dot(residual, g) - dot(before, g)) / size
    size = dot(residual, g)
    for (let i = 0; i < n; i += 1) direction[i] = g[i] + share * direction[i]
  }
  return yield* broughtFlat(space, h, 1)
}

/**
 * Whether g is the projection of the residual r, `along` = r.g: then r.g = g.g, or less where rounded coordinates make lifts
 * of a projection larger than they are. Where only rounding is left, g stands on what is not a lift, r.g is large beside g.g,
 * and a step would leave the lifts.
 */
function isProjection(g: Float64Array, along: number): boolean {
  return along > 0 && along < 2 * dot(g, g)
}

/** Node areas of a plan with panels of 1:1000 need some hundred steps; usual plans take under twenty. */
const mostSteps = 400

