/** The three lists of a raised roof, made together since they share the panels' planes. */
import type { Steps } from '../../base/steps.ts'
import type { Table } from '../../base/table.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Roof } from '../answer/answer.ts'
import { jointTable } from './joint-table.ts'
import { nodeTable } from './node-table.ts'
import { panelPlanes } from './panel-planes.ts'
import { panelTable } from './panel-table.ts'

export interface Lists {
  readonly panels: Table
  readonly joints: Table
  readonly nodes: Table
}

/** Angles, areas and lengths are of the roof as solved; deviations and coordinates as written. */
export function* lists(plan: Plan, roof: Roof, barWidth: Float64Array | null = null): Steps<Lists> {
  const planes = yield* panelPlanes(plan, roof.heights)
  return {
    panels: yield* panelTable(plan, roof, planes),
    joints: yield* jointTable(plan, roof, planes, barWidth),
    nodes: yield* nodeTable(plan, roof),
  }
}
