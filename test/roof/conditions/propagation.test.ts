/** Propagation of known heights: what it says in words, and that it never claims what the linear system denies. */
import { Matrix, SingularValueDecomposition } from 'ml-matrix'
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import type { Plan } from '../../../src/plan/plan.ts'
import type { Condition } from '../../../src/plan/project/condition.ts'
import { conditionRows, type ConditionRows } from '../../../src/roof/conditions/condition-rows.ts'
import { propagation, type Propagation } from '../../../src/roof/conditions/propagation.ts'
import { contradictionReason, forcedReason, words, worstContradiction } from '../../../src/roof/conditions/reason.ts'
import type { Rows } from '../../../src/roof/conditions/rows.ts'
import { grid, plan } from '../../make/plans.ts'

interface Found {
  readonly rows: ConditionRows
  readonly found: Propagation
  readonly reason: string | null
  readonly against: string | null
}

function propagate(on: Plan, conditions: readonly Condition[], datum = 0): Found {
  const rows = conditionRows(on, conditions, datum)
  if (!rows.ok) throw new Error(JSON.stringify(rows.problem))
  const found = propagation(on, rows.value.hard)
  const worst = worstContradiction(found)
  return {
    rows: rows.value, found,
    reason: forcedReason(on, rows.value.held, found),
    against: worst === null ? null : contradictionReason(on, rows.value.held, found, worst, datum),
  }
}

const hard = { soft: null } as const
const level = (name: string, at: Extract<Condition, { kind: 'level' }>['at'], value: number | null = 0): Condition => ({ ...hard, name, kind: 'level', at, level: value })
const hall = grid(12, 8, { bay: 1.5 })

describe('in words', () => {
  test('a level rim over 12 x 8 quads holds all of them, from the corners inwards', () => {
    const { found, reason, against } = propagate(hall, [level('rim level', { rim: 'outer' })])
    expect(reason).toBe('P1, P12, P85 and P96 have two edges on the level rim, so they are level; that makes all 96 panels level')
    expect(against).toBeNull()
    // A panel at column i and row j is reached over the nearest corner: 1 + least i + least j steps, counted by hand.
    expect(Array.from(found.panelStep)).toEqual(Array.from({ length: 96 }, (_, p) => {
      const [i, j] = [p % 12, Math.floor(p / 12)]
      return 1 + Math.min(i, 11 - i) + Math.min(j, 7 - j)
    }))
    expect(found.height.every((h) => h === 0)).toBe(true)
  })
  test('both long sides level: not all follows, and nothing is said', () => {
    const { reason, found } = propagate(hall, [level('a', { run: [[0, 0], [18, 0]] }), level('b', { run: [[0, 12], [18, 12]] })])
    expect(reason).toBeNull()
    expect(found.forced).toBe(false)
    expect(found.panelStep.every((step) => step === -1)).toBe(true)
  })
  test('the same with the level left open: every height follows but one', () => {
    const { found, reason } = propagate(hall, [{ ...hard, name: 'gutter', kind: 'equal', at: { rim: 'outer' } }])
    expect(found.relative).toBe(true)
    expect(reason).toBe('Corners of P1, P12, P85 and P96 follow from "gutter", so they are level; that makes all 96 panels level')
  })
  test('a corner diagonal frees the grid: the rim no longer reaches the middle', () => {
    const square = plan([[0, 0], [1, 0], [2, 0], [0, 1], [1, 1], [2, 1], [0, 2], [1, 2], [2, 2]],
      [[0, 1, 4], [0, 4, 3], [1, 2, 4], [2, 5, 4], [3, 4, 6], [4, 7, 6], [4, 5, 8], [4, 8, 7]])
    expect(propagate(square, [level('rim level', { rim: 'outer' })]).reason).toBeNull()
  })
  test('one panel, several conditions, and a fall', () => {
    const one = grid(1, 1)
    expect(propagate(one, [level('rim level', { rim: 'outer' })]).reason).toBe('P1 has two edges on the level rim, so it is level')
    expect(propagate(hall, [level('south', { run: [[0, 0], [18, 0]] }), level('west', { run: [[0, 0], [0, 12]] })]).reason)
      .toBe('P1 has three or more corners held at one level by "south" and "west", so it is level; that makes all 96 panels level')
    expect(propagate(hall, [
      { ...hard, name: 'gutter', kind: 'fall', at: { run: [[0, 0], [18, 0]] }, per_mille: 5, level: 3 }, level('west', { run: [[0, 0], [0, 12]] }, 3),
    ]).reason).toBe('P1 has three or more corners held by "gutter" and "west", so its plane is fixed; that fixes all 96 panels')
  })
  test('a pitch and one level fix everything', () => {
    const conditions: Condition[] = [{ ...hard, name: 'pitch', kind: 'plane', at: { panels: 'all' }, pitch_deg: 10, bearing_deg: 180 }, level('eaves', { nodes: ['N1'] }, 3)]
    const { found, reason } = propagate(hall, conditions, 0)
    expect(reason).toBe('Corners of all panels follow from "pitch" and "eaves", so their planes are fixed')
    found.height.forEach((h, n) => expect(h * 18).toBeCloseTo(3 + Math.tan(Math.PI / 18) * hall.y[n]!, 12))
  })
  test('corners that do not lie in one plane are named with their levels', () => {
    const { against } = propagate(hall, [level('south gutter', { nodes: ['N1', 'N2'] }), level('wall', { nodes: ['N3'] }, 0.5), level('post', { nodes: ['N4'] }, 1)])
    // Exact: on a square bay with corners 0, 0, 0.5 the fourth lies at 0.5, so one held at 1 is 500 mm off.
    expect(against).toBe('P1 has corners held at +0.000, +0.000, +0.500 and +1.000 by "south gutter", "wall" and "post": 500 mm off one plane')
  })
  test('two ways that meet at a node name it and both levels', () => {
    const two = grid(2, 1)
    const at = (x: number, y: number): string => `N${two.x.findIndex((v, n) => v === x && two.y[n] === y) + 1}`
    const { against } = propagate(two, [
      level('west', { nodes: [at(0, 0), at(1, 0), at(0, 1)] }, 5),
      level('east', { nodes: [at(2, 0), at(2, 1)] }, 5),
      level('head', { nodes: [at(1, 1)] }, 5.25),
    ], 5)
    // P1 holds the head at 5 where it is held at 5.25; on P2 the same head is off the plane of the other three.
    expect(against).toBe('P1 has corners held at +5.000, +5.000, +5.250 and +5.000 by "west" and "head": 250 mm off one plane')
    const chain = propagate(two, [
      level('west', { nodes: [at(0, 0), at(1, 0), at(0, 1)] }, 5),
      { ...hard, name: 'step', kind: 'fall', at: { run: [[0, 1], [1, 1]] }, per_mille: 100, level: null },
    ], 5)
    expect(chain.against).toBe(`by "west" and "step" ${at(1, 1)} would lie at +4.900 and at +5.000: 100 mm apart`)
  })
  test('lists are cut', () => {
    const names = Array.from({ length: 18 }, (_, i) => `P${i + 1}`)
    expect(words(names)).toBe('P1, P2, P3, P4, P5, P6 and 12 more')
    expect(words(names.slice(0, 7))).toBe('P1, P2, P3, P4, P5, P6 and P7')
    expect(words(['P1'])).toBe('P1')
  })
})

describe('exactness', () => {
  test('levels that a grid of parallel rows can have are no contradiction, and come back', () => {
    // Every lift of a rectangular grid is z = f(column) + g(row).
    const [f, g] = [(x: number): number => Math.sin(x), (y: number): number => 0.3 * y * y]
    const z = (n: number): number => f(hall.x[n]!) + g(hall.y[n]!)
    const sides = Array.from({ length: hall.nodeCount }, (_, n) => n).filter((n) => hall.x[n] === 0 || hall.y[n] === 0)
    const { found, reason } = propagate(hall, sides.map((n) => level(`row ${n}`, { nodes: [`N${n + 1}`] }, z(n))))
    expect(found.contradictions).toEqual([])
    expect(reason).toMatch(/^P1 has three or more corners held by "row 0", .* so its plane is fixed; that fixes all 96 panels$/)
    found.height.forEach((h, n) => expect(h * 18).toBeCloseTo(z(n), 10))
  })
  test('rounding along a chain of 400 loose panels raises no false alarm', () => {
    const strip = grid(400, 1, { loose: 0.3, seed: 3 })
    const affine = (n: number): number => 4 + 0.1 * strip.x[n]! - 0.2 * strip.y[n]!
    const corner = strip.corner.subarray(0, 4)
    const far = strip.corner.subarray(strip.panelStart[399]!, strip.panelStart[400]!)
    const { found } = propagate(strip, [...corner, ...far].map((n) => level(`n${n}`, { nodes: [`N${n + 1}`] }, affine(n))))
    expect(found.contradictions).toEqual([])
  })
  test('three corners in line do not hold a panel', () => {
    const t = plan([[0, 0], [1, 0], [2, 0], [2, 1], [0, 1]], [[0, 1, 2, 3, 4]])
    expect(propagate(t, [level('edge', { run: [[0, 0], [2, 0]] })]).found.forced).toBe(false)
    expect(propagate(t, [level('edge', { run: [[0, 0], [2, 0]] }), level('corner', { nodes: [[2, 1]] })]).found.forced).toBe(true)
  })
})

/** Flatness conditions and rows as one dense matrix: each panel's left null space of [x y 1], by singular values. */
function dense(on: Plan, rows: Rows): Matrix {
  const lines: number[][] = []
  for (let p = 0; p < on.panelCount; p += 1) {
    const corners = Array.from(on.corner.subarray(on.panelStart[p]!, on.panelStart[p + 1]!))
    if (corners.length < 4) continue
    const square = new Matrix(corners.map((n) => [on.work[2 * n]!, on.work[2 * n + 1]!, 1, ...Array<number>(corners.length - 3).fill(0)]))
    const { leftSingularVectors: U } = new SingularValueDecomposition(square)
    for (let k = 3; k < corners.length; k += 1) {
      const line = Array<number>(on.nodeCount).fill(0)
      corners.forEach((n, i) => (line[n] = U.get(i, k)))
      lines.push(line)
    }
  }
  for (let r = 0; r < rows.value.length; r += 1) {
    const line = Array<number>(on.nodeCount).fill(0)
    for (let i = rows.start[r]!; i < rows.start[r + 1]!; i += 1) line[rows.node[i]!]! += rows.weight[i]!
    lines.push(line)
  }
  while (lines.length < on.nodeCount) lines.push(Array<number>(on.nodeCount).fill(0))
  return new Matrix(lines)
}

/** A small plan: a grid of quads moved at random or not, some of them cut by a diagonal, perhaps with a void. */
function smallPlan(next: () => number): Plan {
  const [m, n] = [2 + Math.floor(next() * 4), 2 + Math.floor(next() * 3)]
  const whole = grid(m, n, { loose: next() < 0.5 ? 0.25 : 0, seed: Math.floor(next() * 1e6), voids: next() < 0.3 && m > 2 && n > 2 ? [[1, 1]] : [] })
  const faces: number[][] = []
  for (let p = 0; p < whole.panelCount; p += 1) {
    const face = Array.from(whole.corner.subarray(whole.panelStart[p]!, whole.panelStart[p + 1]!))
    if (next() < 0.25) faces.push([face[0]!, face[1]!, face[2]!], [face[0]!, face[2]!, face[3]!])
    else faces.push(face)
  }
  return plan(Array.from({ length: whole.nodeCount }, (_, i) => [whole.x[i]!, whole.y[i]!] as const), faces)
}

/** Conditions of every kind, true of the heights a + b x + c y. */
function randomConditions(on: Plan, next: () => number): Condition[] {
  const [a, b, c] = [next(), next() - 0.5, next() - 0.5]
  const z = (n: number): number => a + b * on.x[n]! + c * on.y[n]!
  const node = (): number => Math.floor(next() * on.nodeCount)
  const panel = (): string => `P${1 + Math.floor(next() * on.panelCount)}`
  const conditions: Condition[] = []
  const count = 1 + Math.floor(next() * 7)
  const floating = next() < 0.2
  for (let i = 0; i < count; i += 1) {
    const name = `c${i}`
    const n = node()
    const [p, q] = [node(), node()]
    const run = [`N${p + 1}`, `N${q + 1}`] as const
    const far = Math.hypot(on.x[p]! - on.x[q]!, on.y[p]! - on.y[q]!)
    const kind = next()
    if (kind < 0.4 && !floating) conditions.push(level(name, { nodes: [`N${n + 1}`] }, z(n)))
    else if (kind < 0.5) conditions.push({ ...hard, name, kind: 'coplanar', at: { panels: [panel(), panel()] } })
    else if (kind < 0.6 && p !== q) conditions.push({ ...hard, name, kind: 'straight', at: { run } })
    else if (kind < 0.75 && p !== q) conditions.push({ ...hard, name, kind: 'fall', at: { run }, per_mille: 1000 * (z(p) - z(q)) / far, level: null })
    else if (kind < 0.85 && on.jointCount > 0) conditions.push({ ...hard, name, kind: 'flush', at: { joints: [`J${1 + Math.floor(next() * on.jointCount)}`] } })
    else {
      const bearing = Math.atan2(-b, -c) * 180 / Math.PI
      conditions.push({ ...hard, name, kind: 'plane', at: { panels: [panel(), panel()] }, pitch_deg: Math.atan(Math.hypot(b, c)) * 180 / Math.PI, bearing_deg: bearing })
    }
  }
  return conditions
}

describe('against the null space of all conditions (ml-matrix)', () => {
  let reached = 0
  let relative = 0
  for (let seed = 1; seed <= 150; seed += 1) {
    test(`random plan and conditions, seed ${seed}`, () => {
      const next = random(seed)
      const on = smallPlan(next)
      const conditions = randomConditions(on, next)
      const { rows, found } = propagate(on, conditions)
      expect(found.contradictions).toEqual([])
      const { diagonal, rightSingularVectors: V } = new SingularValueDecomposition(dense(on, rows.hard))
      const loose = diagonal.map((s, k) => [s, k] as const).filter(([s]) => s < 1e-9).map(([, k]) => k)
      const known = Array.from(found.nodeStep.keys()).filter((n) => found.nodeStep[n]! >= 0)
      reached += known.length
      if (found.relative && known.length > 1) relative += 1
      for (const n of known) {
        // Unique: no motion that the conditions allow moves it (against the first of them where heights are relative).
        for (const k of loose) expect(Math.abs(V.get(n, k) - (found.relative ? V.get(known[0]!, k) : 0))).toBeLessThan(1e-8)
      }
      if (found.forced && !found.relative) expect(loose).toEqual([])
    })
  }
  test('and it reached something', () => {
    expect(reached).toBeGreaterThan(500)
    expect(relative).toBeGreaterThan(5)
  })
})

test('100,000 panels under a level rim: all reached', () => {
  const big = grid(316, 316)
  const rows = conditionRows(big, [level('rim level', { rim: 'outer' })], 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const found = propagation(big, rows.value.hard)
  expect(found.forced).toBe(true)
})
