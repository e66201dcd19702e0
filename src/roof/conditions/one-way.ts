/**
 * One-way: each joint folds one way only. With the form force F (> 0 a valley) a ridge is F <= -leastFold and a valley
 * F >= leastFold, so that it shows; no valley is F <= 0 and no ridge F >= 0, where a joint may stay flat.
 */
import { ok, type Result } from '../../base/result.ts'
import type { Plan } from '../../plan/plan.ts'
import type { OneWayCondition } from '../../plan/project/condition.ts'
import { cornerOverPlane, leastFold } from './form-force.ts'
import { jointsAt, nodesOfPanels, panelsAt } from './places.ts'
import type { Emit } from './rows.ts'
import type { Site } from './site.ts'

/** Emits a row per joint to `signed`; returns the nodes of the panels beside the joints. */
export function oneWayRows(site: Site, { at, fold }: OneWayCondition, signed: Emit): Result<Int32Array> {
  const joints = oneWayJoints(site.plan, at)
  if (!joints.ok) return joints
  const isRidge = fold === 'ridge' || fold === 'no-valley'
  const least = fold === 'ridge' || fold === 'valley' ? leastFold : 0
  const panels = new Set<number>()
  for (const joint of joints.value) {
    panels.add(site.plan.panelOf[2 * joint]).add(site.plan.panelOf[2 * joint + 1])
    const { nodes, weights, lever } = cornerOverPlane(site.plan, joint)
    const turn = (isRidge ? 1 : -1) * Math.sign(lever)
    signed(nodes, weights.map((weight) => turn * weight), -least * Math.abs(lever))
  }
  return ok(nodesOfPanels(site.plan, panels))
}

/** The joints named, or all between two of the panels. */
export function oneWayJoints(plan: Plan, at: OneWayCondition['at']): Result<Int32Array> {
  if ('joints' in at) return jointsAt(plan, at)
  const panels = panelsAt(plan, at)
  if (!panels.ok) return panels
  const taken = new Set(panels.value)
  const between = (joint: number): boolean => taken.has(plan.panelOf[2 * joint]) && taken.has(plan.panelOf[2 * joint + 1])
  return ok(Int32Array.from(Array.from({ length: plan.jointCount }, (_, joint) => joint).filter(between)))
}
