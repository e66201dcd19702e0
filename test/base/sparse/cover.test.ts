/** Vertex covers against a plain augmenting-path matching (König: equal sizes), and edge by edge. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { Cover } from '../../../src/base/sparse/cover.ts'

/** Size of a maximum matching by the textbook recursion (M. Hall 1956), written for clarity alone. */
function matchingSize(edges: readonly (readonly [number, number])[]): number {
  const mate = new Map<number, number>()
  const lefts = [...new Set(edges.map(([l]) => l))]
  const extend = (l: number, seen: Set<number>): boolean => {
    for (const [from, r] of edges) {
      if (from !== l || seen.has(r)) continue
      seen.add(r)
      const other = mate.get(r)
      if (other === undefined || extend(other, seen)) {
        mate.set(r, l)
        return true
      }
    }
    return false
  }
  return lefts.filter((l) => extend(l, new Set())).length
}

describe('a cover meets every edge and is as small as a matching is large', () => {
  const cover = new Cover(400)
  for (let seed = 1; seed <= 40; seed++) {
    test(`seed ${seed}`, () => {
      const next = random(seed)
      const lefts = 1 + Math.floor(next() * (seed % 5 === 0 ? 150 : 12))
      const rights = 1 + Math.floor(next() * (seed % 7 === 0 ? 150 : 12))
      const edges: [number, number][] = []
      const count = Math.floor(next() * 3 * Math.max(lefts, rights))
      for (let e = 0; e < count; e++) edges.push([Math.floor(next() * lefts), 200 + Math.floor(next() * rights)])
      for (const [l, r] of edges) cover.add(l, r)
      cover.solve()
      const members = new Set(cover.members.subarray(0, cover.count))
      expect(members.size).toBe(cover.count)
      for (const [l, r] of edges) expect(members.has(l) || members.has(r)).toBe(true)
      expect(cover.count).toBe(matchingSize(edges))
    })
  }

  test('a greedy start that is wrong everywhere is put right', () => {
    // Left i meets right i and i + 1, right i + 1 first in the lists: greed leaves the last one without.
    for (let i = 0; i < 150; i++) {
      cover.add(i, 200 + i)
      if (i + 1 < 150) cover.add(i, 200 + i + 1)
    }
    cover.solve()
    expect(cover.count).toBe(150)
  })
})
