/** The question that follows when a cure is applied: another plan, other conditions, the rest as it was. */
import { conversion } from '../base/length.ts'
import { nodeName, indexOfName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import type { KeepsWish } from '../plan/project/keeps-wish.ts'
import { inUnit, type Condition } from '../plan/project/condition.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import { carriedOver, nodesTo } from '../roof/cures/joints/cured-conditions.ts'
import type { ChangedPlan } from '../roof/cures/joints/diagonals-plan.ts'
import type { Checked } from './check.ts'
import type { PlanQuestion } from './question.ts'

/**
 * The question with these conditions (in the plan's unit) in the place of all that brief and options held: what options asked
 * of rim and levels stands in the brief then, so that the brief alone can be kept with the plan.
 */
export function withConditionsOf(question: PlanQuestion, { wishes }: Checked, conditions: readonly Condition[]): PlanQuestion {
  const { brief, request } = question
  const { unit, datum, rise, down, shape, pitch } = wishes
  const off = brief.conditions.filter((condition) => condition.off === true).map((condition) => inUnit(condition, conversion(brief.unit ?? unit, unit)))
  // The condition that --pitch makes is made again by the option, as long as that stands.
  const pitched = pitch !== null && conditions.some(isPitch)
  return {
    ...question,
    brief: { ...brief, unit, datum, rise, down, shape, voids: null, conditions: [...conditions.filter((each) => pitch === null || !isPitch(each)), ...off] },
    request: {
      ...request,
      options: {
        ...request.options, rim: null, levels: null, datum: null, rise: null, down: false,
        ...(pitch !== null && !pitched ? { pitch_deg: null, bearing_deg: null } : {}),
      },
    },
    space: null,
  }
}

const isPitch = ({ name, kind }: Condition): boolean => name === 'pitch' && kind === 'plane'

/** The question about a plan with panels divided or joined: conditions, heights and nodes that stay are carried over. */
export function withPlan(question: PlanQuestion, checked: Checked, changed: ChangedPlan): PlanQuestion {
  const { plan } = question.read
  const moved = withConditionsOf(question, checked, carriedOver(plan, changed, checked.wishes.conditions))
  const { options } = moved.request
  const to = nodesTo(plan, changed)
  const staying = (names: readonly string[]): string[] => names.flatMap((name) => {
    const node = to[indexOfName(name, 'N')]
    return node === undefined ? [name] : node < 0 ? [] : [nodeName(node)]
  })
  // Panels are numbered anew: those that kept their shape as drawn are not known among them.
  const { keeps } = moved.brief
  const stay = staying(options.keeps.stay)
  return {
    ...moved,
    brief: keeps === undefined ? moved.brief : { ...moved.brief, keeps: keptNodes(keeps, staying(keeps.stay ?? [])) },
    request: { ...moved.request, options: { ...options, keeps: { ...options.keeps, stay, keepShape: [] } } },
    read: readWith(question.read, changed.plan, changed.nodeFrom),
    target: question.target === undefined || question.target === null ? null : picked(question.target, changed.nodeFrom),
    free: null,
  }
}

/** What was read, over another plan whose nodes come from these. */
export function readWith(read: ReadPlan, plan: Plan, nodeFrom: Int32Array): ReadPlan {
  const { heights, barWidth, ...rest } = read
  // Widths of bars are by edge, and the edges are others now.
  return barWidth === undefined ? { ...read, plan, heights: pickedOrNull(heights, nodeFrom) } : { ...rest, plan, heights: pickedOrNull(heights, nodeFrom) }
}

const pickedOrNull = (values: Float64Array | null, from: Int32Array): Float64Array | null => (values === null ? null : picked(values, from))

const picked = (values: Float64Array, from: Int32Array): Float64Array => Float64Array.from(from, (node) => values[node])

function keptNodes(keeps: KeepsWish, stay: readonly string[]): KeepsWish {
  const rest = Object.fromEntries(Object.entries(keeps).filter(([field]) => field !== 'stay' && field !== 'shapes'))
  return stay.length === 0 ? rest : { ...rest, stay }
}
