/** Flush: the two panels of a joint in one plane. Panels that flush joints hang together share one plane. */
import { disjointSets } from '../../base/disjoint-sets.ts'
import { ok, type Result } from '../../base/result.ts'
import type { Plan } from '../../plan/plan.ts'
import type { FlushCondition } from '../../plan/project/condition.ts'
import { onePlane } from './anchors.ts'
import { gathered } from './gathered.ts'
import { jointsAt, nodesOfPanels } from './places.ts'
import type { Emit } from './rows.ts'
import type { Site } from './site.ts'

/** Rows as for coplanar, per group of panels; returns the nodes of all of them. */
export function flushRows(site: Site, condition: FlushCondition, emit: Emit): Result<Int32Array> {
  const joints = jointsAt(site.plan, condition.at)
  if (!joints.ok) return joints
  const sets = flushPanels(site.plan, joints.value)
  for (const panels of sets) onePlane(site.plan, nodesOfPanels(site.plan, panels), emit)
  return ok(nodesOfPanels(site.plan, sets.flat()))
}

/** The panels on both sides of the joints, by what hangs together across them. */
export function flushPanels(plan: Plan, joints: Int32Array): number[][] {
  const all = disjointSets(plan.panelCount)
  const touched = new Set<number>()
  for (const j of joints) {
    const [left, right] = [plan.panelOf[2 * j], plan.panelOf[2 * j + 1]]
    all.join(left, right)
    touched.add(left).add(right)
  }
  return gathered([...touched].sort((a, b) => a - b), all)
}
