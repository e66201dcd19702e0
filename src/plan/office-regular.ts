/** What is nearly regular in a plan: proposals with their misfits, and the plan in which they are taken. */
import { straight_mm } from '../base/geometry/tolerance.ts'
import type { Repair } from '../base/repair.ts'
import type { Steps } from '../base/steps.ts'
import { counted, inMillimetres, mostPlaces } from './line-work-words.ts'
import { takes } from './office-reduced.ts'
import { nearlyStraightRuns } from './office-straight.ts'
import type { Plan } from './plan.ts'
import type { ReadOptions } from './read-plan.ts'
import { planFromFaces } from './subdivision.ts'

export interface Regular {
  /** The plan with the proposals that were taken; its nodes, panels and edges keep their numbers. */
  readonly plan: Plan
  readonly repairs: readonly Repair[]
  /** How far off straight the worst node of a run is, in mm; 0 where all are as straight as they are written. */
  readonly straight_mm: number
}

/** `tolerance_mm`: the plan tolerance, which bounds every move. */
export function* regular(plan: Plan, tolerance_mm: number, mmPerUnit: number, options: ReadOptions): Steps<Regular> {
  const found = yield* nearlyStraightRuns(plan, tolerance_mm / mmPerUnit, straight_mm / mmPerUnit, !takes(options, 'straighten'))
  if (found === null) return { plan, repairs: [], straight_mm: 0 }
  const mm = (length: number): string => inMillimetres(length * mmPerUnit)
  const what = `${counted(found.nodes.length, 'node', 'nodes')} of ${counted(found.runs, 'run', 'runs')} ${found.nodes.length === 1 ? 'is' : 'are'} off straight by up to ${mm(found.misfit)}`
  const stays = found.runsThatStay === 0 ? '' : `; ${counted(found.runsThatStay, 'run stays', 'runs stay')} as drawn, since nodes would move by more than the plan tolerance of ${inMillimetres(tolerance_mm)} (--plan-tolerance)`
  const where = found.nodes.slice(0, mostPlaces).map((n): [number, number] => [plan.x[n], plan.y[n]])
  const offer = (state: Repair['state'], then: string): Repair => ({ code: 'straighten', state, count: found.nodes.length, message: `${what}${then}${stays}.`, where })
  const moves = found.movedNodes === 0 ? '' : `${counted(found.movedNodes, 'node', 'nodes')} by up to ${mm(found.largest)}`
  const off = found.misfit * mmPerUnit
  if (found.movedNodes === 0 || !takes(options, 'straighten')) {
    return { plan, repairs: [offer('proposed', moves === '' ? '' : `; straightening moves ${moves}`)], straight_mm: off }
  }
  const { span } = plan.frame
  const still = straight_mm / mmPerUnit
  const shifted = (axis: 0 | 1, drawn: Float64Array): Float64Array => drawn.map((value, n) => {
    const move = [0, 1].map((k) => found.moved[2 * n + k] - plan.work[2 * n + k] * span)
    // Nodes that were straight as written keep their digits.
    return Math.hypot(move[0], move[1]) <= still / 1000 ? value : value + move[axis]
  })
  const made = planFromFaces({ unit: plan.unit, x: shifted(0, plan.x), y: shifted(1, plan.y), start: plan.panelStart, corner: plan.corner, ordered: true })
  if (!made.ok) return { plan, repairs: [offer('proposed', '; straightened, panels would overlap')], straight_mm: off }
  return { plan: made.value.plan, repairs: [offer('accepted', `; straightened, which moves ${moves}`)], straight_mm: off }
}
