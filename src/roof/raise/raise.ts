/**
 * The main job: from a plan, its conditions and a wish to the verdict and the roof. Working heights h = (z - datum) / span
 * throughout; whoever asks turns them into the plan's unit.
 */
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import type { ConditionRows } from '../conditions/condition-rows.ts'
import { dualWalk } from '../stress/dual-walk.ts'
import type { FreeRim } from '../stress/free-rim.ts'
import { stressOfGradients } from '../stress/forces.ts'
import type { LiftSpace } from '../stress/lift-space.ts'
import { panelPlanes, squaredResidual } from '../stress/panel-bases.ts'
import type { FoundClash } from './clash.ts'
import { choiceWithin, keptBy, prices, type Price, type Unmet } from './inequalities.ts'
import { integrate } from './integrate.ts'
import { broughtFlat } from './nearest.ts'
import { nearRoof } from './near-roof.ts'
import { outerRimNodes, riseOf, type RiseRule } from './rise.ts'
import { shapeHeights, type Shape } from './shapes.ts'
import { heldLevel } from './held-level.ts'
import { metricOf } from './soft.ts'
import { sumsToZero, type UnderConditions } from './under-conditions.ts'

export interface RaiseQuestion {
  readonly rows: ConditionRows
  readonly names: readonly string[]
  readonly shape: Shape
  /** Heights to come near to (length nodeCount, no gaps); null: the shape is the wish. */
  readonly target: Float64Array | null
  /** Asked rise; null: the default (a tenth of the shorter side, or the target's own). */
  readonly rise: number | null
  readonly rule: RiseRule
  /** A pitch for the whole roof was asked: one plane is then the answer, and no joint need fold. */
  readonly pitched: boolean
  /** Says whether all panels of these heights are flat within the tolerance. */
  readonly within: (heights: Float64Array) => boolean
}

export interface RaisedRoof {
  readonly heights: Float64Array
  readonly gradient: Float64Array
  readonly stress: Float64Array
  readonly closingError: number
  /** RMS |N^T h| over the flatness conditions, over RMS (h - mean). */
  readonly residual: number
  /** False: the near roof of a plan that has no exact one under the conditions. */
  readonly exact: boolean
  /** RMS distance, area-weighted, from the wish. */
  readonly heightError: number
}

export interface Raised {
  readonly under: UnderConditions
  readonly clashes: readonly FoundClash[]
  readonly verdict: 'lifts' | 'lifts in part' | 'lifts within tolerance' | 'does not lift'
  /** Rise that was gone for, null: none. */
  readonly riseAsked: number | null
  readonly roof: RaisedRoof | null
  readonly notices: readonly string[]
  /** Hard conditions that the roof misses: no roof near the wish was found that keeps them. */
  readonly unmet: readonly Unmet[]
  /** What hard conditions that are at their bounds cost, the dearest first. */
  readonly prices: readonly Price[]
}

/** `known`: the space of an earlier answer about the same plan, see `underConditions`. */
export function* raised(plan: Plan, free: FreeRim, areas: Float64Array, question: RaiseQuestion, known: LiftSpace | null = null): Steps<Raised> {
  const { rows, rule } = question
  const { wish, rise, level } = wishOf(plan, question)
  const metric = metricOf(areas, rows.soft)
  const { under, sides, clashes } = yield* keptBy(plan, free, areas, rows, question.names, wish, metric, known)

  const folding = plan.jointCount - ones(under.frozen)
  const lifts = under.start !== null && (folding === plan.jointCount || question.pitched)
  if (under.start !== null && (lifts || folding > 0)) {
    const ground = {
      space: under.space, tilts: under.tilts, areas, metric, sides, rim: outerRimNodes(plan),
      scaleFree: under.scaleFree && sides === null && rows.soft.value.every((value) => value === 0), shiftFree: under.shiftFree && (sides === null || sumsToZero(sides.rows)),
    }
    const asked = { heights: wish, level, rise, rule, settle: question.target === null }
    const within = yield* choiceWithin(ground, under.start, asked, rows)
    const { choice, unmet } = within
    const made = {
      under, clashes, riseAsked: rise, unmet, roof: yield* exactRoof(plan, free, under, choice.heights, wish, areas),
      notices: choice.notice === null ? [] : [choice.notice],
    }
    if (unmet.length > 0) return { ...made, verdict: 'does not lift', prices: [] }
    return { ...made, verdict: lifts ? 'lifts' : 'lifts in part', prices: yield* prices(ground, under.start, asked, within, (heights) => riseOf(heights, ground.rim, rule)) }
  }
  // Rows that contradict each other leave nothing to come near to.
  if (under.rowClashes.length > 0) return { under, clashes, verdict: 'does not lift', riseAsked: rise, roof: null, notices: [], unmet: [], prices: [] }
  const near = yield* nearRoof(under.space, wish, areas, question.within)
  return {
    under, clashes, verdict: near.within ? 'lifts within tolerance' : 'does not lift', riseAsked: rise,
    roof: roofOf(plan, free, near.heights, wish, areas, false, null), notices: [], unmet: [], prices: [],
  }
}

/** Heights to come near to, the level that they stand at, and the rise to reach. */
export function wishOf(plan: Plan, question: RaiseQuestion): { wish: Float64Array; level: number; rise: number | null } {
  if (question.pitched) return { wish: new Float64Array(plan.nodeCount), level: 0, rise: null }
  if (question.target !== null) return { wish: question.target, level: 0, rise: question.rise }
  const { heights, shorterSide } = shapeHeights(plan, question.shape)
  const rise = question.rise ?? shorterSide / 10
  const amplitude = question.rule.down ? -rise : rise
  const shape = heights.slice()
  for (let i = 0; i < shape.length; i += 1) shape[i] *= amplitude
  const level = heldLevel(plan, question.rows, shape, question.rule)
  if (level !== 0) for (let i = 0; i < shape.length; i += 1) shape[i] += level
  return { wish: shape, level, rise }
}

/**
 * The chosen heights' stresses, integrated across the dual edges: the roof that is handed over. The error of a long walk
 * (1e-9 of the rise at 100,000 panels) is reported as the closing error and then taken out again; held nodes are held to
 * the last digit.
 */
function* exactRoof(plan: Plan, free: FreeRim, under: UnderConditions, heights: Float64Array, wish: Float64Array, areas: Float64Array): Steps<RaisedRoof> {
  const { gradient, level } = panelPlanes(plan, free.bases, heights)
  const stress = stressOfGradients(plan, gradient)
  const walk = dualWalk(plan)
  const rootPlane = new Float64Array(3 * plan.partCount)
  walk.root.forEach((panel, part) => {
    rootPlane[3 * part] = gradient[2 * panel]
    rootPlane[3 * part + 1] = gradient[2 * panel + 1]
    rootPlane[3 * part + 2] = level[panel] - gradient[2 * panel] * free.bases.middle[2 * panel] - gradient[2 * panel + 1] * free.bases.middle[2 * panel + 1]
  })
  yield { stage: 'Raising', done: 0.6 }
  const integrated = integrate(plan, stress, walk, rootPlane)
  yield { stage: 'Raising', done: 0.7 }
  const { start, particular } = under.space.elimination
  for (let node = 0; node < plan.nodeCount; node += 1) if (start[node] === start[node + 1]) integrated.heights[node] = particular[node]
  const flat = yield* broughtFlat(under.space, integrated.heights, 1)
  yield { stage: 'Raising', done: 0.9 }
  return roofOf(plan, free, flat, wish, areas, true, integrated.closingError)
}

/** Figures of heights that are taken as they are; planes are the panels' least-squares planes. `closing`: null, theirs is looked for. */
function roofOf(plan: Plan, free: FreeRim, heights: Float64Array, wish: Float64Array, areas: Float64Array, exact: boolean, closing: number | null): RaisedRoof {
  const { gradient, level } = panelPlanes(plan, free.bases, heights)
  const closingError = closing ?? disagreement(plan, free.bases.middle, gradient, level)
  let weight = 0, distance = 0
  for (let i = 0; i < plan.nodeCount; i += 1) {
    weight += areas[i]
    distance += areas[i] * (heights[i] - wish[i]) ** 2
  }
  return {
    heights, gradient, stress: stressOfGradients(plan, gradient), closingError,
    residual: residualShare(plan, free, heights), exact, heightError: Math.sqrt(distance / weight),
  }
}

/** The largest difference of the heights that the panels' planes give a node. */
function disagreement(plan: Plan, middle: Float64Array, gradient: Float64Array, level: Float64Array): number {
  const low = new Float64Array(plan.nodeCount).fill(Infinity)
  const high = new Float64Array(plan.nodeCount).fill(-Infinity)
  for (let p = 0; p < plan.panelCount; p += 1) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const node = plan.corner[c]
      const z = level[p] + gradient[2 * p] * (plan.work[2 * node] - middle[2 * p]) + gradient[2 * p + 1] * (plan.work[2 * node + 1] - middle[2 * p + 1])
      if (z < low[node]) low[node] = z
      if (z > high[node]) high[node] = z
    }
  }
  let most = 0
  for (let i = 0; i < plan.nodeCount; i += 1) most = Math.max(most, high[i] - low[i])
  return most
}

function residualShare(plan: Plan, free: FreeRim, heights: Float64Array): number {
  const conditions = plan.corner.length - 3 * plan.panelCount
  let mean = 0, spread = 0
  for (let i = 0; i < heights.length; i += 1) mean += heights[i] / heights.length
  for (let i = 0; i < heights.length; i += 1) spread += (heights[i] - mean) ** 2
  if (conditions === 0 || spread === 0) return 0
  return Math.sqrt(squaredResidual(plan, free.bases, heights) / conditions / (spread / heights.length))
}

function ones(flags: Uint8Array): number {
  let sum = 0
  for (let i = 0; i < flags.length; i += 1) sum += flags[i]
  return sum
}
