/**
 * The cure "move nodes" where conditions bound one side too. The plan is adjusted without them first; rows that its roof
 * passes are met by a lower rise where that alone does it (an envelope over a dome: a hundred nodes held at one level would be
 * another roof), else held at their bounds, and it is adjusted again, until none is passed (an active set that only grows).
 * What depends on the places of nodes (slopes, folds, ponds) is read from the moved plan each time.
 */
import { clashHeight } from '../../../base/geometry/tolerance.ts'
import type { Steps } from '../../../base/steps.ts'
import type { ConditionRows } from '../../conditions/condition-rows.ts'
import { conditionRows } from '../../conditions/condition-rows.ts'
import { eliminate } from '../../conditions/eliminate.ts'
import { joined, rowCount, rowList, type Rows } from '../../conditions/rows.ts'
import { wishOf } from '../../raise/raise.ts'
import { valuesOf } from '../../raise/one-sided.ts'
import { liftSpace } from '../../stress/lift-space.ts'
import { movedNodes, type Moved, type MoveOutcome, type MoveQuestion } from './move-nodes.ts'

/** Rounds of adjusting; each holds what the last one passed. */
const mostRounds = 8

/** A row that is held again is held this much inside its bound, in spans: its weights change as nodes move. */
const inside = 1e-7

/** `datum` in the plan's unit, from which heights count. */
export function* movedWithin(question: MoveQuestion, datum: number): Steps<MoveOutcome> {
  const { plan, rows, conditions, wish } = question
  const isBounded = rowCount(rows.signed) > 0 || rows.bent.length > 0
  const first = yield* movedNodes(question)
  if (!isBounded || first.kind !== 'moved') return first
  const all: Rows[] = []
  const passed = new Set<string>()
  let outcome: MoveOutcome = first
  for (let round = 0; round < mostRounds && outcome.kind === 'moved'; round += 1) {
    const now = rowsOn(outcome.moved, conditions, datum, plan.frame.span)
    if (now === null) return failed
    const { list, heights } = now
    const values = valuesOf(list, heights)
    const over = passedRows(list, values)
    if (over.length === 0) return outcome
    if (round === 0) {
      const lower: MoveOutcome | null = yield* loweredUntilKept(question, datum, { list, values, over })
      if (lower !== null) return lower
    }
    for (const row of over) passed.add(keyOf(list, row))
    all.push(joined(rowList().rows(), { ...list, value: list.value.map((value) => value - inside) }, over))
    const hard = all.reduce((sum, each) => joined(sum, each, Array.from({ length: rowCount(each) }, (_, row) => row)), rows.hard)
    const { elimination, clashes } = eliminate(hard, plan.nodeCount, wish.names)
    if (clashes.length > 0) return { kind: 'failed', code: 'conditions-clash', message: `${[...new Set(clashes[0].conditions)].map((name) => `"${name}"`).join(' and ')} cannot be kept together near the asked shape`, cure: 'release one of them, or ask for another shape' }
    const space = yield* liftSpace(plan, question.under.space.bases, elimination)
    outcome = yield* movedNodes({ ...question, rows: { ...rows, hard }, under: { ...question.under, space } })
  }
  return outcome.kind === 'moved' ? failed : outcome
}

/** Hard rows beyond their bounds. */
const passedRows = (list: ConditionRows['signed'], values: Float64Array): number[] =>
  [...values.keys()].filter((row) => !Number.isFinite(list.softWeight[row]) && values[row] - list.value[row] > clashHeight)

/** Tries of a lower rise: heights follow the rise nearly, so each is nearer than the last. */
const mostTries = 4

/** The plan adjusted to the highest rise at which no row is passed, as near as a few tries come to it; null: a rise does not do it. */
function* loweredUntilKept(question: MoveQuestion, datum: number, first: { list: ConditionRows['signed']; values: Float64Array; over: readonly number[] }): Steps<MoveOutcome | null> {
  const { plan, wish, conditions } = question
  let { list, values, over } = first
  let rise = wishOf(plan, wish).rise ?? 0
  for (let tried = 0; tried < mostTries; tried += 1) {
    const share = lowered(list, values, over)
    if (share === null) return null
    rise *= share * (1 - lowering)
    const outcome = yield* movedNodes({ ...question, wish: { ...wish, rise } })
    const kept = outcome.kind === 'moved' ? rowsOn(outcome.moved, conditions, datum, plan.frame.span) : null
    if (kept === null) return null
    list = kept.list
    values = valuesOf(list, kept.heights)
    over = passedRows(list, values)
    if (over.length === 0) return outcome
  }
  return null
}

/** A little lower than the share says: the roof of a lower rise is not quite the same roof. */
const lowering = 1e-4

/** A lower rise than this share of the asked one is no answer. */
const leastRise = 0.1

/** The share of the heights at which all passed rows are kept, null where a share cannot do it. */
function lowered(list: ConditionRows['signed'], values: Float64Array, over: readonly number[]): number | null {
  const share = over.reduce((least, row) => Math.min(least, (list.value[row] - inside) / values[row]), 1)
  return share >= leastRise && share < 1 ? share : null
}

const failed: MoveOutcome = { kind: 'failed', code: 'bounds-passed', message: 'no plan near by was found whose roof keeps the bounds that were asked', cure: 'release one of them, or ask for less' }

/** The one-sided rows of the moved plan and its heights, both in spans of the plan as drawn. */
function rowsOn(moved: Moved, conditions: MoveQuestion['conditions'], datum: number, span: number): { list: ConditionRows['signed']; heights: Float64Array } | null {
  const rows = conditionRows(moved.plan, conditions, datum)
  if (!rows.ok) return null
  const factor = span / moved.plan.frame.span
  const heights = moved.adjustment.state.heights.map((height) => height * factor)
  const list = rowList()
  const { signed, bent } = rows.value
  for (let row = 0; row < rowCount(signed); row += 1) {
    const [from, to] = [signed.start[row], signed.start[row + 1]]
    list.emit(signed.condition[row])([...signed.node.subarray(from, to)], [...signed.weight.subarray(from, to)], signed.value[row])
  }
  for (const { condition, rows: each } of bent) each.at(heights, moved.target, list.emit(condition), list.emit(condition))
  const made = list.rows()
  const weightOf = new Map(bent.map(({ condition, softWeight }) => [condition, softWeight]))
  signed.condition.forEach((condition, row) => weightOf.set(condition, signed.softWeight[row]))
  const softWeight = Float64Array.from(made.condition, (condition) => weightOf.get(condition) ?? Infinity)
  return { list: { ...made, value: made.value.map((value) => value / factor), softWeight }, heights: moved.adjustment.state.heights }
}

const keyOf = (rows: Rows, row: number): string => `${rows.condition[row]}:${[...rows.node.subarray(rows.start[row], rows.start[row + 1])].sort((a, b) => a - b).join()}`
