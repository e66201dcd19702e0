/**
 * A certificate that joints cannot all fold one way: weights w >= 0 with sum w_e F_e = 0 in every lift. The sum is a linear
 * function c of the heights, c . h with F_e = g_e . h, and it vanishes on all lifts exactly when the projection of c onto
 * them does: one solve checks them all.
 *
 * The weights come from a solver to its tolerance. They are the one linear relation among the joints they name, so they are
 * found again from random lifts, to rounding, before the check.
 */
import { gaussians } from '../../../base/random.ts'
import type { Steps } from '../../../base/steps.ts'
import { cornerOverPlane } from '../../conditions/form-force.ts'
import { forces, stressOfGradients } from '../../stress/forces.ts'
import { projected, type LiftSpace } from '../../stress/lift-space.ts'
import { panelPlanes } from '../../stress/panel-bases.ts'

export interface Certificate {
  /** Ascending. */
  readonly joints: Int32Array
  /** On form forces, > 0, their sum 1. */
  readonly weights: Float64Array
  /** Size of the sum over all lifts, beside the sizes of its terms: rounding. */
  readonly residual: number
}

/** Weights below this share of the largest are the solver's rounding. */
const smallWeight = 1e-7

/** A sum that is smaller than this beside its terms vanishes: the lifts are known to 1e-12, false certificates leave 1e-3. */
const vanishes = 1e-9

/** More joints than this are no "few", and their relation is not found again. */
const mostRefined = 200

/** The certificate that these weights on these joints are, null where they are none. */
export function* provenCertificate(space: LiftSpace, joints: Int32Array, weights: Float64Array): Steps<Certificate | null> {
  yield { stage: 'Checking the certificate', done: 0 }
  const largest = weights.reduce((most, weight) => Math.max(most, weight), 0)
  const kept = [...joints.keys()].filter((k) => weights[k] > smallWeight * largest).sort((a, b) => joints[a] - joints[b])
  if (kept.length === 0) return null
  const named = Int32Array.from(kept, (k) => joints[k])
  const given = Float64Array.from(kept, (k) => weights[k])
  const found = kept.length > 1 && kept.length <= mostRefined ? relation(space, named) : null
  for (const candidate of found === null ? [given] : [found, given]) {
    const sum = candidate.reduce((total, weight) => total + weight, 0)
    const scaled = candidate.map((weight) => weight / sum)
    const residual = residualOf(space, named, scaled)
    if (scaled.every((weight) => weight > 0) && residual <= vanishes) return { joints: named, weights: scaled, residual }
  }
  return null
}

/** |P c| over the sum of w_e |g_e|, with P the projection onto the lifts. */
export function residualOf(space: LiftSpace, joints: Int32Array, weights: Float64Array): number {
  const c = new Float64Array(space.plan.nodeCount)
  let size = 0
  joints.forEach((joint, k) => {
    const row = cornerOverPlane(space.plan, joint)
    const factor = weights[k] / row.lever
    row.nodes.forEach((node, i) => (c[node] += factor * row.weights[i]))
    size += Math.abs(factor) * Math.hypot(...row.weights)
  })
  return Math.hypot(...projected(space, c)) / size
}

/** The weights whose sum vanishes on random lifts, the first one 1, by least squares; of whatever sign. */
function relation(space: LiftSpace, joints: Int32Array): Float64Array {
  const { plan, bases } = space
  const n = plan.nodeCount
  const samples = joints.length + 4
  const lifts = projected(space, gaussians(n * samples, 37), samples)
  const columns = Array.from(joints, () => new Float64Array(samples))
  for (let s = 0; s < samples; s += 1) {
    const force = forces(plan, stressOfGradients(plan, panelPlanes(plan, bases, lifts.subarray(s * n, (s + 1) * n)).gradient))
    joints.forEach((joint, k) => (columns[k][s] = force[joint]))
  }
  return Float64Array.of(1, ...leastSquares(columns.slice(1), columns[0].map((value) => -value)))
}

/** x that minimises |A x - b| for the columns of A, by Gram-Schmidt, orthogonalised twice. */
function leastSquares(columns: readonly Float64Array[], b: Float64Array): Float64Array {
  const count = columns.length
  const q: Float64Array[] = []
  const r = columns.map(() => new Float64Array(count))
  const product = (u: Float64Array, v: Float64Array): number => u.reduce((sum, value, i) => sum + value * v[i], 0)
  columns.forEach((column, k) => {
    const v = column.slice()
    for (let pass = 0; pass < 2; pass += 1) {
      for (let j = 0; j < k; j += 1) {
        const share = product(q[j], v)
        r[j][k] += share
        for (let i = 0; i < v.length; i += 1) v[i] -= share * q[j][i]
      }
    }
    r[k][k] = Math.sqrt(product(v, v))
    q.push(v.map((value) => value / r[k][k]))
  })
  const x = new Float64Array(count)
  for (let k = count - 1; k >= 0; k -= 1) {
    let rest = product(q[k], b)
    for (let j = k + 1; j < count; j += 1) rest -= r[k][j] * x[j]
    x[k] = rest / r[k][k]
  }
  return x
}
