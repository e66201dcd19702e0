/** Balancing by force densities: what comes out lifts with exactly those stresses; a lifting plan comes back. */
import { expect, test } from 'vitest'
import { finish } from '../../../../src/base/steps.ts'
import type { Plan } from '../../../../src/plan/plan.ts'
import { balanced, bearingEdges, movingNodes } from '../../../../src/roof/cures/balance/balance.ts'
import { fittedDensities, lengthDensities, uniformDensities } from '../../../../src/roof/cures/balance/densities.ts'
import { coordinatesOf, movedPlan } from '../../../../src/roof/cures/move/moved-plan.ts'
import { stressOfGradients } from '../../../../src/roof/stress/forces.ts'
import { freeRim } from '../../../../src/roof/stress/free-rim.ts'
import { panelPlanes } from '../../../../src/roof/stress/panel-bases.ts'
import { grid, plan, voronoi } from '../../../make/plans.ts'

const moved = (of: Plan, work: Float64Array): Plan => {
  const { x, y } = coordinatesOf(of, work)
  const made = movedPlan(of, x, y)
  if (!made.ok) throw new Error(made.problem.message)
  return made.value
}
const shift = (of: Plan, work: Float64Array): number => work.reduce((most, value, i) => Math.max(most, Math.abs(value - of.work[i]!)), 0)

test('a square with its centre anywhere: uniform densities put it in the middle (exact: mean of its neighbours)', () => {
  const of = plan([[0, 0], [4, 0], [4, 4], [0, 4], [1, 0.5]], [[0, 1, 4], [1, 2, 4], [2, 3, 4], [3, 0, 4]])
  const made = finish(balanced(of, uniformDensities(of)))!
  const centre = [...movingNodes(of).keys()].find((n) => movingNodes(of)[n] === 1)!
  const { x, y } = coordinatesOf(of, made.work)
  expect([x[centre], y[centre]]).toEqual([2, 2])
})

test('balancing with the stresses of a lifting plan gives that plan back (Voronoi cells; exact stresses of the paraboloid)', () => {
  const { plan: of, sites } = voronoi(60, 7)
  // Lift max(2 s.x - |s|^2) over the sites: the gradient of a panel is twice its site.
  const lift = Float64Array.from({ length: of.nodeCount }, (_, n) => Math.max(...sites.map(([x, y]) => 2 * (x * of.x[n]! + y * of.y[n]!) - x * x - y * y)))
  const { bases } = finish(freeRim(of))
  const stress = stressOfGradients(of, panelPlanes(of, bases, lift).gradient)
  const density = new Float64Array(of.edgeCount)
  density.set(stress)
  const made = finish(balanced(of, density))!
  expect(shift(of, made.work)).toBeLessThan(1e-12)
  expect(made.crossed).toHaveLength(0)
  // Fitted densities find such stresses by themselves.
  const fitted = finish(balanced(of, finish(fittedDensities(of))))!
  expect(shift(of, fitted.work)).toBeLessThan(1e-6)
})

test('uniform and by length on a convex rim: no crossings, and every joint can fold (Tutte 1963)', () => {
  const of = grid(6, 5, { loose: 0.3 })
  for (const density of [uniformDensities(of), lengthDensities(of)]) {
    const made = finish(balanced(of, density))!
    expect(made.crossed).toHaveLength(0)
    const free = finish(freeRim(moved(of, made.work)))
    expect(free.freedom).toBeGreaterThan(0)
    expect([...free.frozen].every((value) => value === 0)).toBe(true)
  }
})

test('a void balances as one flat face: its rim edges bear stress and the plan lifts with the void flat', () => {
  const of = grid(5, 5, { loose: 0.15, seed: 3, voids: [[2, 2]] })
  expect(bearingEdges(of)).toHaveLength(of.jointCount + 4)
  const made = finish(balanced(of, uniformDensities(of)))!
  expect(made.crossed).toHaveLength(0)
  // Filled, it is the same plan with one more panel: both lift.
  const after = moved(of, made.work)
  expect(finish(freeRim(after)).freedom).toBeGreaterThan(0)
})

test('densities of two signs throw panels over each other, and these are named', () => {
  const of = grid(4, 4)
  const density = uniformDensities(of)
  for (let joint = 0; joint < of.jointCount; joint += 5) density[joint] = -1.7
  const made = finish(balanced(of, density))!
  expect(made.crossed.length).toBeGreaterThan(0)
})
