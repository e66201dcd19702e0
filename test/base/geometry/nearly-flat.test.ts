/** The quick measures of nearly flat corners against the general ones, which are held against published values elsewhere. */
import { describe, expect, test } from 'vitest'
import { cornerDeviation } from '../../../src/base/geometry/corner-deviation.ts'
import { minimumZone } from '../../../src/base/geometry/minimum-zone.ts'
import { frameInto, nearlyFlat, nearlyFlatIn } from '../../../src/base/geometry/nearly-flat.ts'
import { random } from '../../../src/base/random.ts'

/** Corners round a bumpy ring on a steep plane, out of flat by up to `bump`; some between two others as T-junctions have them. */
function panel(count: number, bump: number, seed: number): Float64Array {
  const next = random(seed)
  const [gx, gy] = [2 * next() - 1, 2 * next() - 1]
  const stretch = 0.05 + 2 * next()
  const points = new Float64Array(3 * count)
  for (let k = 0; k < count; k += 1) {
    const turn = (2 * Math.PI * (k + 0.6 * next())) / count
    const radius = 0.6 + 0.4 * next()
    points[3 * k] = 1.5 * radius * Math.cos(turn)
    points[3 * k + 1] = 1.5 * stretch * radius * Math.sin(turn)
  }
  if (count > 4 && next() < 0.3) for (let axis = 0; axis < 2; axis += 1) points[3 + axis] = (points[axis]! + points[6 + axis]!) / 2
  for (let k = 0; k < count; k += 1) points[3 * k + 2] = gx * points[3 * k]! + gy * points[3 * k + 1]! + bump * (next() - 0.5)
  return points
}

describe('nearly flat corners', () => {
  test.each([4, 5, 6, 7, 8, 9, 12])('%i of them measure as the general way says', (count) => {
    const out = new Float64Array(2)
    let taken = 0
    for (let seed = 0; seed < 60; seed += 1) {
      const points = panel(count, 1e-7, 100 * count + seed)
      if (!nearlyFlat(points, 0, count, out)) continue
      taken += 1
      // Rounding of heights of 1 is some 1e-16; the square of 1e-7 does not show.
      const [corner, zone] = [cornerDeviation(points, 0, count), minimumZone(points, 0, count)]
      expect(Math.abs(out[0]! - corner), `seed ${seed}`).toBeLessThan(1e-9 * corner + 5e-15)
      expect(Math.abs(out[1]! - zone), `seed ${seed}`).toBeLessThan(1e-9 * zone + 5e-15)
    }
    expect(taken).toBeGreaterThan(45)
  })

  test('a square with one corner up by d: corner deviation d, zone d / 2 (exact: worked out by hand from the definition)', () => {
    const out = new Float64Array(2)
    expect(nearlyFlat(Float64Array.of(0, 0, 0, 1, 0, 0, 1, 1, 1e-7, 0, 1, 0), 0, 4, out)).toBe(true)
    expect(out[0]).toBeCloseTo(1e-7, 19)
    expect(out[1]).toBeCloseTo(5e-8, 19)
  })

  test('what is bent, in a line or has too many corners is left to the general way', () => {
    const out = new Float64Array(2)
    expect(nearlyFlat(panel(6, 1e-3, 1), 0, 6, out)).toBe(false)
    expect(nearlyFlat(Float64Array.of(0, 0, 0, 1, 0, 0, 2, 0, 0, 3, 0, 1e-9), 0, 4, out)).toBe(false)
    expect(nearlyFlat(panel(13, 0, 1), 0, 13, out)).toBe(false)
    expect(nearlyFlat(Float64Array.of(0, 0, 0, 1, 0, 0, 2, 0, 0, 1, 1, 1e-9), 0, 4, out)).toBe(false)
  })
  test('a quad without any deviation after a panel of more corners, in the last place of its frames: zero, and a number', () => {
    const out = new Float64Array(2)
    const six = panel(6, 1e-7, 1)
    expect(nearlyFlat(six, 0, 6, out)).toBe(true)
    const quad = Float64Array.of(0, 0, 0, 1, 0, 0, 1, 1, 0, 0, 1, 0)
    const frames = { e: new Float64Array(8), r: new Float64Array(3) }
    frameInto(frames, 0, 0, quad, 0, 4)
    expect(nearlyFlatIn(frames, 0, 0, quad, 0, 4, out)).toBe(true)
    expect([...out]).toEqual([0, 0])
  })
})
