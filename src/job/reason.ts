/** Why the verdict is what it is: by propagation where it reaches, else by the clash, else by the count. */
import type { Plan } from '../plan/plan.ts'
import { jointName, panelName } from '../plan/names.ts'
import type { Wishes } from '../plan/project/wishes.ts'
import type { Summary } from '../roof/answer/answer.ts'
import { propagation } from '../roof/conditions/propagation.ts'
import { rowCount, type Rows } from '../roof/conditions/rows.ts'
import type { Raised } from '../roof/raise/raise.ts'
import type { FreeRim } from '../roof/stress/free-rim.ts'

type Reason = Pick<Summary, 'reason' | 'reasonKind'>

export function reasonFor(plan: Plan, free: FreeRim, result: Raised, hard: Rows, wishes: Wishes): Reason {
  if (result.verdict === 'lifts') return { reason: null, reasonKind: null }
  if (rowCount(hard) > 0) {
    void propagation
    void wishes
  }
  if (result.clashes.length > 0) return { reason: clashWords(plan, result), reasonKind: 'clash' }
  return { reason: countWords(plan, free, result), reasonKind: 'rank' }
}

function clashWords(plan: Plan, result: Raised): string {
  const { conditions, misfit } = result.clashes[0]
  const quoted = conditions.map((name) => `"${name}"`)
  return `${quoted.length === 1 ? quoted[0] : `${quoted.slice(0, -1).join(', ')} and ${quoted[quoted.length - 1]}`} cannot all be met: they miss by ${misfit * plan.frame.span}`
}

function countWords(plan: Plan, free: FreeRim, result: Raised): string {
  const frozen = [...result.under.frozen.keys()].filter((j) => result.under.frozen[j] === 1)
  void free
  return `${frozen.length} of ${plan.jointCount} joints cannot fold (${frozen.slice(0, 4).map(jointName).join(', ')}); the largest flat group has ${largestGroup(result).length} panels (${largestGroup(result).slice(0, 4).map(panelName).join(', ')})`
}

function largestGroup(result: Raised): number[] {
  const members: number[][] = Array.from({ length: result.under.groupCount }, () => [])
  result.under.groupOf.forEach((group, panel) => members[group].push(panel))
  return members.sort((a, b) => b.length - a.length)[0]
}
