/** The problem of a place that holds fewer nodes than its condition needs. */
import { fail, type Problem } from '../../base/result.ts'
import { nodeName } from '../../plan/names.ts'
import type { Plan } from '../../plan/plan.ts'

export function tooFew(plan: Plan, nodes: Int32Array, needed: number): { ok: false; problem: Problem } {
  const [node] = nodes
  const where = node === undefined ? null : { names: [nodeName(node)], at: [plan.x[node], plan.y[node]] as const }
  return fail('too-few-nodes', `this place has ${nodes.length === 1 ? 'one node' : `${nodes.length} nodes`} of the plan and needs ${needed} or more`,
    where, 'give points of the plan, in its own coordinates')
}
