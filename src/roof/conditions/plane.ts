/** Plane: each panel at a given pitch and bearing. */
import { disjointSets } from '../../base/disjoint-sets.ts'
import { ok, type Result } from '../../base/result.ts'
import type { Plan } from '../../plan/plan.ts'
import type { PlaneCondition } from '../../plan/project/condition.ts'
import { gathered } from './gathered.ts'
import { nodesOfPanels, panelsAt } from './places.ts'
import type { Emit } from './rows.ts'
import type { Site } from './site.ts'

/**
 * The gradient g of a plane that falls by `pitch_deg` towards `bearing_deg` (clockwise from +y):
 * g = -tan(pitch) (sin bearing, cos bearing).
 */
export function gradientOf(pitch_deg: number, bearing_deg: number): readonly [gx: number, gy: number] {
  const slope = Math.tan(pitch_deg * Math.PI / 180)
  const bearing = bearing_deg * Math.PI / 180
  return [-slope * Math.sin(bearing), -slope * Math.cos(bearing)]
}

/**
 * Panels that share a node lie in one plane when their gradients are the same, so there is one anchor a per such group:
 * h_n - h_a = g . (p_n - p_a) for its other nodes. Returns the nodes.
 */
export function planeRows(site: Site, condition: PlaneCondition, emit: Emit): Result<Int32Array> {
  const panels = panelsAt(site.plan, condition.at)
  if (!panels.ok) return panels
  const { work } = site.plan
  const [gx, gy] = gradientOf(condition.pitch_deg, condition.bearing_deg)
  for (const set of touchingPanels(site.plan, panels.value)) {
    const nodes = nodesOfPanels(site.plan, set)
    const [a] = nodes
    for (const n of nodes) {
      if (n === a) continue
      emit([n, a], [1, -1], gx * (work[2 * n] - work[2 * a]) + gy * (work[2 * n + 1] - work[2 * a + 1]))
    }
  }
  return ok(nodesOfPanels(site.plan, panels.value))
}

/** The panels by what hangs together through shared nodes. */
export function touchingPanels(plan: Plan, panels: Int32Array): number[][] {
  const all = disjointSets(plan.panelCount)
  const seen = new Int32Array(plan.nodeCount).fill(-1)
  for (const p of panels) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const n = plan.corner[c]
      if (seen[n] >= 0) all.join(seen[n], p)
      else seen[n] = p
    }
  }
  return gathered(panels, all)
}
