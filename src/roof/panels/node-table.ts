/** The list of nodes: one row a node, in the plan's order. */
import type { Steps } from '../../base/steps.ts'
import type { Table } from '../../base/table.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Roof } from '../answer/answer.ts'
import { ascending } from './ascending.ts'

/**
 * Columns: node · x, y, z (plan's unit and place, as written in the model) · valence (edges that meet there, rim edges
 * included) · rim (how often a rim passes: 0 inside, 1 on the rim, more where rims touch).
 */
export function* nodeTable(plan: Plan, roof: Roof): Steps<Table> {
  const { nodeCount, origin, rimPasses } = plan
  const valence = new Int32Array(nodeCount)
  for (const node of origin) valence[node] = valence[node] + 1
  yield { stage: 'Listing nodes', done: 1 }
  return {
    rows: nodeCount,
    columns: [
      { kind: 'name', title: 'node', letter: 'N', index: ascending(nodeCount) },
      { kind: 'number', title: 'x', values: roof.writtenX, digits: 'shortest' },
      { kind: 'number', title: 'y', values: roof.writtenY, digits: 'shortest' },
      { kind: 'number', title: 'z', values: roof.written, digits: 'shortest' },
      { kind: 'number', title: 'valence', values: valence, digits: 'shortest' },
      { kind: 'number', title: 'rim', values: rimPasses, digits: 'shortest' },
    ],
  }
}
