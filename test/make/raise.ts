/** The core asked directly, without files: for tests that make their plans in code. */
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { conditionRows } from '../../src/roof/conditions/condition-rows.ts'
import { largestZone } from '../../src/roof/raise/flatness.ts'
import { nodeAreas } from '../../src/roof/raise/nearest.ts'
import { raised, type Raised, type RaiseQuestion } from '../../src/roof/raise/raise.ts'
import { freeRim, type FreeRim } from '../../src/roof/stress/free-rim.ts'

export interface Asked extends Partial<Omit<RaiseQuestion, 'rows' | 'names' | 'within'>> {
  readonly conditions?: readonly Condition[]
  /** In the plan's unit. */
  readonly flat?: number
}

export function raise(plan: Plan, asked: Asked = {}): Raised & { free: FreeRim; z: Float64Array } {
  const { conditions = [], flat = 0.001, ...question } = asked
  const rows = conditionRows(plan, conditions, 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const free = finish(freeRim(plan))
  const answer = finish(
    raised(plan, free, nodeAreas(plan), {
      rows: rows.value, names: conditions.map((c) => c.name), shape: 'dome', target: null, rise: null, rule: { down: false, datum: null }, pitched: false,
      within: (heights) => largestZone(plan, plan.x, plan.y, heights.map((h) => h * plan.frame.span), flat) <= flat, ...question,
    }),
  )
  return { ...answer, free, z: answer.roof === null ? new Float64Array(0) : answer.roof.heights.map((h) => h * plan.frame.span) }
}

export const level = (name: string, at: Extract<Condition, { kind: 'level' }>['at'], height: number | null = 0): Condition => ({ kind: 'level', name, at, level: height, soft: null })
