/** The ways left: lifts that keep the conditions, as many as there are, without a lean that the conditions do not ask for. */
import { describe, expect, test } from 'vitest'
import { conditionRows } from '../../../src/roof/conditions/condition-rows.ts'
import { nodeAreas } from '../../../src/roof/raise/nearest.ts'
import { freeTilts, tiltDimension } from '../../../src/roof/stress/tilts.ts'
import { waysLeft } from '../../../src/roof/stress/ways-left.ts'
import type { Plan } from '../../../src/plan/plan.ts'
import type { Condition } from '../../../src/plan/project/condition.ts'
import { dot, foldForces, roofs } from '../../make/dense-roof.ts'
import { rank } from '../../make/dense.ts'
import { grid, plan } from '../../make/plans.ts'
import { level, raise } from '../../make/raise.ts'

function ways(on: Plan, conditions: readonly Condition[], count: number) {
  const made = conditionRows(on, conditions, 0)
  if (!made.ok) throw new Error(made.problem.message)
  const { under } = raise(on, { conditions })
  return waysLeft(under.space, made.value.hard, under.tilts, nodeAreas(on), count)
}

const energy = (on: Plan, h: Float64Array): number => foldForces(on, [...h]).reduce((sum, force) => sum + force * force, 0)

describe.each([
  ['rim free', [], 9 + 3, 3],
  ['one corner held', [level('corner', { nodes: ['N1'] })], 9 + 2, 2],
  ['a long side held', [level('side', { run: [[0, 0], [6, 0]] })], null, 1],
] as const)('6 x 5 quads, %s', (_, conditions, dimension, tilts) => {
  // Straight lines both ways, so every lift is f(x) + g(y): m + n + 1 dimensions, three of them tilts. Exact: by hand.
  const on = grid(6, 5)
  const held = conditions.flatMap((condition) => {
    const made = conditionRows(on, [condition], 0)
    if (!made.ok) throw new Error(made.problem.message)
    return [...made.value.held[0]!.nodes]
  })
  const rows = held.map((node) => Array.from({ length: on.nodeCount }, (_unused, n) => (n === node ? 1 : 0)))
  const all = roofs(on, rows, rows.map(() => 0))
  const found = ways(on, conditions, 99)

  test('as many as there are, each a lift that keeps what is held, independent of the others', () => {
    if (dimension !== null) expect(all.basis).toHaveLength(dimension)
    expect(found).toHaveLength(all.basis.length - tilts)
    for (const { heights } of found) {
      // What the dense basis does not span of it.
      const left = all.basis.reduce((rest, column) => rest.map((value, n) => value - dot(column, heights) * column[n]!), [...heights])
      expect(Math.max(...left.map(Math.abs))).toBeLessThan(1e-11)
      for (const node of held) expect(Math.abs(heights[node]!)).toBeLessThan(1e-14)
    }
    expect(rank(found.map(({ heights }) => [...heights]), on.nodeCount)).toBe(found.length)
  })
  test('1 at the peak and nowhere more', () => {
    for (const { heights, peak } of found) {
      expect(heights[peak]).toBe(1)
      expect(Math.max(...heights.map(Math.abs))).toBeLessThan(1 + 1e-9)
    }
  })
  test('no free tilt brings the rim nearer to rest', () => {
    const rim = Array.from({ length: on.nodeCount }, (_unused, n) => n).filter((n) => on.rimPasses[n]! > 0)
    const free = [(n: number) => 1 + 0 * n, (n: number) => on.x[n]!, (n: number) => on.y[n]!]
      .map((of) => of).filter((of) => held.every((n) => Math.abs(of(n)) < 1e-12) || held.length === 0)
    for (const { heights } of found) for (const tilt of free) expect(Math.abs(rim.reduce((sum, n) => sum + tilt(n) * heights[n]!, 0))).toBeLessThan(1e-9)
    if (held.length > 1) expect(free).toHaveLength(1)
  })
  test('smoothest first', () => {
    // Folds squared over height squared, less tilt: what "smoothest" is measured in; the first is the least of all mixtures tried.
    const areas = nodeAreas(on)
    const measure = (h: Float64Array): number => {
      const basis = freeTilts(on, null)
      let rest = h
      for (let pass = 0; pass < 50; pass += 1) {
        for (const tilt of basis) {
          const size = tilt.reduce((sum, value, n) => sum + areas[n]! * value * value, 0)
          const share = tilt.reduce((sum, value, n) => sum + areas[n]! * value * rest[n]!, 0) / size
          rest = rest.map((value, n) => value - share * tilt[n]!)
        }
      }
      return energy(on, h) / rest.reduce((sum, value, n) => sum + areas[n]! * value * value, 0)
    }
    const measures = found.map(({ heights }) => measure(heights))
    measures.slice(1).forEach((value, k) => expect(value).toBeGreaterThan(measures[k]! * (1 - 1e-9)))
    const [first, second] = found as [typeof found[0], typeof found[0]]
    for (const share of [-0.5, -0.1, 0.1, 0.5]) {
      expect(measure(first.heights.map((value, n) => value + share * second.heights[n]!))).toBeGreaterThan(measures[0]! * (1 - 1e-9))
    }
  })
})

describe('free tilts', () => {
  test('as many as their dimension, flat, and keeping what is held', () => {
    const on = grid(4, 3, { loose: 0.2 })
    for (const conditions of [[], [level('a', { nodes: ['N1'] })], [level('a', { nodes: ['N1', 'N4'] })], [level('a', { rim: 'outer' })]] as const) {
      const made = conditionRows(on, conditions, 0)
      if (!made.ok) throw new Error(made.problem.message)
      const tilts = freeTilts(on, made.value.hard)
      expect(tilts).toHaveLength(tiltDimension(on, made.value.hard))
      expect(tilts).toHaveLength([3, 2, 1, 0][[0, 1, 2, 14].indexOf(conditions.length === 0 ? 0 : made.value.held[0]!.nodes.length)]!)
      for (const tilt of tilts) {
        expect(Math.max(...foldForces(on, [...tilt]).map(Math.abs))).toBeLessThan(1e-12)
        for (const node of made.value.held[0]?.nodes ?? []) expect(Math.abs(tilt[node]!)).toBeLessThan(1e-12)
      }
    }
  })
  test('two parts each have their own', () => {
    const on = plan([[0, 0], [1, 0], [1, 1], [0, 1], [3, 0], [4, 0], [4, 1], [3, 1]], [[0, 1, 2, 3], [4, 5, 6, 7]])
    expect(freeTilts(on, null)).toHaveLength(6)
  })
})
