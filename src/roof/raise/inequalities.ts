/**
 * What is left under conditions that bound one side: whether any roof keeps them (else which clash), whether they hold some
 * rows at their bounds in every roof, and the roof of choice within them.
 *
 * R is convex: the roofs of its relative interior fold every joint that some roof folds, and R is as free as the equalities
 * leave it, unless the inequalities force equalities (no valleys on a plan whose folds cancel). Those are found by asking for
 * a little to spare everywhere: where that cannot be had, a weighted sum of rows is one number in all roofs, and if it is just
 * what their bounds add up to, each of them is at its bound in every roof, and counts as an equality.
 */
import { clashHeight } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import type { BentMiss } from '../conditions/bent.ts'
import type { ConditionRows, SoftRows } from '../conditions/condition-rows.ts'
import { joined, rowCount, rowList, type Emit } from '../conditions/rows.ts'
import type { FreeRim } from '../stress/free-rim.ts'
import { flatGroups } from '../stress/frozen-joints.ts'
import type { LiftSpace } from '../stress/lift-space.ts'
import { clashOf, sparedClashes, type FoundClash } from './clash.ts'
import { oneSided, valuesOf, type OneSided } from './one-sided.ts'
import { roofOfChoice, type Choice, type Ground, type Wish } from './roof-of-choice.ts'
import type { Metric } from './soft.ts'
import { underConditions, type UnderConditions } from './under-conditions.ts'

export interface Kept {
  readonly under: UnderConditions
  /** null: no condition bounds one side, or no roof is left. */
  readonly sides: OneSided | null
  readonly clashes: readonly FoundClash[]
}

/** To spare, in spans: 10 um of 10 m. What is thinner than this in R is taken for flat. */
const spare = 1e-6

/** Rounds of finding rows that are at their bounds in every roof; each finds all of one contradiction. */
const mostRounds = 20

/** What the hard conditions leave, equalities first and then what bounds one side; or the clash among them. */
export function* keptBy(
  plan: Plan, free: FreeRim, areas: Float64Array, rows: ConditionRows, names: readonly string[], wish: Float64Array, metric: Metric, known: LiftSpace | null,
): Steps<Kept> {
  let hard = rows.hard
  for (let round = 0; ; round += 1) {
    const under = yield* underConditions(plan, free, hard, names, wish, areas, known)
    if (under.rowClashes.length > 0) return { under, sides: null, clashes: yield* sparedClashes(plan, hard, names, under.rowClashes) }
    if (under.start === null) return { under, sides: null, clashes: [yield* clashOf(plan, free, hard, names, areas)] }
    if (rowCount(rows.signed) === 0) return { under, sides: null, clashes: [] }
    const sides = oneSided(under.space, metric, rows.signed)
    const { broken } = yield* sides.held(under.start)
    if (broken.length > 0) return yield* clashAmong(plan, free, areas, joined(hard, rows.signed, broken), names, wish)
    const forced = round < mostRounds ? yield* forcedRows(sides, under.start) : []
    if (forced.length === 0) return { under, sides, clashes: [] }
    hard = joined(hard, rows.signed, forced)
  }
}

/** The broken rows held at their bounds clash like any others, and the near roof comes near to them. */
function* clashAmong(plan: Plan, free: FreeRim, areas: Float64Array, hard: ConditionRows['hard'], names: readonly string[], wish: Float64Array): Steps<Kept> {
  const bound = yield* underConditions(plan, free, hard, names, wish, areas)
  const clashes = bound.rowClashes.length > 0 ? yield* sparedClashes(plan, hard, names, bound.rowClashes) : [yield* clashOf(plan, free, hard, names, areas)]
  const frozen = new Uint8Array(plan.jointCount).fill(1)
  return { under: { ...bound, start: null, freedomLeft: null, frozen, ...flatGroups(plan, frozen) }, sides: null, clashes }
}

/** Hard rows that are at their bounds in every roof; `roof` meets the equalities. */
function* forcedRows(sides: OneSided, roof: Float64Array): Steps<number[]> {
  const { rows } = sides
  const isSoft = new Set(Array.from(rows.condition).filter((_, row) => Number.isFinite(rows.softWeight[row])))
  const { broken, weights } = yield* sides.held(roof, { spare, leaving: (condition) => isSoft.has(condition) })
  if (broken.length === 0) return []
  const values = valuesOf(rows, roof)
  const room = broken.reduce((sum, row, k) => sum + weights[k] * (rows.value[row] - values[row]), 0)
  return room <= clashHeight * weights.reduce((sum, weight) => sum + weight, 0) ? [...broken] : []
}

/** A condition that the roof misses although its rows, as they are at that roof, were asked for. */
export interface Unmet {
  readonly condition: number
  readonly miss: BentMiss
}

export interface ChoiceWithin {
  readonly choice: Choice
  readonly sides: OneSided | null
  /** Hard conditions that no roof near the wish was found to keep; none: all are kept. */
  readonly unmet: readonly Unmet[]
}

/** Roofs after which the rows of slopes and ponds have settled, or do not. */
const mostRoofs = 16

/** Change of the roof, as a share of its range, below which its rows have settled. */
const settledChange = 1e-7

/** The roof of choice, with the rows of slopes and ponds asked again at each roof until they are those of the roof they give. */
export function* choiceWithin(ground: Ground, start: Float64Array, wish: Wish, rows: ConditionRows): Steps<ChoiceWithin> {
  let choice = yield* roofOfChoice(ground, start, wish)
  let sides = ground.sides
  if (rows.bent.length === 0 || missesOf(rows, choice.heights).length === 0) return { choice, sides, unmet: [] }
  const gathered: { nodes: readonly number[]; weights: readonly number[]; value: number; condition: number }[] = []
  let known: { rows: number; lifts: ReadonlyMap<number, Float64Array> } | null = null
  for (let round = 0; round < mostRoofs; round += 1) {
    const list = rowList()
    for (const { nodes, weights, value, condition } of gathered) list.emit(condition)(nodes, weights, value)
    const before = gathered.length
    const fresh = rowList()
    for (const { condition, rows: bent } of rows.bent) {
      const gather: Emit = (nodes, weights, value) => {
        gathered.push({ nodes, weights, value, condition })
        list.emit(condition)(nodes, weights, value)
      }
      bent.at(choice.heights, wish.heights, fresh.emit(condition), gather)
    }
    const all = withSoftness(rows, [rows.signed, list.rows(), fresh.rows()])
    const made: OneSided & { readonly lifts: ReadonlyMap<number, Float64Array> } = oneSided(ground.space, ground.metric, all, known)
    known = { rows: rowCount(rows.signed) + before, lifts: made.lifts }
    const { broken } = yield* made.held(start)
    if (broken.length > 0) return { choice, sides, unmet: missesOf(rows, choice.heights) }
    sides = made
    const last = choice.heights
    choice = yield* roofOfChoice({ ...ground, sides, scaleFree: false }, start, wish)
    const [low, high] = extremes(choice.heights)
    const change = choice.heights.reduce((most, height, i) => Math.max(most, Math.abs(height - last[i])), 0)
    if (missesOf(rows, choice.heights).length === 0 && (change <= settledChange * (high - low) || round >= mostRoofs / 2)) break
  }
  return { choice, sides, unmet: missesOf(rows, choice.heights) }
}

function missesOf(rows: ConditionRows, heights: Float64Array): Unmet[] {
  return rows.bent.flatMap(({ condition, softWeight, rows: bent }) => {
    const miss = Number.isFinite(softWeight) ? null : bent.misses(heights)
    return miss === null ? [] : [{ condition, miss }]
  })
}

/** One list of rows, each with the weight of its condition. */
function withSoftness(rows: ConditionRows, lists: readonly ReturnType<ReturnType<typeof rowList>['rows']>[]): SoftRows {
  const weightOf = new Map<number, number>(rows.bent.map(({ condition, softWeight }) => [condition, softWeight]))
  rows.signed.condition.forEach((condition, row) => weightOf.set(condition, rows.signed.softWeight[row]))
  const all = lists.slice(1).reduce((sum, list) => joined(sum, list, Array.from({ length: rowCount(list) }, (_, row) => row)), lists[0])
  return { ...all, softWeight: Float64Array.from(all.condition, (condition) => weightOf.get(condition) ?? Infinity) }
}

function extremes(heights: Float64Array): [number, number] {
  let low = Infinity, high = -Infinity
  for (const height of heights) {
    low = Math.min(low, height)
    high = Math.max(high, height)
  }
  return [low, high]
}

/** What a condition that is at its bound costs: how the roof of choice would be without it. */
export interface Price {
  readonly condition: number
  /** Node or panel nearest to what binds: the first node of the row that is at its bound. */
  readonly node: number
  /** Rise without the condition less rise with it, in spans. */
  readonly rise: number
  /** Largest move of a node without it, in spans. */
  readonly move: number
}

/** So many conditions at their bounds are priced; each costs another roof of choice. */
const mostPrices = 6

/** A row this near to its bound, in spans, is at it. */
const atBound = 1e-7

/** Moves below this, in spans, are none. */
const unmoved = 1e-6

/** Prices of the hard conditions that hold the roof of choice at a bound, the dearest first. */
export function* prices(ground: Ground, start: Float64Array, wish: Wish, { choice, sides }: ChoiceWithin, riseOf: (heights: Float64Array) => number): Steps<Price[]> {
  if (sides === null) return []
  const values = valuesOf(sides.rows, choice.heights)
  const tight = new Map<number, number>()
  for (let row = 0; row < values.length; row += 1) {
    const condition = sides.rows.condition[row]
    if (Number.isFinite(sides.rows.softWeight[row]) || sides.rows.value[row] - values[row] > atBound || tight.has(condition)) continue
    tight.set(condition, sides.rows.node[sides.rows.start[row]])
  }
  const found: Price[] = []
  for (const [condition, node] of [...tight].slice(0, mostPrices)) {
    const without: OneSided = { rows: sides.rows, held: (heights, options) => sides.held(heights, { ...options, leaving: (other) => other === condition }) }
    const { heights } = yield* roofOfChoice({ ...ground, sides: without, scaleFree: false }, start, wish)
    const move = heights.reduce((most, height, i) => Math.max(most, Math.abs(height - choice.heights[i])), 0)
    if (move > unmoved) found.push({ condition, node, rise: riseOf(heights) - riseOf(choice.heights), move })
  }
  return found.sort((a, b) => b.rise - a.rise || b.move - a.move)
}
