/**
 * Soft conditions join the wish: a condition of weight w counts, with the mean square of its misfits, w times what the mean
 * square of the distance from the wish counts over the whole plan. So a row of a condition with r rows weighs
 * w * nodeCount / r.
 */
import type { SoftRows } from '../conditions/condition-rows.ts'
import { rowCount } from '../conditions/rows.ts'

/** The metric diag(areas) + sum of soft rows, and the right-hand side that the soft values add. */
export interface Metric {
  /** (M + C^T W C) h (length nodeCount). */
  readonly apply: (heights: Float64Array) => Float64Array
  /** M t + C^T W d for the wish t; `zero` takes the soft values d as 0. */
  readonly pull: (wish: Float64Array, zero: boolean) => Float64Array
  /** The areas where they are all there is to it. */
  readonly plain?: Float64Array
}

/** What each row counts: its condition's weight, shared among the condition's rows; see above. */
export function rowWeights(soft: SoftRows, nodeCount: number): Float64Array {
  const rowsOf = new Map<number, number>()
  for (const condition of soft.condition) rowsOf.set(condition, (rowsOf.get(condition) ?? 0) + 1)
  return soft.softWeight.map((w, r) => (w * nodeCount) / (rowsOf.get(soft.condition[r]) ?? 1))
}

export function metricOf(areas: Float64Array, soft: SoftRows): Metric {
  const weight = rowWeights(soft, areas.length)
  const spread = (out: Float64Array, r: number, amount: number): void => {
    for (let k = soft.start[r]; k < soft.start[r + 1]; k += 1) out[soft.node[k]] += amount * soft.weight[k]
  }
  return {
    ...(rowCount(soft) === 0 ? { plain: areas } : {}),
    apply(heights) {
      const out = heights.slice()
      for (let i = 0; i < out.length; i += 1) out[i] *= areas[i]
      for (let r = 0; r < rowCount(soft); r += 1) {
        let value = 0
        for (let k = soft.start[r]; k < soft.start[r + 1]; k += 1) value += soft.weight[k] * heights[soft.node[k]]
        spread(out, r, weight[r] * value)
      }
      return out
    },
    pull(wish, zero) {
      const out = wish.slice()
      for (let i = 0; i < out.length; i += 1) out[i] *= areas[i]
      if (!zero) for (let r = 0; r < rowCount(soft); r += 1) spread(out, r, weight[r] * soft.value[r])
      return out
    },
  }
}
