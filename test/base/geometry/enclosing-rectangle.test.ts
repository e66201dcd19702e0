import { expect, test } from 'vitest'
import { convexHull } from '../../../src/base/geometry/convex-hull.ts'
import { enclosingRectangle } from '../../../src/base/geometry/enclosing-rectangle.ts'
import { random } from '../../../src/base/random.ts'
import { exactTurn } from './exact.ts'

const cloud = (n: number, seed: number): Float64Array => {
  const next = random(seed)
  return Float64Array.from({ length: 2 * n }, (_, k) => (k % 2 === 0 ? 5 : 3) * next())
}

test('every point lies left of every hull side and every hull corner turns left, seeds 1 to 40', () => {
  for (let seed = 1; seed <= 40; seed += 1) {
    // Small lattices have many points in line and repeated.
    const points = seed % 2 === 0 ? cloud(30, seed) : cloud(30, seed).map((v) => Math.round(v))
    const hull = convexHull(points)
    const at = (k: number): [number, number] => [points[2 * hull[k % hull.length]!]!, points[2 * hull[k % hull.length]! + 1]!]
    for (let k = 0; k < hull.length; k += 1) {
      expect(exactTurn(...at(k), ...at(k + 1), ...at(k + 2))).toBe(1)
      for (let i = 0; i < 30; i += 1) expect(exactTurn(...at(k), ...at(k + 1), points[2 * i]!, points[2 * i + 1]!)).toBeGreaterThanOrEqual(0)
    }
  }
})

test('hulls of one point and of points in a line', () => {
  expect(Array.from(convexHull(Float64Array.of(1, 1, 1, 1)))).toEqual([0])
  expect(Array.from(convexHull(Float64Array.of(1, 1, 0, 0, 2, 2)))).toEqual([1, 2])
})

test('the rectangle encloses all points and no direction gives a smaller one, seeds 1 to 30', () => {
  for (let seed = 1; seed <= 30; seed += 1) {
    const points = cloud(25, seed)
    const { centreX, centreY, axisX, axisY, halfLong, halfShort } = enclosingRectangle(points)
    expect(Math.hypot(axisX, axisY)).toBeCloseTo(1, 14)
    expect(halfLong).toBeGreaterThanOrEqual(halfShort)
    for (let i = 0; i < 25; i += 1) {
      const dx = points[2 * i]! - centreX, dy = points[2 * i + 1]! - centreY
      expect(Math.abs(dx * axisX + dy * axisY)).toBeLessThan(halfLong + 1e-12)
      expect(Math.abs(dy * axisX - dx * axisY)).toBeLessThan(halfShort + 1e-12)
    }
    // Twin path: sample directions; the minimum is over a finite set that includes the answer.
    for (let step = 0; step < 720; step += 1) {
      const turn = (step * Math.PI) / 1440
      let [u0, u1, v0, v1] = [Infinity, -Infinity, Infinity, -Infinity]
      for (let i = 0; i < 25; i += 1) {
        const u = points[2 * i]! * Math.cos(turn) + points[2 * i + 1]! * Math.sin(turn)
        const v = points[2 * i + 1]! * Math.cos(turn) - points[2 * i]! * Math.sin(turn)
        u0 = Math.min(u0, u); u1 = Math.max(u1, u); v0 = Math.min(v0, v); v1 = Math.max(v1, v)
      }
      expect((u1 - u0) * (v1 - v0)).toBeGreaterThan(4 * halfLong * halfShort * (1 - 1e-12))
    }
  }
})

test('a turned 6 x 2 rectangle comes back, wherever it lies', () => {
  for (const [far, turn] of [[0, 0.3], [5_700_000, 0.3], [0, 2.9], [0, Math.PI / 2], [-4_000_000, -1.2]] as const) {
    const [c, s] = [Math.cos(turn), Math.sin(turn)]
    const points = Float64Array.from([[-3, -1], [3, -1], [3, 1], [-3, 1], [1, 0.5]].flatMap(([u, v]) => [far + u! * c - v! * s, far + u! * s + v! * c]))
    const r = enclosingRectangle(points)
    expect(r.centreX - far).toBeCloseTo(0, 7)
    expect(r.halfLong).toBeCloseTo(3, 7)
    expect(r.halfShort).toBeCloseTo(1, 7)
    expect(Math.abs(r.axisX * s - r.axisY * c)).toBeLessThan(1e-8)
    expect(r.axisX > 0 || (r.axisX === 0 && r.axisY === 1) || Math.abs(r.axisX) < 1e-8).toBe(true)
  }
})

test('ties go to the axis nearer to x', () => {
  // A square with its corners in the axes' directions: both axes are 45 degrees from x; the climbing one is taken.
  const diamond = enclosingRectangle(Float64Array.of(1, 0, 0, 1, -1, 0, 0, -1))
  expect(diamond.axisX).toBeCloseTo(Math.SQRT1_2, 12)
  expect(diamond.axisY).toBeCloseTo(Math.SQRT1_2, 12)
  expect(enclosingRectangle(Float64Array.of(0, 0, 2, 0, 2, 2, 0, 2))).toMatchObject({ axisX: 1, axisY: 0, halfLong: 1, halfShort: 1, centreX: 1, centreY: 1 })
  // A square turned by 80 degrees is one turned by -10.
  const [c, s] = [Math.cos(80 * Math.PI / 180), Math.sin(80 * Math.PI / 180)]
  const turned = enclosingRectangle(Float64Array.of(0, 0, c, s, c - s, s + c, -s, c))
  expect(Math.atan2(turned.axisY, turned.axisX)).toBeCloseTo(-10 * Math.PI / 180, 10)
})

test('points in a line and a single point give rectangles without width', () => {
  expect(enclosingRectangle(Float64Array.of(0, 0, 3, 4))).toMatchObject({ centreX: 1.5, centreY: 2, halfLong: 2.5, halfShort: 0, axisX: 0.6, axisY: 0.8 })
  expect(enclosingRectangle(Float64Array.of(7, 8))).toMatchObject({ centreX: 7, centreY: 8, halfLong: 0, halfShort: 0 })
})
