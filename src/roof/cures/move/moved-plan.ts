/** A plan with its nodes elsewhere: the same panels, nodes and names. */
import { fail, type Result, ok } from '../../../base/result.ts'
import type { Plan } from '../../../plan/plan.ts'
import { planFromFaces } from '../../../plan/subdivision.ts'

/** Coordinates in the plan's unit from working ones; nodes that did not move keep theirs to the last digit. */
export function coordinatesOf(plan: Plan, work: Float64Array): { x: Float64Array; y: Float64Array } {
  const { span, centreX, centreY } = plan.frame
  const back = (drawn: Float64Array, centre: number, axis: number): Float64Array =>
    drawn.map((value, n) => (work[2 * n + axis] === plan.work[2 * n + axis] ? value : centre + span * work[2 * n + axis]))
  return { x: back(plan.x, centreX, 0), y: back(plan.y, centreY, 1) }
}

/** Fails where the moved panels make no plan any more. */
export function movedPlan(plan: Plan, x: Float64Array, y: Float64Array): Result<Plan> {
  const made = planFromFaces({ unit: plan.unit, x, y, start: plan.panelStart, corner: plan.corner })
  if (!made.ok) return made
  const { plan: moved } = made.value
  const same = moved.corner.length === plan.corner.length && moved.corner.every((node, c) => node === plan.corner[c])
  return same ? ok(moved) : fail('turned-over', 'a panel turned over while nodes moved', null, 'hold more nodes, or ask for less')
}
