import { expect, test } from 'vitest'
import { orientation } from '../../../src/base/geometry/orientation.ts'
import { random } from '../../../src/base/random.ts'
import { exactTurn } from './exact.ts'

test('left turns are positive with y up', () => {
  // Exact: worked out by hand from the definition; twice the area of a right triangle with legs 1 is 1.
  expect(orientation(0, 0, 1, 0, 0, 1)).toBe(1)
  expect(orientation(0, 0, 0, 1, 1, 0)).toBe(-1)
  expect(Math.abs(orientation(0, 0, 1, 1, 2, 2))).toBe(0)
})

test('the sign agrees with integer arithmetic within a few units in the last place of a line, seed 1', () => {
  const next = random(1)
  const seen = new Map<number, number>()
  for (let k = 0; k < 4000; k += 1) {
    const far = k % 2 === 0 ? 5.7e6 : 0
    const [ax, ay] = [far + next(), far + next()]
    const [bx, by] = [far + 10 * next(), far + 10 * next()]
    const t = next()
    const ulp = 2 ** -52 * Math.max(1, far)
    const cx = ax + t * (bx - ax) + ulp * Math.round(2 * next() - 1)
    const cy = ay + t * (by - ay) + ulp * Math.round(2 * next() - 1)
    const truth = exactTurn(ax, ay, bx, by, cx, cy)
    seen.set(truth, (seen.get(truth) ?? 0) + 1)
    expect(Math.sign(orientation(ax, ay, bx, by, cx, cy)) + 0).toBe(truth)
  }
  // All three cases occur, or the test says little.
  expect(seen.size).toBe(3)
})
