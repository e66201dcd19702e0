/** The first sentence of a report: whether the roof can be had, and how much is left to choose. */
import type { Answer } from '../../roof/answer/answer.ts'
import { counted, degreesWords, flatnessWords, isNothing, lengthWords, windWords } from './figures.ts'

/** One sentence with its full stop; the verdict word follows it elsewhere. */
export function headline(answer: Answer): string {
  const { verdict, plan, roof } = answer.summary
  const panels = plan.panels
  const all = panels === 1 ? 'The one panel' : `All ${panels} panels`
  switch (verdict) {
    case 'lifts':
      if (pitched(answer)) return `${all} can be flat, in one plane${slopeClause(answer)}.`
      return `${all} can be flat; ${leftClause(answer)}${rimClause(answer)}.`
    case 'lifts in part':
      return `${all} can be flat, but ${partClause(answer)}; ${leftClause(answer)}${rimClause(answer)}.`
    case 'lifts within plan tolerance': {
      const shift = answer.summary.planShift
      const largest = shift === undefined ? '' : ` (largest shift ${shift.largest_mm < 0.01 ? 'less than 0.01' : String(Number(shift.largest_mm.toPrecision(2)))} mm)`
      return `${all} can be flat once nodes move within the plan tolerance${largest}.`
    }
    case 'lifts within tolerance': {
      const worst = roof === null ? '' : ` (worst ${flatnessWords(roof.flatnessMax_mm)})`
      return `The ${counted(panels, 'panel')} cannot be exactly flat, but the nearest roof keeps every panel within the tolerance${worst}.`
    }
    case 'does not lift':
      return `The roof cannot be raised with flat panels${becauseClause(answer)}.`
  }
}

const hardConditions = (answer: Answer): number => answer.conditions.filter(({ soft }) => !soft).length

/** Asked for by pitch and bearing: the inclined plane is the answer. */
const pitched = (answer: Answer): boolean => answer.conditions.some(({ kind, name, soft }) => kind === 'plane' && name === 'pitch' && !soft)

function slopeClause({ roof }: Answer): string {
  if (roof === null) return ''
  const [gx, gy] = [roof.gradient[0], roof.gradient[1]]
  const slope = (Math.atan(Math.hypot(gx, gy)) * 180) / Math.PI
  if (slope < 0.05) return ' that is level'
  return ` at ${degreesWords(slope)} falling ${windWords((Math.atan2(-gx, -gy) * 180) / Math.PI)}`
}

/** How many ways are left: with a free rim the freedom counts, under conditions what they leave. */
function leftClause(answer: Answer): string {
  const { freedom, freedomLeft } = answer.summary.stress
  const held = hardConditions(answer) > 0
  const left = held ? (freedomLeft ?? 0) : freedom
  const under = held ? ' under the conditions' : ''
  if (left > 0) return `${counted(left, 'independent adjustment')} left${under}`
  return held ? 'there is exactly one such roof under the conditions' : 'nothing is left to adjust but its tilt'
}

function rimClause(answer: Answer): string {
  const { plan, roof } = answer.summary
  if (roof === null) return ''
  const level = isNothing(roof.rimVariation, plan.unit)
  const by = lengthWords(roof.rimVariation, plan.unit, 2)
  if (hardConditions(answer) === 0) return level ? '; with the rim free it stays level' : `; with the rim free it varies by ${by}`
  return level ? '; the rim is level' : `; the rim varies by ${by}`
}

/** Which panels always share a plane. */
function partClause({ summary, flatGroup }: Answer): string {
  const { plan, held } = summary
  const sizes = new Map<number, number>()
  for (const group of flatGroup) sizes.set(group, (sizes.get(group) ?? 0) + 1)
  const largest = Math.max(0, ...sizes.values())
  const folding = plan.joints - held.frozenJoints
  return `only ${folding} of ${counted(plan.joints, 'joint')} can fold: they make ${counted(held.flatGroups, 'plane')}, the largest of ${counted(largest, 'panel')}`
}

function becauseClause({ summary }: Answer): string {
  if (summary.reason !== null) return `: ${summary.reason.replace(/\.$/, '')}`
  return summary.stress.freedomLeft === null ? ': the conditions clash' : ': no joint can fold'
}
