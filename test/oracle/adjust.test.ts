/**
 * Adjusting against values from outside. The moved frustum: the least total shift sqrt(sum |p - p0|^2) of its three inner
 * nodes, rim fixed and level, from the criterion prod d_i(q_i) / d_i(q_{i+1}) = 1 (d_i: distance to rim line i).
 */
import { expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { adjusted, type Adjustment, type PlanKeeps } from '../../src/roof/cures/adjust.ts'
import { eliminate } from '../../src/roof/conditions/eliminate.ts'
import { conditionRows } from '../../src/roof/conditions/condition-rows.ts'
import { nodeAreas } from '../../src/roof/raise/nearest.ts'
import { level } from '../make/raise.ts'
import { plan } from '../make/plans.ts'

const faces = [[0, 1, 4, 3], [1, 2, 5, 4], [2, 0, 3, 5], [3, 4, 5]]
const moved = plan([[0, 0], [12, 0], [0, 12], [2, 2], [10, 1], [2.5, 8]], faces)
/** Index of each point above in the plan, which counts nodes by first use. */
const nodeAt = (x: number, y: number): number => [...moved.x.keys()].find((n) => moved.x[n] === x && moved.y[n] === y)!
const lifted = new Map([['2 2', 2], ['10 1', 1], ['2.5 8', 2]])

const keeps: PlanKeeps = { rim: 'fixed', fixed: [], straight: true, leastEdge: null, leastAngle: null, largestShift: null }

function frustum(fixed: readonly number[], shapeWeight: number): Adjustment {
  const rows = conditionRows(moved, [level('rim', { rim: 'outer' })], 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const { elimination } = eliminate(rows.value.hard, moved.nodeCount, ['rim'])
  const target = Float64Array.from(moved.x, (x, n) => (lifted.get(`${x} ${moved.y[n]}`) ?? 0) / moved.frame.span)
  const areas = nodeAreas(moved)
  const riseWeight = target.map((height, n) => areas[n]! * height)
  return finish(adjusted({ plan: moved, target, riseWeight, elimination, areas, shapeWeight, keeps: { ...keeps, fixed }, settle: 1e-12 }))
}

function totalShift(of: Plan, { state }: Adjustment): number {
  let sum = 0
  state.work.forEach((value, i) => {
    sum += (value - of.work[i]!) ** 2
  })
  return Math.sqrt(sum) * of.frame.span
}

/** prod d_i(q_i) / d_i(q_{i+1}) with the rim lines 0-1, 1-2, 2-0 and inner nodes 3, 4, 5: 1 where the plan lifts with a level rim. */
function product({ state }: Adjustment): number {
  const at = ([x, y]: readonly number[]): [number, number] => {
    const n = nodeAt(x!, y!)
    return [state.work[2 * n]! * moved.frame.span + moved.frame.centreX, state.work[2 * n + 1]! * moved.frame.span + moved.frame.centreY]
  }
  const [a, b, c] = [at([2, 2]), at([10, 1]), at([2.5, 8])]
  const south = (p: readonly number[]): number => p[1]!
  const slant = (p: readonly number[]): number => 12 - p[0]! - p[1]!
  const west = (p: readonly number[]): number => p[0]!
  return (south(a) / south(b)) * (slant(b) / slant(c)) * (west(c) / west(a))
}

test('the moved frustum adjusts back by the least total shift, rim fixed (two independent computations, agreeing to 1e-11)', () => {
  const found = frustum([], 1e-5)
  expect(found.ended).toBe('settled')
  expect(totalShift(moved, found)).toBeCloseTo(0.1858733893, 9)
  expect(product(found)).toBeCloseTo(1, 12)
})

test('with the last node alone free it comes back by the least way to the lifting plans (exact: the criterion is linear in it)', () => {
  const found = frustum([nodeAt(2, 2), nodeAt(10, 1)], 1e-5)
  // a = (2, 2), b = (10, 1): 2/1 * 1/(12 - x - y) * x/2 = 1, so 2 x + y = 12: from (2.5, 8) the way is 1 / sqrt 5.
  expect(totalShift(moved, found)).toBeCloseTo(1 / Math.sqrt(5), 9)
  expect(product(found)).toBeCloseTo(1, 12)
})
