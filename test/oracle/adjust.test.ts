/**
 * Adjusting against values from outside. The moved frustum: the least total shift sqrt(sum |p - p0|^2) of its three inner
 * nodes, rim fixed and level, from the criterion prod d_i(q_i) / d_i(q_{i+1}) = 1 (d_i: distance to rim line i).
 */
import { Matrix, solve } from 'ml-matrix'
import { expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { adjusted, type Adjustment, type PlanKeeps } from '../../src/roof/cures/adjust/adjust.ts'
import { eliminate } from '../../src/roof/conditions/eliminate.ts'
import { conditionRows } from '../../src/roof/conditions/condition-rows.ts'
import { nodeAreas } from '../../src/roof/raise/nearest.ts'
import { nothingHeld } from '../../src/roof/stress/lift-space.ts'
import { jittered } from '../make/jittered.ts'
import { cells, plan } from '../make/plans.ts'
import { level } from '../make/raise.ts'

const faces = [[0, 1, 4, 3], [1, 2, 5, 4], [2, 0, 3, 5], [3, 4, 5]]
const moved = plan([[0, 0], [12, 0], [0, 12], [2, 2], [10, 1], [2.5, 8]], faces)
/** Index of each point above in the plan, which counts nodes by first use. */
const nodeAt = (x: number, y: number): number => [...moved.x.keys()].find((n) => moved.x[n] === x && moved.y[n] === y)!
const lifted = new Map([['2 2', 2], ['10 1', 1], ['2.5 8', 2]])

const keeps: PlanKeeps = { rim: 'fixed', fixed: [], straight: true, leastEdge: null, leastAngle: null, largestShift: null, bays: false, symmetry: false, axes: false, shapes: [] }

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

/**
 * The dense twin: conditions as four-point determinants, their derivatives by central differences, and the conditions of
 * Karush, Kuhn and Tucker by dense least squares: at a least change the objective's gradient is a combination of theirs.
 */
function stationarity(of: Plan, target: Float64Array, areas: Float64Array, w: number, riseWeight: Float64Array, { state }: Adjustment): { misfit: number; left: number } {
  const n = of.nodeCount
  const u = [...state.work, ...state.heights]
  const triples: [number, number, number, number][] = []
  for (let p = 0; p < of.panelCount; p += 1) {
    const nodes = [...of.corner.slice(of.panelStart[p], of.panelStart[p + 1])]
    const third = nodes.length >> 1
    for (const d of nodes) if (d !== nodes[0] && d !== nodes[1] && d !== nodes[third]) triples.push([nodes[0]!, nodes[1]!, nodes[third]!, d])
  }
  const volume = (v: readonly number[], [a, b, c, d]: readonly number[]): number => {
    const from = (k: number): [number, number, number] => [v[2 * k]! - v[2 * a!]!, v[2 * k + 1]! - v[2 * a! + 1]!, v[2 * n + k]! - v[2 * n + a!]!]
    const [p, q, r] = [from(b!), from(c!), from(d!)]
    return p[0] * (q[1] * r[2] - q[2] * r[1]) - p[1] * (q[0] * r[2] - q[2] * r[0]) + p[2] * (q[0] * r[1] - q[1] * r[0])
  }
  const rows = triples.map((triple) => {
    const row = new Array<number>(3 * n).fill(0)
    for (const node of triple) {
      for (const i of [2 * node, 2 * node + 1, 2 * n + node]) {
        const [up, down] = [[...u], [...u]]
        up[i]! += 1e-4
        down[i]! -= 1e-4
        // The determinant is of third degree in all and of first degree in each coordinate: the difference is exact.
        row[i] = (volume(up, triple) - volume(down, triple)) / 2e-4
      }
    }
    const size = Math.hypot(...row)
    return row.map((value) => value / size)
  })
  rows.push([...new Array<number>(2 * n).fill(0), ...riseWeight])
  const gradient = u.map((value, i) => (i < 2 * n ? value - of.work[i]! : w * areas[i - 2 * n]! * (value - target[i - 2 * n]!)))
  const jacobian = new Matrix(rows).transpose()
  const multipliers = solve(jacobian, Matrix.columnVector(gradient), true)
  const left = Matrix.sub(Matrix.columnVector(gradient), jacobian.mmul(multipliers)).norm()
  return { misfit: Math.max(...triples.map((triple) => Math.abs(volume(u, triple)))), left: left / Math.hypot(...gradient) }
}

test.each([1, 2, 3, 4])('least change on a small plan (seed %i): flat by determinants, and stationary by dense linear algebra', (seed) => {
  const { plan: drawn } = jittered(cells(14, seed), 0.01, seed)
  const areas = nodeAreas(drawn)
  const target = Float64Array.from({ length: drawn.nodeCount }, (_, n) => 0.1 * (1 - 2 * (drawn.work[2 * n]! ** 2 + drawn.work[2 * n + 1]! ** 2)))
  const riseWeight = target.map((height, n) => areas[n]! * height)
  const w = 0.3
  const found = finish(adjusted({
    plan: drawn, target, riseWeight, elimination: nothingHeld(drawn.nodeCount), areas, shapeWeight: w, settle: 1e-11,
    keeps: { ...keeps, rim: 'free', straight: false },
  }))
  expect(found.ended).toBe('settled')
  expect(found.active).toEqual([])
  const { misfit, left } = stationarity(drawn, target, areas, w, riseWeight, found)
  expect(misfit).toBeLessThan(1e-15)
  expect(left).toBeLessThan(1e-8)
})
