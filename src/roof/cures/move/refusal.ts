/** What no movement of nodes can bring, known before any step: as a clause without a full stop, or null. */
import { clashHeight } from '../../../base/geometry/tolerance.ts'
import { panelName } from '../../../plan/names.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { ConditionRows } from '../../conditions/condition-rows.ts'
import { propagation } from '../../conditions/propagation.ts'
import { forcedReason } from '../../conditions/reason.ts'
import { rowCount } from '../../conditions/rows.ts'
import { signClash } from './one-sign.ts'

export interface Refusal {
  readonly code: 'level-whatever-moves' | 'one-sign'
  readonly message: string
  /** Panels that show it. */
  readonly panels: readonly number[]
  /** What would help, as a clause. */
  readonly cure: string
}

/**
 * All panels level by the conditions, panel by panel: three corners at one level make a panel level wherever they lie.
 */
export function levelRefusal(plan: Plan, rows: ConditionRows): Refusal | null {
  if (rowCount(rows.hard) === 0) return null
  const found = propagation(plan, rows.hard)
  if (!found.forced || found.contradictions.length > 0) return null
  const level = found.height[0]
  if (!found.height.every((height) => Math.abs(height - level) <= clashHeight)) return null
  const why = forcedReason(plan, rows.held, found) ?? 'all panels are level'
  return {
    code: 'level-whatever-moves', message: `${why}, wherever the nodes are moved to`,
    panels: [...found.panelStep.keys()].filter((p) => found.panelStep[p] === 1), cure: 'divide panels by diagonals, or release a level',
  }
}

/** A target that curves both ways over panels whose joints all fold one way. Heights in spans. */
export function oneSignRefusal(plan: Plan, target: Float64Array): Refusal | null {
  const found = signClash(plan, target)
  if (found === null) return null
  const [valley, ridge] = found.panels
  const at = `${panelName(valley)} (${place(plan, valley)})`
  const where = valley === ridge
    ? `at ${at} the target curves upwards one way and downwards the other`
    : `the target curves upwards at ${at} and downwards at ${panelName(ridge)}: its curvature changes sign between them`
  return {
    code: 'one-sign', panels: [valley, ridge],
    message: `where three joints meet at every node all joints of a roof fold the same way, so it is a dome or a bowl; ${where}`,
    cure: 'ask for a target of one curvature, or divide panels so that more than three joints meet at nodes',
  }
}

/** The middle of a panel in the plan's unit. */
function place(plan: Plan, panel: number): string {
  let x = 0, y = 0
  const from = plan.panelStart[panel], to = plan.panelStart[panel + 1]
  for (let c = from; c < to; c += 1) {
    x += plan.x[plan.corner[c]] / (to - from)
    y += plan.y[plan.corner[c]] / (to - from)
  }
  return `${Number(x.toFixed(3))}, ${Number(y.toFixed(3))}`
}
