/**
 * A plan with panels divided by diagonals: one piece keeps the panel's name, the others come last; nodes are numbered by first
 * use again, as a reader of the new plan will.
 */
import type { Result } from '../../../base/result.ts'
import { ok } from '../../../base/result.ts'
import type { Plan } from '../../../plan/plan.ts'
import { planFromFaces } from '../../../plan/subdivision.ts'
import type { Diagonal } from './diagonals-panels.ts'

export interface ChangedPlan {
  readonly plan: Plan
  /** Node of the old plan behind each node of the new one. */
  readonly nodeFrom: Int32Array
  /** Panels of the old plan behind each panel of the new one: one where panels were divided, several where they were joined. */
  readonly panelsFrom: readonly (readonly number[])[]
}

/** Diagonals of one panel do not cross. */
export function dividedPlan(plan: Plan, diagonals: readonly Diagonal[]): Result<ChangedPlan> {
  const loops: number[][] = Array.from({ length: plan.panelCount }, (_, p) => Array.from({ length: plan.panelStart[p + 1] - plan.panelStart[p] }, (_x, c) => c))
  const owner = Array.from(loops.keys())
  for (const { panel, from, to } of diagonals) {
    // The piece that has both ends: earlier diagonals of the panel have cut it already.
    const at = owner.findIndex((of, k) => of === panel && loops[k].includes(from) && loops[k].includes(to))
    const loop = loops[at]
    const [i, j] = [loop.indexOf(from), loop.indexOf(to)].sort((a, b) => a - b)
    loops[at] = [...loop.slice(0, i + 1), ...loop.slice(j)]
    loops.push(loop.slice(i, j + 1))
    owner.push(panel)
  }
  const corners = loops.map((loop, k) => loop.map((c) => plan.corner[plan.panelStart[owner[k]] + c]))
  const start = Int32Array.from([0, ...corners.map((loop) => loop.length)])
  for (let k = 1; k < start.length; k += 1) start[k] += start[k - 1]
  const made = planFromFaces({ unit: plan.unit, x: plan.x, y: plan.y, start, corner: Int32Array.from(corners.flat()) })
  if (!made.ok) return made
  return ok({ plan: made.value.plan, nodeFrom: made.value.pointOfNode, panelsFrom: owner.map((panel) => [panel]) })
}
