/**
 * The cure "move nodes": refuse what cannot be, choose what to come near to, adjust, and look at what came out. Working
 * measure throughout: lengths and heights in spans, heights from the datum.
 */
import type { Steps } from '../../../base/steps.ts'
import { nodeName } from '../../../plan/names.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { Condition } from '../../../plan/project/condition.ts'
import type { ConditionRows } from '../../conditions/condition-rows.ts'
import { rowCount } from '../../conditions/rows.ts'
import { nearRoof } from '../../raise/near-roof.ts'
import { wishOf, type RaiseQuestion } from '../../raise/raise.ts'
import type { UnderConditions } from '../../raise/under-conditions.ts'
import { lessTilt } from '../../stress/tilt-part.ts'
import { adjusted, type Adjustment, type PlanKeeps } from '../adjust/adjust.ts'
import { straightShare } from './one-sign.ts'
import { levelRefusal, oneSignRefusal, type Refusal } from './refusal.ts'
import { coordinatesOf, movedPlan } from './moved-plan.ts'

export interface MoveQuestion {
  readonly plan: Plan
  readonly rows: ConditionRows
  readonly conditions: readonly Condition[]
  readonly under: Pick<UnderConditions, 'space' | 'rowClashes'>
  readonly areas: Float64Array
  readonly wish: Pick<RaiseQuestion, 'shape' | 'target' | 'rise' | 'rule' | 'pitched' | 'rows' | 'names' | 'within'>
  readonly keeps: PlanKeeps
  /** In spans: whether any node would have to move much further is all that is asked; null: the plan itself is. */
  readonly farBeyond?: number | null
}

export type MoveOutcome =
  | { readonly kind: 'moved'; readonly moved: Moved }
  | { readonly kind: 'refused'; readonly refusal: Refusal }
  | { readonly kind: 'failed'; readonly code: string; readonly message: string; readonly cure: string }

export interface Moved {
  readonly plan: Plan
  readonly adjustment: Adjustment
  readonly target: Float64Array
  /** RMS distance from the target, area-weighted, in spans, and the target's highest less its lowest node. */
  readonly heightError: number
  readonly targetRange: number
  /** Nodes that stayed because a condition knows them by their place. */
  readonly placed: number
}

/** The roof asked for is missed when heights differ from it by more than this share of its range, RMS. */
export const heightShare = 0.05

/** A near roof that keeps less than this of the wish (cosine of the angle between them) is another roof. */
const keptShape = 0.8

/**
 * w, in squares: what a height costs against a shift. A target's heights give way before the plan does; a starting shape only
 * says what kind of roof is meant (at 0.1 its heights drew the nodes of 10,000 cells 14 mm along, at 1e-4 less than 1 mm).
 * Raised a hundredfold where the roof is lost.
 */
const targetWeight = 0.1
const shapeOnlyWeight = 1e-4
const mostTries = 3

/** Panels have to be this flat, in spans. */
const flatBelow = 1e-9

export function* movedNodes(question: MoveQuestion): Steps<MoveOutcome> {
  const { plan, rows, under, areas, wish } = question
  if (under.rowClashes.length > 0) {
    return failed('conditions-clash', `${under.rowClashes[0].conditions.map((name) => `"${name}"`).join(' and ')} contradict each other`, 'release one of them')
  }
  const level = levelRefusal(plan, rows)
  if (level !== null) return { kind: 'refused', refusal: level }
  if (wish.target !== null) {
    const sign = oneSignRefusal(plan, wish.target)
    if (sign !== null) return { kind: 'refused', refusal: sign }
  }
  const target = yield* targetFor(question)
  const riseWeight = lessTilt(plan, target, areas).map((height, n) => areas[n] * height)
  const placed = nodesKnownByPlace(plan, rows, question.conditions)
  const keeps = { ...question.keeps, fixed: [...new Set([...question.keeps.fixed, ...placed])].sort((a, b) => a - b) }
  const range = spread(target)
  let last: MoveOutcome | null = null
  for (let attempt = 0, shapeWeight = wish.target === null ? shapeOnlyWeight : targetWeight; attempt < mostTries; attempt += 1, shapeWeight *= 100) {
    const adjustment = yield* adjusted({ plan, target, riseWeight, elimination: under.space.elimination, areas, shapeWeight, keeps, farBeyond: question.farBeyond ?? null })
    if (adjustment.ended === 'far') return failed('too-far', 'nodes would have to move further than the plan tolerance', 'adjust the plan')
    let outcome = outcomeOf(question, adjustment, target, range, placed.length)
    if (outcome.kind === 'failed') outcome = withCurvature(plan, target, outcome)
    if (outcome.kind !== 'failed' || outcome.code !== 'another-roof') return outcome
    last = outcome
  }
  return last ?? failed('not-found', 'no plan was found', 'ask for less')
}

function outcomeOf({ plan, areas }: MoveQuestion, adjustment: Adjustment, target: Float64Array, range: number, placed: number): MoveOutcome {
  const { state, unflat } = adjustment
  if (!(unflat <= flatBelow)) {
    const stop = adjustment.active.length === 0 ? '' : `, where corners or edges came to their limit (${limits(adjustment)})`
    return failed('not-found', `no plan near by was found that lifts: the panels stay ${(unflat * plan.frame.span).toPrecision(2)} ${plan.unit} out of flat${stop}`, 'release a condition, let rim nodes move, or divide panels')
  }
  if (adjustment.broken.length > 0) {
    return failed('out-of-bounds', `the nearest plan that lifts ${brokenWords(adjustment)}`, 'allow more, or ask for a roof that is nearer to this plan')
  }
  let weight = 0, distance = 0
  for (let n = 0; n < plan.nodeCount; n += 1) {
    weight += areas[n]
    distance += areas[n] * (state.heights[n] - target[n]) ** 2
  }
  const heightError = Math.sqrt(distance / weight)
  if (!(heightError <= heightShare * range)) {
    const share = ((100 * heightError) / range).toPrecision(2)
    return failed('another-roof', `what lifts near by is another roof: it misses the asked heights by ${share} % of their range (RMS)`, 'ask for a shape that this plan can carry: with three joints at every node a dome or a bowl')
  }
  const { x, y } = coordinatesOf(plan, state.work)
  const made = movedPlan(plan, x, y)
  if (!made.ok) return failed(made.problem.code, made.problem.message, made.problem.cure ?? 'hold more nodes')
  return { kind: 'moved', moved: { plan: made.value, adjustment, target, heightError, targetRange: range, placed } }
}

/** Above this share of straight panels the target's zero curvature is named as the likely cause. */
const mostlyStraight = 0.3

function withCurvature(plan: Plan, target: Float64Array, outcome: Extract<MoveOutcome, { kind: 'failed' }>): MoveOutcome {
  if (straightShare(plan, target) < mostlyStraight) return outcome
  return {
    ...outcome,
    message: `${outcome.message}; the target has zero curvature (it is straight one way), and over panels with three joints at every node that is a limit which domes come near to and never reach`,
    cure: 'give the target a little curvature along its straight way, or use panels with four joints at a node',
  }
}

const failed = (code: string, message: string, cure: string): MoveOutcome => ({ kind: 'failed', code, message, cure })

/** What the plan would break, by kind, the first nodes named. */
function brokenWords({ broken }: Adjustment): string {
  const words = { convex: 'turns corners inside out', sharp: 'makes corners too sharp', edge: 'makes edges too short', shift: 'moves nodes too far' }
  const kinds = (['convex', 'sharp', 'edge', 'shift'] as const).map((kind) => broken.filter((each) => each.kind === kind)).filter((list) => list.length > 0)
  return kinds.map((list) => {
    const names = list.slice(0, 4).map(({ nodes }) => nodeName(nodes[nodes.length === 3 ? 1 : 0]))
    return `${words[list[0].kind]} (${list.length}: at ${names.join(', ')}${list.length > names.length ? ' and more' : ''})`
  }).join(' and ')
}

function limits({ active }: Adjustment): string {
  const names = active.slice(0, 3).map(({ nodes }) => nodes.map(nodeName).join('-'))
  return active.length > 3 ? `${names.join(', ')} and ${active.length - 3} more` : names.join(', ')
}

/**
 * Heights to come near to, under the conditions. A target is taken as it is where it keeps the conditions; a starting shape
 * only says what the roof is like, so the roof of this plan that comes nearest to being flat takes its place, unless that is
 * another roof altogether.
 */
function* targetFor({ plan, rows, under, areas, wish }: MoveQuestion): Steps<Float64Array> {
  const { wish: heights } = wishOf(plan, wish)
  const keeps = largestMiss(rows, heights) <= 1e-6 * spread(heights)
  if (wish.target !== null && keeps) return heights
  const near = (yield* nearRoof(under.space, heights, areas, () => false)).heights
  if (wish.target === null && keeps && kept(plan, near, heights, areas) < keptShape) return heights
  return near
}

function largestMiss({ hard }: ConditionRows, heights: Float64Array): number {
  let most = 0
  for (let r = 0; r < rowCount(hard); r += 1) {
    let sum = -hard.value[r]
    for (let k = hard.start[r]; k < hard.start[r + 1]; k += 1) sum += hard.weight[k] * heights[hard.node[k]]
    most = Math.max(most, Math.abs(sum))
  }
  return most
}

/** Cosine between two roofs less their tilts, weighted by areas. */
function kept(plan: Plan, a: Float64Array, b: Float64Array, areas: Float64Array): number {
  const p = lessTilt(plan, a, areas), q = lessTilt(plan, b, areas)
  let pq = 0, pp = 0, qq = 0
  for (let n = 0; n < p.length; n += 1) {
    pq += areas[n] * p[n] * q[n]
    pp += areas[n] * p[n] * p[n]
    qq += areas[n] * q[n] * q[n]
  }
  return pp > 0 && qq > 0 ? pq / Math.sqrt(pp * qq) : 0
}

/**
 * Nodes of hard conditions that depend on where their nodes lie (a fall along a run, a plane) or find them by a point or a
 * run inside the plan: moved, the condition would be another one. Levels on the rim and on nodes called by name go along.
 */
function nodesKnownByPlace(plan: Plan, rows: ConditionRows, conditions: readonly Condition[]): readonly number[] {
  const nodes = new Set<number>()
  rows.held.forEach(({ kind, soft, nodes: held }, index) => {
    // Folds, slopes and ponds are asked of panels and joints, wherever these go.
    if (soft || kind === 'one-way' || kind === 'slope' || kind === 'no-ponding') return
    const { at } = conditions[index] as { at?: object }
    const isLevel = kind === 'level' || kind === 'equal' || kind === 'bounds'
    const byName = at !== undefined && 'nodes' in at && (at.nodes as readonly unknown[]).every((place) => typeof place === 'string')
    const byRim = at !== undefined && 'rim' in at
    const onRim = at !== undefined && 'run' in at && held.every((node) => plan.rimPasses[node] > 0)
    const byPanels = kind === 'bounds' && at !== undefined && 'panels' in at
    if (isLevel && (byName || byRim || onRim || byPanels)) return
    for (const node of held) nodes.add(node)
  })
  return [...nodes]
}

function spread(values: Float64Array): number {
  let low = Infinity, high = -Infinity
  for (const value of values) {
    low = Math.min(low, value)
    high = Math.max(high, value)
  }
  return high - low
}
