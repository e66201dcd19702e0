/**
 * A starting shape stands at the held levels when no datum is stated. Exact, from the definition: levels all raised by the
 * same amount give the same roof raised by it, and the rise is the asked one above the lowest node of the rim.
 */
import { describe, expect, test } from 'vitest'
import { grid } from '../../make/plans.ts'
import { level, raise } from '../../make/raise.ts'

const plan = grid(6, 4, { bay: 1.5 })
const at = (x: number, y: number): number => Array.from(plan.x.keys()).find((n) => plan.x[n] === x && plan.y[n] === y)!
const spread = (z: Float64Array): number => Math.max(...z) - Math.min(...z)

/** Four corners of the rim, one side 0.2 m higher; or a node inside. */
const corners = (base: number) => [[0, 0, 0.2], [9, 0, 0], [9, 6, 0], [0, 6, 0.2]].map(([x, y, up], k) => level(`corner ${k}`, { nodes: [[x!, y!]] }, base + up!))
const middle = (base: number) => [level('mast', { nodes: [[4.5, 3]] }, base)]

describe.each([['corners of the rim', corners, 0.5], ['a node inside', middle, 3]] as const)('%s held', (_, conditions, lower) => {
  test.each([false, true])(`at 112 m as at ${lower} m, so much higher; hangs: %s`, (down) => {
    const low = raise(plan, { conditions: conditions(lower), rule: { down, datum: null } }), high = raise(plan, { conditions: conditions(112), rule: { down, datum: null } })
    expect(high.verdict).toBe('lifts')
    for (const [n, z] of high.z.entries()) expect(z - low.z[n]!).toBeCloseTo(112 - lower, 6)
    expect(spread(high.z)).toBeLessThan(2)
  })
})

test('the rise is the asked one above the lowest node of the rim', () => {
  const { z } = raise(plan, { conditions: corners(112), rise: 0.9 / plan.frame.span })
  expect(z[at(9, 0)]).toBeCloseTo(112, 9)
  expect(Math.max(...z) - Math.min(...Array.from(plan.x.keys()).filter((n) => plan.x[n] === 0 || plan.x[n] === 9 || plan.y[n] === 0 || plan.y[n] === 6).map((n) => z[n]!))).toBeCloseTo(0.9, 6)
})

test('a node inside that the shape reaches bends it: the roof is not taken along as a whole', () => {
  const dome = raise(plan), pulled = raise(plan, { conditions: middle(1) })
  expect(dome.z[at(4.5, 3)]).toBeCloseTo(0.6, 9)
  expect(pulled.z[at(4.5, 3)]).toBeCloseTo(1, 9)
  // A mere shift would lift all corners by 0.4 m.
  expect(pulled.z[at(0, 0)]! - dome.z[at(0, 0)]!).toBeLessThan(0.2)
})

test('a stated datum is the springing, as before', () => {
  const { z } = raise(plan, { conditions: corners(0.1), rise: 1 / plan.frame.span, rule: { down: false, datum: 0 } })
  expect(Math.max(...z)).toBeCloseTo(1, 6)
})
