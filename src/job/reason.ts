/** Why the verdict is what it is: by propagation where it reaches, else by the clash, else by the count. */
import { conversion } from '../base/length.ts'
import { jointName, nodeName, panelName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import type { Summary } from '../roof/answer/answer.ts'
import type { ConditionRows } from '../roof/conditions/condition-rows.ts'
import { propagation } from '../roof/conditions/propagation.ts'
import { contradictionReason, forcedReason, words, worstContradiction } from '../roof/conditions/reason.ts'
import { joined, rowCount, rowList, type Rows } from '../roof/conditions/rows.ts'
import type { Raised } from '../roof/raise/raise.ts'
import type { FreeRim } from '../roof/stress/free-rim.ts'
import { byConditions, byPlan } from './why-frozen.ts'

type Reason = Pick<Summary, 'reason' | 'reasonKind'>

/** The reason as a clause without a full stop; null for a plan that lifts. `datum` in the plan's unit. */
export function reasonFor(plan: Plan, free: FreeRim, result: Raised, rows: ConditionRows, datum: number): Reason {
  if (result.verdict === 'lifts') return { reason: null, reasonKind: null }
  const unmet = unmetWords(result, rows)
  if (unmet !== null) return { reason: unmet, reasonKind: 'clash' }
  const unfolding = unfoldingWords(plan, free, result, rows)
  if (unfolding !== null) return { reason: unfolding, reasonKind: 'clash' }
  if (rowCount(rows.hard) + rowCount(rows.signed) > 0) {
    const found = propagation(plan, rows.hard)
    const worst = worstContradiction(found)
    if (worst !== null) return { reason: contradictionReason(plan, rows.held, found, worst, datum), reasonKind: 'clash' }
    if (result.clashes.length > 0) return { reason: clashWords(plan, result), reasonKind: 'clash' }
    const forced = forcedReason(plan, rows.held, found)
    if (forced !== null) return { reason: forced, reasonKind: 'propagation' }
  }
  return { reason: countWords(plan, result), reasonKind: 'rank' }
}

/** Slopes and ponds are no convex conditions: that none was found near the wish is all that is known. */
function unmetWords({ unmet }: Raised, rows: ConditionRows): string | null {
  if (unmet.length === 0) return null
  const places = unmet.map(({ condition, miss }) => `"${rows.held[condition].name}" (missed most at ${miss.panel < 0 ? nodeName(miss.node) : panelName(miss.panel)})`)
  return `no roof near the asked shape was found that keeps ${words(places)}`
}

/** A form force asked of a joint that cannot fold, which says more than the clash that it makes; null: there is none. */
function unfoldingWords(plan: Plan, free: FreeRim, result: Raised, rows: ConditionRows): string | null {
  for (const { conditions } of result.clashes) {
    for (const [index, { name, kind, joints }] of rows.held.entries()) {
      if (kind !== 'form-force' || joints === null || !conditions.includes(name)) continue
      const others = rowsOf(rows.hard, (condition) => condition !== index && conditions.includes(rows.held[condition].name))
      for (const joint of joints) {
        const why = free.frozen[joint] === 1 ? byPlan(plan, free, joint) : byConditions(plan, others, rows, joint)
        if (why !== null) return `"${name}" cannot be met, since ${why.words}`
      }
    }
  }
  return null
}

function rowsOf(rows: Rows, takes: (condition: number) => boolean): Rows {
  return joined(rowList().rows(), rows, Array.from(rows.condition.keys()).filter((row) => takes(rows.condition[row])))
}

function clashWords(plan: Plan, result: Raised): string {
  const { conditions, misfit } = result.clashes[0]
  const mm = misfit * plan.frame.span * conversion(plan.unit, 'mm')
  const figure = mm < 0.01 ? 'less than 0.01 mm' : mm < 10 ? `${mm.toFixed(2)} mm` : `${mm.toFixed(0)} mm`
  const quoted = conditions.map((name) => `"${name}"`)
  if (quoted.length === 1) return `${quoted[0]} cannot be met by any roof of flat panels: the nearest misses it by ${figure}`
  return `${words(quoted)} cannot all be met by flat panels: the nearest roof misses them by ${figure}`
}

function countWords(plan: Plan, result: Raised): string {
  const { frozen, groupOf, groupCount } = result.under
  const stuck = [...frozen.keys()].filter((joint) => frozen[joint] === 1)
  const under = result.under.freedomLeft === null ? '' : rowsHeld(result)
  if (groupCount === 1) return `no stress balances at every node${under}, so all ${plan.jointCount} joints stay unfolded and all ${plan.panelCount} panels share one plane`
  const size = new Int32Array(groupCount)
  for (const group of groupOf) size[group] += 1
  const largest = size.indexOf(size.reduce((most, count) => Math.max(most, count), 0))
  const members = [...groupOf.keys()].filter((panel) => groupOf[panel] === largest).map(panelName)
  const joints = stuck.length === 1 ? `${jointName(stuck[0])} cannot fold` : `${stuck.length} of ${plan.jointCount} joints cannot fold (${words(stuck.map(jointName))})`
  return `${joints}${under}; the largest flat group has ${members.length} panels (${words(members)})`
}

const rowsHeld = (result: Raised): string => (result.under.space.elimination.free.length < result.under.space.plan.nodeCount ? ' under these conditions' : '')
