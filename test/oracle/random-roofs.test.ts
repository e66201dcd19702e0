/**
 * Random plans of all kinds under random conditions, held against dense linear algebra (singular values by ml-matrix) that
 * solves the same definitions: four-points-coplanar rows for flatness, each condition's rows written out anew, the nearest
 * roof by its normal equations, the near roof by its definition. Source: exact, worked out from the definitions alone. The
 * kind and the seed in a test's name give its case again.
 */
import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { conditionRows } from '../../src/roof/conditions/condition-rows.ts'
import { freeRim } from '../../src/roof/stress/free-rim.ts'
import { closureFreedom, dimensionOfLifts } from '../make/dense.ts'
import { areaShares, dot, foldSizes, largestZone, nearRoofAt, nearest, roofs, tiltDimensionOf, type Soft } from '../make/dense-roof.ts'
import { plan } from '../make/plans.ts'
import { raise } from '../make/raise.ts'
import { randomCondition, type Drawn } from '../make/random-conditions.ts'
import { kinds, randomPlan, type Kind } from '../make/random-plans.ts'

/** Forces of frozen joints are rounding (at most 7e-13 in 1,500 cases), live ones are not (at least 1e-3). */
const frozenForce = 1e-10

const seeds = (from: number, count: number): [Kind, number][] =>
  kinds.flatMap((kind) => Array.from({ length: count }, (_, k): [Kind, number] => [kind, from + k]))

function planOf(kind: Kind, seed: number): Plan {
  const { points, faces } = randomPlan(kind, seed)
  return plan(points, faces)
}

describe('with the rim free', () => {
  test.each(seeds(1, 10))('%s, seed %d: freedom by both dense roads, tilts and frozen joints by dense null spaces', (kind, seed) => {
    const of = planOf(kind, seed)
    const { space, freedom, tilts, frozen, groupCount } = finish(freeRim(of))
    expect(space.dimension).toBe(dimensionOfLifts(of))
    expect(tilts).toBe(tiltDimensionOf(of))
    expect(freedom).toBe(closureFreedom(of))
    const live = foldSizes(of, roofs(of, [], [])).map((force) => force > frozenForce)
    expect([...frozen]).toEqual(live.map((folds) => (folds ? 0 : 1)))
    expect(groupCount).toBe(groupsAcross(of, live))
  })
})

/** Panels in how many groups when those across joints that do not fold are one. */
function groupsAcross(of: Plan, live: readonly boolean[]): number {
  const group = Array.from({ length: of.panelCount }, (_, p) => p)
  for (let joined = true; joined;) {
    joined = false
    for (let j = 0; j < of.jointCount; j += 1) {
      const [a, b] = [group[of.panelOf[2 * j]!]!, group[of.panelOf[2 * j + 1]!]!]
      if (live[j] === true || a === b) continue
      group.forEach((name, p) => (group[p] = name === Math.max(a, b) ? Math.min(a, b) : name))
      joined = true
    }
  }
  return new Set(group).size
}

interface Case {
  readonly of: Plan
  readonly drawn: readonly Drawn[]
  readonly rows: number[][]
  readonly values: number[]
  readonly target: Float64Array
}

/** A plan, up to three conditions that agree with some lift or are drawn without a look at one, and a wavy target. */
function caseOf(kind: Kind, seed: number): Case {
  const of = planOf(kind, seed)
  const next = random(77 * seed + kinds.indexOf(kind))
  const lift = new Array<number>(of.nodeCount).fill(0)
  for (const way of roofs(of, [], []).basis) {
    const share = 0.3 * (next() - 0.5)
    way.forEach((value, i) => (lift[i]! += share * value))
  }
  const agrees = next() < 0.6
  const count = Math.floor(next() * 4)
  const drawn = Array.from({ length: count }, (_, k) =>
    randomCondition(of, next, `condition ${k}`, agrees ? lift : null, next() < 0.25 ? 0.5 + next() : null),
  )
  const hard = drawn.filter(({ condition }) => condition.soft === null)
  const target = Float64Array.from(
    { length: of.nodeCount },
    (_, i) => 0.2 * Math.cos(2 * of.work[2 * i]! + 1) * Math.cos(3 * of.work[2 * i + 1]!) + 0.02 * next(),
  )
  return { of, drawn, rows: hard.flatMap(({ rows }) => rows), values: hard.flatMap(({ values }) => values), target }
}

/** Soft rows as the program scales them, which the definition leaves to it: weight times nodes, shared among a condition's rows. */
function softOf(of: Plan, drawn: readonly Drawn[]): Soft {
  const made = conditionRows(
    of,
    drawn.map(({ condition }) => condition),
    0,
  )
  if (!made.ok) throw new Error(made.problem.message)
  const { start, node, weight, value, condition } = made.value.soft
  const rows = Array.from(value, (_, r) => {
    const row = new Array<number>(of.nodeCount).fill(0)
    for (let k = start[r]!; k < start[r + 1]!; k += 1) row[node[k]!]! += weight[k]!
    return row
  })
  const weights = rows.map(
    (_, r) => (drawn[condition[r]!]!.condition.soft! * of.nodeCount) / condition.filter((index) => index === condition[r]).length,
  )
  return { rows, values: [...value], weights }
}

describe('under random conditions', () => {
  test.each(seeds(1, 9))('%s, seed %d: freedom left, frozen joints, verdict, and the roof', (kind, seed) => {
    const { of, drawn, rows, values, target } = caseOf(kind, seed)
    const { under, verdict, roof } = raise(of, { conditions: drawn.map(({ condition }) => condition), target })
    const set = roofs(of, rows, values)
    expect(under.freedomLeft).toBe(set.particular === null ? null : set.basis.length)
    const live = set.particular === null ? [] : foldSizes(of, set).map((force) => force > frozenForce)
    if (set.particular !== null) expect([...under.frozen]).toEqual(live.map((folds) => (folds ? 0 : 1)))
    const folding = live.filter((folds) => folds).length
    if (set.particular !== null && (folding > 0 || of.jointCount === 0)) {
      expect(verdict).toBe(folding === of.jointCount ? 'lifts' : 'lifts in part')
      expectRoofOfChoice(of, rows, values, roof!.heights, nearest(set, target, areaShares(of), softOf(of, drawn)))
    } else if (roof !== null) {
      const right = nearRoof(of, rows, values, [...target])
      expect(verdict).toBe(right.isWithin ? 'lifts within tolerance' : 'does not lift')
      // At mu = 1e8 either road keeps about eight digits.
      roof.heights.forEach((height, i) => expect(Math.abs(height - right.heights[i]!)).toBeLessThan(1e-7))
    } else expect(verdict).toBe('does not lift')
  })
})

/** Conditions met to 1e-9 of the span, panels flat to rounding, and the nearest of all such roofs. */
function expectRoofOfChoice(
  of: Plan,
  rows: readonly number[][],
  values: readonly number[],
  heights: Float64Array,
  right: readonly number[],
): void {
  rows.forEach((row, r) => expect(Math.abs(dot(row, heights) - values[r]!)).toBeLessThan(1e-9))
  expect(largestZone(of, heights)).toBeLessThan(1e-14)
  heights.forEach((height, i) => expect(Math.abs(height - right[i]!)).toBeLessThan(1e-8))
}

/** Of mu = 1 .. 1e8 by decades the least that brings every panel within 1 mm (plans are in metres), else 1e8. */
function nearRoof(
  of: Plan,
  rows: readonly number[][],
  values: readonly number[],
  target: readonly number[],
): { heights: number[]; isWithin: boolean } {
  const areas = areaShares(of)
  let heights: number[] = []
  for (let power = 0; power <= 8; power += 1) {
    heights = nearRoofAt(of, rows, values, target, areas, 10 ** power)
    if (largestZone(of, heights) <= 0.001 / of.frame.span) return { heights, isWithin: true }
  }
  return { heights, isWithin: false }
}

describe('asked for a rise', () => {
  const rim = (of: Plan): number[] => [...of.rimPasses.keys()].filter((node) => of.rimPasses[node]! > 0)
  test.each(seeds(41, 3))('%s, seed %d: the nearest roof to the shape, scaled to the rise, where nothing has a height', (kind, seed) => {
    const of = planOf(kind, seed)
    const wish = Array.from({ length: of.nodeCount }, (_, i) => 1 - 2 * of.work[2 * i]! ** 2 - of.work[2 * i + 1]!)
    const { roof, verdict } = raise(of, { target: Float64Array.from(wish), rise: 0.125 })
    const set = roofs(of, [], [])
    const isLift = foldSizes(of, set).some((force) => force > frozenForce)
    expect(verdict === 'lifts' || verdict === 'lifts in part').toBe(isLift)
    if (!isLift) return
    const near = nearest(set, wish, areaShares(of))
    const outer = outerRim(of)
    const scale = 0.125 / (Math.max(...near) - Math.min(...outer.map((node) => near[node]!)))
    roof!.heights.forEach((height, i) => expect(Math.abs(height - scale * near[i]!)).toBeLessThan(1e-8))
  })

  test.each(seeds(51, 3))(
    '%s, seed %d: with two nodes at heights of their own the wish is amplified until the rise is there',
    (kind, seed) => {
      const of = planOf(kind, seed)
      const [a, b] = [rim(of)[0]!, rim(of)[1]!]
      const at = (node: number, height: number) =>
        ({ kind: 'level', name: `at ${node}`, soft: null, at: { nodes: [`N${node + 1}`] }, level: height * of.frame.span }) as const
      const wish = Array.from({ length: of.nodeCount }, (_, i) => 1 - 2 * of.work[2 * i]! ** 2 - 2 * of.work[2 * i + 1]! ** 2)
      const asked = 0.3
      const { roof, verdict } = raise(of, { conditions: [at(a, 0), at(b, 0.01)], target: Float64Array.from(wish), rise: asked })
      const unit = (node: number): number[] => wish.map((_, i) => (i === node ? 1 : 0))
      const set = roofs(of, [unit(a), unit(b)], [0, 0.01])
      const isLift = foldSizes(of, set).some((force) => force > frozenForce)
      expect(verdict === 'lifts' || verdict === 'lifts in part').toBe(isLift)
      if (!isLift) return
      const outer = outerRim(of)
      const rise = (h: ArrayLike<number>): number => Math.max(...Array.from(h)) - Math.min(...outer.map((node) => h[node]!))
      expect(rise(roof!.heights)).toBeCloseTo(asked, 9)
      // h(a) = nearest to a * wish, with the a that gives this roof: from one node, held to all.
      const areas = areaShares(of)
      const [rest, one] = [
        nearest(
          set,
          wish.map(() => 0),
          areas,
        ),
        nearest(set, wish, areas),
      ]
      const way = one.map((height, i) => height - rest[i]!)
      const most = way.reduce((best, value, i) => (Math.abs(value) > Math.abs(way[best]!) ? i : best), 0)
      const amplitude = (roof!.heights[most]! - rest[most]!) / way[most]!
      roof!.heights.forEach((height, i) => expect(Math.abs(height - rest[i]! - amplitude * way[i]!)).toBeLessThan(1e-8))
    },
  )
})

/** Nodes on rim loops that run clockwise. */
function outerRim(of: Plan): number[] {
  const found = new Set<number>()
  for (let loop = 0; loop + 1 < of.rimStart.length; loop += 1) {
    const round = [...of.rimHalf.slice(of.rimStart[loop], of.rimStart[loop + 1])].map((half) => of.origin[half]!)
    const twice = round.reduce((sum, p, k) => {
      const q = round[(k + 1) % round.length]!
      return sum + of.work[2 * p]! * of.work[2 * q + 1]! - of.work[2 * q]! * of.work[2 * p + 1]!
    }, 0)
    if (twice < 0) for (const node of round) found.add(node)
  }
  return [...found]
}
