/** Which conditions contradict each other: an irreducible set, see `irreducible.ts`. */
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import type { SoftRows } from '../conditions/condition-rows.ts'
import { rowCount, type Rows } from '../conditions/rows.ts'
import { eliminate, type RowClash } from '../conditions/eliminate.ts'
import type { FreeRim } from '../stress/free-rim.ts'
import { irreducible } from './irreducible.ts'
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
  const all = [...new Set(hard.condition)].sort((a, b) => a - b)
  const clashes = function* (subset: readonly number[]): Steps<boolean> {
    return (yield* feasibleRoof(plan, free, rowsOf(hard, new Set(subset)), names, zero, areas)).start === null
  }
  const { kept } = yield* irreducible(all, clashes, mostTrials)
  const members = rowsOf(hard, new Set(kept))
  return { conditions: kept.map((index) => names[index]), misfit: yield* misfitOf(plan, free, members) }
}

/**
 * Clashes among the rows themselves, each brought down to conditions of which none can be spared: elimination names all that
 * it combined on the way. No factor is needed, so there is no end of trials.
 */
export function* sparedClashes(plan: Plan, hard: Rows, names: readonly string[], clashes: readonly RowClash[]): Steps<RowClash[]> {
  const found = new Map<string, RowClash>()
  const indexOf = new Map(names.map((name, index) => [name, index]))
  for (const { conditions } of clashes) {
    const contradicts = (subset: readonly number[]): readonly RowClash[] => eliminate(rowsOf(hard, new Set(subset)), plan.nodeCount, names).clashes
    const all = conditions.flatMap((name) => indexOf.get(name) ?? [])
    const { kept } = yield* irreducible(all, function* (subset) {
      yield { stage: 'Looking for the clash', done: 0 }
      return contradicts(subset).length > 0
    }, Infinity)
    const misfit = contradicts(kept).reduce((most, clash) => Math.max(most, clash.misfit), 0)
    const key = kept.join()
    if (!found.has(key)) found.set(key, { conditions: kept.map((index) => names[index]), misfit })
  }
  return [...found.values()]
}

/** Rows of the conditions in the set. */
export function rowsOf(rows: Rows, conditions: ReadonlySet<number>): Rows {
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
