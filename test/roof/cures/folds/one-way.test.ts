/** One-way folds: the classic plans without one, their certificates and margins; optima against their duals. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../../../src/base/steps.ts'
import type { Plan } from '../../../../src/plan/plan.ts'
import { linearSolver, programRows } from '../../../../src/roof/cures/folds/linear-program.ts'
import { answered, marginOf, oneWay, type OneWay } from '../../../../src/roof/cures/folds/one-way.ts'
import { residualOf } from '../../../../src/roof/cures/folds/one-way-certificate.ts'
import { basisProgram, heightsProgram } from '../../../../src/roof/cures/folds/one-way-program.ts'
import { forces, jointLengths, stressOfGradients } from '../../../../src/roof/stress/forces.ts'
import { freeRim } from '../../../../src/roof/stress/free-rim.ts'
import { panelPlanes } from '../../../../src/roof/stress/panel-bases.ts'
import { cells, grid, plan, voronoi, type Points } from '../../../make/plans.ts'

const solver = await linearSolver()

function asked(of: Plan, chosen = Int32Array.from({ length: of.jointCount }, (_, j) => j)): OneWay & { free: ReturnType<typeof spaceOf> } {
  const free = spaceOf(of)
  return { ...finish(oneWay(free.space, free.tilts, free.frozen, chosen, solver)), free }
}
const spaceOf = (of: Plan) => finish(freeRim(of))
const all = (of: Plan): Int32Array => Int32Array.from({ length: of.jointCount }, (_, j) => j)
/** The joint between two nodes of the list that the plan was made of; nodes of a plan are numbered by first use. */
const joint = (of: Plan, from: Points, a: number, b: number): number => {
  const at = (k: number): number => [...of.x.keys()].find((n) => of.x[n] === from[k]![0] && of.y[n] === from[k]![1])!
  return [...all(of)].find((j) => [of.origin[2 * j], of.origin[2 * j + 1]].sort().join() === [at(a), at(b)].sort().join())!
}

// The classic non-regular triangulation: De Loera, Rambau, Santos, "Triangulations" (2010), published.
const points: Points = [[4, 0], [0, 4], [0, 0], [2, 1], [1, 2], [1, 1]]
const twisted = plan(points, [[3, 4, 5], [0, 3, 1], [1, 3, 4], [1, 2, 4], [2, 4, 5], [0, 2, 5], [0, 3, 5]])
const untwisted = plan(points, [[3, 4, 5], [0, 1, 4], [0, 3, 4], [1, 2, 4], [2, 4, 5], [0, 2, 5], [0, 3, 5]])
/** Fold expressions of its joints 1-3, 2-4, 0-5 (exact: planes through three points, by hand). */
const folds = [
  [1 / 4, -1 / 4, 0, -1, 1, 0],
  [0, 1 / 4, -1 / 4, 0, -1, 1],
  [-1 / 4, 0, 1 / 4, 1, 0, -1],
]

describe('the classic triangulation without a one-way roof', () => {
  const no = asked(twisted)
  test('margin 0, and its certificate is the published one: three joints whose folds sum to 0 in every roof', () => {
    expect(no.margin).toBe(0)
    expect(no.heights).toBeNull()
    expect([...no.certificate!.joints]).toEqual([joint(twisted, points, 1, 3), joint(twisted, points, 2, 4), joint(twisted, points, 0, 5)].sort((a, b) => a - b))
    // Each weighted fold is one of the expressions times one number, for every single height.
    const ratios: number[] = []
    for (let node = 0; node < 6; node += 1) {
      const heights = Float64Array.from(twisted.x, (x, n) => (x === points[node]![0] && twisted.y[n] === points[node]![1] ? 1 : 0))
      const force = forces(twisted, stressOfGradients(twisted, panelPlanes(twisted, no.free.bases, heights).gradient))
      let sum = 0
      folds.forEach((fold, k) => {
        const pair = [[1, 3], [2, 4], [0, 5]][k]!
        const j = joint(twisted, points, pair[0]!, pair[1]!)
        const weighted = no.certificate!.weights[no.certificate!.joints.indexOf(j)]! * force[j]!
        sum += weighted
        if (fold[node] === 0) expect(Math.abs(weighted)).toBeLessThan(1e-14)
        else ratios.push(weighted / fold[node]!)
      })
      expect(Math.abs(sum)).toBeLessThan(1e-14)
    }
    for (const ratio of ratios) expect(ratio / ratios[0]!).toBeCloseTo(1, 12)
    expect(no.certificate!.residual).toBeLessThan(1e-14)
  })

  test('any joint fewer, and there is one', () => {
    for (const left of no.certificate!.joints) {
      const some = asked(twisted, all(twisted).filter((j) => j !== left))
      expect(some.margin).toBeGreaterThan(0.01)
    }
  })

  test('the control has one: margin 0.157297 on forces, measured on its roof (published figure for this program)', () => {
    const yes = asked(untwisted)
    expect(yes.margin).toBeCloseTo(0.157297, 6)
    expect(yes.certificate).toBeNull()
    const force = forces(untwisted, stressOfGradients(untwisted, panelPlanes(untwisted, yes.free.bases, yes.heights!).gradient))
    expect(Math.max(...force)).toBeLessThanOrEqual(-yes.margin + 1e-12)
    expect(Math.max(...force.map(Math.abs))).toBeCloseTo(1, 12)
  })

  test('the control on stresses with heights up to 1: margin 1/3, in working and in drawn coordinates', () => {
    // -s >= t, |z| <= 1: the same solver on a program of its own. Its roof in drawn units: stresses times the span squared.
    const stressRow = (p: Plan, j: number): number[] => {
      const bases = spaceOf(p).bases
      return points.map((_, node) => {
        const gradient = panelPlanes(p, bases, Float64Array.from(points, (_point, n) => (n === node ? 1 : 0))).gradient
        return stressOfGradients(p, gradient)[j]! / p.frame.span ** 2
      })
    }
    const list = programRows()
    for (const j of all(untwisted)) list.row([0, 1, 2, 3, 4, 5, 6], [...stressRow(untwisted, j), 1], -Infinity, 0)
    const bound = Float64Array.of(1, 1, 1, 1, 1, 1, Infinity)
    const answer = finish(solver.solved({ cost: Float64Array.of(0, 0, 0, 0, 0, 0, -1), lower: bound.map((b) => -b), upper: bound, ...list.rows() }, 'test'))
    expect(-answer.objective).toBeCloseTo(1 / 3, 9)
  })
})

test('another non-regular triangulation: 11 s02 + 20 s15 + 8 s34 = 0 in every roof (exact; not regular: published)', () => {
  const corners: Points = [[0, 3], [0, 1], [-1, -1], [1, -1], [-4, -2], [4, -2]]
  const plan7 = plan(corners, [[0, 1, 2], [1, 3, 5], [2, 3, 4], [0, 1, 5], [0, 2, 4], [3, 4, 5], [1, 2, 3]])
  const no = asked(plan7)
  expect(no.margin).toBe(0)
  const lengths = jointLengths(plan7)
  const onStress = ([a, b]: readonly [number, number]): number => {
    const at = no.certificate!.joints.indexOf(joint(plan7, corners, a, b))
    return no.certificate!.weights[at]! * lengths[no.certificate!.joints[at]!]!
  }
  expect(no.certificate!.joints.length).toBe(3)
  const [w02, w15, w34] = [onStress([0, 2]), onStress([1, 5]), onStress([3, 4])]
  expect(w02 / w34).toBeCloseTo(11 / 8, 12)
  expect(w15 / w34).toBeCloseTo(20 / 8, 12)
})

test('a joint that no roof folds is its own certificate (a stem between two joints in line; exact)', () => {
  const corners: Points = [[0, 0], [4, 0], [8, 0], [8, 4], [8, 8], [0, 8], [4, 4], [0, 4]]
  const stem = plan(corners, [[0, 1, 6, 7], [1, 2, 3, 6], [4, 5, 7, 6, 3]])
  const no = asked(stem)
  expect(no.margin).toBe(0)
  expect([...no.certificate!.joints]).toEqual([joint(stem, corners, 1, 6)])
})

test('cells of a Voronoi diagram: the paraboloid folds them all one way, so the margin is at least its own (exact: sites)', () => {
  const { plan: plan80, sites } = voronoi(80, 5)
  const yes = asked(plan80)
  // Lowest of the tangent planes at the sites of -(x^2 + y^2), read at the nodes.
  const lift = Float64Array.from({ length: plan80.nodeCount }, (_, n) => Math.min(...sites.map(([x, y]) => x * x + y * y - 2 * (x * plan80.x[n]! + y * plan80.y[n]!))))
  const paraboloid = marginOf(yes.free.space, lift, all(plan80)).margin
  expect(paraboloid).toBeGreaterThan(1e-3)
  expect(yes.margin).toBeGreaterThanOrEqual(paraboloid - 1e-9)
})


test('written over a basis and over heights, the program has one optimum, and its dual has the same', () => {
  for (const of of [cells(30, 2), grid(5, 4), untwisted, grid(4, 3, { loose: 0.2 })]) {
    const free = spaceOf(of)
    const chosen = all(of)
    const programs = [finish(basisProgram(free.space, free.freedom, chosen)), heightsProgram(free.space, chosen)]
    const [a, b] = programs.map((program) => finish(answered(free.space, chosen, program, solver)).margin)
    expect(a).toBeCloseTo(b!, 7)
    for (const { program } of programs) {
      const answer = finish(solver.solved(program, 'test'))
      // Dual objective: the bound that each multiplier stands at, rows and columns.
      let dual = 0
      answer.rowDual.forEach((y, r) => (dual += y === 0 ? 0 : y * (y > 0 ? program.rowLower[r]! : program.rowUpper[r]!)))
      answer.columnDual.forEach((y, c) => (dual += Math.abs(y) < 1e-9 ? 0 : y * (y > 0 ? program.lower[c]! : program.upper[c]!)))
      expect(dual).toBeCloseTo(answer.objective, 8)
    }
  }
})

test('a certificate with a weight that is off by a thousandth is refused', () => {
  const { certificate, free } = asked(twisted)
  const wrong = certificate!.weights.map((w, k) => (k === 0 ? 1.001 * w : w))
  expect(residualOf(free.space, certificate!.joints, wrong)).toBeGreaterThan(1e-5)
})
