import { expect, test } from 'vitest'
import { crossingPoint, crossProperly } from '../../../src/base/geometry/segment-crossing.ts'
import { random } from '../../../src/base/random.ts'
import { exactCrossing, exactTurn } from './exact.ts'

const out = new Float64Array(2)
type Eight = [number, number, number, number, number, number, number, number]

test('small integer segments cross properly exactly when both straddle each other, all cases on a 4 x 4 lattice', () => {
  let crossings = 0
  for (let code = 0; code < 4 ** 8; code += 37) {
    const p = Array.from({ length: 8 }, (_, k) => Math.floor(code / 4 ** k) % 4) as Eight
    const [ax, ay, bx, by, cx, cy, dx, dy] = p
    const truth = exactTurn(ax, ay, bx, by, cx, cy) * exactTurn(ax, ay, bx, by, dx, dy) < 0 && exactTurn(cx, cy, dx, dy, ax, ay) * exactTurn(cx, cy, dx, dy, bx, by) < 0
    expect(crossProperly(...p)).toBe(truth)
    if (truth) crossings += 1
  }
  expect(crossings).toBeGreaterThan(50)
})

test('crossing points are within rounding of the exact ones, seed 2', () => {
  const next = random(2)
  let worst = 0
  for (let k = 0; k < 2000; k += 1) {
    const p = Array.from({ length: 8 }, () => 20 * next() - 10) as Eight
    if (!crossProperly(...p)) continue
    crossingPoint(...p, out)
    const [x, y] = exactCrossing(p)!
    // Error grows with 1 / sin of the angle between the lines; that much the data themselves do not fix.
    const [ax, ay, bx, by, cx, cy, dx, dy] = p
    const sine = Math.abs((bx - ax) * (dy - cy) - (by - ay) * (dx - cx)) / Math.hypot(bx - ax, by - ay) / Math.hypot(dx - cx, dy - cy)
    worst = Math.max(worst, (Math.hypot(out[0]! - x, out[1]! - y) / 20) * sine)
  }
  expect(worst).toBeGreaterThan(0)
  expect(worst).toBeLessThan(4 * 2 ** -52)
})

test('lines along the axes give their own coordinates, unrounded', () => {
  const next = random(3)
  for (let k = 0; k < 500; k += 1) {
    const x = next(), y = next()
    crossingPoint(x, -1, x, 2 + next(), -1, y, 2 + next(), y, out)
    expect([out[0], out[1]]).toEqual([x, y])
    crossingPoint(-1, -1, 2, 2 + next(), x, -3, x, 4, out)
    expect(out[0]).toBe(x)
  }
})

test('parallel lines have no crossing', () => {
  crossingPoint(0, 0, 1, 1, 0, 1, 1, 2, out)
  expect(out[0]).toBeNaN()
})
