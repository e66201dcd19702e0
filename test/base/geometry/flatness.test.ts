/** Minimum zone and corner deviation against values worked out from their definitions, and each against another road. */
import { describe, expect, test } from 'vitest'
import { cornerDeviation } from '../../../src/base/geometry/corner-deviation.ts'
import { minimumZone } from '../../../src/base/geometry/minimum-zone.ts'
import { random } from '../../../src/base/random.ts'

const zone = (corners: number[][]): number => minimumZone(Float64Array.from(corners.flat()), 0, corners.length)
const deviation = (corners: number[][]): number => cornerDeviation(Float64Array.from(corners.flat()), 0, corners.length)

/**
 * Least width over every normal that three corners, or two pairs of corners, can give: the theorem alone, by brute force,
 * for any number of corners.
 */
function bruteZone(corners: number[][]): number {
  const minus = (a: number[], b: number[]): number[] => a.map((value, i) => value - b[i]!)
  const cross = (a: number[], b: number[]): number[] => [a[1]! * b[2]! - a[2]! * b[1]!, a[2]! * b[0]! - a[0]! * b[2]!, a[0]! * b[1]! - a[1]! * b[0]!]
  const chords = corners.flatMap((a, i) => corners.slice(i + 1).map((b) => minus(b, a)))
  let best = Infinity
  for (let i = 0; i < chords.length; i += 1) {
    for (let j = i + 1; j < chords.length; j += 1) {
      const normal = cross(chords[i]!, chords[j]!)
      const length = Math.hypot(...normal)
      if (length < 1e-9) continue
      const along = corners.map((corner) => (corner[0]! * normal[0]! + corner[1]! * normal[1]! + corner[2]! * normal[2]!) / length)
      best = Math.min(best, Math.max(...along) - Math.min(...along))
    }
  }
  return best
}

describe('minimum zone', () => {
  // Exact: the zone of a unit square with one corner lifted by h is the distance of its diagonals, h / sqrt(4 + 2 h^2).
  test.each([[0.01, 0.004999875], [0.1, 0.0498754668]])('unit square, corner lifted %d', (h, expected) => {
    expect(zone([[0, 0, 0], [1, 0, 0], [1, 1, h], [0, 1, 0]])).toBeCloseTo(expected, 9)
    expect(zone([[0, 0, 0], [1, 0, 0], [1, 1, h], [0, 1, 0]])).toBeCloseTo(h / Math.sqrt(4 + 2 * h * h), 15)
  })
  test('2000 x 1000 mm, one corner 10 mm (exact, from the definition)', () => {
    expect(zone([[0, 0, 0], [2000, 0, 0], [2000, 1000, 10], [0, 1000, 0]])).toBeCloseTo(4.999922, 6)
  })
  test('trapezoid (exact, from the definition)', () => {
    expect(zone([[0, 0, 0], [3, 0, 0], [2, 1, 0.05], [0, 1, 0]])).toBeCloseTo(0.0299850112, 10)
  })
  test('five measured points (points from a public engineering forum, figure exact)', () => {
    const points = [[11.5, 7, 1.1], [18.5, 6.9, 1.03], [4.5, 13, 1.02], [25.5, 30, 1.03], [11.5, 37.5, 1.02]]
    expect(zone(points)).toBeCloseTo(0.0672621, 7)
  })
  test('180 degree corners and repeated directions do no harm', () => {
    expect(zone([[0, 0, 0], [1, 0, 0], [2, 0, 0], [2, 1, 0], [0, 1, 0]])).toBe(0)
    expect(zone([[0, 0, 0], [1, 0, 0.1], [2, 0, 0], [2, 1, 0], [0, 1, 0]])).toBeGreaterThan(0.05)
  })
  test.each([5, 6, 9, 12, 13, 16, 24])('%d random corners agree with brute force over all normals', (count) => {
    const next = random(count)
    for (let round = 0; round < 3; round += 1) {
      const corners = Array.from({ length: count }, () => [next() * 3, next() * 2, next() * 0.2])
      const found = zone(corners)
      expect(Math.abs(found / bruteZone(corners) - 1)).toBeLessThan(1e-10)
    }
  })
  test('turned in space it stays the same', () => {
    const next = random(5)
    const corners = Array.from({ length: 16 }, () => [next() * 3, next() * 2, next() * 0.1])
    const [c, s] = [Math.cos(0.7), Math.sin(0.7)]
    const turned = corners.map(([x, y, z]) => [x! + 100, c * y! - s * z! - 7, s * y! + c * z!])
    expect(zone(turned)).toBeCloseTo(zone(corners), 12)
  })
})

describe('corner deviation', () => {
  test('on a square it is twice the minimum zone to first order; each corner from the plane of the other three', () => {
    const h = 0.01
    // Exact: the lifted corner is h over the plane of the others; every other corner is less far from its three.
    expect(deviation([[0, 0, 0], [1, 0, 0], [1, 1, h], [0, 1, 0]])).toBeCloseTo(h, 15)
  })
  test('triangles have none; a corner without which the others are in line is skipped', () => {
    expect(deviation([[0, 0, 0], [1, 0, 5], [0, 1, 2]])).toBe(0)
    // Exact: (2, 0, 0) lies 0.02 under z = 0.01 x - 0.01 y, the plane of the other three.
    expect(deviation([[0, 0, 0], [1, 0, 0.01], [2, 0, 0], [1, 1, 0]])).toBeCloseTo(0.02 / Math.sqrt(1.0002), 14)
  })
  test('pentagon: one corner lifted off four that are flat', () => {
    expect(deviation([[0, 0, 0], [2, 0, 0], [2, 1, 0], [1, 2, 0.03], [0, 1, 0]])).toBeCloseTo(0.03, 15)
  })
})
