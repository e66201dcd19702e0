/**
 * Known bodies seen from above. Vertex coordinates: H. S. M. Coxeter, Regular Polytopes (3rd ed. 1973), 3.7, for the regular
 * and quasi-regular solids and the rhombic ones; permutations of (0, 1, 2) for the truncated octahedron. Dihedral angles: the
 * same book, table I, and for the others the closed forms beside them (tabulated in H. M. Cundy, A. P. Rollett, Mathematical
 * Models, 2nd ed. 1961). Counts and dimensions: exact, worked out from four-points-coplanar conditions.
 */
import { describe, expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import { interiorNodeCount, type Plan } from '../../src/plan/plan.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { freeRim } from '../../src/roof/stress/free-rim.ts'
import { cyclic, golden, permuted, seenFrom, signed, type Vector } from '../make/bodies.ts'
import { closureFreedom, dimensionOfLifts } from '../make/dense.ts'
import { foldAt, planeOf, trueArea } from '../make/measure.ts'
import { plan, type Points } from '../make/plans.ts'
import { level, raise } from '../make/raise.ts'

const degrees = 180 / Math.PI
const cube = signed([1, 1, 1])
const dodecahedron = signed([1, 1, 1], ...cyclic([0, golden, 1 / golden]))
const icosahedron = signed(...cyclic([0, 1, golden]))

interface Body {
  readonly name: string
  readonly vertices: readonly Vector[]
  readonly up: Vector
  readonly nodes: number
  readonly joints: number
  readonly interior: number
  readonly dim: number
  /** Bare count of joints and nodes, tilts included; where it is not `dim` the view is a special position. */
  readonly countSays: number
  /** Closed forms in degrees, and how they are tabulated. */
  readonly dihedral: readonly number[]
  readonly tabulated: readonly number[]
  /** Heights that are still open when nodes that lie level in the body are held level with each other. */
  readonly rings: number
}

const arccos = (value: number): number => Math.acos(value) * degrees
const bodies: readonly Body[] = [
  {
    name: 'cube, vertex up', vertices: cube, up: [1, 1, 1],
    nodes: 7, joints: 3, interior: 1, dim: 4, countSays: 4,
    dihedral: [90], tabulated: [90], rings: 2,
  },
  {
    name: 'cuboctahedron, square up', vertices: signed(...permuted([1, 1, 0])), up: [0, 0, 1],
    nodes: 8, joints: 4, interior: 0, dim: 7, countSays: 7,
    dihedral: [arccos(-1 / Math.sqrt(3))], tabulated: [125.2644], rings: 2,
  },
  {
    name: 'truncated octahedron, square up', vertices: signed(...permuted([0, 1, 2])), up: [0, 0, 1],
    nodes: 16, joints: 8, interior: 4, dim: 4, countSays: 3,
    dihedral: [arccos(-1 / 3), arccos(-1 / Math.sqrt(3))], tabulated: [109.4712, 125.2644], rings: 2,
  },
  {
    name: 'dodecahedron, 2-fold axis up', vertices: dodecahedron, up: [0, 0, 1],
    nodes: 12, joints: 5, interior: 2, dim: 4, countSays: 4,
    dihedral: [arccos(-1 / Math.sqrt(5))], tabulated: [116.5651], rings: 2,
  },
  {
    name: 'dodecahedron, face up', vertices: dodecahedron, up: [0, 1, golden],
    nodes: 15, joints: 10, interior: 5, dim: 4, countSays: 3,
    dihedral: [arccos(-1 / Math.sqrt(5))], tabulated: [116.5651], rings: 2,
  },
  {
    name: 'icosahedron, 2-fold axis up', vertices: icosahedron, up: [0, 0, 1],
    nodes: 8, joints: 9, interior: 2, dim: 8, countSays: 8,
    dihedral: [arccos(-Math.sqrt(5) / 3)], tabulated: [138.1897], rings: 3,
  },
  {
    name: 'rhombic dodecahedron, 4-fold axis up', vertices: [...cube, ...signed(...cyclic([2, 0, 0]))], up: [0, 0, 1],
    nodes: 9, joints: 4, interior: 1, dim: 5, countSays: 5,
    dihedral: [120], tabulated: [120], rings: 2,
  },
  {
    name: 'rhombic triacontahedron, 2-fold axis up', vertices: [...dodecahedron, ...icosahedron], up: [0, 0, 1],
    nodes: 20, joints: 20, interior: 8, dim: 7, countSays: 7,
    dihedral: [144], tabulated: [144], rings: 3,
  },
]

/** Dihedral angles of all joints in degrees, ridges counted from the inside. */
const dihedrals = (of: Plan, z: Float64Array): number[] => Array.from({ length: of.jointCount }, (_, j) => 180 - foldAt(of, z, j))

/** Every dihedral is one of the known ones, and each known one occurs. */
function expectDihedrals(found: readonly number[], known: readonly number[]): void {
  for (const angle of found) expect(Math.min(...known.map((right) => Math.abs(angle - right)))).toBeLessThan(1e-6)
  for (const right of known) expect(Math.min(...found.map((angle) => Math.abs(angle - right)))).toBeLessThan(1e-6)
}

describe.each(bodies)('$name', ({ vertices, up, nodes, joints, interior, dim, countSays, dihedral, tabulated, rings }) => {
  const { plan: of, height } = seenFrom(vertices, up)
  const names = (at: number): string[] =>
    [...height.keys()].filter((node) => Math.abs(height[node]! - at) < 1e-9).map((node) => `N${node + 1}`)
  const levels = [...new Set(Array.from(height, (z) => Number(z.toFixed(9))))].sort((a, b) => b - a)

  test(`${nodes} nodes, ${joints} joints, ${interior} inside; dim ${dim}, and the bare count says ${countSays}`, () => {
    expect([of.nodeCount, of.jointCount, interiorNodeCount(of)]).toEqual([nodes, joints, interior])
    const { space, freedom, count, frozen } = finish(freeRim(of))
    expect([space.dimension, freedom + 3, count + 3]).toEqual([dim, dim, countSays])
    expect([dimensionOfLifts(of), closureFreedom(of) + 3]).toEqual([dim, dim])
    expect(frozen.every((value) => value === 0)).toBe(true)
  })

  test('with the heights of the body as target the dihedral angles come back', () => {
    const { verdict, z } = raise(of, { target: height.map((value) => value / of.frame.span) })
    expect(verdict).toBe('lifts')
    expectDihedrals(dihedrals(of, z), dihedral)
    dihedral.forEach((angle, k) => expect(angle).toBeCloseTo(tabulated[k]!, 4))
  })

  // What lies level in the body lies level in the roof, the lowest at 0: then each further level is one number.
  test(`from the plan, its symmetry and ${rings - 1} height${rings > 2 ? 's' : ''} the dihedral angles come back`, () => {
    const lowest = levels[levels.length - 1]!
    const equal: Condition[] = levels
      .filter((at) => names(at).length > 1)
      .map((at) => ({ kind: 'equal', name: `ring ${at}`, at: { nodes: names(at) }, soft: null }))
    const ground = level('ground', { nodes: names(lowest) }, 0)
    expect(raise(of, { conditions: [...equal, ground] }).under.freedomLeft).toBe(rings - 1)
    const given = levels.slice(0, rings - 1).map((at) => level(`height ${at}`, { nodes: names(at).slice(0, 1) }, at - lowest))
    const { under, verdict, z } = raise(of, { conditions: [...equal, ground, ...given] })
    expect([under.freedomLeft, verdict]).toEqual([0, 'lifts'])
    z.forEach((value, node) => expect(Math.abs(value - (height[node]! - lowest))).toBeLessThan(1e-9))
    expectDihedrals(dihedrals(of, z), dihedral)
  })
})

test('dodecahedron, face up: heights 0, -1, -phi, slopes 2, stresses -1.701302 and -3.804226, areas 1.063314 and 2.377641', () => {
  // Exact: inner pentagon of radius 1 at 90 + 72 k degrees, next five at radius phi there, five more halfway between.
  const at = (radius: number, angle: number): [number, number] => [radius * Math.cos(angle / degrees), radius * Math.sin(angle / degrees)]
  const points: Points = [0, 1, 2].flatMap((ring) =>
    [0, 1, 2, 3, 4].map((k) => at(ring === 0 ? 1 : golden, (ring === 2 ? 126 : 90) + 72 * k)),
  )
  const side = (k: number): number[] => [k, 5 + k, 10 + k, 5 + ((k + 1) % 5), (k + 1) % 5]
  const of = plan(points, [[0, 1, 2, 3, 4], ...[0, 1, 2, 3, 4].map(side)])
  const inner = ['N1', 'N2', 'N3', 'N4', 'N5']
  const { under, verdict, roof, z } = raise(of, {
    conditions: [level('top', { nodes: inner }, 0), level('one height', { nodes: [points[5]!] }, -1)],
  })
  expect([under.freedomLeft, verdict]).toEqual([0, 'lifts'])
  z.forEach((value, node) => {
    const radius = Math.hypot(of.x[node]!, of.y[node]!)
    const isOuter = points.slice(10).some(([x, y]) => x === of.x[node] && y === of.y[node])
    expect(value).toBeCloseTo(radius < 1.1 ? 0 : isOuter ? -golden : -1, 12)
  })
  for (let p = 1; p < 6; p += 1) {
    expect(Math.hypot(...planeOf(of, z, p))).toBeCloseTo(2, 12)
    const { inPlan, inSpace } = trueArea(of, z, p)
    expect(inPlan).toBeCloseTo(1.063314, 6)
    expect(inSpace).toBeCloseTo(2.377641, 6)
  }
  const stress = Array.from(roof!.stress, (s) => s / of.frame.span).sort((a, b) => a - b)
  stress.slice(0, 5).forEach((s) => expect(s).toBeCloseTo(-3.804226, 6))
  stress.slice(5).forEach((s) => expect(s).toBeCloseTo(-1.701302, 6))
})

// Exact: cos(fold) = cos^2 a + sin^2 a cos(turn) for two planes of slope a whose level eaves turn by that angle.
describe.each([
  [45, 90, 120, 35.2644],
  [30, 90, 138.5904, 22.2077],
  [35, 90, 132.1451, 26.341],
  [15, 90, 158.9094, 10.7286],
  [30, 60, 151.045, 26.5651],
  [30, 120, 128.6822, 16.1021],
])('hip of two %d degree slopes where the eaves turn by %d degrees', (slope, turn, dihedral, hipSlope) => {
  test(`dihedral ${dihedral}, hip slope ${hipSlope}`, () => {
    const half = (180 - turn) / 2 / degrees
    // Corner at the origin, the hip along +x, eaves of length 10 to both sides, a panel of depth 3 on each.
    const depth = 3
    const hip = depth / Math.sin(half)
    const eave = (sign: number, along: number, inwards: number): [number, number] => [
      along * Math.cos(half) + inwards * Math.sin(half),
      sign * (along * Math.sin(half) - inwards * Math.cos(half)),
    ]
    const points: Points = [[0, 0], eave(-1, 10, 0), eave(-1, 10, depth), [hip, 0], eave(1, 10, depth), eave(1, 10, 0)]
    const of = plan(points, [
      [0, 1, 2, 3],
      [0, 3, 4, 5],
    ])
    const rise = depth * Math.tan(slope / degrees)
    const { under, verdict, z } = raise(of, {
      conditions: [level('eaves', { nodes: [points[0]!, points[1]!, points[5]!] }), level('one height', { nodes: [points[3]!] }, rise)],
    })
    expect([under.freedomLeft, verdict]).toEqual([0, 'lifts'])
    const fold = Math.cos(slope / degrees) ** 2 + Math.sin(slope / degrees) ** 2 * Math.cos(turn / degrees)
    expect(dihedrals(of, z)[0]! + arccos(fold)).toBeCloseTo(180, 7)
    expect(dihedrals(of, z)[0]).toBeCloseTo(dihedral, 4)
    expect(Math.atan2(rise, hip) * degrees).toBeCloseTo(hipSlope, 4)
    for (const p of [0, 1]) expect(Math.atan(Math.hypot(...planeOf(of, z, p))) * degrees).toBeCloseTo(slope, 9)
  })
})
