/** Level: h_n = (level - datum) / span at every node of the place. */
import { ok, type Result } from '../../base/result.ts'
import type { LevelCondition } from '../../plan/project/condition.ts'
import { nodesAt } from './places.ts'
import type { Emit } from './rows.ts'
import { heightOf, type Site } from './site.ts'

/** Emits a row per node; returns the nodes. */
export function levelRows(site: Site, condition: LevelCondition, emit: Emit): Result<Int32Array> {
  const nodes = nodesAt(site, condition.at)
  if (!nodes.ok) return nodes
  const height = heightOf(site, condition.level)
  for (const n of nodes.value) emit([n], [1], height)
  return ok(nodes.value)
}
