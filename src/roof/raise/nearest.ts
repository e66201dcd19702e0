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
import type { Factor } from '../../base/sparse/factor.ts'
import { solve } from '../../base/sparse/solve.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import { addTo, liftBasis, minus, nearestOfFew } from '../stress/lift-basis.ts'
import { expand, projected, pulledIn, reduce, type LiftSpace } from '../stress/lift-space.ts'
import { applyForm } from '../stress/panel-bases.ts'
import { linearAnswers, together, type LinearAnswers } from './linear-answers.ts'
import type { Metric } from './soft.ts'

/** Plan area that belongs to each node (an equal share of its panels), scaled to mean 1 (length nodeCount). */
export function nodeAreas(plan: Plan): Float64Array {
  const known = areasOf.get(plan) ?? newAreas(plan)
  areasOf.set(plan, known)
  return known
}

const areasOf = new WeakMap<Plan, Float64Array>()

function newAreas(plan: Plan): Float64Array {
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
 * panels). Linear in h0 and t, so a level that is moved costs nothing the third time.
 */
export function* roofUnderConditions(space: LiftSpace, wish: Float64Array): Steps<Float64Array> {
  const n = wish.length
  return yield* answersOf(space, 'conditions', null).to(together(space.elimination.particular, wish), n, (question) => proximal(space, question.subarray(0, n), question.subarray(n)))
}

function* proximal(space: LiftSpace, h0: Float64Array, wish: Float64Array): Steps<Float64Array> {
  const { elimination, plan, bases } = space
  const right = reduce(elimination, applyForm(plan, bases, h0))
  const pull = reduce(elimination, minus(wish, h0))
  for (let u = 0; u < right.length; u += 1) right[u] = -right[u] - tau * pull[u]
  const h = expand(elimination, solve(space.factor, right))
  addTo(h, h0, 1)
  yield { stage: 'Raising', done: 0.1 }
  return yield* broughtFlat(space, h, 3)
}

/** The same roof with what is unflat in it taken out `steps` times, or until a step takes out next to nothing. */
export function* broughtFlat(space: LiftSpace, heights: Float64Array, steps: number): Steps<Float64Array> {
  let h = heights
  for (let step = 0; step < steps; step += 1) {
    yield { stage: 'Raising', done: step / (2 * steps) }
    const unflat = unflatPart(space, h)
    if (unflat === null) continue
    h = minus(h, unflat)
    if (largest(unflat) <= nothingLeft * largest(h)) break
  }
  return h
}

/** A step takes out all but tau / lambda, 3e-4 at most: after one this small the rest is rounding. */
const nothingLeft = 1e-13

function largest(values: Float64Array): number {
  let most = 0
  for (let i = 0; i < values.length; i += 1) most = Math.max(most, Math.abs(values[i]))
  return most
}

/**
 * What is unflat in the heights; null where it is lost among the lifts' own residuals. U = T K^-1 T^T Q gives back what is not
 * a lift (to 1 + tau / lambda), and of a lift x / (x - 1) with x = lambda / tau: nothing where the plan is exact, but a fifth
 * at x = 0.18, which a plan with coordinates to 10 um has. Applied again the former stays and the latter shrinks.
 */
function unflatPart(space: LiftSpace, heights: Float64Array): Float64Array | null {
  let part = unflat(space, heights)
  if (space.probe !== null && space.dimension * space.probe.quotient <= exactLift) return part
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

/** Lifts at or below this share of tau, in all, are exact: of them nothing is taken that counts. */
const exactLift = 1e-10 * tau
const mostPasses = 4
const settledShare = 1e-2

/**
 * From a roof that meets the conditions to the one nearest to the wish and to the soft conditions (`zeroSoft`: their values
 * taken as 0). With no freedom it is the roof given.
 */
export function* nearestLift(space: LiftSpace, roof: Float64Array, metric: Metric, wish: Float64Array, zeroSoft: boolean): Steps<Float64Array> {
  if (space.dimension === 0) return roof
  yield { stage: 'Raising', done: 0.4 }
  const basis = liftBasis(space)
  yield { stage: 'Raising', done: 0.45 }
  if (basis !== null) return nearestOfFew(basis, roof, metric, wish, zeroSoft)
  const { plain } = metric
  if (plain === undefined) return yield* byGradients(space, roof, metric, wish, zeroSoft)
  const n = wish.length
  return yield* answersOf(space, 'nearest', plain).to(together(roof, wish), n, (question) => byGradients(space, question.subarray(0, n), metric, question.subarray(n), zeroSoft))
}

/** The same by conjugate gradients. */
function* byGradients(space: LiftSpace, roof: Float64Array, metric: Metric, wish: Float64Array, zeroSoft: boolean): Steps<Float64Array> {
  const pull = metric.pull(wish, zeroSoft)
  // The nearest in plain least squares is a good start: areas differ little.
  const h = projected(space, minus(wish, roof))
  yield { stage: 'Raising', done: 0.5 }
  addTo(h, roof, 1)
  const kept = metric.apply(h)
  let residual = minus(pull, kept)
  let g = projected(space, residual)
  yield { stage: 'Raising', done: 0.5 }
  const isLean = leavesLittle(space)
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
    residual = before.slice()
    addTo(residual, turned, -length)
    addTo(h, direction, length)
    if (isLean) {
      // K y = r says r - Q y = -tau y = g: what is no lift goes out of the residual, as exactly as Q y holds no lift, and so
      // what one solve leaves of it shrinks with the steps (the residual update of Gould, Hribar and Nocedal).
      g = pulledIn(space, residual)
      addTo(residual, applyForm(space.plan, space.bases, g), 1 / tau)
    } else g = projected(space, residual)
    // Polak and Ribiere's share: the projection is good to 1e-3 only, and this form forgives it.
    const share = (dot(residual, g) - dot(before, g)) / size
    size = dot(residual, g)
    for (let i = 0; i < direction.length; i += 1) direction[i] = g[i] + share * direction[i]
  }
  return yield* broughtFlat(space, h, 1)
}

interface KeptAnswers {
  readonly areas: Float64Array | null
  readonly answers: LinearAnswers
}

/** The last answers off a factor, of each kind; those about other areas are forgotten. */
const lastAnswers = new WeakMap<Factor, Map<'conditions' | 'nearest', KeptAnswers>>()

function answersOf({ factor }: LiftSpace, kind: 'conditions' | 'nearest', areas: Float64Array | null): LinearAnswers {
  const last = lastAnswers.get(factor) ?? new Map<'conditions' | 'nearest', KeptAnswers>()
  lastAnswers.set(factor, last)
  const kept = last.get(kind)
  if (kept !== undefined && kept.areas === areas) return kept.answers
  const answers = linearAnswers()
  last.set(kind, { areas, answers })
  return answers
}

/** Whether one solve leaves so little that is no lift, tau / lambda of the nearest near lift, that one more at the end takes it out. */
const leavesLittle = ({ probe }: LiftSpace): boolean => probe !== null && dot(probe.rest, probe.rest) <= leanShare ** 2 * dot(probe.lift, probe.lift)
const leanShare = 1e-6

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

