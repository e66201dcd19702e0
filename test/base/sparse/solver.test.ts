/**
 * The solver against ml-matrix (dense, another's code), against eigenvalues known by construction, and against itself on
 * another road (refactor and factor, many columns and one).
 */
import { determinant, EigenvalueDecomposition, Matrix, solve as denseSolve } from 'ml-matrix'
import { describe, expect, test, vi } from 'vitest'
import { gaussians, random } from '../../../src/base/random.ts'
import { analyse } from '../../../src/base/sparse/analyse.ts'
import { cliquePattern } from '../../../src/base/sparse/cliques.ts'
import { factor, refactor, type Factor } from '../../../src/base/sparse/factor.ts'
import { inertia, type Inertia } from '../../../src/base/sparse/inertia.ts'
import type { SymmetricMatrix } from '../../../src/base/sparse/matrix.ts'
import { multiply, residual } from '../../../src/base/sparse/multiply.ts'
import { dissection } from '../../../src/base/sparse/order.ts'
import { refined } from '../../../src/base/sparse/refine.ts'
import { solve, solving } from '../../../src/base/sparse/solve.ts'
import { finish, type Steps } from '../../../src/base/steps.ts'
import { bricks, cliquesOf, dense, flatnessForm, planOf, quads, same, type TestPlan } from './plans.ts'

/** Residuals at rounding: a modest multiple of the unit roundoff 2^-53, as for a stable factor of moderate growth. */
const rounding = 1e-14

function factorOf(matrix: SymmetricMatrix, coordinates: Float64Array): Factor {
  return finish(factor(analyse(matrix.pattern, finish(dissection(matrix.pattern, coordinates))), matrix.values))
}

/** Random diagonally dominant values with random signs on the diagonal: no pivoting is needed, all inertias occur. */
function dominant(plan: TestPlan, seed: number): SymmetricMatrix {
  const { pattern } = cliquesOf(plan)
  const next = random(seed)
  const values = Float64Array.from(pattern.row, () => 2 * next() - 1)
  const sum = new Float64Array(pattern.size)
  for (let j = 0; j < pattern.size; j++) {
    for (let p = pattern.start[j]! + 1; p < pattern.start[j + 1]!; p++) {
      sum[j] = sum[j]! + Math.abs(values[p]!)
      sum[pattern.row[p]!] = sum[pattern.row[p]!]! + Math.abs(values[p]!)
    }
  }
  for (let j = 0; j < pattern.size; j++) values[pattern.start[j]!] = (next() < 0.4 ? -1 : 1) * (sum[j]! + 0.5 + next())
  return { pattern, values }
}

const scattered = (size: number, faces: number[][], seed = 3): TestPlan => {
  const next = random(seed)
  return planOf(Array.from({ length: size }, () => [next(), next()] as const), faces)
}

const shapes: Record<string, TestPlan> = {
  'nothing at all': planOf([], []),
  'one unknown': planOf([[0, 0]], [[0]]),
  'one unknown in no panel': planOf([[0, 0]], []),
  'unknowns in no panel': planOf([[0, 0], [1, 0], [2, 1]], []),
  'one triangle': planOf([[0, 0], [1, 0], [0, 1]], [[2, 0, 1]]),
  'quads 5 x 4': quads(5, 4),
  'bricks 6 x 5': bricks(6, 5),
  'two parts and a lone unknown': planOf(
    [[0, 0], [1, 0], [1, 1], [0, 1], [9, 9], [5, 0], [6, 0], [6, 1], [5, 1]], [[0, 1, 2, 3], [8, 7, 6, 5]]),
  'a chain on one line': planOf(Array.from({ length: 90 }, (_, i) => [i, 0] as const), Array.from({ length: 89 }, (_, i) => [i, i + 1])),
  'all at one place': planOf(Array.from({ length: 80 }, () => [2, 3] as const), Array.from({ length: 78 }, (_, i) => [i, i + 1, i + 2])),
  'an arrow: one unknown meets all': scattered(70, Array.from({ length: 69 }, (_, i) => [0, i + 1])),
  'one dense clique': scattered(60, [Array.from({ length: 60 }, (_, i) => (i * 7) % 60)]),
  'panels that ignore the coordinates': scattered(
    120, Array.from({ length: 100 }, (_, i) => [...new Set([i, (i * 37 + 11) % 120, (i * 53 + 29) % 120])])),
  'coordinates that are not numbers': planOf(
    Array.from({ length: 60 }, () => [NaN, Infinity] as const), Array.from({ length: 58 }, (_, i) => [i, i + 1, i + 2])),
}

describe('small matrices of all shapes, against ml-matrix', () => {
  for (const [name, plan] of Object.entries(shapes)) {
    test(name, () => {
      const matrix = dominant(plan, 5)
      const { size } = matrix.pattern
      const f = factorOf(matrix, plan.coordinates)
      const b = gaussians(size, 8)
      const x = solve(f, b)
      expect(x.length).toBe(size)
      if (size === 0) {
        expect(inertia(f)).toEqual({ negative: 0, zero: 0, positive: 0 })
        return
      }
      const full = new Matrix(dense(matrix))
      const expected = denseSolve(full, Matrix.columnVector(Array.from(b))).to1DArray()
      const largest = Math.max(...expected.map(Math.abs))
      for (let i = 0; i < size; i++) expect(Math.abs(x[i]! - expected[i]!)).toBeLessThanOrEqual(1e-12 * largest)
      expect(residual(matrix, x, b)).toBeLessThan(rounding)
      const eigenvalues = new EigenvalueDecomposition(full, { assumeSymmetric: true }).realEigenvalues
      const negative = eigenvalues.filter((v) => v < 0).length
      expect(inertia(f)).toEqual({ negative, zero: 0, positive: size - negative })
      const product = full.mmul(Matrix.columnVector(Array.from(b))).to1DArray()
      multiply(matrix, b).forEach((value, i) => expect(Math.abs(value - product[i]!)).toBeLessThan(1e-12 * full.norm()))
    })
  }
})

describe('cliques', () => {
  test('positions name the entries of each block, repeated pairs once in the pattern', () => {
    const plan = bricks(4, 3)
    const { pattern, position } = cliquesOf(plan)
    const pairs = new Set<string>()
    let at = 0
    for (let c = 0; c + 1 < plan.start.length; c++) {
      const face = plan.index.subarray(plan.start[c]!, plan.start[c + 1]!)
      for (let a = 0; a < face.length; a++) {
        for (let b = a; b < face.length; b++) {
          const [low, high] = [Math.min(face[a]!, face[b]!), Math.max(face[a]!, face[b]!)]
          const p = position[at++]!
          expect(pattern.row[p]).toBe(high)
          expect(p >= pattern.start[low]! && p < pattern.start[low + 1]!).toBe(true)
          pairs.add(`${low} ${high}`)
        }
      }
    }
    expect(at).toBe(position.length)
    for (let j = 0; j < pattern.size; j++) pairs.add(`${j} ${j}`)
    expect(pattern.row.length).toBe(pairs.size)
    for (let j = 0; j < pattern.size; j++) {
      expect(pattern.row[pattern.start[j]!]).toBe(j)
      for (let p = pattern.start[j]! + 1; p < pattern.start[j + 1]!; p++) expect(pattern.row[p]).toBeGreaterThan(pattern.row[p - 1]!)
    }
  })

  test('a clique of 500', () => {
    const { pattern, position } = cliquePattern(500, Int32Array.of(0, 500), Int32Array.from({ length: 500 }, (_, i) => (i * 3) % 500))
    expect(pattern.row.length).toBe(125250)
    expect(new Set(position).size).toBe(125250)
  })

  test('a repeated or unknown member is a bug of the caller', () => {
    expect(() => cliquePattern(3, Int32Array.of(0, 3), Int32Array.of(0, 1, 0))).toThrow(/twice/)
    expect(() => cliquePattern(3, Int32Array.of(0, 2), Int32Array.of(0, 3))).toThrow(/not there/)
  })
})

test('pivots multiply to the determinant that ml-matrix finds', () => {
  const plan = bricks(7, 6)
  const matrix = flatnessForm(plan, 0.3)
  const full = new Matrix(dense(matrix))
  const product = factorOf(matrix, plan.coordinates).pivot.reduce((a, d) => a * d, 1)
  expect(Math.abs(product / determinant(full) - 1)).toBeLessThan(1e-12)
})

test('a dense clique of 500 among quads', () => {
  const grid = quads(30, 30)
  const plan = {
    coordinates: grid.coordinates,
    start: Int32Array.of(...grid.start, grid.index.length + 500),
    index: Int32Array.of(...grid.index, ...Array.from({ length: 500 }, (_, i) => (i * 7) % 961)),
  }
  const matrix = dominant(plan, 4)
  const b = gaussians(961, 5)
  expect(residual(matrix, solve(factorOf(matrix, plan.coordinates), b), b)).toBeLessThan(rounding)
})

describe('larger matrices', () => {
  const plan = quads(140, 140)
  const matrix = flatnessForm(plan, 1e-3)
  const { size } = matrix.pattern
  const analysis = analyse(matrix.pattern, finish(dissection(matrix.pattern, plan.coordinates)))
  const f = finish(factor(analysis, matrix.values))
  const b = gaussians(size, 2)

  test('the residual is at rounding with 20,000 unknowns', () => {
    expect(residual(matrix, solve(f, b), b)).toBeLessThan(rounding)
    expect(residual(matrix, refined(f, matrix, b), b)).toBeLessThan(rounding)
  })

  test.each([2, 4, 7, 9])('%i columns give what single ones give', (columns) => {
    const many = gaussians(size * columns, 4)
    const together = solve(f, many, columns)
    for (let c = 0; c < columns; c++) {
      const alone = solve(f, many.slice(c * size, (c + 1) * size))
      const scale = alone.reduce((m, v) => Math.max(m, Math.abs(v)), 0)
      alone.forEach((value, i) => {
        if (!(Math.abs(value - together[c * size + i]!) <= 1e-12 * scale)) throw new Error(`column ${c}, unknown ${i}`)
      })
    }
  })

  test('refactoring gives the factor of the new values, and of the old ones again', () => {
    const other = flatnessForm(plan, 0.5)
    const g = finish(factor(analysis, matrix.values))
    finish(refactor(g, other.values))
    expect(same(solve(g, b), solve(finish(factor(analysis, other.values)), b))).toBe(true)
    finish(refactor(g, matrix.values))
    expect(same(solve(g, b), solve(f, b))).toBe(true)
  })

  test('binary and plain kernels give the same bytes', () => {
    const [plain, binary] = [false, true].map((which) => finish(factor(analysis, matrix.values, { binary: which }))) as [Factor, Factor]
    expect(same(binary.pivot, plain.pivot)).toBe(true)
    expect(same(solve(binary, b), solve(plain, b))).toBe(true)
    expect(same(solve(binary, gaussians(3 * size, 3), 3), solve(plain, gaussians(3 * size, 3), 3))).toBe(true)
  })

  test('all long work comes in steps: no stretch between two looks at the clock is long', () => {
    // A clock that runs 41 ms at every look makes each look a step.
    let time = 0
    const clock = vi.spyOn(performance, 'now').mockImplementation(() => (time += 41))
    const count = (steps: Steps<unknown>): number => {
      let n = 0
      while (steps.next().done !== true) n++
      return n
    }
    const pieces = count(dissection(matrix.pattern, plan.coordinates))
    const parts = count(refactor(finish(factor(analysis, matrix.values)), matrix.values))
    const sweeps = count(solving(f, gaussians(8 * size, 6), 8))
    clock.mockRestore()
    expect(pieces).toBeGreaterThan(size / 40)
    expect(parts).toBeGreaterThan(analysis.operations / 4e6)
    expect(sweeps).toBeGreaterThan((8 * analysis.panel[analysis.fronts]!) / 2e6)
  })

  test('a factor given up halfway is refused, and made good by refactoring', () => {
    const g = finish(factor(analysis, matrix.values))
    const expected = solve(g, b)
    let time = 0
    const clock = vi.spyOn(performance, 'now').mockImplementation(() => (time += 41))
    const steps = refactor(g, flatnessForm(plan, 2).values)
    for (let k = 0; k < 5; k++) expect(steps.next().done).toBe(false)
    steps.return()
    clock.mockRestore()
    expect(() => solve(g, b)).toThrow(/complete/)
    expect(() => inertia(g)).toThrow(/complete/)
    finish(refactor(g, matrix.values))
    expect(same(solve(g, b), expected)).toBe(true)
  })

  test('the same input gives the same bytes', () => {
    expect(same(finish(dissection(matrix.pattern, plan.coordinates)).rank, analysis.ordering.rank)).toBe(true)
    expect(same(solve(finish(factor(analysis, matrix.values)), b), solve(f, b))).toBe(true)
  })
})

describe('inertia', () => {
  /** S D S^T keeps the signs of D (Sylvester 1852). */
  test('S D S^T has the signs of D', () => {
    const plan = quads(40, 30, 0.1, 9)
    const { pattern } = cliquesOf(plan)
    const next = random(12)
    // S has a unit diagonal and one entry below it in each column, at a panel neighbour, so that S D S^T stays in the panels' pattern.
    const values = new Float64Array(pattern.row.length)
    let negative = 0
    const entry = (i: number, j: number): number => {
      for (let p = pattern.start[j]!; p < pattern.start[j + 1]!; p++) if (pattern.row[p] === i) return p
      throw new Error('not in the pattern')
    }
    for (let j = 0; j < pattern.size; j++) {
      const sign = next() < 0.3 ? -1 : 1
      if (sign < 0) negative++
      const d = sign * (0.5 + next())
      const last = pattern.start[j + 1]! - 1
      const i = pattern.row[last]!
      const s = i === j ? 0 : 2 * next() - 1
      values[entry(j, j)] = values[entry(j, j)]! + d
      if (i !== j) {
        values[entry(i, j)] = values[entry(i, j)]! + d * s
        values[entry(i, i)] = values[entry(i, i)]! + d * s * s
      }
    }
    expect(inertia(factorOf({ pattern, values }, plan.coordinates))).toEqual({ negative, zero: 0, positive: pattern.size - negative })
  })

  test('the flatness form of a quad grid has 3 tilts and nx + ny - 2 folds below the shift', () => {
    // Stresses of a jittered nx x ny grid: joints less two conditions an inner node, (nx - 1) ny + nx (ny - 1) - 2 (nx - 1)(ny - 1)
    // = nx + ny - 2; exact: worked out by hand from the definition.
    const plan = quads(20, 14, 0.1, 3)
    const { negative, zero } = inertia(factorOf(flatnessForm(plan, -1e-13), plan.coordinates))
    expect({ negative, zero }).toEqual({ negative: 3 + 20 + 14 - 2, zero: 0 })
  })

  test('eigenvalues of a grid below any bound are counted as the formula says', () => {
    // Five-point Laplacian of a 45 x 38 grid with fixed surroundings: 4 - 2 cos(pi k / 46) - 2 cos(pi l / 39), k = 1 .. 45, l = 1 .. 38.
    const [nx, ny] = [45, 38]
    const plan = quads(nx - 1, ny - 1, 0, 2)
    const x = plan.coordinates
    const { pattern } = cliquesOf(plan)
    const values = new Float64Array(pattern.row.length)
    const eigenvalues: number[] = []
    const wave = (k: number, n: number): number => 2 - 2 * Math.cos((Math.PI * k) / (n + 1))
    for (let k = 1; k <= nx; k++) for (let l = 1; l <= ny; l++) eigenvalues.push(wave(k, nx) + wave(l, ny))
    for (const bound of [0.001, 0.05, 0.777, 2.345, 4.001, 6.1, 7.99]) {
      for (let j = 0; j < pattern.size; j++) {
        for (let p = pattern.start[j]!; p < pattern.start[j + 1]!; p++) {
          const i = pattern.row[p]!
          const apart = Math.abs(x[2 * j]! - x[2 * i]!) + Math.abs(x[2 * j + 1]! - x[2 * i + 1]!)
          values[p] = apart === 0 ? 4 - bound : apart === 1 ? -1 : 0
        }
      }
      const negative = eigenvalues.filter((v) => v < bound).length
      expect(inertia(factorOf({ pattern, values }, plan.coordinates))).toEqual({ negative, zero: 0, positive: nx * ny - negative })
    }
  })

  test('panels of sizes 1 : 1000 keep their count', () => {
    // Graded like the lines of a logarithmic chart; the count of quads does not depend on sizes.
    const even = quads(24, 18, 0.1, 5)
    const graded = { ...even, coordinates: even.coordinates.map((c, i) => 1000 ** (c / (i % 2 === 0 ? 24 : 18))) }
    const { negative, zero } = inertia(factorOf(flatnessForm(graded, -1e-13), graded.coordinates))
    expect({ negative, zero }).toEqual({ negative: 3 + 24 + 18 - 2, zero: 0 })
  })

  test('zero pivots are counted, never silent, and leave no NaN', () => {
    const { pattern } = cliquePattern(4, Int32Array.of(0, 2, 4), Int32Array.of(0, 1, 2, 3))
    const line = Float64Array.of(0, 0, 1, 0, 2, 0, 3, 0)
    const nothing = factorOf({ pattern, values: new Float64Array(pattern.row.length) }, line)
    expect(inertia(nothing)).toEqual({ negative: 0, zero: 4, positive: 0 })
    expect(Array.from(solve(nothing, Float64Array.of(0, 0, 0, 0)))).toEqual([0, 0, 0, 0])
    // Two springs: [1 -1; -1 1] twice. Singular; a load in balance still has an answer.
    const springs = { pattern, values: Float64Array.from(pattern.row, (_, p) => [1, -1, 1, 1, -1, 1][p]!) }
    const f = factorOf(springs, line)
    expect(inertia(f)).toEqual({ negative: 0, zero: 2, positive: 2 })
    const load = Float64Array.of(1, -1, -2, 2)
    expect(residual(springs, refined(f, springs, load), load)).toBeLessThan(rounding)
    // [0 1; 1 0] has no L D L^T without pivoting: one pivot stands in, refinement still solves.
    const swap = { pattern, values: Float64Array.from(pattern.row, (_, p) => [0, 1, 0, 0, 1, 0][p]!) }
    const g = factorOf(swap, line)
    expect(inertia(g).zero).toBe(2)
    expect(residual(swap, refined(g, swap, load), load)).toBeLessThan(rounding)
  })

  test('a pivot lost in rounding counts as zero, one of 1e-13 does not', () => {
    // [a b; b b^2 / a] is singular; its last number rounded to either neighbour leaves one unit in the last place, at most 2^-52 of it.
    const { pattern } = cliquePattern(2, Int32Array.of(0, 2), Int32Array.of(0, 1))
    let rounded = 0
    for (let k = 1; k <= 60; k++) {
      const [a, b] = [0.7 + k / 13, 0.3 + k / 17]
      const corner = (b / a) * b
      const near = corner + ((k % 3) - 1) * 0.7 * 2 ** -52 * corner
      if (near !== corner) rounded++
      const count = (last: number): Inertia =>
        inertia(factorOf({ pattern, values: Float64Array.of(a, b, last) }, Float64Array.of(0, 0, 1, 0)))
      expect(count(near)).toEqual({ negative: 0, zero: 1, positive: 1 })
      expect(count(corner - 1e-13)).toEqual({ negative: 1, zero: 0, positive: 1 })
    }
    expect(rounded).toBe(40)
  })

  test('values that are not finite are refused', () => {
    const { pattern } = cliquePattern(2, Int32Array.of(0, 2), Int32Array.of(0, 1))
    expect(() => factorOf({ pattern, values: Float64Array.of(1, NaN, 1) }, Float64Array.of(0, 0, 1, 0))).toThrow(/finite/)
  })
})
