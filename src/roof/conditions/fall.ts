/** Fall: heights go down evenly along a run, as a gutter does. */
import { ok, type Result } from '../../base/result.ts'
import type { FallCondition } from '../../plan/project/condition.ts'
import { runAt } from './places.ts'
import { tooFew } from './too-few.ts'
import type { Emit } from './rows.ts'
import { heightOf, type Site } from './site.ts'

/**
 * With s the plan distance from the run's first point and f = per_mille / 1000:
 * h_n = h(level) - f s_n where the level is stated, else h_n - h_0 = -f (s_n - s_0) with 0 the run's first node.
 */
export function fallRows(site: Site, condition: FallCondition, emit: Emit): Result<Int32Array> {
  const run = runAt(site, condition.at)
  if (!run.ok) return run
  const { nodes, along } = run.value
  if (nodes.length < 2) return tooFew(site.plan, nodes, 2)
  const fall = condition.per_mille / 1000
  if (condition.level !== null) {
    const top = heightOf(site, condition.level)
    for (let i = 0; i < nodes.length; i += 1) emit([nodes[i]], [1], top - fall * along[i])
  } else {
    for (let i = 1; i < nodes.length; i += 1) emit([nodes[i], nodes[0]], [1, -1], -fall * (along[i] - along[0]))
  }
  return ok(nodes)
}
