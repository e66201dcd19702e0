/** Straight: a run stays a straight line in space when seen from the side. */
import { ok, type Result } from '../../base/result.ts'
import type { StraightCondition } from '../../plan/project/condition.ts'
import { runAt } from './places.ts'
import { tooFew } from './too-few.ts'
import type { Emit } from './rows.ts'
import type { Site } from './site.ts'

/** With t_n = (s_n - s_a) / (s_b - s_a) between the run's first node a and last node b: h_n - (1 - t_n) h_a - t_n h_b = 0. */
export function straightRows(site: Site, condition: StraightCondition, emit: Emit): Result<Int32Array> {
  const run = runAt(site, condition.at)
  if (!run.ok) return run
  const { nodes, along } = run.value
  if (nodes.length < 2) return tooFew(site.plan, nodes, 2)
  const last = nodes.length - 1
  for (let i = 1; i < last; i += 1) {
    const t = (along[i] - along[0]) / (along[last] - along[0])
    emit([nodes[i], nodes[0], nodes[last]], [1, t - 1, -t], 0)
  }
  return ok(nodes)
}
