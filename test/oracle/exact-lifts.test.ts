/**
 * Lifts that are known exactly. Source of every value: exact, worked out by hand or with rationals from the definition alone
 * (four points coplanar, planes meeting along a joint), unless another source stands beside it. s > 0 valley, s < 0 ridge.
 */
import { describe, expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { closure } from '../../src/roof/stress/closure.ts'
import { dualWalk } from '../../src/roof/stress/dual-walk.ts'
import { stressOfGradients } from '../../src/roof/stress/forces.ts'
import { freeRim } from '../../src/roof/stress/free-rim.ts'
import { projected } from '../../src/roof/stress/lift-space.ts'
import { panelBases, panelPlanes } from '../../src/roof/stress/panel-bases.ts'
import { reciprocalFigure } from '../../src/roof/stress/reciprocal.ts'
import { integrate } from '../../src/roof/raise/integrate.ts'
import { plan, voronoi, type Points } from '../make/plans.ts'
import { level, raise } from '../make/raise.ts'

/** Point index of each node of the plan (nodes are numbered by first use). */
const pointOf = (of: Plan, points: Points): number[] => Array.from(of.x, (x, n) => points.findIndex(([px, py]) => px === x && py === of.y[n]))

/** Heights per node from heights per point. */
const byNode = (of: Plan, points: Points, heights: readonly number[]): Float64Array => Float64Array.from(pointOf(of, points), (k) => heights[k]!)

/** Stress per unit length of the joint between two points, from heights. */
function stressBetween(of: Plan, points: Points, heights: readonly number[]): (a: number, b: number) => number {
  const work = byNode(of, points, heights).map((z) => z / of.frame.span)
  const s = stressOfGradients(of, panelPlanes(of, panelBases(of), work).gradient).map((value) => value / of.frame.span)
  const point = pointOf(of, points)
  return (a, b) => {
    for (let j = 0; j < of.jointCount; j += 1) {
      const [p, q] = [point[of.origin[2 * j]!]!, point[of.origin[2 * j + 1]!]!]
      if ((p === a && q === b) || (p === b && q === a)) return s[j]!
    }
    throw new Error(`no joint ${a}-${b}`)
  }
}

/**
 * Whether the solver's space of lifts holds these heights: its projection must give them back. One projection mixes lifts
 * among each other by 1e-3 (solves at tau = 1e-13), which the second, of what is left, takes away.
 */
function expectLift(of: Plan, points: Points, heights: readonly number[]): void {
  const z = byNode(of, points, heights)
  const { space } = finish(freeRim(of))
  let back = new Float64Array(z.length)
  for (let pass = 0; pass < 4; pass += 1) {
    const left = projected(space, z.map((value, i) => value - back[i]!))
    back = back.map((value, i) => value + left[i]!)
  }
  const most = Math.max(...z.map(Math.abs))
  z.forEach((value, i) => expect(Math.abs(back[i]! - value)).toBeLessThan(1e-9 * most))
}

/** Residual of A s = 0 relative to the largest term. */
function closureResidual(of: Plan, heights: Float64Array): number {
  const s = stressOfGradients(of, panelPlanes(of, panelBases(of), heights).gradient)
  const { start, joint, value } = closure(of)
  let worst = 0
  for (let r = 0; r + 1 < start.length; r += 1) {
    let sum = 0, size = 0
    for (let k = start[r]!; k < start[r + 1]!; k += 1) {
      sum += value[k]! * s[joint[k]!]!
      size += Math.abs(value[k]! * s[joint[k]!]!)
    }
    worst = Math.max(worst, size === 0 ? 0 : Math.abs(sum) / size)
  }
  return worst
}

describe('triangular frustum', () => {
  const points: Points = [[0, 0], [12, 0], [0, 12], [2, 2], [10, 1], [2, 8]]
  const faces = [[0, 1, 4, 3], [1, 2, 5, 4], [2, 0, 3, 5], [3, 4, 5]]
  const of = plan(points, faces)
  test('dim 4, heights (0, 0, 0, 2, 1, 2), stresses -1/2, -1, -1/2, -1/8, -1/8, -3/16', () => {
    expect(finish(freeRim(of)).space.dimension).toBe(4)
    expectLift(of, points, [0, 0, 0, 2, 1, 2])
    const s = stressBetween(of, points, [0, 0, 0, 2, 1, 2])
    for (const [a, b, expected] of [[0, 3, -1 / 2], [1, 4, -1], [2, 5, -1 / 2], [3, 4, -1 / 8], [4, 5, -1 / 8], [3, 5, -3 / 16]] as const) expect(s(a, b)).toBeCloseTo(expected, 12)
    expect(closureResidual(of, byNode(of, points, [0, 0, 0, 2, 1, 2]))).toBeLessThan(1e-13)
  })
  test('with the rim level and a rise of 2 it is raised to just these heights', () => {
    const { verdict, z, under } = raise(of, { conditions: [level('rim', { rim: 'outer' })], rise: 2 / 12 })
    expect([verdict, under.freedomLeft]).toEqual(['lifts', 1])
    byNode(of, points, [0, 0, 0, 2, 1, 2]).forEach((value, i) => expect(z[i]).toBeCloseTo(value, 10))
  })
  test('last node moved to (5/2, 8): dim 3, no lift; Ceva-like product 5/3 instead of 1', () => {
    const moved: Points = [...points.slice(0, 5), [2.5, 8]]
    const { free, verdict } = raise(plan(moved, faces))
    expect([free.space.dimension, verdict]).toEqual([3, 'does not lift'])
    const distance = (i: number, [x, y]: readonly [number, number]): number => {
      const [a, b] = [moved[i]!, moved[(i + 1) % 3]!]
      return ((b[0] - a[0]) * (y - a[1]) - (b[1] - a[1]) * (x - a[0])) / Math.hypot(b[0] - a[0], b[1] - a[1])
    }
    const inner = [moved[3]!, moved[4]!, moved[5]!]
    const product = [0, 1, 2].reduce((all, i) => (all * distance(i, inner[i]!)) / distance(i, inner[(i + 1) % 3]!), 1)
    expect(product).toBeCloseTo(5 / 3, 12)
  })
})

describe('square in a square', () => {
  const points: Points = [[-3, -3], [3, -3], [3, 3], [-3, 3], [-1, -1], [1, -1], [1, 1], [-1, 1]]
  const sides = [[0, 1, 5, 4], [1, 2, 6, 5], [2, 3, 7, 6], [3, 0, 4, 7]]
  const middle = [4, 5, 6, 7]
  test('heights 0 and 1: all eight joints s = -1/4, side gradients 1/2', () => {
    const of = plan(points, [...sides, middle])
    expectLift(of, points, [0, 0, 0, 0, 1, 1, 1, 1])
    const s = stressBetween(of, points, [0, 0, 0, 0, 1, 1, 1, 1])
    for (const [a, b] of [[0, 4], [1, 5], [2, 6], [3, 7], [4, 5], [5, 6], [6, 7], [4, 7]] as const) expect(s(a, b)).toBeCloseTo(-1 / 4, 13)
    const { gradient } = panelPlanes(of, panelBases(of), byNode(of, points, [0, 0, 0, 0, 1, 1, 1, 1]).map((z) => z / 6))
    expect(Math.hypot(gradient[0]!, gradient[1]!)).toBeCloseTo(1 / 2, 13)
  })
  test('without the middle panel dim 5; (1,1) moved to (1, 3/2): 3 with, 4 without it', () => {
    const moved: Points = points.map((p, i) => (i === 6 ? [1, 1.5] : p))
    const dim = (of: Plan): number => finish(freeRim(of)).space.dimension
    expect([dim(plan(points, sides)), dim(plan(moved, [...sides, middle])), dim(plan(moved, sides))]).toEqual([5, 3, 4])
  })
})

test('square with its centre: spokes and a pyramid; spokes of +2 balance at the centre (common practice, no source)', () => {
  const points: Points = [[0, 0], [2, 0], [2, 2], [0, 2], [1, 1]]
  const of = plan(points, [[0, 1, 4], [1, 2, 4], [2, 3, 4], [3, 0, 4]])
  // s = +2 on each spoke: gradient jumps of 2 sqrt 2 across the diagonals, a pyramid turned down, apex -2 * ... by planes.
  const s = stressBetween(of, points, [0, 0, 0, 0, -2])
  for (let k = 0; k < 4; k += 1) expect(s(k, 4)).toBeCloseTo(2, 13)
})

test("octahedron from its top, Tutte's drawing: all joints +1, heights 0, 0, 0, -12, -12, -12, dim 6", () => {
  const points: Points = [[0, 0], [10, 0], [0, 10], [4, 2], [4, 4], [2, 4]]
  const [A, B, C, a, b, c] = [0, 1, 2, 3, 4, 5] as const
  const of = plan(points, [[A, B, a], [B, b, a], [B, C, b], [C, c, b], [C, A, c], [A, a, c], [a, b, c]])
  expect(finish(freeRim(of)).space.dimension).toBe(6)
  const s = stressBetween(of, points, [0, 0, 0, -12, -12, -12])
  for (const [p, q] of [[A, a], [B, a], [B, b], [C, b], [C, c], [A, c], [a, b], [b, c], [a, c]] as const) expect(s(p, q)).toBeCloseTo(1, 12)
})

test('Delaunay triangles with z = x^2 + y^2: s = cot + cot of the opposite angles, positive where locally Delaunay', () => {
  const points: Points = [[0, 0], [4, 0], [4, 3], [0, 3], [1, 1], [3, 1.5]]
  const of = plan(points, [[0, 1, 4], [1, 5, 4], [1, 2, 5], [2, 3, 5], [3, 4, 5], [3, 0, 4]])
  const s = stressBetween(of, points, points.map(([x, y]) => x * x + y * y))
  for (const [a, b, expected] of [[2, 5, 7 / 2], [1, 5, 43 / 14], [3, 5, 4 / 9], [3, 4, 13 / 6], [0, 4, 5], [4, 5, 55 / 21], [1, 4, 9 / 14]] as const) {
    expect(s(a, b)).toBeCloseTo(expected, 12)
  }
})

describe('Voronoi diagrams', () => {
  // Corner coordinates published: J. Burkardt, Voronoi diagram data page. Heights and stresses exact: z = max(2 s.x - |s|^2).
  const sites: Points = [[0, 0], [0, 1], [0.2, 0.5], [0.3, 0.6], [0.4, 0.5], [0.6, 0.3], [0.6, 0.5], [1, 0], [1, 1]]
  test('the cell of (.4, .5): corners, heights 0.03, 0.39, 0.69, 0.33, stresses 4/3, 1, 2, 4/3 towards its neighbours', () => {
    const cell: Points = [[0.3, 0.2], [0.5, 0.4], [0.5, 0.7], [0.3, 0.5]]
    const lift = ([x, y]: readonly [number, number]): number => Math.max(...sites.map(([a, b]) => 2 * (a * x + b * y) - a * a - b * b))
    expect(cell.map((p) => Number(lift(p).toFixed(12)))).toEqual([0.03, 0.39, 0.69, 0.33])
    // Each side's neighbours as a strip of two panels: the stress of their planes across the side.
    for (const [a, b, other, expected] of [[3, 0, 2, 4 / 3], [2, 3, 3, 1], [0, 1, 5, 2], [1, 2, 6, 4 / 3]] as const) {
      const [p, q] = [cell[a]!, cell[b]!]
      const gradient = Float64Array.from([2 * 0.4, 2 * 0.5, 2 * sites[other]![0], 2 * sites[other]![1]])
      const outside: [number, number] = [(p[0] + q[0]) / 2 + (q[1] - p[1]), (p[1] + q[1]) / 2 - (q[0] - p[0])]
      const of = plan([...cell, outside], [[0, 1, 2, 3], [b, a, 4]])
      expect(stressOfGradients(of, gradient)[0]! / of.frame.span).toBeCloseTo(expected, 12)
    }
  })
  test.each([24, 150, 600])('%d cells by d3-delaunay: freedom 1, and the roof is the known one', (count) => {
    const { plan: of, sites: at } = voronoi(count, count)
    const lift = (x: number, y: number): number => Math.max(...at.map(([a, b]) => 2 * (a * x + b * y) - a * a - b * b))
    const target = Float64Array.from(of.x, (x, n) => lift(x, of.y[n]!))
    const { free, verdict, roof, z } = raise(of, { target: target.map((height) => height / of.frame.span) })
    expect([free.freedom, verdict]).toEqual([1, 'lifts'])
    const scale = Math.max(...target)
    z.forEach((height, n) => expect(Math.abs(height - target[n]!)).toBeLessThan(1e-8 * scale))
    // s = 2 |s_i - s_j| / length on every joint: the planes of two sites.
    for (let j = 0; j < of.jointCount; j += 1) {
      const [left, right] = [at[of.panelOf[2 * j]!]!, at[of.panelOf[2 * j + 1]!]!]
      const [a, b] = [of.origin[2 * j]!, of.origin[2 * j + 1]!]
      const length = Math.hypot(of.x[b]! - of.x[a]!, of.y[b]! - of.y[a]!)
      const known = (2 * Math.hypot(left[0] - right[0], left[1] - right[1])) / length
      // Short joints magnify the rounding of their own length; forces are compared.
      expect(Math.abs((roof!.stress[j]! / of.frame.span - known) * length)).toBeLessThan(1e-5)
    }
  })
})

describe('twin roads between stress and roof', () => {
  const { plan: of } = voronoi(80, 9)
  const heights = projected(finish(freeRim(of)).space, Float64Array.from({ length: of.nodeCount }, (_, i) => Math.sin(3 * i)))
  const { gradient } = panelPlanes(of, panelBases(of), heights)
  const stress = stressOfGradients(of, gradient)
  const walk = dualWalk(of)
  test('heights -> stress -> heights: integration gives the roof back, up to a tilt taken from its root', () => {
    const root = walk.root[0]!
    const bases = panelBases(of)
    const { level: levels } = panelPlanes(of, bases, heights)
    const c = levels[root]! - gradient[2 * root]! * bases.middle[2 * root]! - gradient[2 * root + 1]! * bases.middle[2 * root + 1]!
    const again = integrate(of, stress, walk, Float64Array.from([gradient[2 * root]!, gradient[2 * root + 1]!, c]))
    heights.forEach((h, i) => expect(Math.abs(again.heights[i]! - h)).toBeLessThan(1e-10))
    expect(again.closingError).toBeLessThan(1e-10)
  })
  test('the reciprocal figure: each edge perpendicular to its joint and as long as its force (Maxwell 1864)', () => {
    const { point, edge } = reciprocalFigure(of, stress, walk)
    for (let j = 0; j < of.jointCount; j += 1) {
      const [a, b] = [of.origin[2 * j]!, of.origin[2 * j + 1]!]
      const d = [of.work[2 * b]! - of.work[2 * a]!, of.work[2 * b + 1]! - of.work[2 * a + 1]!] as const
      const e = [point[2 * edge[2 * j]!]! - point[2 * edge[2 * j + 1]!]!, point[2 * edge[2 * j]! + 1]! - point[2 * edge[2 * j + 1]! + 1]!] as const
      const force = Math.abs(stress[j]!) * Math.hypot(...d)
      expect(Math.abs(Math.hypot(...e) - force)).toBeLessThan(1e-10)
      expect(Math.abs(d[0] * e[0] + d[1] * e[1])).toBeLessThan(1e-10)
    }
  })
})
