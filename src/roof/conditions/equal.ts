/** Equal: all nodes of the place at one level, which is left open: h_n - h_0 = 0. */
import { ok, type Result } from '../../base/result.ts'
import type { EqualCondition } from '../../plan/project/condition.ts'
import { nodesAt } from './places.ts'
import { tooFew } from './too-few.ts'
import type { Emit } from './rows.ts'
import type { Site } from './site.ts'

export function equalRows(site: Site, condition: EqualCondition, emit: Emit): Result<Int32Array> {
  const nodes = nodesAt(site, condition.at)
  if (!nodes.ok) return nodes
  if (nodes.value.length < 2) return tooFew(site.plan, nodes.value, 2)
  for (let i = 1; i < nodes.value.length; i += 1) emit([nodes.value[i], nodes.value[0]], [1, -1], 0)
  return ok(nodes.value)
}
