/**
 * Rise as the trade measures it, from the springing: highest node less springing, the springing being the lowest node of
 * the outer rim or a stated datum; for a roof that hangs, springing (highest outer-rim node) less lowest node. Never negative.
 */
import type { Plan } from '../../plan/plan.ts'

export interface RiseRule {
  /** Roof hangs down from its rim. */
  readonly down: boolean
  /** Springing in the same measure as the heights; null: taken from the outer rim. */
  readonly datum: number | null
}

/** Nodes on outer rims, each once (ascending); found once a plan, not to be written to. */
export function outerRimNodes(plan: Plan): Int32Array {
  const known = rimOf.get(plan) ?? newRim(plan)
  rimOf.set(plan, known)
  return known
}

const rimOf = new WeakMap<Plan, Int32Array>()

function newRim(plan: Plan): Int32Array {
  const on = new Uint8Array(plan.nodeCount)
  for (let loop = 0; loop < plan.rimIsVoid.length; loop += 1) {
    if (plan.rimIsVoid[loop] === 1) continue
    for (let k = plan.rimStart[loop]; k < plan.rimStart[loop + 1]; k += 1) on[plan.origin[plan.rimHalf[k]]] = 1
  }
  const nodes: number[] = []
  on.forEach((value, node) => {
    if (value === 1) nodes.push(node)
  })
  return Int32Array.from(nodes)
}

/** Rise of the heights; convex in them, so along a line of roofs it has one lowest stretch. */
export function riseOf(heights: Float64Array, rim: Int32Array, rule: RiseRule): number {
  const sign = rule.down ? -1 : 1
  let peak = -Infinity
  for (const height of heights) peak = Math.max(peak, sign * height)
  return Math.max(0, peak - sign * springing(heights, rim, rule))
}

/** Level from which the rise is measured. */
export function springing(heights: Float64Array, rim: Int32Array, rule: RiseRule): number {
  if (rule.datum !== null) return rule.datum
  let level = rule.down ? -Infinity : Infinity
  for (const node of rim) level = rule.down ? Math.max(level, heights[node]) : Math.min(level, heights[node])
  return level
}

/** Highest less lowest node of the outer rim. */
export function rimVariation(heights: Float64Array, rim: Int32Array): number {
  let low = Infinity, high = -Infinity
  for (const node of rim) {
    low = Math.min(low, heights[node])
    high = Math.max(high, heights[node])
  }
  return high - low
}
