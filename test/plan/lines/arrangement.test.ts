import { expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { reading, type Segment } from '../drawings.ts'
import { faults, messyLines, messyOutlines } from './messy.ts'

test.each([[0, 0], [5_700_000, 4_000_000]])('messy lines become a subdivision without crossings, whatever they are; offset %i, %i', (dx, dy) => {
  expect(messyLines(20, 250, dx, dy)).toBeGreaterThan(120)
})

test('outlines become panels that do not overlap, or are refused, whatever they are', () => {
  const outcomes = messyOutlines(21, 400)
  // Both outcomes are common, or the test says little.
  expect(outcomes.get('read')).toBeGreaterThan(50)
  expect(outcomes.get('panels-overlap')).toBeGreaterThan(50)
})

test.each([1, 2, 3, 4, 5, 6])('lines through nearly one point, and nearly parallel ones, leave no sliver narrower than the snap distance, seed %i', (seed) => {
  const next = random(seed)
  const lines: Segment[] = [[[-3, -3], [3, -3]], [[3, -3], [3, 3]], [[3, 3], [-3, 3]], [[-3, 3], [-3, -3]]]
  for (let k = 0; k < 14; k += 1) {
    const turn = (Math.PI * (k + next())) / 14
    const off = 8e-4 * (next() - 0.5)
    const [c, s] = [Math.cos(turn), Math.sin(turn)]
    lines.push([[2.9 * c - off * s, 2.9 * s + off * c], [-2.9 * c - off * s, -2.9 * s + off * c]])
  }
  for (let k = 0; k < 6; k += 1) lines.push([[-3, 2 + 2e-4 * k], [3, 2 + 1e-3 * (next() - 0.5)]])
  const result = reading({ lines })
  if (!result.ok) throw new Error(result.problem.message)
  const { plan } = result.value
  expect(faults(plan)).toEqual([])
  for (let p = 0; p < plan.panelCount; p += 1) {
    let twice = 0, perimeter = 0
    const nodes = plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1])
    nodes.forEach((a, k) => {
      const b = nodes[(k + 1) % nodes.length]!
      twice += plan.x[a]! * plan.y[b]! - plan.x[b]! * plan.y[a]!
      perimeter += Math.hypot(plan.x[a]! - plan.x[b]!, plan.y[a]! - plan.y[b]!)
    })
    expect(twice / perimeter).toBeGreaterThan(0.9e-3)
  }
})
