/**
 * The gap: square root of the smallest eigenvalue of the flatness form above tau, in a plan of span 1: how far the nearest
 * near lift is from being a lift.
 *
 * Lanczos (1950) with full reorthogonalisation on (I + tau K^-1) K^-1, whose eigenvalues are lambda / (lambda - tau)^2:
 * 0 on lifts, 1 / lambda just above them, so lifts are filtered in every step and the largest Ritz value is the gap's.
 * Only for the free rim (T = I), where the metric is the identity.
 */
import { gaussians } from '../../base/random.ts'
import { solve } from '../../base/sparse/solve.ts'
import { tau } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import type { LiftSpace } from './lift-space.ts'

const mostSteps = 40
/** The figure is reported to about three digits. */
const wantedShare = 1e-3

/** Smallest eigenvalue above tau, null when every height vector lifts. */
export function* smallestNearLift(space: LiftSpace): Steps<number | null> {
  const n = space.plan.nodeCount
  if (space.dimension >= n) return null
  const filtered = (x: Float64Array): Float64Array => {
    const y = solve(space.factor, x)
    const z = solve(space.factor, y)
    for (let i = 0; i < n; i += 1) y[i] += tau * z[i]
    return y
  }
  // One application first: it takes the lifts out of the random start and turns it towards the near lifts.
  const basis: Float64Array[] = [unit(filtered(gaussians(n, 7)))]
  const alpha: number[] = []
  const beta: number[] = []
  let best = 0
  for (let step = 0; step < Math.min(mostSteps, n - space.dimension); step += 1) {
    yield { stage: 'Measuring the gap', done: step / mostSteps }
    const q = basis[step]
    const w = filtered(q)
    alpha.push(dot(q, w))
    for (let pass = 0; pass < 2; pass += 1) {
      for (const other of basis) {
        const share = dot(other, w)
        for (let i = 0; i < n; i += 1) w[i] -= share * other[i]
      }
    }
    const length = Math.sqrt(dot(w, w))
    const { value, last } = largestOfTridiagonal(alpha, beta)
    // |length * last| bounds the distance to an eigenvalue; the error of the Ritz value is its square over the spread.
    const settled = Math.abs(length * last) < wantedShare * value && Math.abs(value - best) < wantedShare * value
    best = value
    if (settled || length < 1e-14 * value) break
    beta.push(length)
    for (let i = 0; i < n; i += 1) w[i] /= length
    basis.push(w)
  }
  return best > 0 ? 1 / best : null
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0
  for (let i = 0; i < a.length; i += 1) sum += a[i] * b[i]
  return sum
}

function unit(a: Float64Array): Float64Array {
  const length = Math.sqrt(dot(a, a))
  return a.map((value) => value / length)
}

/** Largest eigenvalue of the symmetric tridiagonal matrix, and the last entry of its unit eigenvector. */
function largestOfTridiagonal(diagonal: readonly number[], off: readonly number[]): { value: number; last: number } {
  const n = diagonal.length
  let low = Math.max(...diagonal)
  let high = low
  for (let i = 0; i < n; i += 1) high = Math.max(high, diagonal[i] + Math.abs(off[i] ?? 0) + Math.abs(off[i - 1] ?? 0))
  // Sturm count by bisection (Givens 1954): eigenvalues below x are the negative pivots of T - x I.
  const below = (x: number): number => {
    let count = 0
    let pivot = 1
    for (let i = 0; i < n; i += 1) {
      pivot = diagonal[i] - x - (i > 0 ? (off[i - 1] * off[i - 1]) / (pivot || Number.MIN_VALUE) : 0)
      if (pivot < 0) count += 1
    }
    return count
  }
  for (let k = 0; k < 60; k += 1) {
    const middle = (low + high) / 2
    if (below(middle) === n) high = middle
    else low = middle
  }
  const value = (low + high) / 2
  // Recurrence for the eigenvector from the top; scaled as it goes.
  let before = 0, at = 1, squares = 1
  for (let i = 0; i + 1 < n; i += 1) {
    const next = ((value - diagonal[i]) * at - (i > 0 ? off[i - 1] : 0) * before) / off[i]
    before = at
    at = next
    squares += next * next
  }
  return { value, last: at / Math.sqrt(squares) }
}
