/**
 * The cure "pack the rim": levels that are held at the rim become corrections. Among the roofs that meet all other conditions,
 * panels flat, and rise as asked, the one whose largest correction max |z_i - level_i| is least: a minimax problem in a basis
 * of the lifts, z = z0 + B a, solved by reweighted least squares with a certified gap (`minimax.ts`). The rise enters
 * as the height of the wish's peak, moved until the rise is the asked one. Of the roofs that share the least largest correction
 * the one nearest to the wish is taken.
 * Tried and dropped: the rise as t' . z = alpha t' . t (t' the wish less its tilt). The roof then trades its peak for its
 * shoulders and every rim node ends at the bound.
 */
import { dot } from '../../../base/dot.ts'
import { tau } from '../../../base/geometry/tolerance.ts'
import { gaussians } from '../../../base/random.ts'
import { solve } from '../../../base/sparse/solve.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'
import { joined, rowCount, rowList, type Rows } from '../../conditions/rows.ts'
import { outerRimNodes, riseOf, type RiseRule } from '../../raise/rise.ts'
import { feasibleRoof } from '../../raise/under-conditions.ts'
import type { FreeRim } from '../../stress/free-rim.ts'
import { expand, flattened, projected, reduce, type LiftSpace } from '../../stress/lift-space.ts'
import { minimax, nearestWithin, type Minimax } from './minimax.ts'

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
  /** null: whatever the least correction leaves. */
  readonly rise: number | null
  readonly rule: RiseRule
}

/** Numbers in a basis of the lifts (nodes x lifts), and in its inner products (nodes x lifts^2), beyond which this is not tried. */
const mostNumbers = 8e6
const mostProducts = 1.2e9
/** A peak that lifts follow less than this cannot be raised. */
const leastRise = 1e-6
const mostRiseSteps = 8
/** Where the search for the peak begins: a rim that gives way takes up a quarter of the rise on rectangular grids. */
const peakShare = 0.75
const farthestPeak = 10
/** A peak held by another condition gives way to the next highest node. */
const mostPeaks = 8
const firstSteps = 40
const laterSteps = 15
const roughSteps = 6
/** Where the rough search ends. */
const roughWithin = 0.02
/** What the rise may miss the asked one by: a tenth of a millimetre of a metre, far below what is set out. */
const riseWithin = 1e-4
/** What the largest correction may be over the least found, so that roofs are left to choose from. */
const slack = 2e-3

/** Not tried: the basis of the lifts would be too large. */
export interface PackingTooLarge {
  readonly nodes: number
  readonly lifts: number
}

/** null: no level is held at the rim, or no roof under the other conditions rises. */
export function* packedRim({ plan, free, hard, names, areas, wish, rise, rule }: PackQuestion): Steps<PackedRim | PackingTooLarge | null> {
  const held = heldAtRim(plan, hard)
  if (held.rows.length === 0) return null
  const rest = rowsBut(hard, held.rows)
  const { space, start } = yield* feasibleRoof(plan, free, rest, names, wish, areas)
  if (start === null || space.dimension === 0) return null
  const n = plan.nodeCount, d = space.dimension
  if (n * d > mostNumbers || n * d * d > mostProducts) return { nodes: n, lifts: d }
  const found = peakOf(space, wish, rule.down)
  if (found === null) return null
  const { peak, lift } = found
  const basis = yield* basisAlong(space, lift)
  const along = lift[peak] / basis.scale

  // z = start + B a with a_0 set by the rise, so the unknowns are a_1 .. a_{d-1}.
  const count = held.rows.length
  const a = new Float64Array(count * (d - 1))
  const first0 = new Float64Array(count)
  for (let k = 0; k < count; k += 1) {
    const row = basis.coordinates(basis.at(held.node[k]))
    first0[k] = row[0]
    a.set(row.subarray(1), k * (d - 1))
  }
  // The wish stands so that its rim is as far above the levels as below.
  const { middle, level } = middles(held, wish)
  const anchor = basis.coordinates(basis.along(wish.map((height, k) => height - middle + level - start[k]))).slice(1)
  if (rise === null) {
    const rows = Float64Array.from({ length: count * d }, (_, e) => (e % d === 0 ? first0[e / d] : a[Math.floor(e / d) * (d - 1) + (e % d) - 1]))
    const right = Float64Array.from({ length: count }, (_, k) => held.level[k] - start[held.node[k]])
    const near = basis.coordinates(basis.along(wish.map((height, k) => height - middle + level - start[k])))
    const { b, largest, least } = minimax(rows, right, d, near, null, firstSteps)
    const change = basis.heights(nearestWithin(rows, right, d, near, b, (1 + slack) * largest))
    return packedBy(hard, held, flattened(space, start.map((height, k) => height + change[k])), least)
  }
  let last: Minimax | null = null
  /** The roof whose peak is so far above the levels; `fine`: of those that share the largest correction the one nearest to the wish. */
  const at = (above: number, steps: number, fine: boolean): { heights: Float64Array; found: Minimax } => {
    const first = (level + above - start[peak]) / along
    const right = Float64Array.from({ length: count }, (_, k) => held.level[k] - start[held.node[k]] - first * first0[k])
    const found = minimax(a, right, d - 1, anchor, last?.weights ?? null, steps)
    last = found
    const b = fine ? nearestWithin(a, right, d - 1, anchor, found.b, (1 + slack) * found.largest) : found.b
    const change = basis.heights(Float64Array.from({ length: d }, (_, i) => (i === 0 ? first : b[i - 1])))
    return { heights: flattened(space, start.map((height, k) => height + change[k])), found }
  }
  const rim = outerRimNodes(plan)
  const asked = (rule.down ? -1 : 1) * rise
  // Secant on the rise, which grows with the peak and all but linearly; roughly first, then with the roof that is given out.
  let before = 0, riseBefore = riseOf(at(0, roughSteps, false).heights, rim, rule)
  let above = peakShare * asked
  let chosen = at(above, roughSteps, false)
  for (let step = 0, fine = false; step < mostRiseSteps; step += 1) {
    yield { stage: 'Packing the rim', done: step / mostRiseSteps }
    const now = riseOf(chosen.heights, rim, rule)
    const off = Math.abs(asked) - now
    const near: boolean = Math.abs(off) <= (fine ? riseWithin : roughWithin) * Math.abs(asked)
    if ((near && fine) || (now === riseBefore && !near)) break
    const next = near ? above : above + (off * (above - before)) / (now - riseBefore)
    if (!(next * asked > 0) || Math.abs(next) > farthestPeak * Math.abs(asked)) break
    if (!near) {
      before = above
      riseBefore = now
      above = next
    }
    chosen = at(above, fine ? laterSteps : near ? firstSteps : roughSteps, fine || near)
    fine ||= near
  }
  return packedBy(hard, held, chosen.heights, chosen.found.least)
}

function packedBy(hard: Rows, held: HeldAtRim, heights: Float64Array, least: number): PackedRim {
  const { nodes, corrections } = corrected(held, heights)
  return {
    heights, nodes, corrections, conditions: [...new Set(held.rows.map((r) => hard.condition[r]))],
    largest: corrections.reduce((most, value) => Math.max(most, Math.abs(value)), 0), least,
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

/** -tau T K^-1 T^T h: lifts but for tau / lambda, 1e-7 on usual plans, which is taken out of the roof in the end. */
function nearlyLifts({ elimination, factor }: LiftSpace, heights: Float64Array, columns: number): Float64Array {
  return expand(elimination, solve(factor, reduce(elimination, heights, columns), columns), columns).map((value) => -tau * value)
}

/** Orthonormal lifts q_0 .. q_{d-1} = R L^-T, kept as the lifts R at hand and their Gram matrix's factor L. */
interface LiftBasis {
  /** Length of the first lift at hand, q_0 times this. */
  readonly scale: number
  /** Row of R at a node, and R^T h for heights h (length d each). */
  at(node: number): Float64Array
  along(heights: Float64Array): Float64Array
  /** L^-1 x: from R^T h to the q's. */
  coordinates(x: Float64Array): Float64Array
  /** sum c_i q_i (length nodeCount). */
  heights(c: Float64Array): Float64Array
}

/** All lifts of the space, the first along the one given; the others random ones, whose Gram matrix is well enough conditioned. */
function* basisAlong(space: LiftSpace, first: Float64Array): Steps<LiftBasis> {
  const n = first.length, d = space.dimension
  const lifts = new Float64Array(n * d)
  lifts.set(first)
  const chunk = 8
  for (let from = 1; from < d; from += chunk) {
    yield { stage: 'Packing the rim', done: from / d }
    const columns = Math.min(chunk, d - from)
    lifts.set(nearlyLifts(space, gaussians(n * columns, 7 + from), columns), from * n)
  }
  const column = (i: number): Float64Array => lifts.subarray(i * n, (i + 1) * n)
  const lower = new Float64Array(d * d)
  for (let i = 0; i < d; i += 1) {
    if (i % 16 === 0) yield { stage: 'Packing the rim', done: i / d }
    for (let j = 0; j <= i; j += 1) {
      let sum = dot(column(i), column(j))
      for (let k = 0; k < j; k += 1) sum -= lower[i * d + k] * lower[j * d + k]
      lower[i * d + j] = i === j ? Math.sqrt(Math.max(sum, 1e-300)) : sum / lower[j * d + j]
    }
  }
  return {
    scale: lower[0],
    at: (node) => Float64Array.from({ length: d }, (_, i) => lifts[i * n + node]),
    along: (heights) => Float64Array.from({ length: d }, (_, i) => dot(column(i), heights)),
    coordinates(x) {
      const c = x.slice()
      for (let i = 0; i < d; i += 1) {
        for (let k = 0; k < i; k += 1) c[i] -= lower[i * d + k] * c[k]
        c[i] /= lower[i * d + i]
      }
      return c
    },
    heights(c) {
      const x = c.slice()
      for (let i = d - 1; i >= 0; i -= 1) {
        x[i] /= lower[i * d + i]
        for (let k = 0; k < i; k += 1) x[k] -= lower[i * d + k] * x[i]
      }
      const out = new Float64Array(n)
      for (let i = 0; i < d; i += 1) {
        const lift = column(i)
        for (let k = 0; k < n; k += 1) out[k] += x[i] * lift[k]
      }
      return out
    },
  }
}
