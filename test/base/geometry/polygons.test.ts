import { expect, test } from 'vitest'
import { pointInPolygon } from '../../../src/base/geometry/point-in-polygon.ts'
import { polygonCentroid, signedArea } from '../../../src/base/geometry/polygon-area.ts'
import { random } from '../../../src/base/random.ts'

const indices = (n: number): Int32Array => Int32Array.from({ length: n }, (_, i) => i)

test('area and centroid of an L, exact: worked out by hand from the definition', () => {
  // 3 x 1 and 1 x 2: area 5, centroid ((3 * 1.5 + 2 * 0.5) / 5, (3 * 0.5 + 2 * 2) / 5) = (1.1, 1.1).
  const x = Float64Array.of(0, 3, 3, 1, 1, 0)
  const y = Float64Array.of(0, 0, 1, 1, 3, 3)
  expect(signedArea(x, y, indices(6), 0, 6)).toBe(5)
  expect(signedArea(x, y, indices(6).reverse(), 0, 6)).toBe(-5)
  const out = new Float64Array(2)
  polygonCentroid(x, y, indices(6), 0, 6, out)
  expect(out[0]).toBeCloseTo(1.1, 14)
  expect(out[1]).toBeCloseTo(1.1, 14)
})

test('survey coordinates cost the area no digits beyond those of the corners', () => {
  const x = Float64Array.of(0, 3, 3, 0).map((v) => v + 5_700_000)
  const y = Float64Array.of(0, 0, 2, 2).map((v) => v + 4_000_000)
  expect(signedArea(x, y, indices(4), 0, 4)).toBe(6)
})

test('the centroid of a polygon without area is the mean of its corners', () => {
  const out = new Float64Array(2)
  polygonCentroid(Float64Array.of(0, 2, 4), Float64Array.of(0, 0, 0), indices(3), 0, 3, out)
  expect(Array.from(out)).toEqual([2, 0])
})

test('points in a star-shaped polygon lie inside exactly when nearer to the centre than the side in their direction, seed 4', () => {
  const next = random(4)
  const n = 9
  const radius = Float64Array.from({ length: n }, () => 1 + 3 * next())
  const angle = (k: number): number => (2 * Math.PI * k) / n
  const x = Float64Array.from(radius, (r, k) => r * Math.cos(angle(k)))
  const y = Float64Array.from(radius, (r, k) => r * Math.sin(angle(k)))
  for (let k = 0; k < 3000; k += 1) {
    const turn = 2 * Math.PI * next()
    const sector = Math.floor(turn / (2 * Math.PI / n)) % n
    const other = (sector + 1) % n
    // Distance from the centre to the side along this direction: p = s a + (1 - s) b.
    const [dx, dy] = [Math.cos(turn), Math.sin(turn)]
    const [ex, ey] = [x[other]! - x[sector]!, y[other]! - y[sector]!]
    const reach = (x[sector]! * ey - y[sector]! * ex) / (dx * ey - dy * ex)
    const share = 2 * next()
    if (Math.abs(share - 1) < 1e-9) continue
    expect(pointInPolygon(share * reach * dx, share * reach * dy, x, y, indices(n), 0, n)).toBe(share < 1 ? 1 : -1)
  }
})

test('corners and points of sides are on the boundary, levels through corners are counted once', () => {
  const x = Float64Array.of(0, 4, 4, 2, 0)
  const y = Float64Array.of(0, 0, 4, 2, 4)
  const where = (px: number, py: number): number => pointInPolygon(px, py, x, y, indices(5), 0, 5)
  for (let k = 0; k < 5; k += 1) expect(where(x[k]!, y[k]!)).toBe(0)
  expect([where(2, 0), where(4, 1), where(3, 3), where(0, 3)]).toEqual([0, 0, 0, 0])
  expect([where(1, 2), where(3, 2), where(-1, 2), where(5, 2), where(2, 3), where(-1, 4), where(-1, 0), where(5, 0), where(2, 4)]).toEqual([1, 1, -1, -1, -1, -1, -1, -1, -1])
})
