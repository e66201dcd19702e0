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
import { assert } from '../../base/assert.ts'
import { clashHeight, fixedShare } from '../../base/geometry/tolerance.ts'
import { gaussians } from '../../base/random.ts'
import type { Steps } from '../../base/steps.ts'
import type { SoftRows } from '../conditions/condition-rows.ts'
import { rowCount } from '../conditions/rows.ts'
import { projected, type LiftSpace } from '../stress/lift-space.ts'
import { nearestLift } from './nearest.ts'
import { rowWeights, type Metric } from './soft.ts'

export interface OneSided {
  readonly rows: SoftRows
  /** The nearest roof to `heights` that keeps the rows. */
  held(heights: Float64Array, options?: HeldOptions): Steps<Held>
}

export interface HeldOptions {
  /** Hard rows are kept by this much to spare, in spans. */
  readonly spare?: number
  /** Conditions of which the rows are left out. */
  readonly leaving?: (condition: number) => boolean
}

/** `broken`: rows that no roof can keep together, none where all are kept; `misfit`: how far the last of them is off, in spans. */
export interface Held {
  readonly heights: Float64Array
  readonly broken: readonly number[]
  /** Weights > 0 of the broken rows, whose weighted sum is one number in all roofs (Farkas): more than the rows allow. */
  readonly weights: readonly number[]
  readonly misfit: number
}

/** Squared sine, in the metric, below which a condition is a combination of others: the lifts are known to 1e-9. */
const dependentShare = 1e-10

/** A row whose lift is known: how far the lift moves every row. */
interface Pull {
  readonly lift: Float64Array
  readonly moves: Float64Array
}

/** `known`: of the same space and metric, whose first rows are these; its lifts serve again. */
export function oneSided(space: LiftSpace, metric: Metric, rows: SoftRows, known: { readonly rows: number; readonly lifts: ReadonlyMap<number, Float64Array> } | null = null): OneSided & { readonly lifts: ReadonlyMap<number, Float64Array> } {
  const count = rowCount(rows)
  const give = rowWeights(rows, space.plan.nodeCount).map((weight) => 1 / weight)
  const fixed = fixedRows(space, rows)
  const lifts = new Map<number, Float64Array>(known === null ? [] : [...known.lifts].filter(([row]) => row < known.rows))
  const pulls = new Map<number, Pull>()
  function* pullOf(row: number): Steps<Pull> {
    const before = pulls.get(row)
    if (before !== undefined) return before
    let lift = lifts.get(row)
    if (lift === undefined) {
      const pull = new Float64Array(space.plan.nodeCount)
      for (let k = rows.start[row]; k < rows.start[row + 1]; k += 1) pull[rows.node[k]] += rows.weight[k]
      const zero = new Float64Array(space.plan.nodeCount)
      lift = yield* nearestLift(space, zero, { apply: (heights) => metric.apply(heights), pull: () => pull }, zero, false)
      lifts.set(row, lift)
    }
    const made = { lift, moves: valuesOf(rows, lift) }
    pulls.set(row, made)
    return made
  }

  function* held(heights: Float64Array, { spare = 0, leaving = () => false }: HeldOptions = {}): Steps<Held> {
    const excess = valuesOf(rows, heights)
    for (let row = 0; row < count; row += 1) {
      excess[row] = leaving(rows.condition[row]) ? -Infinity : excess[row] - rows.value[row] + (give[row] === 0 ? spare : 0)
    }
    const largest = excess.reduce((most, value) => (value > most ? value : most), 0)
    const kept = Math.max(clashHeight, roundingShare * largest)
    const active: { row: number; pull: Pull; lambda: number }[] = []
    const isActive = new Uint8Array(count)
    /** How far each row is over its bound with the multipliers as they are. */
    const off = excess.slice()
    const roof = (): Float64Array => {
      const out = heights.slice()
      for (const { pull, lambda } of active) for (let i = 0; i < out.length; i += 1) out[i] -= lambda * pull.lift[i]
      return out
    }
    for (let turn = 0; ; turn += 1) {
      assert(turn <= mostTurns + 20 * count, 'holding bounds comes to an end')
      for (let row = 0; row < count; row += 1) off[row] = excess[row]
      for (const { pull, lambda } of active) for (let row = 0; row < count; row += 1) off[row] -= lambda * pull.moves[row]
      let worst = -1
      let most = kept
      for (let row = 0; row < count; row += 1) {
        if (isActive[row] === 1 || !(off[row] > most)) continue
        worst = row
        most = off[row]
      }
      if (worst < 0) return { heights: roof(), broken: [], weights: [], misfit: 0 }
      // Where no roof moves the row there is nothing to add; a soft one is then left as it is.
      const isFixed = fixed[worst] === 1
      if (isFixed && give[worst] === 0) return { heights: roof(), broken: [worst], weights: [1], misfit: most }
      if (isFixed) {
        excess[worst] = 0
        continue
      }
      const pull = yield* pullOf(worst)
      yield { stage: 'Holding bounds', done: active.length / (active.length + 10) }
      let lambda = 0
      for (let added = false; !added; ) {
        const r = solved(active.map((one) => active.map((other) => other.pull.moves[one.row] + (one === other ? give[one.row] : 0))), active.map((one) => pull.moves[one.row]))
        const own = pull.moves[worst] + give[worst]
        const rest = own - active.reduce((sum, other, k) => sum + other.pull.moves[worst] * r[k], 0)
        const over = active.reduce((sum, other) => sum - other.lambda * other.pull.moves[worst], excess[worst]) - lambda * own
        const full = rest > dependentShare * own ? over / rest : Infinity
        let step = full
        let leaves = -1
        active.forEach((one, k) => {
          if (r[k] > 0 && one.lambda / r[k] < step) {
            step = one.lambda / r[k]
            leaves = k
          }
        })
        if (step === Infinity) {
          // The row is the sum of r_k times the active ones, all r_k <= 0: with weights 1 and -r_k the sum vanishes.
          const found = [{ row: worst, weight: 1 }, ...active.map(({ row }, k) => ({ row, weight: -r[k] }))].filter(({ weight }) => weight > smallWeight).sort((a, b) => a.row - b.row)
          return { heights: roof(), broken: found.map(({ row }) => row), weights: found.map(({ weight }) => weight), misfit: most }
        }
        active.forEach((one, k) => (one.lambda -= step * r[k]))
        lambda += step
        if (leaves >= 0) {
          isActive[active[leaves].row] = 0
          active.splice(leaves, 1)
        } else {
          active.push({ row: worst, pull, lambda })
          isActive[worst] = 1
          added = true
        }
      }
    }
  }
  return { rows, held, lifts }
}

/** Bounds of roofs that are far beyond them are kept to this share of how far: the lifts' rounding. */
const roundingShare = 1e-10

/** The method ends by itself; a loop by rounding would not. */
const mostTurns = 1000

/** Weights of a contradiction below this are rounding of the lifts. */
const smallWeight = 1e-8

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

/** row . heights of every row. */
export function valuesOf(rows: SoftRows, heights: Float64Array): Float64Array {
  return Float64Array.from(rows.value, (_, row) => valueOf(rows, row, heights))
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
