/** Conditions that bound one side: roofs worked out by hand, and a small program against all its active sets. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../../src/base/steps.ts'
import type { Condition } from '../../../src/plan/project/condition.ts'
import { conditionRows } from '../../../src/roof/conditions/condition-rows.ts'
import { leastFold } from '../../../src/roof/conditions/form-force.ts'
import { ponds } from '../../../src/roof/conditions/no-ponding.ts'
import { nodeAreas } from '../../../src/roof/raise/nearest.ts'
import { oneSided } from '../../../src/roof/raise/one-sided.ts'
import { metricOf } from '../../../src/roof/raise/soft.ts'
import { forces, stressOfGradients } from '../../../src/roof/stress/forces.ts'
import { gaussians } from '../../../src/base/random.ts'
import { cells, grid, plan } from '../../make/plans.ts'
import { level, raise } from '../../make/raise.ts'

const bounds = (name: string, at: Extract<Condition, { kind: 'bounds' }>['at'], least: number | null, most: number | null): Condition => ({ kind: 'bounds', name, at, least, most, soft: null })
const slope = (name: string, least_deg: number | null, most_deg: number | null): Condition => ({ kind: 'slope', name, at: { panels: 'all' }, least_deg, most_deg, soft: null })
const oneWay = (name: string, fold: Extract<Condition, { kind: 'one-way' }>['fold']): Condition => ({ kind: 'one-way', name, at: { panels: 'all' }, fold, soft: null })

// A pitched roof: two panels of 10 m x 4 m that meet along the ridge y = 4; both eaves held at 0.
const pitched = plan([[0, 0], [10, 0], [10, 4], [0, 4], [10, 8], [0, 8]], [[0, 1, 2, 3], [3, 2, 4, 5]])
const eaves = [level('south eaves', { run: [[0, 0], [10, 0]] }), level('north eaves', { run: [[0, 8], [10, 8]] })]
const nodeAt = (p: typeof pitched, x: number, y: number): number => [...p.x.keys()].find((n) => p.x[n] === x && p.y[n] === y)!

describe('a pitched roof, its ridge the one thing that is free', () => {
  const ridge = (z: Float64Array): number => z[nodeAt(pitched, 0, 4)]!

  test('a bound above the asked rise changes nothing', () => {
    const made = raise(pitched, { conditions: [...eaves, bounds('envelope', { run: [[0, 4], [10, 4]] }, null, 2.5)], rise: 2 / 10 })
    expect(ridge(made.z)).toBeCloseTo(2, 9)
    expect(made.prices).toEqual([])
    expect(made.verdict).toBe('lifts')
  })

  test('a bound below it holds the ridge there, and costs the difference in rise (exact: one free height)', () => {
    const made = raise(pitched, { conditions: [...eaves, bounds('envelope', { run: [[0, 4], [10, 4]] }, null, 1.5)], rise: 2 / 10 })
    expect(ridge(made.z)).toBeCloseTo(1.5, 8)
    expect(made.under.freedomLeft).toBe(1)
    expect(made.prices).toHaveLength(1)
    expect(made.prices[0]!.condition).toBe(2)
    expect(made.prices[0]!.rise * 10).toBeCloseTo(0.5, 6)
    expect([nodeAt(pitched, 0, 4), nodeAt(pitched, 10, 4)]).toContain(made.prices[0]!.node)
  })

  test('headroom above the asked rise lifts the ridge', () => {
    const made = raise(pitched, { conditions: [...eaves, bounds('headroom', { run: [[0, 4], [10, 4]] }, 3, null)], rise: 2 / 10 })
    expect(ridge(made.z)).toBeCloseTo(3, 8)
  })

  test('least and largest slope: ridge at 4 tan(angle) (exact: one pitch)', () => {
    const steep = raise(pitched, { conditions: [...eaves, slope('drainage', 30, null)], rise: 1 / 10 })
    expect(steep.unmet).toEqual([])
    expect(ridge(steep.z)).toBeCloseTo(4 * Math.tan(Math.PI / 6), 6)
    const flat = raise(pitched, { conditions: [...eaves, slope('wind', null, 10)], rise: 2 / 10 })
    expect(ridge(flat.z)).toBeCloseTo(4 * Math.tan(Math.PI / 18), 6)
    expect(flat.prices[0]!.rise * 10).toBeCloseTo(2 - 4 * Math.tan(Math.PI / 18), 5)
  })

  test('a ridge that may be no ridge is flat: nothing folds, and the count says so (no ridge, eaves at one level)', () => {
    // Ridge at h > 0 is a ridge, h < 0 a valley; asked rise up, no ridges: h = 0 is the nearest.
    const made = raise(pitched, { conditions: [...eaves, oneWay('no ridge', 'no-ridge')], rise: 2 / 10 })
    expect(ridge(made.z)).toBeLessThanOrEqual(1e-9)
    // Together with no valley only the level roof is left: one roof, frozen.
    const both = raise(pitched, { conditions: [...eaves, oneWay('no ridge', 'no-ridge'), oneWay('no valley', 'no-valley')], rise: 2 / 10 })
    expect(both.under.freedomLeft).toBe(0)
    expect([...both.under.frozen]).toEqual([1])
    expect(both.verdict).not.toBe('lifts')
  })

  test('bounds that contradict each other are named, the others are not', () => {
    const made = raise(pitched, { conditions: [...eaves, bounds('envelope', { nodes: [[0, 4]] }, null, 1), bounds('headroom', { nodes: [[10, 4]] }, 1.2, null), bounds('idle', { nodes: [[5, 0]], within_mm: 6000 }, -1, 1)], rise: 2 / 10 })
    expect(made.verdict).toBe('does not lift')
    expect(made.clashes).toHaveLength(1)
    const named = [...made.clashes[0]!.conditions].sort()
    // One level eaves and the ridge's two ends make one plane, so both ends have one height: either eaves will do.
    expect(named[2]).toMatch(/ eaves$/)
    expect(named.slice(0, 2)).toEqual(['envelope', 'headroom'])
    expect(named).toHaveLength(3)
    expect(made.clashes[0]!.misfit * 10).toBeGreaterThan(0.01)
  })
})

test('an envelope over a whole roof below the asked rise: the roof rises to it, and does not lie level at it', () => {
  // z = f(x) + g(y) with the springing at 0: from 0 at a corner to the bound in the middle (exact).
  const bays = grid(6, 4)
  const made = raise(bays, { conditions: [bounds('envelope', { panels: 'all' }, null, 0.4)], rise: 0.1 })
  expect(Math.max(...made.z)).toBeCloseTo(0.4, 5)
  expect(Math.max(...made.z) - Math.min(...made.z)).toBeCloseTo(0.4, 3)
  expect(made.prices[0]!.rise).toBeCloseTo(0.1 - 0.4 / 6, 3)
})

describe('one panel with slopes', () => {
  const pane = plan([[0, 0], [2, 0], [2, 1], [0, 1]], [[0, 1, 2, 3]])
  const fall = (z: Float64Array): number => {
    const [a, b, d] = [nodeAt(pane, 0, 0), nodeAt(pane, 2, 0), nodeAt(pane, 0, 1)].map((n) => z[n]!)
    return (Math.atan(Math.hypot((b! - a!) / 2, d! - a!)) * 180) / Math.PI
  }
  test('a target at 10 degrees is brought to exactly 15, or to exactly 5 (exact: the nearest plane)', () => {
    const target = Float64Array.from(pane.x, (_, n) => (pane.y[n]! * Math.tan(Math.PI / 18)) / 2)
    expect(fall(raise(pane, { target, conditions: [slope('drainage', 15, null)] }).z)).toBeCloseTo(15, 5)
    expect(fall(raise(pane, { target, conditions: [slope('drainage', null, 5)] }).z)).toBeCloseTo(5, 5)
    expect(fall(raise(pane, { target, conditions: [slope('drainage', 8, 12)] }).z)).toBeCloseTo(10, 6)
  })
  test('a level target falls somewhere', () => {
    expect(fall(raise(pane, { target: new Float64Array(4), conditions: [slope('drainage', 3, null)] }).z)).toBeCloseTo(3, 5)
  })
})

test('a barrel asked to be ridges: every joint along it folds by the least that shows, the others lie flat (exact: f_i + g_j)', () => {
  // A rectangular grid lifts as z = f(x) + g(y): joints across may not be ridges without a fold in f.
  const of = grid(4, 4)
  const joints = [...Array(of.jointCount).keys()].filter((j) => of.y[of.origin[2 * j]!] === of.y[of.origin[2 * j + 1]!]).map((j) => `J${j + 1}`)
  const made = raise(of, { shape: 'barrel', rise: 0.1, conditions: [{ kind: 'one-way', name: 'along', at: { joints }, fold: 'ridge', soft: null }] })
  const force = forces(of, stressOfGradients(of, made.roof!.gradient))
  const along = joints.map((name) => force[Number(name.slice(1)) - 1]!)
  expect(Math.max(...along)).toBeLessThanOrEqual(-leastFold + 1e-8)
  const all = raise(of, { shape: 'barrel', rise: 0.1, conditions: [oneWay('all', 'ridge')] })
  expect(Math.max(...forces(of, stressOfGradients(of, all.roof!.gradient)))).toBeLessThanOrEqual(-leastFold + 1e-8)
  const none = raise(of, { shape: 'barrel', rise: 0.1, conditions: [oneWay('none', 'valley')] })
  expect(Math.min(...forces(of, stressOfGradients(of, none.roof!.gradient)))).toBeGreaterThanOrEqual(leastFold - 1e-8)
})

test('no valleys on the classic triangulation: three folds cancel in every roof, so they stay flat and count as frozen', () => {
  // De Loera, Rambau, Santos, "Triangulations" (2010): the folds of 1-3, 2-4, 0-5 sum to 0 in every roof.
  const of = plan([[4, 0], [0, 4], [0, 0], [2, 1], [1, 2], [1, 1]], [[3, 4, 5], [0, 3, 1], [1, 3, 4], [1, 2, 4], [2, 4, 5], [0, 2, 5], [0, 3, 5]])
  const made = raise(of, { conditions: [oneWay('no valley', 'no-valley')] })
  expect(made.under.frozen.reduce((sum, value) => sum + value, 0)).toBe(3)
  expect(made.verdict).toBe('lifts in part')
  const force = forces(of, stressOfGradients(of, made.roof!.gradient))
  expect(Math.max(...force)).toBeLessThan(1e-9)
  // Six heights less two independent flat folds; the third follows.
  expect(made.under.freedomLeft).toBe(4)
})

test('ponds: a dimple drains once it is asked to, and a level floor in a bowl is one pond', () => {
  const of = grid(4, 4)
  const bowl = Float64Array.from(of.x, (x, n) => ((x - 2) ** 2 + (of.y[n]! - 2) ** 2) / 100)
  const all = Int32Array.from(of.x.keys())
  expect(ponds(of, bowl, all).map(({ nodes }) => nodes)).toEqual([[nodeAt(of, 2, 2)]])
  const floor = Float64Array.from(of.x, (_, n) => (of.rimPasses[n] === 0 ? 0 : 0.1))
  expect(ponds(of, floor, all)[0]!.nodes).toHaveLength(9)
  const made = raise(of, { target: bowl.map((h) => h / 4), conditions: [{ kind: 'no-ponding', name: 'drainage', at: { panels: 'all' }, soft: null }] })
  expect(made.unmet).toEqual([])
  expect(ponds(of, made.roof!.heights, all)).toEqual([])
})

test('the nearest roof within bounds is the best of all active sets (dense enumeration of a small quadratic program)', () => {
  const of = cells(9, 4)
  const { free } = raise(of)
  const areas = nodeAreas(of)
  const wish = Float64Array.from(gaussians(of.nodeCount, 3), (value) => 0.1 * value)
  const nodes = [0, 5, 9, 14].map((n) => `N${n + 1}`)
  const rows = conditionRows(of, nodes.map((name, k) => bounds(`b${k}`, { nodes: [name] }, -0.004, 0.004)), 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const metric = metricOf(areas, rows.value.soft)
  // The lifts as a dense basis, orthonormal in the areas; nearest point u, rows c in the basis.
  const dimension = free.space.dimension
  const basis: Float64Array[] = []
  const inner = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + areas[i]! * value * b[i]!, 0)
  for (let k = 0; k < dimension; k += 1) {
    const v = raise(of, { target: gaussians(of.nodeCount, 50 + k), rise: null }).roof!.heights.slice()
    for (let pass = 0; pass < 3; pass += 1) for (const b of basis) { const share = inner(v, b); v.forEach((value, i) => (v[i] = value - share * b[i]!)) }
    const size = Math.sqrt(inner(v, v))
    basis.push(v.map((value) => value / size))
  }
  const y0 = basis.map((b) => inner(b, wish))
  const { signed } = rows.value
  const c = Array.from(signed.value, (_, r) => basis.map((b) => { let sum = 0; for (let k = signed.start[r]!; k < signed.start[r + 1]!; k += 1) sum += signed.weight[k]! * b[signed.node[k]!]!; return sum }))
  let best = { cost: Infinity, y: y0 }
  for (let set = 0; set < 1 << c.length; set += 1) {
    const active = c.map((_, r) => r).filter((r) => (set >> r) & 1)
    // y = y0 - C^T l, C y = b on the active rows.
    const g = active.map((r) => active.map((q) => c[r]!.reduce((sum, value, k) => sum + value * c[q]![k]!, 0)))
    const right = active.map((r) => c[r]!.reduce((sum, value, k) => sum + value * y0[k]!, 0) - signed.value[r]!)
    const l = gauss(g, right)
    if (l === null) continue
    const y = y0.map((value, k) => value - active.reduce((sum, r, i) => sum + l[i]! * c[r]![k]!, 0))
    const keeps = c.every((row, r) => row.reduce((sum, value, k) => sum + value * y[k]!, 0) <= signed.value[r]! + 1e-9)
    const cost = y.reduce((sum, value, k) => sum + (value - y0[k]!) ** 2, 0)
    if (keeps && cost < best.cost) best = { cost, y }
  }
  expect(best.cost).toBeGreaterThan(1e-7)
  const u = Float64Array.from({ length: of.nodeCount }, (_, i) => basis.reduce((sum, b, k) => sum + y0[k]! * b[i]!, 0))
  const { heights, broken } = finish(oneSided(free.space, metric, signed).held(u))
  expect(broken).toEqual([])
  heights.forEach((height, i) => expect(height).toBeCloseTo(basis.reduce((sum, b, k) => sum + best.y[k]! * b[i]!, 0), 8))
})

/** x with A x = b, null where A is singular. */
function gauss(a: number[][], b: number[]): number[] | null {
  const n = b.length
  const m = a.map((row, i) => [...row, b[i]!])
  for (let k = 0; k < n; k += 1) {
    let p = k
    for (let i = k; i < n; i += 1) if (Math.abs(m[i]![k]!) > Math.abs(m[p]![k]!)) p = i
    if (Math.abs(m[p]![k]!) < 1e-12) return null
    ;[m[k], m[p]] = [m[p]!, m[k]!]
    for (let i = 0; i < n; i += 1) {
      if (i === k) continue
      const factor = m[i]![k]! / m[k]![k]!
      for (let j = k; j <= n; j += 1) m[i]![j]! -= factor * m[k]![j]!
    }
  }
  return m.map((row, i) => row[n]! / row[i]!)
}

test('a slope that cannot be had is said, with the panel', () => {
  // Whole rim level: rectangular bays stay level.
  const of = grid(3, 3)
  const made = raise(of, { conditions: [level('rim', { rim: 'outer' }), slope('drainage', 3, null)], rise: 0.1 })
  expect(made.verdict).not.toBe('lifts')
})
