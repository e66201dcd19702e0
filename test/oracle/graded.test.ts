/**
 * Counts on plans with panels of 1 : 1000. Sources: cells, 1 + 3 (the paraboloid's lift, and tilts); quads in general position,
 * columns + rows + 1 (exact: heights on one line of nodes each way fix all others, four points of a panel being coplanar).
 */
import { expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { freeRim } from '../../src/roof/stress/free-rim.ts'
import type { TestPlan } from '../base/sparse/plans.ts'
import { gradedCells, gradedQuads, quadLifts } from '../make/graded.ts'
import { dimensionOfLifts } from '../make/dense.ts'
import { plan } from '../make/plans.ts'

const made = ({ coordinates, start, index }: TestPlan): Plan =>
  plan(Array.from({ length: coordinates.length / 2 }, (_, i) => [coordinates[2 * i]!, coordinates[2 * i + 1]!] as const), Array.from({ length: start.length - 1 }, (_, f) => Array.from(index.subarray(start[f], start[f + 1]))))

/** Largest over smallest panel, as square roots of areas. */
function grading({ panelStart, corner, work, panelCount }: Plan): number {
  let least = Infinity, most = 0
  for (let p = 0; p < panelCount; p += 1) {
    let twice = 0
    const nodes = corner.subarray(panelStart[p], panelStart[p + 1])
    nodes.forEach((a, k) => {
      const b = nodes[(k + 1) % nodes.length]!
      twice += work[2 * a]! * work[2 * b + 1]! - work[2 * a + 1]! * work[2 * b]!
    })
    least = Math.min(least, twice)
    most = Math.max(most, twice)
  }
  return Math.sqrt(most / least)
}

test.each([1, 2, 3])('cells 16 x 16, seed %i: 1 + 3, no joint frozen', (seed) => {
  const of = made(gradedCells(16, seed))
  expect(grading(of)).toBeGreaterThan(500)
  const { space, freedom, frozen, decided } = finish(freeRim(of))
  expect([space.dimension, freedom, decided]).toEqual([4, 1, true])
  expect(frozen.every((value) => value === 0)).toBe(true)
})

test.each([1, 2, 3])('quads 20 x 14, seed %i: by formula, no joint frozen', (seed) => {
  const of = made(gradedQuads(20, 14, seed))
  expect(grading(of)).toBeGreaterThan(500)
  const { space, frozen, decided } = finish(freeRim(of))
  expect([space.dimension, decided]).toEqual([quadLifts(20, 14), true])
  expect(frozen.every((value) => value === 0)).toBe(true)
})

test('a dense rank says the same of both', () => {
  expect(dimensionOfLifts(made(gradedCells(7, 4)))).toBe(4)
  expect(dimensionOfLifts(made(gradedQuads(8, 7, 4)))).toBe(quadLifts(8, 7))
})
