/**
 * The gap: square root of the smallest eigenvalue of the flatness form above tau, in a plan of span 1: how far the nearest
 * near lift is from being a lift.
 *
 * Krylov space of K^-1 Q K^-1, then Rayleigh-Ritz with Q itself (Lanczos 1950 with full reorthogonalisation; Parlett, "The
 * Symmetric Eigenvalue Problem"). K^-1 blows lifts up to 1/tau and near lifts to 1/lambda; Q takes the lifts out again, exactly but for
 * the rounding of what it leaves (see `applyForm`), and the second K^-1 restores the near lifts. Lifts of a plan with rounded
 * coordinates have residuals of their own: of those it takes lambda / tau only, and the answer is one of them. The question
 * is then asked again off another factor, of Q - sigma I with sigma = 1e-11, and more often: (K^-1 Q)^5 K^-1 leaves
 * (lambda / sigma)^5 / sigma of a lift, at most 10, beside 1 / lambda of a near lift.
 * Tried and dropped: K^-1 alone and filters I + tau K^-1 (each takes the lifts down by their rounding over tau, 1e-2 to 1e-3
 * only, so five of them are needed: three times the solves); blocks of four vectors (the same digits at twice the cost).
 * Only for the free rim (T = I), where the metric is the identity.
 */
import { dot } from '../../base/dot.ts'
import { EigenvalueDecomposition, Matrix } from 'ml-matrix'
import { gaussians } from '../../base/random.ts'
import type { Factor } from '../../base/sparse/factor.ts'
import { solve } from '../../base/sparse/solve.ts'
import type { Steps } from '../../base/steps.ts'
import type { LiftSpace } from './lift-space.ts'
import { applyForm } from './panel-bases.ts'

/** Largest dimension of the space; three to six are usual. */
const mostSteps = 24
/** The figure is reported to two digits. */
const wantedShare = 5e-3

/** Passes that a factor at `tauCoarse` needs where lifts are rounded. */
export const passesWhereRounded = 5

/**
 * Smallest eigenvalue above tau; null when every height vector lifts; below tau when rounded lifts hid it from the space's own
 * factor. `off`: a factor of Q - t I with t above all lifts.
 */
export function* smallestNearLift(space: LiftSpace, off: Factor = space.factor, passes = 1): Steps<number | null> {
  const n = space.plan.nodeCount
  if (space.dimension >= n) return null
  const basis: Float64Array[] = []
  const formed: Float64Array[] = []
  const isOwn = off === space.factor && passes === 1 && space.probe !== null
  let vector = isOwn ? space.probe.rest : gaussians(n, 7)
  let found = Infinity
  for (let step = 0; step < mostSteps; step += 1) {
    yield { stage: 'Measuring the gap', done: step / mostSteps }
    const direction = newDirection(basis, step === 0 && isOwn ? space.probe.rest : filtered(space, off, passes, vector))
    if (direction === null) break
    basis.push(direction)
    formed.push(applyForm(space.plan, space.bases, direction))
    vector = direction
    const next = ritz(basis, formed)
    const settled = Math.abs(next - found) < wantedShare * next
    found = next
    if (settled || basis.length >= n - space.dimension) break
  }
  return found
}

/** (K^-1 Q)^passes K^-1 of the vector. */
function filtered(space: LiftSpace, off: Factor, passes: number, vector: Float64Array): Float64Array {
  let out = solve(off, vector)
  for (let pass = 0; pass < passes; pass += 1) out = solve(off, applyForm(space.plan, space.bases, out))
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
  // Less than this is amplified noise.
  return after > 1e-6 * before ? direction.map((value) => value / after) : null
}

/** Smallest eigenvalue of Q on the span of an orthonormal basis; `formed` is Q of each. */
function ritz(basis: readonly Float64Array[], formed: readonly Float64Array[]): number {
  const small = new Matrix(basis.map((column) => formed.map((other) => dot(column, other))))
  return Math.min(...new EigenvalueDecomposition(small, { assumeSymmetric: true }).realEigenvalues)
}

