/** Coplanar: all corners of the panels in one plane, which is left open. */
import { ok, type Result } from '../../base/result.ts'
import type { CoplanarCondition } from '../../plan/project/condition.ts'
import { onePlane } from './anchors.ts'
import { nodesOfPanels, panelsAt } from './places.ts'
import type { Emit } from './rows.ts'
import type { Site } from './site.ts'

export function coplanarRows(site: Site, condition: CoplanarCondition, emit: Emit): Result<Int32Array> {
  const panels = panelsAt(site.plan, condition.at)
  if (!panels.ok) return panels
  const nodes = nodesOfPanels(site.plan, panels.value)
  if (nodes.length > 0) onePlane(site.plan, nodes, emit)
  return ok(nodes)
}
