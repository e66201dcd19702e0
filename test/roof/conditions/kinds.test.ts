/** Each kind of condition against heights that its definition makes true, and against heights that it must refuse. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import type { Plan } from '../../../src/plan/plan.ts'
import type { Condition } from '../../../src/plan/project/condition.ts'
import { conditionRows, type ConditionRows } from '../../../src/roof/conditions/condition-rows.ts'
import { eliminate } from '../../../src/roof/conditions/eliminate.ts'
import { homogeneous } from '../../../src/roof/conditions/homogeneous.ts'
import { gradientOf } from '../../../src/roof/conditions/plane.ts'
import type { Rows } from '../../../src/roof/conditions/rows.ts'
import { grid, plan } from '../../make/plans.ts'

const hall = grid(12, 8, { bay: 1.5 })

function rowsOf(on: Plan, condition: Condition, datum = 0): ConditionRows {
  const made = conditionRows(on, [condition], datum)
  if (!made.ok) throw new Error(JSON.stringify(made.problem))
  return made.value
}

/** Largest |row . h - value| over the rows, in spans, for heights in the plan's unit. */
function misfit(on: Plan, rows: Rows, z: (x: number, y: number, node: number) => number, datum = 0): number {
  let worst = 0
  for (let r = 0; r < rows.value.length; r += 1) {
    let sum = -rows.value[r]!
    for (let i = rows.start[r]!; i < rows.start[r + 1]!; i += 1) {
      const n = rows.node[i]!
      sum += rows.weight[i]! * (z(on.x[n]!, on.y[n]!, n) - datum) / on.frame.span
    }
    worst = Math.max(worst, Math.abs(sum))
  }
  return worst
}

/** How many independent conditions the rows are. */
const rankOf = (on: Plan, rows: Rows): number => on.nodeCount - eliminate(rows, on.nodeCount, ['it']).elimination.free.length

const common = { name: 'it', soft: null }
const bump = (x: number, y: number): number => Math.sin(1.3 * x + 0.4) * Math.cos(0.9 * y)

describe('level', () => {
  test('the outer rim at a level above the datum', () => {
    const { hard, held } = rowsOf(hall, { ...common, kind: 'level', at: { rim: 'outer' }, level: 3.2 }, 3)
    expect(held[0]!.nodes).toHaveLength(40)
    expect(rankOf(hall, hard)).toBe(40)
    expect(misfit(hall, hard, () => 3.2, 3)).toBeLessThan(1e-15)
    expect(misfit(hall, hard, () => 3.3, 3)).toBeCloseTo(0.1 / 18, 12)
  })
  test('without a level it is at the datum', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'level', at: { run: [[0, 0], [18, 0]] }, level: null }, 4)
    expect(hard.value).toEqual(new Float64Array(13))
    expect(homogeneous(hard)).toBe(true)
    expect(homogeneous(rowsOf(hall, { ...common, kind: 'level', at: { run: [[0, 0], [18, 0]] }, level: 4.1 }, 4).hard)).toBe(false)
  })
  test('the rim of one of two voids, by a point inside', () => {
    const two = grid(5, 3, { voids: [[1, 1], [3, 1]] })
    const { held } = rowsOf(two, { ...common, kind: 'level', at: { rim: [3.5, 1.5] }, level: 0 })
    expect(Array.from(held[0]!.nodes, (n) => [two.x[n], two.y[n]]).sort()).toEqual([[3, 1], [3, 2], [4, 1], [4, 2]])
    const none = conditionRows(two, [{ ...common, kind: 'level', at: { rim: [0.5, 0.5] }, level: 0 }], 0)
    expect(none).toMatchObject({ ok: false, problem: { code: 'no-void-there', where: { at: [0.5, 0.5], entity: 'condition "it"' } } })
  })
  test('nodes by name and by point, panels by point', () => {
    expect(Array.from(rowsOf(hall, { ...common, kind: 'level', at: { nodes: ['N3', [1.51, 0.02]] }, level: 0 }).held[0]!.nodes))
      .toEqual([2, hall.x.findIndex((x, n) => x === 1.5 && hall.y[n] === 0)])
    expect(rowsOf(hall, { ...common, kind: 'level', at: { panels: [[0.7, 0.7], [2, 1]] }, level: 0 }).held[0]!.nodes).toHaveLength(6)
    expect(conditionRows(hall, [{ ...common, kind: 'level', at: { nodes: ['N118'] }, level: 0 }], 0))
      .toMatchObject({ ok: false, problem: { code: 'no-such-node', cure: 'the plan has nodes N1 to N117' } })
    expect(conditionRows(hall, [{ ...common, kind: 'level', at: { nodes: [[0.7, 0]] }, level: 0 }], 0))
      .toMatchObject({ ok: false, problem: { code: 'no-node-there' } })
  })
})

describe('runs', () => {
  test('take nodes within 1 mm and no farther, in the order drawn', () => {
    const bent = plan([[0, 0], [1, 0.0009], [2, 0], [3, 0.0011], [4, 0], [4, 2], [0, 2]], [[0, 1, 2, 3, 4, 5, 6]])
    const { held } = rowsOf(bent, { ...common, kind: 'equal', at: { run: [[4, 0], [0, 0]] } })
    expect(Array.from(held[0]!.nodes, (n) => bent.x[n])).toEqual([4, 2, 1, 0])
  })
  test('keep to the plan at survey coordinates and in millimetres', () => {
    const [x0, y0] = [3_400_000_000, 5_700_000_000]
    const far = plan([[x0, y0], [x0 + 1500, y0], [x0 + 3000, y0], [x0 + 3000, y0 + 2000], [x0, y0 + 2000]], [[0, 1, 2, 3, 4]], 'mm')
    const { held, hard } = rowsOf(far, { ...common, kind: 'fall', at: { run: [[x0, y0], [x0 + 3000, y0]] }, per_mille: 10, level: 4000 })
    expect(held[0]!.nodes).toHaveLength(3)
    expect(misfit(far, hard, (x) => 4000 - 0.01 * (x - x0))).toBeLessThan(1e-12)
  })
  test('a run beside the plan is a problem at its first point', () => {
    expect(conditionRows(hall, [{ ...common, kind: 'straight', at: { run: [[0, -1], [18, -1]] } }], 0))
      .toMatchObject({ ok: false, problem: { code: 'empty-run', where: { at: [0, -1] } } })
    expect(conditionRows(hall, [{ ...common, kind: 'straight', at: { run: [[0, 0], [1, 0]] } }], 0))
      .toMatchObject({ ok: false, problem: { code: 'too-few-nodes', where: { names: ['N1'] } } })
  })
  test('round a corner, closed: each node once', () => {
    const { held } = rowsOf(hall, { ...common, kind: 'equal', at: { run: [[0, 0], [18, 0], [18, 12], [0, 12], [0, 0]] } })
    expect(held[0]!.nodes).toHaveLength(40)
    expect(held[0]!.nodes[0]).toBe(hall.x.findIndex((x, n) => x === 0 && hall.y[n] === 0))
  })
})

describe('fall, straight, equal', () => {
  const at = { run: [[0, 12], [18, 12]] } as const
  test('a gutter falls 5 per mille from its first point', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'fall', at, per_mille: 5, level: 3.5 })
    expect(rankOf(hall, hard)).toBe(13)
    expect(misfit(hall, hard, (x) => 3.5 - 0.005 * x)).toBeLessThan(1e-15)
    expect(misfit(hall, hard, (x) => 3.5 + 0.005 * x)).toBeCloseTo(0.18 / 18, 12)
  })
  test('without a level only the fall is held', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'fall', at, per_mille: 5, level: null })
    expect(rankOf(hall, hard)).toBe(12)
    for (const top of [0, 7.25]) expect(misfit(hall, hard, (x) => top - 0.005 * x)).toBeLessThan(1e-15)
    expect(misfit(hall, hard, (x) => -0.006 * x)).toBeGreaterThan(1e-5)
  })
  test('straight leaves two unknowns of the run', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'straight', at })
    expect(rankOf(hall, hard)).toBe(11)
    expect(misfit(hall, hard, (x, y) => 1.1 + 0.37 * x + (y < 12 ? bump(x, y) : 0))).toBeLessThan(1e-15)
    expect(misfit(hall, hard, bump)).toBeGreaterThan(1e-2)
  })
  test('equal leaves one', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'equal', at })
    expect(rankOf(hall, hard)).toBe(12)
    expect(misfit(hall, hard, (x, y) => (y < 12 ? bump(x, y) : 2))).toBeLessThan(1e-15)
  })
})

describe('planes', () => {
  const loose = grid(4, 3, { loose: 0.2, seed: 5 })
  const affine = (x: number, y: number): number => 0.3 - 0.21 * x + 0.4 * y
  test('coplanar: panels that touch nowhere still share one plane', () => {
    const { hard, held } = rowsOf(loose, { ...common, kind: 'coplanar', at: { panels: ['P1', 'P12'] } })
    expect(held[0]!.nodes).toHaveLength(8)
    expect(rankOf(loose, hard)).toBe(5)
    expect(misfit(loose, hard, affine)).toBeLessThan(1e-14)
    expect(misfit(loose, hard, bump)).toBeGreaterThan(1e-2)
  })
  test('flush: chains of flush joints share a plane, separate chains do not', () => {
    const joint = (x: number, y: number): readonly [number, number] => [x, y]
    const square = grid(4, 1)
    const { hard } = rowsOf(square, { ...common, kind: 'flush', at: { joints: [joint(1, 0.5), joint(3, 0.5)] } })
    const tent = (x: number): number => Math.abs(x - 2)
    expect(misfit(square, hard, tent)).toBeLessThan(1e-15)
    expect(misfit(square, hard, (x) => Math.abs(x - 1))).toBeGreaterThan(0.1)
    // Ten nodes; each chain of two quads leaves 3 unknowns and they share two nodes: 3 + 3 - 2.
    expect(rankOf(square, hard)).toBe(10 - 4)
  })
  test('plane: pitch and bearing, downhill to the east and to the south-west', () => {
    expect(gradientOf(45, 90)[0]).toBeCloseTo(-1, 15)
    expect(gradientOf(45, 90)[1]).toBeCloseTo(0, 15)
    for (const [pitch, bearing] of [[20, 90], [7, 225]] as const) {
      const { hard } = rowsOf(loose, { ...common, kind: 'plane', at: { panels: 'all' }, pitch_deg: pitch, bearing_deg: bearing })
      expect(rankOf(loose, hard)).toBe(loose.nodeCount - 1)
      const downhill = [Math.sin(bearing * Math.PI / 180), Math.cos(bearing * Math.PI / 180)] as const
      const slope = Math.tan(pitch * Math.PI / 180)
      expect(misfit(loose, hard, (x, y) => 5 - slope * (x * downhill[0] + y * downhill[1]))).toBeLessThan(1e-14)
      expect(misfit(loose, hard, (x, y) => 5 + slope * (x * downhill[0] + y * downhill[1]))).toBeGreaterThan(0.01)
    }
  })
  test('panels of one plane condition that do not touch keep heights of their own', () => {
    const { hard } = rowsOf(loose, { ...common, kind: 'plane', at: { panels: ['P1', 'P12'] }, pitch_deg: 10, bearing_deg: 0 })
    expect(rankOf(loose, hard)).toBe(6)
  })
})

describe('profile', () => {
  /** Exact: an arc of chord 12 and rise 2.4 has the radius (36 + 5.76) / 4.8 = 8.7 and its centre 6.3 below the chord. */
  const section = (y: number): number => Math.sqrt(8.7 ** 2 - (y - 6) ** 2) - 6.3

  test('the barrel over 18 x 12 m: heights of its arc from the definition', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'profile', at: { run: [[0, 0], [0, 12]] }, section: { arc: { rise: 2.4 } }, level: null })
    const expected = [0, 1.146, 1.866, 2.27, 2.4, 2.27, 1.866, 1.146, 0]
    expect(Array.from(hard.value, (h) => Number((h * 18).toFixed(3)))).toEqual(expected)
    expect(misfit(hall, hard, (_, y) => section(y))).toBeLessThan(1e-15)
  })
  test('held at both ends and along one side it is the whole barrel', () => {
    const conditions: Condition[] = [
      { ...common, name: 'west', kind: 'profile', at: { run: [[0, 0], [0, 12]] }, section: { arc: { rise: 2.4 } }, level: null },
      ...[0, 1.5, 3, 4.5, 6, 7.5, 9, 10.5, 12].map((y): Condition => ({ ...common, name: `run ${y}`, kind: 'equal', at: { run: [[0, y], [18, y]] } })),
    ]
    const made = conditionRows(hall, conditions, 0)
    if (!made.ok) throw new Error(made.problem.message)
    const { elimination, clashes } = eliminate(made.value.hard, hall.nodeCount, conditions.map((c) => c.name))
    expect(clashes).toEqual([])
    expect(elimination.free).toHaveLength(0)
    elimination.particular.forEach((h, n) => expect(h * 18).toBeCloseTo(section(hall.y[n]!), 12))
  })
  test('sagging, flat and on a level of its own', () => {
    const at = { run: [[0, 0], [0, 12]] } as const
    const sag = rowsOf(hall, { ...common, kind: 'profile', at, section: { arc: { rise: -2.4 } }, level: 5 })
    expect(misfit(hall, sag.hard, (_, y) => 5 - section(y))).toBeLessThan(1e-15)
    const flat = rowsOf(hall, { ...common, kind: 'profile', at, section: { arc: { rise: 0 } }, level: 5 })
    expect(misfit(hall, flat.hard, () => 5)).toBe(0)
    expect(conditionRows(hall, [{ ...common, kind: 'profile', at, section: { arc: { rise: 6.1 } }, level: 5 }], 0))
      .toMatchObject({ ok: false, problem: { code: 'steep-arc' } })
  })
  test('gable by pitch: 20 degrees over 12 m rises 2.184 m', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'profile', at: { run: [[3, 0], [3, 12]] }, section: { pitch_deg: 20 }, level: 0 })
    expect(Math.max(...hard.value) * 18).toBeCloseTo(2.184, 3)
    expect(misfit(hall, hard, (_, y) => Math.tan(Math.PI / 9) * (6 - Math.abs(y - 6)))).toBeLessThan(1e-15)
  })
  test('polyline: levels absolute, along from the first point; too short is a problem at the node', () => {
    const at = { run: [[18, 0], [0, 0]] } as const
    const { hard } = rowsOf(hall, { ...common, kind: 'profile', at, section: { points: [[0, 4], [6, 5], [18, 4.5]] }, level: null }, 4)
    const z = (x: number): number => (18 - x <= 6 ? 4 + (18 - x) / 6 : 5 - 0.5 * (12 - x) / 12)
    expect(misfit(hall, hard, z, 4)).toBeLessThan(1e-15)
    expect(conditionRows(hall, [{ ...common, kind: 'profile', at, section: { points: [[0, 4], [6, 5]] }, level: null }], 0))
      .toMatchObject({ ok: false, problem: { code: 'short-section', where: { at: [10.5, 0] } } })
  })
  test('named nodes in order: distances add up along the line through them', () => {
    const { hard } = rowsOf(hall, { ...common, kind: 'profile', at: { nodes: ['N1', 'N2', 'N5'] }, section: { points: [[0, 1], [100, 101]] }, level: null })
    const along = (a: number, b: number): number => Math.hypot(hall.x[a]! - hall.x[b]!, hall.y[a]! - hall.y[b]!)
    expect(Array.from(hard.value, (h) => h * 18)).toEqual([1, 1 + along(0, 1), 1 + along(0, 1) + along(1, 4)].map((v) => expect.closeTo(v, 12)))
  })
})

describe('soft conditions', () => {
  test('are kept apart, with their weight on each row', () => {
    const made = conditionRows(hall, [
      { name: 'a', soft: 3, kind: 'level', at: { nodes: ['N1', 'N2'] }, level: 1 },
      { name: 'b', soft: null, kind: 'equal', at: { rim: 'outer' } },
      { name: 'c', soft: 0.5, kind: 'level', at: { nodes: ['N3'] }, level: 1 },
    ], 0)
    if (!made.ok) throw new Error(made.problem.message)
    expect(Array.from(made.value.soft.softWeight)).toEqual([3, 3, 0.5])
    expect(Array.from(made.value.soft.condition)).toEqual([0, 0, 2])
    expect(new Set(made.value.hard.condition)).toEqual(new Set([1]))
    expect(made.value.held.map((h) => [h.name, h.kind, h.soft])).toEqual([['a', 'level', true], ['b', 'equal', false], ['c', 'level', true]])
  })
})

describe('conditions that contradict each other are named, with the misfit', () => {
  const clashes = (...conditions: Condition[]): unknown => {
    const made = conditionRows(hall, conditions, 0)
    if (!made.ok) throw new Error(made.problem.message)
    return eliminate(made.value.hard, hall.nodeCount, conditions.map((c) => c.name)).clashes
  }
  const rim: Condition = { ...common, name: 'rim level', kind: 'level', at: { rim: 'outer' }, level: 0 }
  const bystander: Condition = { ...common, name: 'post', kind: 'level', at: { nodes: [[9, 6]] }, level: 2 }

  test('a wall above a level rim', () => {
    // Exact: the two share the rim nodes of the north side, 0.6 m apart on a span of 18 m.
    expect(clashes(bystander, rim, { ...common, name: 'wall', kind: 'level', at: { run: [[0, 12], [18, 12]] }, level: 0.6 }))
      .toEqual([{ conditions: ['rim level', 'wall'], misfit: expect.closeTo(0.6 / 18, 12) as number }])
  })
  test('a fall without a level on a level rim: the far end is missed by the whole fall', () => {
    expect(clashes(bystander, rim, { ...common, name: 'gutter', kind: 'fall', at: { run: [[0, 0], [18, 0]] }, per_mille: 5, level: null }))
      .toEqual([{ conditions: ['rim level', 'gutter'], misfit: expect.closeTo(0.09 / 18, 12) as number }])
  })
  test('a straight run between two posts, past two more: a clash for each', () => {
    const post = (name: string, x: number, z: number): Condition => ({ ...common, name, kind: 'level', at: { nodes: [[x, 6]] }, level: z })
    expect(clashes(post('west', 0, 1), post('middle', 9, 1.5), post('east', 18, 1.2), post('apart', 3, 7), { ...common, name: 'ridge', kind: 'straight', at: { run: [[0, 6], [1.5, 6], [18, 6]] } }))
      .toMatchObject([{ conditions: ['west', 'east', 'apart', 'ridge'] }, { conditions: ['west', 'middle', 'east', 'ridge'] }])
  })
  test('nothing where all agree', () => {
    expect(clashes(rim, bystander, { ...common, name: 'again', kind: 'equal', at: { rim: 'outer' } }, { ...common, name: 'once more', kind: 'straight', at: { run: [[0, 0], [18, 0]] } })).toEqual([])
  })
})

describe('size', () => {
  test('100,000 nodes, 2,000 of them held: nothing but the held ones leaves the unknowns', () => {
    const big = grid(316, 316)
    const next = random(9)
    const nodes = Array.from({ length: 2000 }, () => `N${1 + Math.floor(next() * big.nodeCount)}`)
    const rows = rowsOf(big, { ...common, kind: 'level', at: { nodes }, level: 1 }).hard
    const { elimination } = eliminate(rows, big.nodeCount, ['it'])
    expect(elimination.free.length).toBe(big.nodeCount - new Set(nodes).size)
  })
  test('thousands of panels in one plane, and again in two overlapping sets', () => {
    const big = grid(100, 100, { loose: 0.2 })
    const panels = (from: number, to: number): string[] => Array.from({ length: to - from }, (_, i) => `P${from + i + 1}`)
    const sets = [panels(0, 6000), panels(3000, 10000)]
    const made = conditionRows(big, sets.map((list, i) => ({ ...common, name: `set ${i}`, kind: 'coplanar', at: { panels: list } })), 0)
    if (!made.ok) throw new Error(made.problem.message)
    const { elimination, clashes } = eliminate(made.value.hard, big.nodeCount, ['set 0', 'set 1'])
    expect(clashes).toEqual([])
    expect(elimination.free).toHaveLength(3)
    expect(elimination.start[big.nodeCount]).toBeLessThanOrEqual(3 * big.nodeCount)
    // Fully reduced: heights of any affine function come back from its three free nodes.
    const affine = (n: number): number => 0.2 + 0.7 * big.work[2 * n]! - 0.3 * big.work[2 * n + 1]!
    for (let n = 0; n < big.nodeCount; n += 1) {
      let h = elimination.particular[n]!
      for (let i = elimination.start[n]!; i < elimination.start[n + 1]!; i += 1) h += elimination.weight[i]! * affine(elimination.free[elimination.unknown[i]!]!)
      expect(Math.abs(h - affine(n))).toBeLessThan(1e-12)
    }
  })
})
