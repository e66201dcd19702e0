/** Mirror lines against plans whose lines follow from their definition, and roofs under mirrored conditions. */
import { expect, test } from 'vitest'
import { mirrorLines } from '../../src/plan/symmetry.ts'
import { nodeName } from '../../src/plan/names.ts'
import type { Plan } from '../../src/plan/plan.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { heldForce, heldNode, heldPlane, heldRun } from '../../src/plan/project/edits.ts'
import { asymmetry, imageName, symmetricConditions, symmetricHeights } from '../../src/plan/project/mirrored.ts'
import { grid, plan } from '../make/plans.ts'
import { raise } from '../make/raise.ts'

const degrees = (made: Plan): number[] => mirrorLines(made, 1).map(({ angle }) => Math.round((angle * 180) / Math.PI))

/** A regular polygon of n corners cut into triangles from its middle, turned by so many radians. */
function wheel(n: number, turn: number): Plan {
  const rim = Array.from({ length: n }, (_, k): [number, number] => [10 * Math.cos(turn + (2 * Math.PI * k) / n), 10 * Math.sin(turn + (2 * Math.PI * k) / n)])
  return plan([[0, 0], ...rim], rim.map((_, k) => [0, k + 1, ((k + 1) % n) + 1]))
}

test('exact: a rectangle of bays has 2 mirror lines, a square 4, one with a corner out 1, with a void off the middle none', () => {
  expect(degrees(grid(6, 4))).toEqual([0, 90])
  expect(degrees(grid(5, 5))).toEqual([0, 45, 90, 135])
  expect(degrees(grid(5, 5, { voids: [[0, 0]] }))).toEqual([45])
  expect(degrees(grid(6, 4, { voids: [[1, 1]] }))).toEqual([])
})

test('exact: a wheel of n spokes has n mirror lines, however it is turned', () => {
  for (const n of [3, 5, 8, 12]) {
    const lines = mirrorLines(wheel(n, 0.3), 1)
    expect(lines.length).toBe(n)
    lines.forEach(({ angle }) => expect(Math.abs(Math.sin(n * (angle - 0.3)))).toBeLessThan(1e-9))
  }
})

test('nodes off by less than the tolerance still mirror, and by how much is said; by more they do not', () => {
  const made = grid(6, 4)
  const moved = { ...made, x: made.x.map((x, i) => (i === 9 ? x + 0.0008 : x)) }
  const [line] = mirrorLines(moved, 1)
  expect(mirrorLines(moved, 1).length).toBe(2)
  expect(line!.misfit).toBeGreaterThan(0.0003)
  expect(mirrorLines({ ...made, x: made.x.map((x, i) => (i === 9 ? x + 0.003 : x)) }, 1)).toEqual([])
})

test('an oblique lattice has no mirror line', () => {
  const made = grid(6, 4)
  expect(mirrorLines({ ...made, x: made.x.map((x, i) => x + 0.3 * made.y[i]!) }, 1)).toEqual([])
})

const nodeAt = (made: Plan, x: number, y: number): number => made.x.findIndex((px, i) => Math.abs(px - x) < 1e-9 && Math.abs(made.y[i]! - y) < 1e-9)
const names = (made: Plan, points: readonly (readonly [number, number])[]): string[] => points.map(([x, y]) => nodeName(nodeAt(made, x, y)))

const upright = (made: Plan) => mirrorLines(made, 1).find(({ angle }) => Math.abs(angle - Math.PI / 2) < 1e-9)!

test('exact: a node at (1, 0) of 6 x 4 bays has its image at (5, 0), a panel falling north-east one falling north-west', () => {
  const made = grid(6, 4)
  const line = upright(made)
  const held = symmetricConditions(made, line, heldNode(nodeAt(made, 1, 0), 0.4))
  const [one, image] = names(made, [[1, 0], [5, 0]])
  expect(held.ok && held.value.map(({ name, at }) => [name, at])).toEqual([[`height of ${one}`, { nodes: [one] }], [`height of ${image}`, { nodes: [image] }]])
  const slope = symmetricConditions(made, line, heldPlane(0, 12, 45))
  expect(slope.ok && slope.value[1]).toMatchObject({ name: 'slope of P6', at: { panels: ['P6'] }, pitch_deg: 12, bearing_deg: 315 })
  expect(imageName(made, line, imageName(made, line, 'south gutter'))).toBe('south gutter')
})

test('exact: what lies across the line is made symmetric: a fall is refused, levels are evened, a slope keeps its share along the line', () => {
  const made = grid(3, 2)
  const line = upright(made)
  const run = names(made, [[0, 0], [1, 0], [2, 0], [3, 0]])
  const fall: Condition = { name: 'f', soft: null, kind: 'fall', at: { run }, per_mille: 20, level: null }
  expect(symmetricConditions(made, line, fall)).toMatchObject({ ok: false, problem: { code: 'not-symmetric' } })
  const levels = symmetricConditions(made, line, heldRun(run, { points: [[0, 0], [1, 4], [2, 0], [3, 2]] }, null))
  expect(levels.ok && levels.value).toMatchObject([{ section: { points: [[0, 1], [1, 2], [2, 2], [3, 1]] } }])
  const across = symmetricConditions(made, line, heldPlane(1, 45, 60))
  // tan 45 cos 60 = 1 / 2, northwards.
  expect(across.ok && across.value).toMatchObject([{ pitch_deg: (Math.atan(0.5) * 180) / Math.PI, bearing_deg: 0 }])
})

test('roofs under mirrored conditions are mirrored to 1e-9 of the span: heights, slopes, forces and profiles, seed by seed', () => {
  const made = grid(8, 6, { bay: 1.5 })
  const line = upright(made)
  const at = (x: number, y: number): number => nodeAt(made, x, y)
  /** The joint with its middle there. */
  const beside = (x: number, y: number): number => Array.from({ length: made.jointCount }, (_, j) => j).find((j) => {
    const [a, b] = [made.origin[2 * j]!, made.origin[2 * j + 1]!]
    return Math.abs((made.x[a]! + made.x[b]!) / 2 - x) + Math.abs((made.y[a]! + made.y[b]!) / 2 - y) < 1
  })!
  const asked: Condition[][] = [
    [heldNode(at(3, 3), 0.9)], [heldNode(at(1.5, 6), 0.5), heldForce(beside(3, 4.5), -0.1)], [heldPlane(9, 14, 160), heldNode(at(4.5, 3), 1.2)],
    [heldRun(names(made, [[0, 0], [0, 1.5], [0, 3], [0, 4.5]]), { points: [[0, 0], [1.5, 0.2], [3, 0.7], [4.5, 0.8]] }, null)],
    [{ ...heldNode(at(3, 3), 0.9), soft: 3 }],
  ]
  for (const conditions of asked) {
    const both = conditions.flatMap((condition) => {
      const pair = symmetricConditions(made, line, condition)
      return pair.ok ? pair.value : []
    })
    expect(both.length).toBe(2 * conditions.length)
    const one = raise(made, { conditions })
    const two = raise(made, { conditions: both })
    expect(asymmetry(line, one.z)).toBeGreaterThan(1e-3 * made.frame.span)
    expect(two.verdict).not.toBe('does not lift')
    expect(asymmetry(line, two.z)).toBeLessThan(1e-9 * made.frame.span)
    // Half a roof and half its image is a roof of the mirrored conditions too.
    expect(asymmetry(line, symmetricHeights(line, one.z))).toBe(0)
  }
})
