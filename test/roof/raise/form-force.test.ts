/** Roofs under form forces: by hand on a pyramid, by dense algebra on cells. */
import { describe, expect, test } from 'vitest'
import type { Plan } from '../../../src/plan/plan.ts'
import type { Condition, FormForceCondition } from '../../../src/plan/project/condition.ts'
import { conditionRows } from '../../../src/roof/conditions/condition-rows.ts'
import { leastFold } from '../../../src/roof/conditions/form-force.ts'
import { areaShares, dot, foldForces, nearest, noSoft, roofs, type Soft } from '../../make/dense-roof.ts'
import { grid, plan } from '../../make/plans.ts'
import { level, raise } from '../../make/raise.ts'

const asked = (joint: number, force: FormForceCondition['force'], soft: number | null = null): Condition =>
  ({ name: `force of J${joint + 1}`, soft, kind: 'form-force', at: { joints: [`J${joint + 1}`] }, force })

/** The signed rows of conditions of one joint each, densely: "row . h <= value". */
function signedRows(on: Plan, joints: readonly number[], soft: number): { row: number[]; value: number }[] {
  return joints.map((joint) => {
    const made = conditionRows(on, [asked(joint, 'valley', soft)], 0)
    if (!made.ok) throw new Error(made.problem.message)
    const { node, weight, value } = made.value.signed
    const row = new Array<number>(on.nodeCount).fill(0)
    node.forEach((n, k) => (row[n]! += weight[k]!))
    return { row, value: value[0]! }
  })
}

const forcesOf = (on: Plan, { z }: { z: Float64Array }): number[] => foldForces(on, Array.from(z, (height) => height / on.frame.span))

/**
 * Four triangles over the square of side 2 about an apex: with the rim level and the apex at H the gradients are (0, H),
 * (-H, 0), .., so each joint's slope jumps by H sqrt(2), a ridge. Exact: worked out by hand from the definition.
 */
const pyramid = plan([[-1, -1], [1, -1], [1, 1], [-1, 1], [0, 0]], [[0, 1, 4], [1, 2, 4], [2, 3, 4], [3, 0, 4]])
const apex = Array.from(pyramid.x).findIndex((x, n) => x === 0 && pyramid.y[n] === 0)
const rim = level('rim', { rim: 'outer' })

describe('a pyramid over a level rim', () => {
  test('the force says the height, whatever rise is asked', () => {
    for (const force of [-0.5, -0.02, 0.3]) {
      const made = raise(pyramid, { conditions: [rim, asked(0, force)], rise: 0.4 })
      expect(made.verdict).toBe('lifts')
      expect(made.under).toMatchObject({ freedomLeft: 0, scaleFree: false })
      expect(made.z[apex]).toBeCloseTo(-force / Math.SQRT2, 14)
      for (const each of forcesOf(pyramid, made)) expect(each).toBeCloseTo(force, 14)
    }
  })
  test('ridge holds of itself, valley turns the roof to the least fold', () => {
    const free = raise(pyramid, { conditions: [rim] })
    const ridge = raise(pyramid, { conditions: [rim, asked(0, 'ridge')] })
    const valley = raise(pyramid, { conditions: [rim, asked(0, 'valley')] })
    expect(free.z[apex]).toBeCloseTo(0.2, 14)
    expect(ridge.z[apex]).toBeCloseTo(0.2, 12)
    expect(valley.z[apex]).toBeCloseTo(-leastFold / Math.SQRT2, 12)
    expect([ridge.verdict, valley.verdict]).toEqual(['lifts', 'lifts'])
    expect([ridge.clashes, valley.clashes, valley.under.freedomLeft]).toEqual([[], [], 1])
  })
  test('two joints that are one fold cannot be a ridge and a valley', () => {
    const made = raise(pyramid, { conditions: [rim, asked(0, 'ridge'), asked(1, 'valley')] })
    expect(made.verdict).toBe('does not lift')
    expect(made.under.freedomLeft).toBeNull()
    expect(made.clashes.map(({ conditions }) => conditions)).toEqual([['rim', 'force of J1', 'force of J2']])
  })
  test('no force is flush: the roof stays in the level of its rim', () => {
    for (const force of [0, 'flush'] as const) {
      const made = raise(pyramid, { conditions: [rim, asked(2, force)] })
      expect(Math.max(...made.z.map(Math.abs))).toBeLessThan(1e-15)
      expect(made.under.freedomLeft).toBe(0)
    }
  })
})

describe('quads with the rim free', () => {
  // m + n - 2 = 12 independent stresses: joints less two for each node inside. Exact: counted by hand.
  const on = grid(8, 6, { loose: 0.12, seed: 4 })
  const joints = [3, 17, 40]
  const riseOf = (z: Float64Array): number => {
    const outer = Array.from(z).filter((_, n) => on.rimPasses[n]! > 0)
    return Math.max(...z) - Math.min(...outer)
  }
  test('the force holds while the rise goes where it is asked', () => {
    for (const rise of [1, 1.5, 3]) {
      const made = raise(on, { conditions: [asked(17, -0.11)], rise: rise / on.frame.span })
      expect(made.verdict).toBe('lifts')
      expect(forcesOf(on, made)[17]).toBeCloseTo(-0.11, 11)
      expect(riseOf(made.z)).toBeCloseTo(rise, 9)
      expect(made.under.freedomLeft).toBe(14)
      expect(made.free.freedom).toBe(12)
    }
  })
  test('several at once, ridges and a valley', () => {
    const made = raise(on, { conditions: [asked(3, -0.2), asked(17, 0.05), asked(40, -0.4)] })
    expect(made.under.freedomLeft).toBe(12)
    const forces = forcesOf(on, made)
    ;[-0.2, 0.05, -0.4].forEach((force, k) => expect(forces[joints[k]!]).toBeCloseTo(force, 11))
    expect(made.roof!.residual).toBeLessThan(1e-13)
    // What the answer reports as stress is the same force over the joint's length.
    const [a, b] = [on.origin[34]!, on.origin[35]!]
    expect(made.roof!.stress[17]! * Math.hypot(on.work[2 * b]! - on.work[2 * a]!, on.work[2 * b + 1]! - on.work[2 * a + 1]!)).toBeCloseTo(0.05, 11)
  })
})

describe('against dense algebra', () => {
  const on = grid(5, 4, { loose: 0.15, seed: 6 })
  const n = on.nodeCount
  const areas = areaShares(on)
  /** F as a row on heights, by linearity from the unit heights. */
  const rowOf = (joint: number): number[] => Array.from({ length: n }, (_, i) => foldForces(on, Array.from({ length: n }, (_, k) => (k === i ? 1 : 0)))[joint]!)
  const target = Float64Array.from({ length: n }, (_, i) => 0.2 - 0.4 * (on.work[2 * i]! ** 2 + on.work[2 * i + 1]! ** 2))
  const size = (h: readonly number[]): number => h.reduce((sum, height, i) => sum + areas[i]! * (height - target[i]!) ** 2, 0)

  test('a soft force is met as far as its weight goes', () => {
    const natural = nearest(roofs(on, [], []), target, areas)
    const before = foldForces(on, natural)[5]!
    let last = Infinity
    for (const weight of [0.01, 1, 100, 1e6]) {
      const made = raise(on, { conditions: [asked(5, before + 0.3, weight)], target })
      // The row is scaled, so its weight in F is not the one asked: found from the roof itself, it must be one positive number.
      const left = before + 0.3 - forcesOf(on, made)[5]!
      expect(left).toBeGreaterThan(0)
      expect(left).toBeLessThan(last)
      last = left
    }
    expect(last).toBeLessThan(1e-4)
  })

  test.each([[[2, 5, 9], null], [[0, 4, 7, 11], null], [[2, 5, 9], 2]] as const)('joints %j asked to be valleys of a dome, soft %j: the best of all sets held', (joints, soft) => {
    const made = raise(on, { conditions: joints.map((joint) => asked(joint, 'valley', soft)), target })
    const mine = Array.from(made.z, (height) => height / on.frame.span)
    const rows = joints.map(rowOf)
    const kept = (h: readonly number[], slack: number): boolean => rows.every((row) => dot(row, h) > leastFold - slack)
    if (soft === null) {
      // All 2^k sets of joints held at the least fold: the nearest roof that keeps every sign.
      let best = Infinity
      for (let set = 0; set < 1 << joints.length; set += 1) {
        const held = rows.filter((_, k) => (set >> k) % 2 === 1)
        const roof = nearest(roofs(on, held, held.map(() => leastFold)), target, areas)
        if (kept(roof, 1e-9)) best = Math.min(best, size(roof))
      }
      expect(best).toBeLessThan(Infinity)
      expect(kept(mine, 1e-9)).toBe(true)
      expect(size(mine)).toBeCloseTo(best, 10)
      expect(kept(nearest(roofs(on, [], []), target, areas), 1e-9)).toBe(false)
    } else {
      // Broken ones count with their square: of all sets of rows counted, the roof that breaks exactly those.
      const signed = signedRows(on, joints, soft)
      let agreeing = 0
      for (let set = 0; set < 1 << joints.length; set += 1) {
        const of = joints.map((_, k) => k).filter((k) => (set >> k) % 2 === 1)
        const counted: Soft = of.length === 0 ? noSoft : { rows: of.map((k) => signed[k]!.row), values: of.map((k) => signed[k]!.value), weights: of.map(() => soft * n) }
        const roof = nearest(roofs(on, [], []), target, areas, counted)
        if (!signed.every(({ row, value }, k) => of.includes(k) === dot(row, roof) > value)) continue
        agreeing += 1
        mine.forEach((height, i) => expect(height).toBeCloseTo(roof[i]!, 10))
      }
      expect(agreeing).toBe(1)
    }
  })
})

test('a joint that is frozen has no force: the clash names the condition', () => {
  // A level rim freezes a grid of quads, panel by panel from its corners.
  const on = grid(4, 3)
  const made = raise(on, { conditions: [rim, asked(7, -0.1)] })
  expect(made.verdict).toBe('does not lift')
  expect(made.clashes.map(({ conditions }) => conditions)).toEqual([['rim', 'force of J8']])
  const signed = raise(on, { conditions: [rim, asked(7, 'ridge')] })
  expect(signed.clashes.map(({ conditions }) => conditions)).toEqual([['rim', 'force of J8']])
  expect(signed.roof?.exact).toBe(false)
})
