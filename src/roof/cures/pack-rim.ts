/**
 * The cure "pack the rim": levels that are held at the rim become corrections. Among the roofs that meet all other conditions,
 * panels flat, and rise as asked, the one whose largest correction max |z_i - level_i| is least: a minimax problem in a basis
 * of the lifts, z = z0 + B a, solved by reweighted least squares with a certified gap (`pack-rim-minimax.ts`). The rise enters
 * as t' . z = alpha t' . t (t' the wish less its tilt), alpha so that the rise is the asked one.
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
import { lessTilt } from '../stress/tilt-part.ts'
import { minimax, type Minimax } from './pack-rim-minimax.ts'

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
/** A lift that follows less than this of the wish carries no rise. */
const leastRise = 1e-6
const mostRiseSteps = 6
const firstSteps = 120
const laterSteps = 25

/** null: no level is held at the rim, or no roof under the other conditions rises. */
export function* packedRim({ plan, free, hard, names, areas, wish, rise, rule }: PackQuestion): Steps<PackedRim | null> {
  const held = heldAtRim(plan, hard)
  if (held.rows.length === 0) return null
  const rest = rowsBut(hard, held.rows)
  const { space, start } = yield* feasibleRoof(plan, free, rest, names, wish, areas)
  if (start === null || space.dimension === 0) return null
  const n = plan.nodeCount, d = space.dimension
  if (n * d > mostNumbers || n * d * d > mostProducts) return null
  const shape = lessTilt(plan, wish, areas).map((height, i) => areas[i] * height)
  const basis = yield* basisTowards(space, shape)
  const along = dot(shape, basis.subarray(0, n))
  if (!(along > leastRise * Math.sqrt(dot(shape, shape)))) return null

  // z = start + B a with a_0 set by the rise, so the unknowns are a_1 .. a_{d-1}.
  const count = held.rows.length
  const a = new Float64Array(count * (d - 1))
  for (let k = 0; k < count; k += 1) for (let i = 1; i < d; i += 1) a[k * (d - 1) + i - 1] = basis[i * n + held.node[k]]
  const anchor = Float64Array.from({ length: d - 1 }, (_, i) => {
    let sum = 0
    for (let k = 0; k < n; k += 1) sum += basis[(i + 1) * n + k] * (wish[k] - start[k])
    return sum
  })
  let last: Minimax | null = null
  const at = (alpha: number): { heights: Float64Array; found: Minimax } => {
    const first = (alpha * dot(shape, wish) - dot(shape, start)) / along
    const right = Float64Array.from({ length: count }, (_, k) => held.level[k] - start[held.node[k]] - first * basis[held.node[k]])
    const found = minimax(a, right, d - 1, anchor, last?.weights ?? null, last === null ? firstSteps : laterSteps)
    last = found
    const heights = start.map((height, i) => height + first * basis[i])
    for (let i = 1; i < d; i += 1) for (let k = 0; k < n; k += 1) heights[k] += found.b[i - 1] * basis[i * n + k]
    return { heights, found }
  }
  const rim = outerRimNodes(plan)
  let alpha = 1
  let chosen = at(alpha)
  if (rise !== null) {
    // Secant on the rise, which grows with alpha and all but linearly.
    let before = 0, riseBefore = riseOf(at(0).heights, rim, rule)
    for (let step = 0; step < mostRiseSteps; step += 1) {
      yield { stage: 'Packing the rim', done: step / mostRiseSteps }
      const now = riseOf(chosen.heights, rim, rule)
      if (Math.abs(now - rise) <= 1e-6 * rise || !(Math.abs(now - riseBefore) > 0)) break
      const next = alpha + ((rise - now) * (alpha - before)) / (now - riseBefore)
      if (!(next > 0) || next > 1e3) break
      before = alpha
      riseBefore = now
      alpha = next
      chosen = at(alpha)
    }
  }
  const { nodes, corrections } = corrected(held, chosen.heights)
  return {
    heights: chosen.heights, nodes, corrections, conditions: [...new Set(held.rows.map((r) => hard.condition[r]))],
    largest: corrections.reduce((most, value) => Math.max(most, Math.abs(value)), 0), least: chosen.found.least,
  }
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

/** Orthonormal lifts (d of length n, one after another): the first along the part of `shape` that lifts can follow. */
function* basisTowards(space: LiftSpace, shape: Float64Array): Steps<Float64Array> {
  const n = shape.length, d = space.dimension
  const basis = new Float64Array(n * d)
  basis.set(projected(space, shape))
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
