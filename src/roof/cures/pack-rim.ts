/**
 * The cure "pack the rim": levels that are held at the rim become corrections. Among the roofs that meet all other conditions,
 * panels flat, and rise as asked, the one whose largest correction max |z_i - level_i| is least: a minimax problem in a basis
 * of the lifts, z = z0 + B a, solved by reweighted least squares with a certified gap (`pack-rim-minimax.ts`). The rise enters
 * as the height of the wish's peak, moved until the rise is the asked one. Of the roofs that share the least largest correction
 * the one nearest to the wish is taken.
 * Tried and dropped: the rise as t' . z = alpha t' . t (t' the wish less its tilt). The roof then trades its peak for its
 * shoulders and every rim node ends at the bound.
 */
import { dot } from '../../base/dot.ts'
import { gaussians } from '../../base/random.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import { joined, rowCount, rowList, type Rows } from '../conditions/rows.ts'
import { outerRimNodes, riseOf, type RiseRule } from '../raise/rise.ts'
import { feasibleRoof } from '../raise/under-conditions.ts'
import type { FreeRim } from '../stress/free-rim.ts'
import { projected, type LiftSpace } from '../stress/lift-space.ts'
import { minimax, nearestWithin, type Minimax } from './pack-rim-minimax.ts'

export interface PackedRim {
  /** Heights of the roof, in spans (length nodeCount). */
  readonly heights: Float64Array
  /** Rim nodes that were held, each once, and what each is packed by (upwards > 0), in spans. */
  readonly nodes: Int32Array
  readonly corrections: Float64Array
  /** Conditions whose levels these were, by index. */
  readonly conditions: readonly number[]
  readonly largest: number
  /** No roof that rises as far has a largest correction below this. */
  readonly least: number
}

export interface PackQuestion {
  readonly plan: Plan
  readonly free: FreeRim
  readonly hard: Rows
  readonly names: readonly string[]
  readonly areas: Float64Array
  readonly wish: Float64Array
  /** null: the wish's own. */
  readonly rise: number | null
  readonly rule: RiseRule
}

/** Numbers in a basis of the lifts (nodes x lifts), and in making it orthonormal (nodes x lifts^2), beyond which this is not tried. */
const mostNumbers = 8e6
const mostProducts = 6e8
/** A peak that lifts follow less than this cannot be raised. */
const leastRise = 1e-6
const mostRiseSteps = 6
/** Where the search for the peak begins: a rim that gives way takes up a quarter of the rise on rectangular grids. */
const peakShare = 0.75
const farthestPeak = 10
/** A peak held by another condition gives way to the next highest node. */
const mostPeaks = 8
const firstSteps = 120
const laterSteps = 25
/** What the largest correction may be over the least found, so that roofs are left to choose from. */
const slack = 2e-3

/** null: no level is held at the rim, or no roof under the other conditions rises. */
export function* packedRim({ plan, free, hard, names, areas, wish, rise, rule }: PackQuestion): Steps<PackedRim | null> {
  const held = heldAtRim(plan, hard)
  if (held.rows.length === 0) return null
  const rest = rowsBut(hard, held.rows)
  const { space, start } = yield* feasibleRoof(plan, free, rest, names, wish, areas)
  if (start === null || space.dimension === 0) return null
  const n = plan.nodeCount, d = space.dimension
  if (n * d > mostNumbers || n * d * d > mostProducts) return null
  const found = peakOf(space, wish, rule.down)
  if (found === null) return null
  const { peak, lift } = found
  const basis = yield* basisAlong(space, lift)
  const along = basis[peak]

  // z = start + B a with a_0 set by the rise, so the unknowns are a_1 .. a_{d-1}.
  const count = held.rows.length
  const a = new Float64Array(count * (d - 1))
  for (let k = 0; k < count; k += 1) for (let i = 1; i < d; i += 1) a[k * (d - 1) + i - 1] = basis[i * n + held.node[k]]
  // The wish stands so that its rim is as far above the levels as below.
  const { middle, level } = middles(held, wish)
  const anchor = Float64Array.from({ length: d - 1 }, (_, i) => {
    let sum = 0
    for (let k = 0; k < n; k += 1) sum += basis[(i + 1) * n + k] * (wish[k] - middle + level - start[k])
    return sum
  })
  let last: Minimax | null = null
  /** The roof whose peak is so far above the levels. */
  const at = (above: number): { heights: Float64Array; found: Minimax } => {
    const first = (level + above - start[peak]) / along
    const right = Float64Array.from({ length: count }, (_, k) => held.level[k] - start[held.node[k]] - first * basis[held.node[k]])
    const found = minimax(a, right, d - 1, anchor, last?.weights ?? null, last === null ? firstSteps : laterSteps)
    last = found
    // Many roofs share the least largest correction: of those the one nearest to the wish.
    const b = nearestWithin(a, right, d - 1, anchor, found.b, (1 + slack) * found.largest)
    const heights = start.map((height, i) => height + first * basis[i])
    for (let i = 1; i < d; i += 1) for (let k = 0; k < n; k += 1) heights[k] += b[i - 1] * basis[i * n + k]
    return { heights, found }
  }
  const rim = outerRimNodes(plan)
  const asked = (rule.down ? -1 : 1) * (rise ?? riseOf(wish, rim, rule))
  // Secant on the rise, which grows with the peak and all but linearly.
  let before = 0, riseBefore = riseOf(at(0).heights, rim, rule)
  let above = peakShare * asked
  let chosen = at(above)
  for (let step = 0; step < mostRiseSteps; step += 1) {
    yield { stage: 'Packing the rim', done: step / mostRiseSteps }
    const now = riseOf(chosen.heights, rim, rule)
    if (Math.abs(now - Math.abs(asked)) <= 1e-6 * Math.abs(asked) || !(Math.abs(now - riseBefore) > 0)) break
    const next = above + ((Math.abs(asked) - now) * (above - before)) / (now - riseBefore)
    if (!(next * asked > 0) || Math.abs(next) > farthestPeak * Math.abs(asked)) break
    before = above
    riseBefore = now
    above = next
    chosen = at(above)
  }
  const { nodes, corrections } = corrected(held, chosen.heights)
  return {
    heights: chosen.heights, nodes, corrections, conditions: [...new Set(held.rows.map((r) => hard.condition[r]))],
    largest: corrections.reduce((most, value) => Math.max(most, Math.abs(value)), 0), least: chosen.found.least,
  }
}

/** The highest node of the wish (the lowest where the roof hangs) that lifts can raise, and the lift that raises it best. */
function peakOf(space: LiftSpace, wish: Float64Array, down: boolean): { peak: number; lift: Float64Array } | null {
  const order = [...wish.keys()].sort((a, b) => (down ? wish[a] - wish[b] : wish[b] - wish[a]) || a - b)
  for (const peak of order.slice(0, mostPeaks)) {
    const unit = new Float64Array(wish.length)
    unit[peak] = 1
    const lift = projected(space, unit)
    if (lift[peak] > leastRise) return { peak, lift }
  }
  return null
}

interface HeldAtRim {
  readonly rows: readonly number[]
  readonly node: readonly number[]
  readonly level: readonly number[]
}

/** Hard rows that give a rim node its height. */
function heldAtRim(plan: Plan, hard: Rows): HeldAtRim {
  const rows: number[] = [], node: number[] = [], level: number[] = []
  for (let r = 0; r < rowCount(hard); r += 1) {
    const at = hard.start[r]
    if (hard.start[r + 1] - at !== 1 || plan.rimPasses[hard.node[at]] === 0) continue
    rows.push(r)
    node.push(hard.node[at])
    level.push(hard.value[r] / hard.weight[at])
  }
  return { rows, node, level }
}

/** Half way between the highest and the lowest: of the wish at the held nodes, and of their levels. */
function middles({ node, level }: HeldAtRim, wish: Float64Array): { middle: number; level: number } {
  const half = (values: readonly number[]): number => (Math.min(...values) + Math.max(...values)) / 2
  return { middle: half(node.map((n) => wish[n])), level: half(level) }
}

function rowsBut(rows: Rows, left: readonly number[]): Rows {
  const out = new Set(left)
  return joined(rowList().rows(), rows, Array.from(rows.value.keys()).filter((r) => !out.has(r)))
}

/** The correction of each node, from the level that it misses most where it has several. */
function corrected(held: HeldAtRim, heights: Float64Array): { nodes: Int32Array; corrections: Float64Array } {
  const by = new Map<number, number>()
  held.node.forEach((node, k) => {
    const correction = heights[node] - held.level[k]
    if (Math.abs(correction) >= Math.abs(by.get(node) ?? 0)) by.set(node, correction)
  })
  const nodes = Int32Array.from(by.keys()).sort()
  return { nodes, corrections: Float64Array.from(nodes, (node) => by.get(node) ?? 0) }
}

/** Orthonormal lifts (d of length n, one after another): the first along the one given. */
function* basisAlong(space: LiftSpace, first: Float64Array): Steps<Float64Array> {
  const n = first.length, d = space.dimension
  const basis = new Float64Array(n * d)
  basis.set(first)
  const chunk = 8
  for (let from = 1; from < d; from += chunk) {
    yield { stage: 'Packing the rim', done: from / d }
    const columns = Math.min(chunk, d - from)
    basis.set(projected(space, gaussians(n * columns, 7 + from), columns), from * n)
  }
  for (let i = 0; i < d; i += 1) {
    if (i % 16 === 0) yield { stage: 'Packing the rim', done: i / d }
    const v = basis.subarray(i * n, (i + 1) * n)
    for (let pass = 0; pass < 2; pass += 1) {
      for (let j = 0; j < i; j += 1) {
        const u = basis.subarray(j * n, (j + 1) * n)
        const share = dot(u, v)
        for (let k = 0; k < n; k += 1) v[k] -= share * u[k]
      }
    }
    const size = Math.sqrt(dot(v, v))
    for (let k = 0; k < n; k += 1) v[k] /= size
  }
  return basis
}
