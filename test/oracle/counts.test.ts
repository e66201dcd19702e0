/**
 * Freedom of plans whose lifts can be counted by hand, held against the solver. Source of each count: exact, worked out from
 * four-points-coplanar conditions alone, without stresses, unless another source stands beside it.
 */
import { describe, expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { voidCount } from '../../src/plan/plan.ts'
import { freeRim } from '../../src/roof/stress/free-rim.ts'
import { grid, plan, type Points } from '../make/plans.ts'
import { closureFreedom, dimensionOfLifts } from '../make/dense.ts'

const facts = (of: Plan) => finish(freeRim(of))

/** Dimension of the lifts, tilts included, by the sparse road; the two dense twin roads must say the same. */
function dimension(of: Plan): number {
  const { space } = facts(of)
  expect(dimensionOfLifts(of)).toBe(space.dimension)
  if (of.partCount === 1) expect(closureFreedom(of) + 3).toBe(space.dimension)
  return space.dimension
}

describe('quad grids', () => {
  test.each([[1, 1, 3], [2, 2, 5], [3, 2, 6], [4, 3, 8], [5, 5, 11]])('%d x %d loosely spaced: %d', (m, n, dim) => {
    expect(dimension(grid(m, n, { loose: 0.15, seed: 10 * m + n }))).toBe(dim)
  })
  test.each([[2, 2], [3, 5], [12, 8]])('%d x %d rectangular: m + n + 1 (every lift is f(x) + g(y))', (m, n) => {
    expect(dimension(grid(m, n))).toBe(m + n + 1)
  })
  test.each([[[], 9], [[[1, 1]], 10], [[[1, 1], [3, 1]], 11]] as [Points, number][])('5 x 3 with voids %j: %d', (voids, dim) => {
    const of = grid(5, 3, { loose: 0.12, voids })
    expect(voidCount(of)).toBe(voids.length)
    expect(dimension(of)).toBe(dim)
  })
  test('12 x 8 quads of 1.5 m: freedom 18, free rim 21 with the tilts', () => {
    const { freedom, space, frozen, groupCount } = facts(grid(12, 8, { bay: 1.5 }))
    expect([freedom, space.dimension]).toEqual([18, 21])
    expect(frozen.every((value) => value === 0)).toBe(true)
    expect(groupCount).toBe(96)
  })
})

test('any triangulation lifts in every way: dim = nodes', () => {
  const points: Points = [[0, 0], [4, 0], [4, 3], [0, 3], [1, 1], [3, 1.5]]
  const of = plan(points, [[0, 1, 4], [1, 5, 4], [1, 2, 5], [2, 3, 5], [3, 4, 5], [3, 0, 4]])
  expect(dimension(of)).toBe(6)
  expect(facts(of).gap).toBeNull()
})

describe('rings of k panels round a void', () => {
  /** Inner polygon a scaled copy of the outer about `centre` (joint lines meet there), or with a corner moved. */
  const ring = (k: number, moved: number): Plan => {
    const points: [number, number][] = []
    for (const radius of [1, 2]) {
      for (let i = 0; i < k; i += 1) {
        const angle = (2 * Math.PI * (i + 0.13 * Math.sin(7 * i))) / k
        points.push([radius * Math.cos(angle), radius * Math.sin(angle)])
      }
    }
    points[0] = [points[0]![0], points[0]![1] + moved]
    const faces = Array.from({ length: k }, (_, i) => [i, i + k, ((i + 1) % k) + k, (i + 1) % k])
    return plan(points, faces)
  }
  test.each([3, 4, 5, 6, 9])('k = %d: k + 1 where all joint lines meet, else k (k = 3 is the theorem of Desargues)', (k) => {
    expect(dimension(ring(k, 0))).toBe(k + 1)
    expect(dimension(ring(k, 0.21))).toBe(k)
  })
})

describe('special positions, where the bare count is wrong', () => {
  const flower = (disturb: number): Plan => {
    const corners = (cx: number, cy: number): [number, number][] =>
      Array.from({ length: 6 }, (_, k) => [cx + Math.cos((Math.PI * k) / 3), cy + Math.sin((Math.PI * k) / 3)])
    const centres: [number, number][] = [[0, 0]]
    for (let k = 0; k < 6; k += 1) centres.push([Math.sqrt(3) * Math.cos(Math.PI / 6 + (k * Math.PI) / 3), Math.sqrt(3) * Math.sin(Math.PI / 6 + (k * Math.PI) / 3)])
    const points: [number, number][] = []
    const faces = centres.map(([cx, cy]) =>
      corners(cx, cy).map(([x, y]) => {
        const known = points.findIndex(([a, b]) => Math.hypot(a - x, b - y) < 1e-9)
        return known >= 0 ? known : points.push([x, y]) - 1
      }),
    )
    return plan(points.map(([x, y], i) => [x + disturb * Math.sin(17 * i + 1), y + disturb * Math.cos(29 * i)]), faces)
  }
  test('seven regular hexagons lift in one way although the count says none; disturbed by 5 % they do not', () => {
    const regular = facts(flower(0))
    expect([regular.count, regular.freedom]).toEqual([0, 1])
    expect(dimension(flower(0))).toBe(4)
    expect(dimension(flower(0.05))).toBe(3)
  })
  test('pinwheel of four rectangles round a square cannot lift', () => {
    const points: Points = [[0, 0], [2, 0], [3, 0], [3, 2], [3, 3], [1, 3], [0, 3], [0, 1], [1, 1], [2, 1], [2, 2], [1, 2]]
    const of = plan(points, [[0, 1, 9, 8, 7], [1, 2, 3, 10, 9], [3, 4, 5, 11, 10], [5, 6, 7, 8, 11], [8, 9, 10, 11]])
    expect(dimension(of)).toBe(3)
    expect(facts(of).groupCount).toBe(1)
  })
  test('T-junction: the stem of three joints, two collinear, is frozen in every lift', () => {
    const points: Points = [[0, 0], [4, 0], [8, 0], [8, 4], [8, 8], [0, 8], [4, 4], [0, 4]]
    const of = plan(points, [[0, 1, 6, 7], [1, 2, 3, 6], [4, 5, 7, 6, 3]])
    const { space, frozen } = facts(of)
    expect(space.dimension).toBe(4)
    const stem = [...frozen.keys()].filter((j) => frozen[j] === 1).map((j) => [of.origin[2 * j]!, of.origin[2 * j + 1]!].map((node) => [of.x[node], of.y[node]]))
    expect(stem).toEqual([[[4, 0], [4, 4]]])
  })
  test('two rectangles with a node halfway along their joint: dim 4; the node is merged away before counting', () => {
    const of = plan([[0, 0], [1, 0], [1, 1], [1, 2], [0, 2], [2, 0], [2, 2]], [[0, 1, 2, 3, 4], [1, 5, 6, 3, 2]])
    expect(dimension(of)).toBe(4)
    expect([facts(of).count, facts(of).freedom]).toEqual([1, 1])
  })
})

describe('straight lines across a square', () => {
  /** Faces of an arrangement of lines inside [0,10]^2, cut one line after another: a x + b y = c. */
  const cut = (lines: readonly (readonly [number, number, number])[]): Plan => {
    let faces: [number, number][][] = [[[0, 0], [10, 0], [10, 10], [0, 10]]]
    for (const [a, b, c] of lines) {
      faces = faces.flatMap((face) => {
        const below: [number, number][] = [], above: [number, number][] = []
        face.forEach((p, i) => {
          const q = face[(i + 1) % face.length]!
          const sp = a * p[0] + b * p[1] - c, sq = a * q[0] + b * q[1] - c
          if (sp <= 0) below.push(p)
          if (sp >= 0) above.push(p)
          if (sp * sq < 0) {
            const t = sp / (sp - sq)
            const x: [number, number] = [p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1])]
            below.push(x)
            above.push(x)
          }
        })
        return [below, above].filter((part) => part.length > 2)
      })
    }
    const points: [number, number][] = []
    const index = (p: [number, number]): number => {
      const known = points.findIndex(([x, y]) => Math.hypot(x - p[0], y - p[1]) < 1e-7)
      return known >= 0 ? known : points.push(p) - 1
    }
    const loops = faces.map((face) => face.map(index).filter((node, i, all) => node !== all[(i + 1) % all.length]))
    // Nodes of neighbours that lie on a side are corners of it.
    const whole = loops.map((loop) =>
      loop.flatMap((from, i) => {
        const to = loop[(i + 1) % loop.length]!
        const [p, q] = [points[from]!, points[to]!]
        const on = points.map(([x, y], k) => ({ k, t: ((x - p[0]) * (q[0] - p[0]) + (y - p[1]) * (q[1] - p[1])) / ((q[0] - p[0]) ** 2 + (q[1] - p[1]) ** 2), off: Math.abs((x - p[0]) * (q[1] - p[1]) - (y - p[1]) * (q[0] - p[0])) }))
          .filter(({ k, t, off }) => k !== from && k !== to && t > 0 && t < 1 && off < 1e-7)
          .sort((u, v) => u.t - v.t)
        return [from, ...on.map(({ k }) => k)]
      }),
    )
    return plan(points, whole)
  }
  test('x = 3, y = 4, x + y = 5.5: dim 6', () => expect(dimension(cut([[1, 0, 3], [0, 1, 4], [1, 1, 5.5]]))).toBe(6))
  test.each([1, 2, 4, 6])('%d lines in general position: n + 3', (n) => {
    const lines = Array.from({ length: n }, (_, k) => {
      const angle = 0.4 + (Math.PI * k) / n
      return [Math.cos(angle), Math.sin(angle), 5 * (Math.cos(angle) + Math.sin(angle)) + 1.1 * Math.sin(5 * k + 1)] as const
    })
    expect(dimension(cut(lines))).toBe(n + 3)
  })
})

describe('pinch nodes, by the flatness conditions and by closure', () => {
  test('two voids that share a node', () => {
    const of = grid(4, 4, { loose: 0.1, voids: [[1, 1], [2, 2]] })
    expect(Math.max(...of.rimPasses)).toBe(2)
    dimension(of)
  })
  test('a void hinged to the outer rim', () => dimension(grid(4, 3, { loose: 0.1, voids: [[0, 0], [1, 1]] })))
  test('two parts that share a node have one height there: tilts 3 + 3 - 1', () => {
    const of = plan([[0, 0], [1, 0], [1, 1], [0, 1], [2, 1], [2, 2], [1, 2]], [[0, 1, 2, 3], [2, 4, 5, 6]])
    expect(of.partCount).toBe(2)
    expect([facts(of).tilts, dimension(of)]).toEqual([5, 5])
  })
})
