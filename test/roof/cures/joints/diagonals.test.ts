/** Diagonals that free a roof: found, not assumed; every count held against the dense rank of the divided plan. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../../../src/base/steps.ts'
import type { Plan } from '../../../../src/plan/plan.ts'
import type { Condition } from '../../../../src/plan/project/condition.ts'
import { conditionRows } from '../../../../src/roof/conditions/condition-rows.ts'
import { addedDiagonals } from '../../../../src/roof/cures/joints/diagonals.ts'
import { dividedPlan } from '../../../../src/roof/cures/joints/diagonals-plan.ts'
import { nodeAreas } from '../../../../src/roof/raise/nearest.ts'
import { shapeHeights } from '../../../../src/roof/raise/shapes.ts'
import { underConditions } from '../../../../src/roof/raise/under-conditions.ts'
import { freeRim } from '../../../../src/roof/stress/free-rim.ts'
import { hipGrid } from '../../../make/hip-grid.ts'
import { jittered } from '../../../make/jittered.ts'
import { cells, grid, plan as planOf } from '../../../make/plans.ts'

const levelRim: Condition = { name: 'eaves', soft: null, kind: 'level', at: { rim: 'outer' }, level: 0 }

function under(plan: Plan, conditions: readonly Condition[]) {
  const rows = conditionRows(plan, conditions, 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const free = finish(freeRim(plan))
  const wish = shapeHeights(plan, 'dome').heights.map((z) => 0.1 * z)
  return { wish, ...finish(underConditions(plan, free, rows.value.hard, conditions.map(({ name }) => name), wish, nodeAreas(plan))) }
}

function found(plan: Plan, conditions: readonly Condition[], down = false) {
  const { space, start, wish } = under(plan, conditions)
  return finish(addedDiagonals({ space, start, wish, down }))?.diagonals ?? []
}

describe('12 x 8 square bays, rim level', () => {
  const plan = hipGrid(0)
  const diagonals = found(plan, [levelRim])
  test('the four corner diagonals, running inwards', () => {
    const places = diagonals.map(({ panel, from, to }) => [from, to].map((c) => plan.corner[plan.panelStart[panel] + c]!).map((n) => [plan.x[n], plan.y[n]]))
    const inwards = [[[0, 0], [1.5, 1.5]], [[18, 0], [16.5, 1.5]], [[0, 12], [1.5, 10.5]], [[18, 12], [16.5, 10.5]]]
    const sorted = (ends: readonly (readonly (number | undefined)[])[]): string[] => ends.map((end) => end.join(' ')).sort()
    expect(places.map(sorted)).toEqual(inwards.map(sorted))
  })
  test('freedom left 1 (exact: rim 0 leaves z_ij = a plateau, divided corners only)', () => {
    const made = dividedPlan(plan, diagonals)
    if (!made.ok) throw new Error(made.problem.message)
    expect(made.value.plan.panelCount).toBe(100)
    expect(under(made.value.plan, [levelRim]).freedomLeft).toBe(1)
  })
})


describe('the same grid, its lines converging both ways, rim level', () => {
  const skewed = (i: number, j: number): readonly [number, number] => [1.5 * i * (1 + 0.02 * j), 1.5 * j * (1 + 0.01 * i)]
  const plan = hipGrid(0, skewed)
  test('the corner diagonals free nothing there', () => {
    expect(under(hipGrid(1, skewed), [levelRim]).freedomLeft).toBe(0)
  })
  test('and others are found that do; each of them is needed', () => {
    const diagonals = found(plan, [levelRim])
    expect(diagonals.map(({ panel }) => panel)).not.toEqual([0, 11, 84, 95])
    const left = (list: typeof diagonals): number | null => {
      const made = dividedPlan(plan, list)
      if (!made.ok) throw new Error(made.problem.message)
      return under(made.value.plan, [levelRim]).freedomLeft
    }
    expect(left(diagonals)).toBe(1)
    for (const one of diagonals) expect(left(diagonals.filter((each) => each !== one))).toBe(0)
  })
})

describe('cells of a Voronoi diagram, one node moved: the one lift is gone', () => {
  const drawn = cells(40, 3)
  const middle = Array.from(drawn.x.keys()).filter((n) => drawn.rimPasses[n] === 0).sort((a, b) => Math.hypot(drawn.work[2 * a]!, drawn.work[2 * a + 1]!) - Math.hypot(drawn.work[2 * b]!, drawn.work[2 * b + 1]!))[0]!
  const loops = Array.from({ length: drawn.panelCount }, (_, p) => Array.from(drawn.corner.subarray(drawn.panelStart[p], drawn.panelStart[p + 1])))
  const plan = planOf(Array.from(drawn.x, (x, n) => [n === middle ? x + 0.05 : x, drawn.y[n]!] as const), loops)
  const left = (list: ReturnType<typeof found>): number | null => {
    const made = dividedPlan(plan, list)
    if (!made.ok) throw new Error(made.problem.message)
    return under(made.value.plan, []).freedomLeft
  }
  const diagonals = found(plan, [])
  test('a few diagonals across its panels bring one back', () => {
    expect(under(plan, []).freedomLeft).toBe(3)
    expect(diagonals.length).toBeGreaterThan(0)
    expect(diagonals.length).toBeLessThan(10)
    expect(left(diagonals)).toBe(4)
  })
  test('each of them is needed', () => {
    for (const one of diagonals) expect(left(diagonals.filter((each) => each !== one))).toBe(3)
  })
})

test('where most panels would need one, none are offered', () => {
  expect(found(jittered(cells(40, 3), 0.05, 2).plan, [])).toEqual([])
})

test('three levels on one flat panel and a fourth off it: one diagonal across it', () => {
  // Exact: four corners of one quad at 0, 0, 0 and 0.1 lie in no plane; divided, any four heights do.
  const plan = grid(1, 1)
  const posts = [0, 0, 0, 0.1].map((level, k): Condition => ({ name: `post ${k + 1}`, soft: null, kind: 'level', at: { nodes: [`N${k + 1}`] }, level }))
  expect(under(plan, posts).start).toBeNull()
  expect(found(plan, posts)).toHaveLength(1)
})
