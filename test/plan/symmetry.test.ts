/** Mirror lines of plans: as many as the figure has, with their pairs, and none where one node or void is not matched. */
import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { mirrorLines, type MirrorLine } from '../../src/plan/symmetry.ts'
import { cells, grid, honeycomb, plan } from '../make/plans.ts'
import { bond, skewGrid } from '../make/spoilt.ts'

const lines = (p: Plan, tolerance = 1e-6): MirrorLine[] => finish(mirrorLines(p, tolerance))
const degrees = ({ direction: [x, y] }: MirrorLine): number => Number(((Math.atan2(y, x) * 180) / Math.PI).toFixed(9))

/** n triangles round a hub, turned by `turn` and moved far off. */
function wheel(n: number, turn = 0.3, at: readonly [number, number] = [3512345.25, 5412345.75]): Plan {
  const rim = Array.from({ length: n }, (_, k) => [at[0] + 7 * Math.cos(turn + (2 * Math.PI * k) / n), at[1] + 7 * Math.sin(turn + (2 * Math.PI * k) / n)] as const)
  return plan([at, ...rim], rim.map((_, k) => [0, k + 1, ((k + 1) % n) + 1]))
}

/** The plan with its nodes moved by up to `by` in x and y. */
function moved(p: Plan, by: number, seed: number): Plan {
  const next = random(seed)
  const faces = Array.from({ length: p.panelCount }, (_, k) => Array.from(p.corner.subarray(p.panelStart[k]!, p.panelStart[k + 1]!)))
  return plan(Array.from(p.x, (x, n) => [x + by * (2 * next() - 1), p.y[n]! + by * (2 * next() - 1)] as const), faces)
}

describe('as many lines as the figure has (exact: worked out by hand)', () => {
  test.each([
    ['an oblong grid', grid(6, 4), [0, 90]],
    ['a square grid', grid(5, 5), [-45, 0, 45, 90]],
    ['a bond of odd height', bond(4, 3), [0, 90]],
    ['a skew grid whose bays are equal', skewGrid(4, 4, 60), [-60, 30]],
    ['a skew grid that is longer', skewGrid(5, 3, 60), []],
    ['random cells', cells(30, 4), []],
    ['hexagons, two rows', honeycomb(4, 2), []],
    ['hexagons, three rows', honeycomb(4, 3), [0]],
    ['a grid with a void in the middle', grid(5, 3, { voids: [[2, 1]] }), [0, 90]],
    ['a grid with a void off the middle', grid(5, 3, { voids: [[1, 1]] }), [0]],
    ['a grid with a void in a corner bay', grid(5, 3, { voids: [[1, 0]] }), []],
  ] as const)('%s', (_, p, expected) => {
    expect(lines(p).map(degrees)).toEqual(expected.map((value) => expect.closeTo(value, 6) as number))
  })

  test.each([3, 4, 7, 12, 60])('a wheel of %i, turned, in survey coordinates', (n) => {
    const found = lines(wheel(n))
    expect(found).toHaveLength(n)
    for (const { image, point, misfit } of found) {
      expect(image[0]).toBe(0)
      expect(Math.hypot(point[0] - 3512345.25, point[1] - 5412345.75)).toBeLessThan(1e-8)
      expect(misfit).toBeLessThan(1e-8)
    }
  })
})

test('the pairs are each other\'s images, and mirrored by the line onto each other', () => {
  for (const { point, direction: [ux, uy], image, misfit } of lines(grid(5, 5))) {
    const p = grid(5, 5)
    for (let n = 0; n < p.nodeCount; n += 1) {
      expect(image[image[n]!]).toBe(n)
      const [dx, dy] = [p.x[n]! - point[0], p.y[n]! - point[1]]
      const along = dx * ux + dy * uy
      const [mx, my] = [point[0] + 2 * along * ux - dx, point[1] + 2 * along * uy - dy]
      expect(Math.hypot(mx - p.x[image[n]!]!, my - p.y[image[n]!]!)).toBeLessThan(1e-12)
    }
    expect(misfit).toBeLessThan(1e-12)
  }
})

test('nearly mirrored within the tolerance, the misfit as it is', () => {
  for (const seed of [1, 2, 3, 4]) {
    const p = moved(grid(8, 5, { bay: 1.5 }), 0.0005, seed)
    expect(lines(p, 1e-6)).toEqual([])
    const found = lines(p, 0.004)
    expect(found.map((line) => Math.abs(Math.round(degrees(line)))).sort((a, b) => a - b)).toEqual([0, 90])
    // Two nodes at most 0.71 mm off, and the line a little.
    for (const { misfit } of found) expect([misfit > 0.0005, misfit < 0.002]).toEqual([true, true])
  }
})

test('one node off by more than the tolerance breaks the lines that it is not on', () => {
  const p = grid(6, 4)
  const faces = Array.from({ length: p.panelCount }, (_, k) => Array.from(p.corner.subarray(p.panelStart[k]!, p.panelStart[k + 1]!)))
  const off = (node: number, dx: number): Plan => plan(Array.from(p.x, (x, n) => [n === node ? x + dx : x, p.y[n]!] as const), faces)
  const middle = Array.from(p.x.keys()).find((n) => p.x[n] === 2 && p.y[n] === 2)!
  expect(lines(off(middle, 0.01), 0.001).map(degrees)).toEqual([expect.closeTo(0, 6)])
  const corner = Array.from(p.x.keys()).find((n) => p.x[n] === 2 && p.y[n] === 1)!
  expect(lines(off(corner, 0.01), 0.001)).toEqual([])
})
