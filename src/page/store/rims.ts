/** The rims of a plan as places of conditions. */
import type { Point } from '../../plan/project/condition.ts'
import type { Plan } from '../../plan/plan.ts'

export interface Rim {
  readonly title: string
  readonly at: 'outer' | Point
}

/** The outer rim, then one round each void. */
export function rimsOf(plan: Plan): Rim[] {
  return [{ title: 'rim', at: 'outer' }, ...voidPoints(plan).map((at, k) => ({ title: `rim of void ${k + 1}`, at }))]
}

/** A point in each void: beside the middle of its first edge, a little inwards. */
function voidPoints(plan: Plan): Point[] {
  const points: Point[] = []
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 0) continue
    const half = plan.rimHalf[plan.rimStart[l]]
    const a = plan.origin[half]
    const b = plan.origin[half ^ 1]
    const dx = plan.x[b] - plan.x[a]
    const dy = plan.y[b] - plan.y[a]
    // The void lies on the left of its rim's half-edges.
    points.push([(plan.x[a] + plan.x[b]) / 2 - dy * 0.02, (plan.y[a] + plan.y[b]) / 2 + dx * 0.02])
  }
  return points
}
