/** Form force: rows against the gradients of lifts that are known exactly. */
import { describe, expect, test } from 'vitest'
import type { Plan } from '../../../src/plan/plan.ts'
import type { Condition, FormForceCondition } from '../../../src/plan/project/condition.ts'
import { conditionRows, type ConditionRows } from '../../../src/roof/conditions/condition-rows.ts'
import { eliminate } from '../../../src/roof/conditions/eliminate.ts'
import { leastFold } from '../../../src/roof/conditions/form-force.ts'
import { homogeneous } from '../../../src/roof/conditions/homogeneous.ts'
import { propagation } from '../../../src/roof/conditions/propagation.ts'
import type { Rows } from '../../../src/roof/conditions/rows.ts'
import { plan, voronoi } from '../../make/plans.ts'

const common = { name: 'it', soft: null }

function rowsOf(on: Plan, ...conditions: Condition[]): ConditionRows {
  const made = conditionRows(on, conditions, 0)
  if (!made.ok) throw new Error(JSON.stringify(made.problem))
  return made.value
}

const asked = (joint: number, force: FormForceCondition['force']): FormForceCondition => ({ ...common, kind: 'form-force', at: { joints: [`J${joint + 1}`] }, force })

/** row . h - value of each row, h in spans. */
function misfits(on: Plan, rows: Rows, z: ArrayLike<number>): number[] {
  return Array.from(rows.value, (value, r) => {
    let sum = -value
    for (let k = rows.start[r]!; k < rows.start[r + 1]!; k += 1) sum += rows.weight[k]! * z[rows.node[k]!]! / on.frame.span
    return sum
  })
}

/**
 * The paraboloid z = k |p|^2 by its tangent planes at the sites: gradients 2 k s, so across a joint the slope jumps by
 * 2 k |s_L - s_R|, a valley everywhere. Exact: worked out by hand from the definition; plus a tilt, which folds nothing.
 */
function paraboloid(count: number, seed: number, k: number): { on: Plan; z: number[]; force: number[] } {
  const { plan: on, sites } = voronoi(count, seed)
  const z = new Array<number>(on.nodeCount).fill(0)
  for (let p = 0; p < on.panelCount; p += 1) {
    const [sx, sy] = sites[p]!
    for (const n of on.corner.subarray(on.panelStart[p], on.panelStart[p + 1])) {
      z[n] = k * (2 * (sx * on.x[n]! + sy * on.y[n]!) - sx * sx - sy * sy) + 0.3 * on.x[n]! - 0.2 * on.y[n]! + 7
    }
  }
  const force = Array.from({ length: on.jointCount }, (_, j) => {
    const [l, r] = [sites[on.panelOf[2 * j]!]!, sites[on.panelOf[2 * j + 1]!]!]
    return 2 * k * Math.hypot(l[0] - r[0], l[1] - r[1])
  })
  return { on, z, force }
}

describe('a number', () => {
  test.each([[0.04, 1], [-0.3, 2]])('every joint of a paraboloid of cells, z = %f |p|^2, seed %i', (k, seed) => {
    const { on, z, force } = paraboloid(60, seed, k)
    let shortest = Infinity
    for (let j = 0; j < on.jointCount; j += 1) {
      const rows = rowsOf(on, asked(j, force[j]!)).hard
      expect(rows.value).toHaveLength(1)
      expect(Math.abs(misfits(on, rows, z)[0]!)).toBeLessThan(2e-14)
      // One tenth more force is a corner that lies a tenth of |value| elsewhere: the row tells them apart.
      expect(Math.abs(misfits(on, rowsOf(on, asked(j, 1.1 * force[j]!)).hard, z)[0]!)).toBeCloseTo(0.1 * Math.abs(rows.value[0]!), 12)
      expect(Math.max(...rows.weight.map(Math.abs))).toBe(1)
      const [a, b] = [on.origin[2 * j]!, on.origin[2 * j + 1]!]
      shortest = Math.min(shortest, Math.hypot(on.x[a]! - on.x[b]!, on.y[a]! - on.y[b]!))
    }
    // The cells have tiny joints, where a row through the joint's own ends would lose its digits.
    expect(shortest).toBeLessThan(0.03)
  })
  test('no unit: the same plan and roof in millimetres', () => {
    const { on, z, force } = paraboloid(24, 3, 0.1)
    const mm: Plan = { ...on, unit: 'mm', x: on.x.map((x) => 1000 * x), y: on.y.map((y) => 1000 * y), frame: { ...on.frame, span: 1000 * on.frame.span } }
    for (const j of [0, 5, 17]) expect(Math.abs(misfits(mm, rowsOf(mm, asked(j, force[j]!)).hard, z.map((level) => 1000 * level))[0]!)).toBeLessThan(2e-14)
  })
  test('several joints: a row each; not a condition that any scale meets', () => {
    const { on, z, force } = paraboloid(24, 3, 0.1)
    const made = rowsOf(on, { ...common, kind: 'form-force', at: { joints: ['J1', 'J2', 'J9'] }, force: force[0]! })
    expect(misfits(on, made.hard, z)[0]).toBeCloseTo(0, 13)
    expect(made.hard.value).toHaveLength(3)
    expect(homogeneous(made.hard)).toBe(false)
    expect(eliminate(made.hard, on.nodeCount, ['it']).elimination.free).toHaveLength(on.nodeCount - 3)
    expect(made.held[0]).toMatchObject({ kind: 'form-force', soft: false })
    expect(made.signed.value).toHaveLength(0)
  })
  test('0 and flush are the condition flush', () => {
    const { on } = paraboloid(24, 3, 0.1)
    const flush = rowsOf(on, { ...common, kind: 'flush', at: { joints: ['J4'] } })
    expect(rowsOf(on, asked(3, 0)).hard).toEqual(flush.hard)
    expect(rowsOf(on, asked(3, 'flush')).hard).toEqual(flush.hard)
  })
  test('a joint that is not there', () => {
    const { on } = paraboloid(24, 3, 0.1)
    expect(conditionRows(on, [asked(9999, 1)], 0)).toMatchObject({ ok: false, problem: { code: 'no-such-joint', where: { names: ['J10000'], entity: 'condition "it"' } } })
  })
})

describe('a sign', () => {
  test('bounds the force on one side, by the least fold', () => {
    const { on, z, force } = paraboloid(24, 3, 0.1)
    for (let j = 0; j < on.jointCount; j += 1) {
      const [valley, ridge] = [rowsOf(on, asked(j, 'valley')), rowsOf(on, asked(j, 'ridge'))]
      expect(valley.hard.value).toHaveLength(0)
      const lever = Math.abs(valley.signed.value[0]!) / leastFold
      // row . h - value = (leastFold - F) lever for a valley, (leastFold + F) lever for a ridge: kept where it is not above 0.
      expect(misfits(on, valley.signed, z)[0]).toBeCloseTo((leastFold - force[j]!) * lever, 12)
      expect(misfits(on, ridge.signed, z)[0]).toBeCloseTo((leastFold + force[j]!) * lever, 12)
      expect(valley.signed.softWeight[0]).toBe(Infinity)
    }
    expect(rowsOf(on, { ...asked(0, 'ridge'), soft: 3 }).signed.softWeight).toEqual(Float64Array.of(3))
  })
})

describe('propagation', () => {
  /** Two squares side by side over the joint x = 1. */
  const two = plan([[0, 0], [1, 0], [2, 0], [2, 1], [1, 1], [0, 1]], [[0, 1, 4, 5], [1, 2, 3, 4]])
  test('carries a plane over a joint of known form force', () => {
    // West level at 0: the east panel rises by the force, a valley: z = 0.25 (x - 1). Exact: by hand.
    const rows = rowsOf(two, { ...common, kind: 'level', at: { panels: ['P1'] }, level: 0 }, { ...asked(0, 0.25), name: 'f' })
    const found = propagation(two, rows.hard)
    expect(found).toMatchObject({ forced: true, contradictions: [], relative: false })
    for (let n = 0; n < two.nodeCount; n += 1) expect(found.height[n]! * two.frame.span).toBeCloseTo(0.25 * Math.max(0, two.x[n]! - 1), 14)
  })
  test('says what contradicts it', () => {
    const rows = rowsOf(two, { ...common, kind: 'level', at: { panels: 'all' }, level: 0 }, { ...asked(0, 0.25), name: 'f' })
    const [first] = propagation(two, rows.hard).contradictions
    expect(first).toMatchObject({ conditions: [0, 1] })
    expect(first!.misfit * two.frame.span).toBeCloseTo(0.25, 14)
  })
})
