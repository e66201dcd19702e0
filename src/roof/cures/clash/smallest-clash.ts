/**
 * Why not: the conditions that leave no roof, or no fold, together, none of which can be spared. Where conditions clash the
 * answer has them already. Where roofs are left but no joint folds, conditions are let go in turn as long as nothing folds:
 * by propagation of known planes where that settles it (no factor), else by a factor of what the rest leaves.
 */
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { ConditionRows } from '../../conditions/condition-rows.ts'
import { propagation } from '../../conditions/propagation.ts'
import { rowsOf } from '../../raise/clash.ts'
import { irreducible } from '../../raise/irreducible.ts'
import { underConditions } from '../../raise/under-conditions.ts'
import type { FreeRim } from '../../stress/free-rim.ts'

export interface NoFold {
  /** Conditions by index; none where the plan folds nothing with its rim free either. */
  readonly conditions: readonly number[]
  /** False where the search was ended: some of them might be spared. */
  readonly finished: boolean
}

/** Each trial that propagation does not settle is a factor. */
const mostFactors = 24

/** An irreducible set of hard conditions under which no joint folds; to be asked where none does. */
export function* conditionsThatFlatten(plan: Plan, free: FreeRim, rows: ConditionRows, names: readonly string[], areas: Float64Array): Steps<NoFold> {
  const all = [...new Set(rows.hard.condition)].sort((a, b) => a - b)
  if (free.freedom === 0 || all.length === 0) return { conditions: [], finished: true }
  const zero = new Float64Array(plan.nodeCount)
  let factors = 0
  const { kept, finished } = yield* irreducible(all, function* (subset) {
    const some = rowsOf(rows.hard, new Set(subset))
    const found = propagation(plan, some)
    if (found.forced && found.contradictions.length === 0) return found.panelStep.every((step) => step >= 0) && isOnePlane(plan, found.height)
    if (factors >= mostFactors) return false
    factors += 1
    const under = yield* underConditions(plan, free, some, names, zero, areas)
    return under.start !== null && under.frozen.every((frozen) => frozen === 1)
  }, Infinity)
  return { conditions: kept, finished: finished && factors < mostFactors }
}

/** All heights are known then: whether they lie in one plane, so that nothing folds. */
function isOnePlane({ nodeCount, work }: Plan, height: Float64Array): boolean {
  let [m0, mx, my, xx, xy, yy, h0, hx, hy] = [0, 0, 0, 0, 0, 0, 0, 0, 0]
  for (let n = 0; n < nodeCount; n += 1) {
    const x = work[2 * n], y = work[2 * n + 1], h = height[n]
    m0 += 1; mx += x; my += y; xx += x * x; xy += x * y; yy += y * y; h0 += h; hx += h * x; hy += h * y
  }
  const [cxx, cxy, cyy, chx, chy] = [xx - (mx * mx) / m0, xy - (mx * my) / m0, yy - (my * my) / m0, hx - (h0 * mx) / m0, hy - (h0 * my) / m0]
  const det = cxx * cyy - cxy * cxy
  const gx = (chx * cyy - chy * cxy) / det, gy = (chy * cxx - chx * cxy) / det
  for (let n = 0; n < nodeCount; n += 1) {
    if (Math.abs(height[n] - h0 / m0 - gx * (work[2 * n] - mx / m0) - gy * (work[2 * n + 1] - my / m0)) > flatWithin) return false
  }
  return true
}

/** In spans: heights that propagation agrees on. */
const flatWithin = 1e-8
