/**
 * Where a starting shape stands when no datum is stated: at the held levels, since a survey's 112 m would else make the roof
 * rise by 78 m from a shape that starts at 0.
 *
 *     two outer-rim nodes or more are held   c = lowest of their levels (highest where the roof hangs), which is the springing
 *     others are                             c = mean of (level - height of the shape) over them, where that is more than the
 *                                            shape's own rise; else 0: the shape reaches them, and bends to them
 *
 * A stated datum is the springing: c = 0 in heights above it. Tried and dropped: the mean over all held nodes, which sinks
 * a dome over a rim that is held level by the height its sides have at the rim; and moving the shape for every held node,
 * so that a node pulled up by hand took the whole roof with it.
 */
import type { Plan } from '../../plan/plan.ts'
import type { ConditionRows } from '../conditions/condition-rows.ts'
import { rowCount, type Rows } from '../conditions/rows.ts'
import { outerRimNodes, type RiseRule } from './rise.ts'

/** The level c, in spans, for a shape of these heights (length nodeCount); 0 where nothing is held. */
export function heldLevel(plan: Plan, { hard, soft }: Pick<ConditionRows, 'hard' | 'soft'>, shape: Float64Array, { down, datum }: RiseRule): number {
  if (datum !== null) return 0
  const levels = levelsOf(hard)
  if (levels.size === 0) for (const [node, level] of levelsOf(soft)) levels.set(node, level)
  if (levels.size === 0) return 0
  const onRim = Array.from(outerRimNodes(plan), (node) => levels.get(node)).filter((level) => level !== undefined)
  if (onRim.length > 1) return onRim.reduce((one, other) => (down ? Math.max(one, other) : Math.min(one, other)))
  let sum = 0
  for (const [node, level] of levels) sum += level - shape[node]
  const misfit = sum / levels.size
  return Math.abs(misfit) > range(shape) ? misfit : 0
}

/** Rows of one node each: w h = v holds its height at v / w. */
function levelsOf(rows: Rows): Map<number, number> {
  const levels = new Map<number, number>()
  for (let r = 0; r < rowCount(rows); r += 1) {
    if (rows.start[r + 1] - rows.start[r] === 1) levels.set(rows.node[rows.start[r]], rows.value[r] / rows.weight[rows.start[r]])
  }
  return levels
}

/** Highest less lowest. */
function range(heights: Float64Array): number {
  let low = Infinity, high = -Infinity
  for (const height of heights) {
    low = Math.min(low, height)
    high = Math.max(high, height)
  }
  return high - low
}
