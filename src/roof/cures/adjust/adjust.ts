/**
 * Adjusting: the smallest change of a plan that lets it lift to the asked roof. Minimise
 *     sum |p - p0|^2 + w sum m (z - t)^2     subject to all panels flat, the conditions met, the rise held,
 * over node positions p and heights z together (p0 the plan as drawn, t the target, m node areas, working measure).
 *
 * How it is walked to: `walk.ts`. The form of the problem: Tang, Sun, Gomes, Wallner, Pottmann, "Form-finding with polyhedral
 * meshes made simple" (2014).
 *
 * Without the held rise a flat roof is a solution, and one that small w finds. With it, "least shift" alone is still ill
 * posed (one corner panel folded off costs next to nothing), so w is kept.
 */
import { conversion } from '../../../base/length.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { Elimination } from '../../conditions/eliminate.ts'
import { baysBlock, baysKept } from './bays.ts'
import { bounds, type BoundKind, type BoundOptions } from './bounds.ts'
import { flatnessBlock, unflatness } from './flatness.ts'
import { tiedBlock } from './held.ts'
import { mobility, type MobilityKeeps } from './mobility.ts'
import type { State } from './rows.ts'
import { distanceBlock, heldDistances } from './shapes.ts'
import { straightBlock, straightPasses } from './straight.ts'
import { mirrorBlock, mirrored } from './symmetry.ts'
import { settled, Walk, type Ending } from './walk.ts'

/** What the plan has to keep while it is adjusted. */
export interface PlanKeeps extends BoundOptions, MobilityKeeps {
  /** Whether straight joint runs stay straight. */
  readonly straight: boolean
  /** Whether bays that are equal as drawn stay equal. */
  readonly bays: boolean
  /** Whether what is symmetric as drawn stays symmetric. */
  readonly symmetry: boolean
  /** Panels that keep their shape in the plan. */
  readonly shapes: readonly number[]
}

export interface AdjustQuestion {
  readonly plan: Plan
  /** Heights to come near to, in spans; they keep the conditions (length nodeCount). */
  readonly target: Float64Array
  /** Weights of the rise row: target less its tilt, times the node areas. null: the rise is not held. */
  readonly riseWeight: Float64Array | null
  /** The conditions on heights, solved. */
  readonly elimination: Elimination
  readonly areas: Float64Array
  /** w: what a height costs against a shift of the same size, squared. */
  readonly shapeWeight: number
  readonly keeps: PlanKeeps
  /** Relative change of the plan at which the iteration ends; default `settled`. */
  readonly settle?: number
  /**
   * In spans: end as soon as a step shows that some node has to move several times as far. The first step tells the size of
   * what is to come within a fifth (measured), so a plan that is out of tolerance costs one factor. null: go on.
   */
  readonly farBeyond?: number | null
}

export interface Adjustment {
  /** Positions and heights, working measure. */
  readonly state: State
  readonly ended: Ending
  readonly iterations: number
  /** Largest |N^T z| of a panel, in spans. */
  readonly unflat: number
  readonly fixedCount: number
  readonly slidingCount: number
  readonly straightCount: number
  /** Nodes kept in the middle of their neighbours, mirror lines kept, panels that kept their shape. */
  readonly bayCount: number
  readonly mirrorCount: number
  readonly shapeCount: number
  /** Bounds that hold at the end, by kind: how many, and the first corners or edges in question as nodes. */
  readonly active: readonly { readonly kind: BoundKind; readonly nodes: readonly number[] }[]
  /** Bounds that it passes: the plan may not be given out. */
  readonly broken: readonly { readonly kind: BoundKind; readonly nodes: readonly number[] }[]
}

/** What is within this of equal, or of symmetric, was meant so: what drawings are exact to (our own choice, as the plan tolerance is). */
const keptWithin_mm = 1

export function* adjusted(question: AdjustQuestion): Steps<Adjustment> {
  const { plan, target, elimination, areas, shapeWeight, keeps } = question
  const mobile = mobility(plan, keeps, elimination, areas, shapeWeight)
  const mayMove = (node: number): boolean => mobile.xx[node] + mobile.yy[node] > 0
  const all = bounds(plan, keeps)
  const passes = keeps.straight ? straightPasses(plan) : new Int32Array(0)
  const withinPlan = (keptWithin_mm * conversion('mm', plan.unit)) / plan.frame.span
  const bays = keeps.bays ? yield* baysKept(plan, withinPlan, mayMove) : null
  const mirrors = keeps.symmetry ? yield* mirrored(plan, keptWithin_mm, mayMove) : null
  const fixedBlocks = [
    flatnessBlock(plan), straightBlock(plan, passes), tiedBlock(plan, elimination),
    ...(bays === null ? [] : [baysBlock(plan, bays)]), ...(mirrors === null ? [] : [mirrorBlock(plan, mirrors)]),
    ...(keeps.shapes.length === 0 ? [] : [distanceBlock(plan, heldDistances(plan, keeps.shapes, mayMove))]),
  ]
  const anchor: State = { work: plan.work, heights: target }
  const rise = question.riseWeight
  const run = new Walk(plan, anchor, rise, mobile, all, fixedBlocks, shapeWeight, areas, mirrors?.home ?? null)
  const ended = yield* run.settle(question.settle ?? settled, question.farBeyond ?? null)
  if (ended !== 'far') yield* run.polish()
  const named = (bound: number): Adjustment['active'][number] => ({ kind: all.kindOf(bound), nodes: all.nodesOf(bound) })
  return {
    state: run.state, ended, iterations: run.iterations, unflat: unflatness(plan, run.state.work, run.state.heights).largest,
    fixedCount: mobile.fixedCount, slidingCount: mobile.slidingCount, straightCount: passes.length / 3,
    bayCount: (bays?.along.length ?? 0) / 2, mirrorCount: mirrors?.lines.length ?? 0, shapeCount: keeps.shapes.length,
    active: run.active.map(named),
    broken: Array.from({ length: all.count }, (_, bound) => bound).filter((bound) => all.broken(bound, run.state.work)).map(named),
  }
}
