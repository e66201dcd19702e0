/**
 * Conditions that bound one side only (a joint asked to be a ridge, whatever its force): c_i . h <= b_i. With u the roof
 * nearest to the wish in the metric M, the nearest one that keeps them is
 *
 *   h = u - sum lambda_i g_i,   g_i the lift with M g_i = c_i,   lambda >= 0, lambda_i = 0 where c_i . h < b_i
 *
 * so all is decided in the small matrix G = c_j . g_i by the dual active set method (Goldfarb, Idnani, Math. Programming 27,
 * 1983): the worst broken condition is added, those that would pull the wrong way are let go. A soft condition of weight w
 * costs w (c . h - b)^2 / 2 where it is broken, which adds 1 / w to its diagonal entry.
 *
 * The lifts g_i cost a solve each and serve every later roof on the same ground; only conditions that some roof breaks need
 * theirs.
 */
import { clashHeight, fixedShare } from '../../base/geometry/tolerance.ts'
import { gaussians } from '../../base/random.ts'
import type { Steps } from '../../base/steps.ts'
import type { SoftRows } from '../conditions/condition-rows.ts'
import { rowCount } from '../conditions/rows.ts'
import { projected, type LiftSpace } from '../stress/lift-space.ts'
import { nearestLift } from './nearest.ts'
import { rowWeights, type Metric } from './soft.ts'

export interface OneSided {
  /** The nearest roof to `heights` that keeps the rows. */
  held(heights: Float64Array): Steps<Held>
}

/** `broken`: rows that no roof can keep together, none where all are kept; `misfit`: how far the last of them is off, in spans. */
export interface Held {
  readonly heights: Float64Array
  readonly broken: readonly number[]
  readonly misfit: number
}

/** Squared sine, in the metric, below which a condition is a combination of others: the lifts are known to 1e-9. */
const dependentShare = 1e-10

export function oneSided(space: LiftSpace, metric: Metric, rows: SoftRows): OneSided {
  const count = rowCount(rows)
  const give = rowWeights(rows, space.plan.nodeCount).map((weight) => 1 / weight)
  const fixed = fixedRows(space, rows)
  const lifts = new Map<number, Float64Array>()
  function* liftOf(row: number): Steps<Float64Array> {
    const known = lifts.get(row)
    if (known !== undefined) return known
    const pull = new Float64Array(space.plan.nodeCount)
    for (let k = rows.start[row]; k < rows.start[row + 1]; k += 1) pull[rows.node[k]] += rows.weight[k]
    const zero = new Float64Array(space.plan.nodeCount)
    const lift = yield* nearestLift(space, zero, { apply: (heights) => metric.apply(heights), pull: () => pull }, zero, false)
    lifts.set(row, lift)
    return lift
  }

  function* held(heights: Float64Array): Steps<Held> {
    const excess = Float64Array.from({ length: count }, (_, row) => valueOf(rows, row, heights) - rows.value[row])
    const active: { row: number; lift: Float64Array; lambda: number }[] = []
    const off = (row: number): number => active.reduce((sum, { lift, lambda }) => sum - lambda * valueOf(rows, row, lift), excess[row])
    const roof = (): Float64Array => {
      const out = heights.slice()
      for (const { lift, lambda } of active) for (let i = 0; i < out.length; i += 1) out[i] -= lambda * lift[i]
      return out
    }
    for (;;) {
      let worst = -1
      let most = clashHeight
      for (let row = 0; row < count; row += 1) {
        if (active.some((other) => other.row === row)) continue
        const by = off(row)
        if (by > most) {
          worst = row
          most = by
        }
      }
      if (worst < 0) return { heights: roof(), broken: [], misfit: 0 }
      // Where no roof moves the row there is nothing to add; a soft one is then left as it is.
      const isFixed = fixed[worst] === 1
      if (isFixed && give[worst] === 0) return { heights: roof(), broken: [worst], misfit: most }
      if (isFixed) {
        excess[worst] = 0
        continue
      }
      const lift = yield* liftOf(worst)
      let lambda = 0
      for (let added = false; !added; ) {
        const r = solved(active.map((one) => active.map((other) => valueOf(rows, one.row, other.lift) + (one === other ? give[one.row] : 0))), active.map((one) => valueOf(rows, one.row, lift)))
        const own = valueOf(rows, worst, lift) + give[worst]
        const rest = own - active.reduce((sum, other, k) => sum + valueOf(rows, worst, other.lift) * r[k], 0)
        const full = rest > dependentShare * own ? (off(worst) - lambda * own) / rest : Infinity
        let step = full
        let leaves = -1
        active.forEach((one, k) => {
          if (r[k] > 0 && one.lambda / r[k] < step) {
            step = one.lambda / r[k]
            leaves = k
          }
        })
        if (step === Infinity) return { heights: roof(), broken: [...active.map(({ row }) => row), worst].sort((a, b) => a - b), misfit: most }
        active.forEach((one, k) => (one.lambda -= step * r[k]))
        lambda += step
        if (leaves >= 0) active.splice(leaves, 1)
        else {
          active.push({ row: worst, lift, lambda })
          added = true
        }
      }
    }
  }
  return { held }
}

/** 1 for each row that has one value in all roofs: two random lifts move it by nothing but rounding. */
function fixedRows(space: LiftSpace, rows: SoftRows): Uint8Array {
  const n = space.plan.nodeCount
  const probes = projected(space, gaussians(2 * n, 20), 2)
  const fixed = new Uint8Array(rowCount(rows)).fill(1)
  for (const probe of [probes.subarray(0, n), probes.subarray(n)]) {
    for (let row = 0; row < fixed.length; row += 1) {
      let size = 0
      for (let k = rows.start[row]; k < rows.start[row + 1]; k += 1) size += Math.abs(rows.weight[k] * probe[rows.node[k]])
      if (Math.abs(valueOf(rows, row, probe)) > fixedShare * size) fixed[row] = 0
    }
  }
  return fixed
}

function valueOf(rows: SoftRows, row: number, heights: Float64Array): number {
  let sum = 0
  for (let k = rows.start[row]; k < rows.start[row + 1]; k += 1) sum += rows.weight[k] * heights[rows.node[k]]
  return sum
}

/** x with A x = b for a small symmetric positive definite A, by elimination without pivoting (it needs none). */
function solved(a: number[][], b: number[]): number[] {
  const n = b.length
  for (let k = 0; k < n; k += 1) {
    for (let i = k + 1; i < n; i += 1) {
      const factor = a[i][k] / a[k][k]
      for (let j = k; j < n; j += 1) a[i][j] -= factor * a[k][j]
      b[i] -= factor * b[k]
    }
  }
  for (let k = n - 1; k >= 0; k -= 1) {
    for (let j = k + 1; j < n; j += 1) b[k] -= a[k][j] * b[j]
    b[k] /= a[k][k]
  }
  return b
}
