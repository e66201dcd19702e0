/** Runs that are nearly straight: found with their misfit, straightened on acceptance, never farther than the plan tolerance. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import type { Plan } from '../../../src/plan/plan.ts'
import type { ReadPlan } from '../../../src/plan/read-plan.ts'
import { cells, grid, honeycomb } from '../../make/plans.ts'
import { bond, skewGrid } from '../../make/spoilt.ts'
import { read, type Point } from '../drawings.ts'

/** Outlines of a plan with every node moved by `shift`. */
function outlines(plan: Plan, shift: (x: number, y: number, node: number) => Point): Point[][] {
  return Array.from({ length: plan.panelCount }, (_, p) =>
    Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (n) => shift(plan.x[n]!, plan.y[n]!, n)))
}

const straighten = (r: ReadPlan): string => r.repairs.filter(({ code }) => code === 'straighten').map(({ state, message }) => `${state}: ${message}`).join(' ')

/** Sine of the largest turn at a node where two edges of the clean plan go straight on, by its definition. */
function largestTurn(clean: Plan, got: Plan): number {
  const nodeAt = (n: number): number => {
    let best = 0
    for (let m = 0; m < got.nodeCount; m += 1) {
      if (Math.hypot(got.x[m]! - clean.x[n]!, got.y[m]! - clean.y[n]!) < Math.hypot(got.x[best]! - clean.x[n]!, got.y[best]! - clean.y[n]!)) best = m
    }
    return best
  }
  const same = Array.from({ length: clean.nodeCount }, (_, n) => nodeAt(n))
  const neighbours: number[][] = Array.from({ length: clean.nodeCount }, () => [])
  for (let e = 0; e < clean.edgeCount; e += 1) {
    const [a, b] = [clean.origin[2 * e]!, clean.origin[2 * e + 1]!]
    neighbours[a]!.push(b)
    neighbours[b]!.push(a)
  }
  const turn = (plan: Plan, a: number, n: number, b: number): [sine: number, dot: number] => {
    const [ux, uy, vx, vy] = [plan.x[n]! - plan.x[a]!, plan.y[n]! - plan.y[a]!, plan.x[b]! - plan.x[n]!, plan.y[b]! - plan.y[n]!]
    return [Math.abs(ux * vy - uy * vx) / Math.hypot(ux, uy) / Math.hypot(vx, vy), ux * vx + uy * vy]
  }
  let most = 0
  neighbours.forEach((list, n) => list.forEach((a) => list.forEach((b) => {
    const [sine, dot] = turn(clean, a, n, b)
    if (dot > 0 && sine < 1e-9) most = Math.max(most, turn(got, same[a]!, same[n]!, same[b]!)[0])
  })))
  return most
}

describe('a node that slipped', () => {
  const slipped = (by: number): Point[][] => outlines(grid(6, 4), (x, y) => (x === 2 && y === 1 ? [x + by, y - by / 2] : [x, y]))

  test('is found with its misfit, and goes back to the last digit', () => {
    const r = read({ outlines: slipped(0.0008) })
    expect(straighten(r)).toBe('proposed: 1 node of 2 runs is off straight by up to 0.8 mm; straightening moves 1 node by up to 0.89 mm.')
    expect(r.plan.x).toContain(2.0008)
    expect(r.questions).toEqual([])
    const taken = read({ outlines: slipped(0.0008) }, { accept: ['straighten'] })
    expect(straighten(taken)).toMatch(/^accepted: /)
    expect(largestTurn(grid(6, 4), taken.plan)).toBeLessThan(1e-14)
    for (let n = 0; n < taken.plan.nodeCount; n += 1) expect(Math.abs(taken.plan.x[n]! - Math.round(taken.plan.x[n]!))).toBeLessThan(1e-14)
  })

  test('stays where it would move farther than the plan tolerance, which is said', () => {
    const r = read({ outlines: slipped(0.004) }, { accept: ['all'] })
    expect(straighten(r)).toMatch(/^proposed: 1 node of 2 runs is off straight by up to 4 mm; .*stay as drawn, since nodes would move by more than the plan tolerance of 1 mm/)
    expect(r.plan.x).toContain(2.004)
    const wider = read({ outlines: slipped(0.004) }, { accept: ['all'], planTolerance_mm: 5 })
    expect(straighten(wider)).toMatch(/^accepted: .*moves 1 node by up to 4\.5 mm\.$/)
    expect(largestTurn(grid(6, 4), wider.plan)).toBeLessThan(1e-14)
  })

  test('is no slip when it is far off', () => {
    expect(straighten(read({ outlines: slipped(0.03) }))).toBe('')
  })
})

describe('nodes set out by hand', () => {
  const loose = (plan: Plan, by: number, seed: number): Point[][] => {
    const next = random(seed)
    const shifts = Array.from({ length: 2 * plan.nodeCount }, () => by * (2 * next() - 1))
    return outlines(plan, (x, y, n) => [x + shifts[2 * n]!, y + shifts[2 * n + 1]!])
  }

  test.each([
    ['grid', grid(8, 5)], ['bond', bond(5, 4)], ['bars at 50 degrees', skewGrid(5, 4, 50)], ['with diagonals', skewGrid(6, 6, 90, true)],
  ] as const)('%s: all runs straight, no node moved farther than the tolerance', (_, clean) => {
    for (const seed of [1, 2, 3]) {
      const sketch = { outlines: loose(clean, 0.00025, seed) }
      const before = read(sketch)
      const taken = read(sketch, { accept: ['straighten'] })
      expect(largestTurn(clean, before.plan)).toBeGreaterThan(1e-5)
      expect(largestTurn(clean, taken.plan)).toBeLessThan(1e-9)
      expect([taken.plan.panelCount, taken.plan.nodeCount, taken.plan.jointCount]).toEqual([clean.panelCount, clean.nodeCount, clean.jointCount])
      for (let n = 0; n < taken.plan.nodeCount; n += 1) {
        expect(Math.hypot(taken.plan.x[n]! - before.plan.x[n]!, taken.plan.y[n]! - before.plan.y[n]!)).toBeLessThanOrEqual(0.001)
      }
    }
  })
})

test('plans that are straight or have no runs offer nothing, and nothing changes when all is accepted', () => {
  for (const plan of [grid(5, 4), bond(4, 3), honeycomb(4, 3), cells(12, 3), skewGrid(4, 4, 35)]) {
    const sketch = { outlines: outlines(plan, (x, y) => [x, y]) }
    expect(straighten(read(sketch))).toBe('')
    expect(Array.from(read(sketch, { accept: ['all'] }).plan.x)).toEqual(Array.from(read(sketch).plan.x))
  }
})

test('the plan tolerance joins line ends', () => {
  // The last end misses by 3 mm: a millimetre leaves the square open.
  const lines = [[[0, 0], [1, 0]], [[1, 0], [1, 1]], [[1, 1], [0, 1]], [[0, 1], [0.003, 0.003]]] as const
  expect(() => read({ lines })).toThrow('no-panels')
  expect(read({ lines }, { planTolerance_mm: 4 }).plan.panelCount).toBe(1)
  expect(() => read({ lines }, { planTolerance_mm: 4, snap_mm: 1 })).toThrow('no-panels')
})
