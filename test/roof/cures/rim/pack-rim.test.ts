/** The least largest correction of a rim, held against values by hand and against bounds that any roof has to keep. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../../../src/base/steps.ts'
import type { Plan } from '../../../../src/plan/plan.ts'
import type { Condition } from '../../../../src/plan/project/condition.ts'
import { conditionRows } from '../../../../src/roof/conditions/condition-rows.ts'
import { packedRim, type PackedRim } from '../../../../src/roof/cures/rim/pack-rim.ts'
import { minimax } from '../../../../src/roof/cures/rim/minimax.ts'
import { nodeAreas } from '../../../../src/roof/raise/nearest.ts'
import { shapeHeights } from '../../../../src/roof/raise/shapes.ts'
import { freeRim } from '../../../../src/roof/stress/free-rim.ts'
import { squaredResidual } from '../../../../src/roof/stress/panel-bases.ts'
import { grid } from '../../../make/plans.ts'

const level = (name: string, at: Extract<Condition, { kind: 'level' }>['at'], height: number): Condition => ({ name, soft: null, kind: 'level', at, level: height })

function packed(plan: Plan, conditions: readonly Condition[], rise: number): PackedRim | null {
  const rows = conditionRows(plan, conditions, 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const { span } = plan.frame
  const found = finish(packedRim({
    plan, free: finish(freeRim(plan)), hard: rows.value.hard, names: conditions.map(({ name }) => name), areas: nodeAreas(plan),
    wish: shapeHeights(plan, 'dome').heights.map((z) => (rise / span) * z), rise: rise / span, rule: { down: false, datum: null },
  }))
  if (found !== null && 'lifts' in found) throw new Error('too large')
  return found
}

describe('minimax', () => {
  test('a line over three points (exact: errors alternate, 1/4 each)', () => {
    // y = |x| at -1, 0, 1 by a constant: best 1/2, error 1/2; by a line through (0,0),(1,1),(2,1): error 1/4.
    const line = minimax(Float64Array.from([1, 0, 1, 1, 1, 2]), Float64Array.from([0, 1, 1]), 2, new Float64Array(2), null, 200)
    expect(line.largest).toBeCloseTo(0.25, 3)
    expect(line.least).toBeLessThanOrEqual(0.25 + 1e-12)
    expect(line.least).toBeGreaterThan(0.249)
  })
})

describe('4 x 4 square bays, rim level at 0, rise 1', () => {
  // Exact: lifts are f_i + g_j; with f, g concave of rise r each and symmetric, the rim runs from 0 at the corners to r, the
  // middle to 2 r above the corners. Rise from the lowest rim node 1: r = 1/2, and a shift of -1/4 leaves 1/4 either way.
  const found = packed(grid(4, 4), [level('eaves', { rim: 'outer' }, 0)], 1)!
  test('packed by a quarter of the rise, up and down', () => {
    expect(4 * found.largest).toBeCloseTo(0.25, 3)
    expect(found.least).toBeGreaterThan(0.995 * found.largest)
    expect(found.nodes).toHaveLength(16)
  })
  test('the panels are flat', () => {
    const plan = grid(4, 4)
    expect(squaredResidual(plan, finish(freeRim(plan)).bases, found.heights)).toBeLessThan(1e-24)
  })
})

test('other conditions stay: a post inside at its level', () => {
  const plan = grid(4, 4)
  const middle = level('post', { nodes: [[2, 2]] }, 0.8)
  const found = packed(plan, [level('eaves', { rim: 'outer' }, 0), middle], 1)!
  const post = Array.from(plan.x.keys()).find((n) => plan.x[n] === 2 && plan.y[n] === 2)!
  expect(4 * found.heights[post]!).toBeCloseTo(0.8, 12)
  expect(found.conditions).toEqual([0])
})

test('nothing is held at the rim: nothing to pack', () => {
  expect(packed(grid(4, 4), [level('post', { nodes: [[2, 2]] }, 0.8)], 1)).toBeNull()
})
