/** The dissection: a true separator tree on any input, as cheap as the theorems say on plans. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { analyse } from '../../../src/base/sparse/analyse.ts'
import { dissection } from '../../../src/base/sparse/order.ts'
import { places } from '../../../src/base/sparse/places.ts'
import { finish } from '../../../src/base/steps.ts'
import { bricks, cliquesOf, planOf, quads, type TestPlan } from './plans.ts'

describe('places', () => {
  test('as a stable sort by value gives them', () => {
    const next = random(4)
    const coordinates = Float64Array.from({ length: 4000 }, () => Math.floor(next() * 500) - 250)
    for (const axis of [0, 1] as const) {
      const value = (i: number): number => coordinates[2 * i + axis]!
      const expected = Array.from({ length: 2000 }, (_, i) => i).sort((a, b) => value(a) - value(b) || a - b)
      const { sorted, place } = places(coordinates, axis)
      expect(Array.from(sorted)).toEqual(expected)
      expected.forEach((i, k) => expect(place[i]).toBe(k))
    }
  })

  test('the largest comes last, what is not a number comes first', () => {
    expect(Array.from(places(Float64Array.of(3, 0, 1, 0, 2, 0), 0).sorted)).toEqual([1, 2, 0])
    expect(Array.from(places(Float64Array.of(3, 0, 1, 0, NaN, 0, 1e300, 0), 0).sorted).slice(-1)).toEqual([3])
    expect(new Set(places(Float64Array.of(NaN, 0, Infinity, 0, -Infinity, 0, 2, 0), 0).sorted).size).toBe(4)
  })
})

const blob = (size: number, seed: number): TestPlan => {
  const next = random(seed)
  const faces = Array.from({ length: size }, () => [...new Set(Array.from({ length: 3 }, () => Math.floor(next() * size)))])
  return planOf(Array.from({ length: size }, () => [next(), next()] as const), faces)
}

const plans: Record<string, TestPlan> = {
  'quads': quads(23, 31),
  'bricks': bricks(20, 24),
  'one line': planOf(Array.from({ length: 300 }, (_, i) => [i, 7] as const), Array.from({ length: 298 }, (_, i) => [i, i + 1, i + 2])),
  'one place': planOf(Array.from({ length: 300 }, () => [1, 1] as const), Array.from({ length: 298 }, (_, i) => [i, i + 1, i + 2])),
  'no numbers': planOf(Array.from({ length: 200 }, () => [NaN, NaN] as const), Array.from({ length: 198 }, (_, i) => [i, i + 1, i + 2])),
  'no connection at all': planOf(Array.from({ length: 200 }, (_, i) => [i % 14, i] as const), []),
  'a dense clique': planOf(Array.from({ length: 150 }, (_, i) => [i % 12, i] as const), [Array.from({ length: 150 }, (_, i) => i)]),
  'connections that ignore the coordinates': blob(250, 6),
  'nothing': planOf([], []),
}

describe('the tree of pieces', () => {
  for (const [name, plan] of Object.entries(plans)) {
    test(name, () => {
      const { pattern } = cliquesOf(plan)
      const { rank, first, parent } = finish(dissection(pattern, plan.coordinates))
      expect(Array.from(rank).sort((a, b) => a - b)).toEqual(Array.from(rank, (_, i) => i))
      expect(first[parent.length]).toBe(pattern.size)
      const piece = new Int32Array(pattern.size)
      parent.forEach((up, t) => {
        piece.fill(t, first[t]!, first[t + 1]!)
        expect(up === -1 ? t === parent.length - 1 : up > t).toBe(true)
      })
      // A connection may only lead up the tree: both ends in one piece, or one above the other.
      for (let j = 0; j < pattern.size; j++) {
        for (let p = pattern.start[j]!; p < pattern.start[j + 1]!; p++) {
          const [low, high] = [rank[j]!, rank[pattern.row[p]!]!].sort((a, b) => a - b) as [number, number]
          let t = piece[low]!
          while (t !== -1 && t !== piece[high]) t = parent[t]!
          expect(t).toBe(piece[high])
        }
      }
    })
  }
})

describe('cost', () => {
  const cost = (plan: TestPlan): { operations: number; entries: number } => {
    const { pattern } = cliquesOf(plan)
    const analysis = analyse(pattern, finish(dissection(pattern, plan.coordinates)))
    return { operations: analysis.operations, entries: analysis.panel[analysis.fronts]! }
  }

  test('four times the unknowns cost about eight times the operations and little more than four times the entries', () => {
    // O(n^1.5) operations and O(n log n) entries (Lipton, Rose, Tarjan 1979); 8 and 4 (1 + 1 / log2 n) in the limit.
    const small = cost(quads(60, 60))
    const large = cost(quads(120, 120))
    expect(large.operations / small.operations).toBeGreaterThan(5)
    expect(large.operations / small.operations).toBeLessThan(9)
    expect(large.entries / small.entries).toBeLessThan(4 * 1.4)
  })

  test('on a 100 x 100 grid it costs less than a third of elimination row by row', () => {
    // Row by row the band has m + 1 entries below each pivot: (m + 1)^2 multiplications and additions for each of m^2 unknowns, exactly.
    const m = 100
    expect(cost(quads(m - 1, m - 1)).operations).toBeLessThan((m * m * (m + 1) ** 2) / 3)
  })

  test('two parts far apart cost no more than one and one', () => {
    const one = quads(30, 30, 0.1, 3)
    const size = one.coordinates.length / 2
    const both = {
      coordinates: Float64Array.of(...one.coordinates, ...one.coordinates.map((c, i) => (i % 2 === 0 ? c + 1000 : c))),
      start: Int32Array.of(...one.start, ...one.start.slice(1).map((s) => s + one.index.length)),
      index: Int32Array.of(...one.index, ...one.index.map((i) => i + size)),
    }
    expect(cost(both).operations).toBeLessThan(1.02 * 2 * cost(one).operations)
  })
})
