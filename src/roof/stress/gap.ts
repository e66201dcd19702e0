/**
 * The gap: square root of the smallest eigenvalue of the flatness form above tau, in a plan of span 1: how far the nearest
 * near lift is from being a lift.
 *
 * Block Krylov space of F = (I + tau K^-1)^m K^-1, then Rayleigh-Ritz with Q itself (Golub, Underwood 1977; Parlett, "The
 * Symmetric Eigenvalue Problem"). K^-1 alone blows the lifts up to 1/tau; each factor I + tau K^-1 takes them down to their
 * rounding over tau, about 1e-2 to 1e-3. The share of lifts left in the Ritz vector is measured, and m grows until it is small.
 * Tried and dropped: single-vector Lanczos with m = 1 (finds the rounding of the lifts, 1e10 above 1/gap^2, and calls it the
 * gap); m = 5 throughout (right, and twice the solves where the gap is small anyway).
 * Only for the free rim (T = I), where the metric is the identity.
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix'
import { gaussians } from '../../base/random.ts'
import { solve } from '../../base/sparse/solve.ts'
import { tau } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import { projected, type LiftSpace } from './lift-space.ts'
import { applyForm } from './panel-bases.ts'

/** Columns carried through one solve, and how many blocks make the space: enough for three digits of the figure. */
const width = 4
const mostBlocks = 6
const wantedShare = 1e-3
/** Share of lifts (2-norm) that a Ritz vector may hold: it lowers the eigenvalue by its square. */
const liftShare = 1e-2
const mostFilters = 9

/** Smallest eigenvalue above tau; null when every height vector lifts. */
export function* smallestNearLift(space: LiftSpace): Steps<number | null> {
  if (space.dimension >= space.plan.nodeCount) return null
  for (let filters = 2; ; filters += 2) {
    const { value, vector } = yield* smallestRitz(space, filters)
    const lifts = projected(space, vector)
    if (dot(lifts, lifts) < liftShare ** 2 * dot(vector, vector) || filters >= mostFilters) return value
  }
}

/** Smallest Ritz value of Q over the filtered Krylov space, and its vector. */
function* smallestRitz(space: LiftSpace, filters: number): Steps<{ value: number; vector: Float64Array }> {
  const n = space.plan.nodeCount
  const columns = Math.min(width, n - space.dimension)
  const basis: Float64Array[] = []
  const formed: Float64Array[] = []
  let block = gaussians(columns * n, 7)
  let found = { value: Infinity, vector: new Float64Array(n) }
  for (let step = 0; step < mostBlocks; step += 1) {
    yield { stage: 'Measuring the gap', done: step / mostBlocks }
    block = filtered(space, block, columns, filters)
    const before = basis.length
    for (let k = 0; k < columns; k += 1) {
      const direction = newDirection(basis, block.subarray(k * n, (k + 1) * n))
      if (direction === null) continue
      basis.push(direction)
      formed.push(applyForm(space.plan, space.bases, direction))
      block.set(direction, k * n)
    }
    if (basis.length === before) break
    const next = ritz(basis, formed)
    const settled = Math.abs(next.value - found.value) < wantedShare * next.value
    found = next
    if (settled || basis.length >= n - space.dimension) break
  }
  return found
}

function filtered(space: LiftSpace, block: Float64Array, columns: number, filters: number): Float64Array {
  let out = solve(space.factor, block, columns)
  for (let pass = 0; pass < filters; pass += 1) {
    const again = solve(space.factor, out, columns)
    out = out.map((value, i) => value + tau * again[i])
  }
  return out
}

/** What is new in the vector against the orthonormal basis, of length 1; null when nothing reliable is. */
function newDirection(basis: readonly Float64Array[], column: Float64Array): Float64Array | null {
  const direction = column.slice()
  const before = Math.sqrt(dot(direction, direction))
  for (let pass = 0; pass < 2; pass += 1) {
    for (const other of basis) {
      const share = dot(other, direction)
      for (let i = 0; i < direction.length; i += 1) direction[i] -= share * other[i]
    }
  }
  const after = Math.sqrt(dot(direction, direction))
  // Less than this is amplified noise, lifts among it.
  return after > 1e-4 * before ? direction.map((value) => value / after) : null
}

function ritz(basis: readonly Float64Array[], formed: readonly Float64Array[]): { value: number; vector: Float64Array } {
  const size = basis.length
  const small = new Matrix(size, size)
  for (let a = 0; a < size; a += 1) {
    for (let b = a; b < size; b += 1) {
      const entry = dot(basis[a], formed[b])
      small.set(a, b, entry)
      small.set(b, a, entry)
    }
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(small, { assumeSymmetric: true })
  const least = realEigenvalues.indexOf(Math.min(...realEigenvalues))
  const vector = new Float64Array(basis[0].length)
  basis.forEach((column, k) => {
    const share = eigenvectorMatrix.get(k, least)
    for (let i = 0; i < vector.length; i += 1) vector[i] += share * column[i]
  })
  return { value: realEigenvalues[least], vector }
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0
  for (let i = 0; i < a.length; i += 1) sum += a[i] * b[i]
  return sum
}
