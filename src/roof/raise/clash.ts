/**
 * Which conditions contradict each other: an irreducible set, found by leaving conditions out in shrinking blocks and
 * keeping them out while the rest still clash (delta debugging, Zeller and Hildebrandt 2002). Not always the smallest set:
 * none of its members can be spared.
 */
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import type { SoftRows } from '../conditions/condition-rows.ts'
import { rowCount, type Rows } from '../conditions/rows.ts'
import type { FreeRim } from '../stress/free-rim.ts'
import { nearestLift } from './nearest.ts'
import { metricOf } from './soft.ts'
import { feasibleRoof } from './under-conditions.ts'

export interface FoundClash {
  readonly conditions: readonly string[]
  /** Largest miss of a row, in span units, in the exact roof that comes nearest to meeting them all. */
  readonly misfit: number
}

/** More trials than this would hold up the answer; the set found so far is then named as it is. */
const mostTrials = 60

/** The clash among hard rows that no roof meets. */
export function* clashOf(plan: Plan, free: FreeRim, hard: Rows, names: readonly string[], areas: Float64Array): Steps<FoundClash> {
  const zero = new Float64Array(plan.nodeCount)
  let kept = [...new Set(hard.condition)].sort((a, b) => a - b)
  let trials = 0
  for (let block = Math.ceil(kept.length / 2); block >= 1 && kept.length > 1; block = block > 1 ? Math.ceil(block / 2) : 0) {
    for (let from = 0; from < kept.length && kept.length > 1 && trials < mostTrials; ) {
      yield { stage: 'Looking for the clash', done: trials / mostTrials }
      const rest = kept.filter((_, k) => k < from || k >= from + block)
      trials += 1
      const clashes = rest.length > 0 && (yield* feasibleRoof(plan, free, rowsOf(hard, new Set(rest)), names, zero, areas)).start === null
      if (clashes) kept = rest
      else from += block
    }
  }
  const members = rowsOf(hard, new Set(kept))
  return { conditions: kept.map((index) => names[index]), misfit: yield* misfitOf(plan, free, members) }
}

/** Rows of the conditions in the set. */
function rowsOf(rows: Rows, conditions: ReadonlySet<number>): Rows {
  const start = [0]
  const node: number[] = [], weight: number[] = [], value: number[] = [], condition: number[] = []
  for (let r = 0; r < rowCount(rows); r += 1) {
    if (!conditions.has(rows.condition[r])) continue
    for (let k = rows.start[r]; k < rows.start[r + 1]; k += 1) {
      node.push(rows.node[k])
      weight.push(rows.weight[k])
    }
    start.push(node.length)
    value.push(rows.value[r])
    condition.push(rows.condition[r])
  }
  return {
    start: Int32Array.from(start), node: Int32Array.from(node), weight: Float64Array.from(weight),
    value: Float64Array.from(value), condition: Int32Array.from(condition),
  }
}

/** Largest miss of the rows in the roof that meets them best in least squares, panels exactly flat. */
function* misfitOf(plan: Plan, free: FreeRim, rows: Rows): Steps<number> {
  // Heights themselves weigh next to nothing, so the rows alone decide.
  const almostNothing = new Float64Array(plan.nodeCount).fill(1e-9)
  const soft: SoftRows = { ...rows, softWeight: new Float64Array(rowCount(rows)).fill(1) }
  const metric = metricOf(almostNothing, soft)
  const zero = new Float64Array(plan.nodeCount)
  const roof = yield* nearestLift(free.space, zero, metric, zero, false)
  let worst = 0
  for (let r = 0; r < rowCount(rows); r += 1) {
    let value = -rows.value[r]
    for (let k = rows.start[r]; k < rows.start[r + 1]; k += 1) value += rows.weight[k] * roof[rows.node[k]]
    worst = Math.max(worst, Math.abs(value))
  }
  return worst
}
