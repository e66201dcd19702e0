/** Joints without force by the balance of nodes: by hand, and never one that folds in some roof. */
import { describe, expect, test } from 'vitest'
import type { Plan } from '../../../src/plan/plan.ts'
import { zeroForceJoints } from '../../../src/roof/stress/zero-force-joints.ts'
import { foldSizes, roofs } from '../../make/dense-roof.ts'
import { grid, plan } from '../../make/plans.ts'

/** The joint between two points. */
function jointAt(on: Plan, a: readonly [number, number], b: readonly [number, number]): number {
  const is = (node: number, [x, y]: readonly [number, number]): boolean => on.x[node] === x && on.y[node] === y
  const joint = Array.from({ length: on.jointCount }, (_, j) => j).find((j) => {
    const [from, to] = [on.origin[2 * j]!, on.origin[2 * j + 1]!]
    return (is(from, a) && is(to, b)) || (is(from, b) && is(to, a))
  })
  if (joint === undefined) throw new Error('no such joint')
  return joint
}

/** A row of two below one of three, as bricks lie: stems at (2, 1) from above and .. below. Exact: worked out by hand. */
const bond = plan(
  [[0, 0], [3, 0], [6, 0], [0, 1], [2, 1], [3, 1], [4, 1], [6, 1], [0, 2], [2, 2], [4, 2], [6, 2]],
  [[0, 1, 5, 4, 3], [1, 2, 7, 6, 5], [3, 4, 9, 8], [4, 5, 6, 10, 9], [6, 7, 11, 10]],
)

/** Over a slab two courses of two, their joints in line: the lower is a stem on the slab. */
const tower = plan(
  [[0, 0], [4, 0], [4, 1], [2, 1], [0, 1], [2, 2], [0, 2], [4, 2], [2, 3], [0, 3], [4, 3]],
  [[0, 1, 2, 3, 4], [4, 3, 5, 6], [3, 2, 7, 5], [6, 5, 8, 9], [5, 7, 10, 8]],
)

describe('by hand', () => {
  test('a stem of a T-junction', () => {
    const found = zeroForceJoints(bond)
    const stem = jointAt(bond, [2, 1], [2, 2])
    expect(found[stem]).toMatchObject({ rule: 'stem', before: [], others: [jointAt(bond, [0, 1], [2, 1]), jointAt(bond, [2, 1], [3, 1])].sort((a, b) => a - b) })
    expect(bond.x[found[stem]!.node]).toBe(2)
    expect(found.filter((entry) => entry !== null)).toHaveLength(3)
    expect(found[jointAt(bond, [3, 1], [4, 1])]).toBeNull()
  })
  test('two that are not in line', () => {
    const bent = plan([[0, 0], [2, 0], [2, 2], [0, 2], [0.8, 0.8]], [[0, 1, 4, 3], [1, 2, 3, 4]])
    expect(zeroForceJoints(bent)).toMatchObject([{ rule: 'corner', others: [1], before: [] }, { rule: 'corner', others: [0] }])
  })
  test('a stem on a stem: the upper one follows from the lower', () => {
    const found = zeroForceJoints(tower)
    const [lower, upper] = [jointAt(tower, [2, 1], [2, 2]), jointAt(tower, [2, 2], [2, 3])]
    expect(found[lower]).toMatchObject({ rule: 'stem', before: [] })
    expect(found[upper]).toMatchObject({ rule: 'stem', before: [lower] })
    expect(found.filter((entry) => entry !== null)).toHaveLength(2)
  })
})

describe('against all roofs', () => {
  test.each([
    ['bond', bond],
    ['tower', tower],
    ['quads', grid(4, 3, { loose: 0.1 })],
    ['quads with a bent joint', plan([[0, 0], [2, 0], [4, 0], [0, 2], [2, 2], [4, 2], [0, 4], [2, 4], [4, 4], [1, 2.5]], [[0, 1, 4, 9, 3], [1, 2, 5, 4], [3, 9, 4, 7, 6], [4, 5, 8, 7]])],
  ] as const)('%s: no joint that some roof folds is found', (_, on) => {
    const sizes = foldSizes(on, roofs(on, [], []))
    const found = zeroForceJoints(on)
    found.forEach((entry, joint) => entry !== null && expect(sizes[joint]).toBeLessThan(1e-9))
    if (on === bond || on === tower) found.forEach((entry, joint) => expect(entry === null).toBe(sizes[joint]! > 1e-9))
  })
})
