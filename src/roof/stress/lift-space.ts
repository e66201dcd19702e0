/**
 * All lifts of a plan that keep the hard conditions, as one sparse factor.
 *
 * With N the flatness conditions of all panels, Q = sum N N^T the flatness form and h = h0 + T y the heights that keep the
 * conditions (T from elimination, the identity when nothing is held), K = T^T (Q - tau I) T is factored once:
 *   its negative pivots count the lifts (Sylvester's law of inertia: the number does not depend on the basis T);
 *   -tau T K^-1 T^T projects any heights to the nearest lift, up to tau / lambda on what is not one;
 *   I - T K^-1 T^T Q takes out what is left, and flattens a roof that meets conditions which are not zero.
 * Tried and dropped: weighting panels by area or its inverse (spoils the decision between lift and near lift on uneven
 * plans); an augmented Lagrangian on M + mu Q (one factor as well, four solves, 1e3 times less exact on uneven plans).
 */
import { analysing, type Analysis } from '../../base/sparse/analyse.ts'
import { cliquePatternSteps, type CliquePattern } from '../../base/sparse/cliques.ts'
import { factor, type Factor } from '../../base/sparse/factor.ts'
import { inertia } from '../../base/sparse/inertia.ts'
import { dissection } from '../../base/sparse/order.ts'
import { solve } from '../../base/sparse/solve.ts'
import { dot } from '../../base/dot.ts'
import { tau } from '../../base/geometry/tolerance.ts'
import { gaussians } from '../../base/random.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Elimination } from '../conditions/eliminate.ts'
import { applyForm, squaredResidual, type PanelBases } from './panel-bases.ts'

export interface LiftSpace {
  readonly plan: Plan
  readonly bases: PanelBases
  readonly elimination: Elimination
  readonly form: ReducedForm
  readonly analysis: Analysis
  /** Factor of K = T^T (Q - tau I) T. */
  readonly factor: Factor
  /** Lifts that keep the conditions with all their values zero, tilts included. */
  readonly dimension: number
  /** A random lift; null where there is none. */
  readonly probe: Probe | null
}

/** Random heights projected: two solves, which say what several questions ask first. */
export interface Probe {
  /** The lift they come to (length nodeCount) .. */
  readonly lift: Float64Array
  /** .. and what the second solve took out of it: -tau T K^-1 T^T Q T K^-1 T^T of the heights, made of near lifts mostly. */
  readonly rest: Float64Array
  /** |N^T h|^2 / |h|^2 of the lift: how exactly the plan's lifts lift, as eigenvalues are; rounding squared where they do. */
  readonly quotient: number
}

/** Clique c holds unknowns index[start[c] .. start[c + 1]). */
interface FormPattern {
  readonly cliques: CliquePattern
  readonly start: Int32Array
  readonly index: Int32Array
}

/** Q and the metric under an elimination: one clique of unknowns a panel, then one a node. */
export interface ReducedForm extends FormPattern {
  /** T^T Q T, one value per entry of the pattern. */
  readonly flatness: Float64Array
}

/** The elimination of a plan on which nothing is held: T = I. */
export function nothingHeld(nodeCount: number): Elimination {
  const free = Int32Array.from({ length: nodeCount }, (_, i) => i)
  const start = Int32Array.from({ length: nodeCount + 1 }, (_, i) => i)
  return { free, start, unknown: free, weight: new Float64Array(nodeCount).fill(1), particular: new Float64Array(nodeCount) }
}

/**
 * Order, analyse and factor for this plan under these conditions; one factor serves every later question. `like`: a space whose
 * order and analysis serve again where panels and conditions join the same nodes, as on a plan whose nodes were moved.
 */
export function* liftSpace(plan: Plan, bases: PanelBases, elimination: Elimination, like: LiftSpace | null = null): Steps<LiftSpace> {
  yield { stage: 'Assembling', done: 0 }
  const known = like !== null && samePattern(like, plan, elimination) ? like : null
  const form = yield* reducedForm(plan, bases, elimination, known?.form ?? null)
  const { pattern } = form.cliques
  const analysis = known?.analysis ?? (yield* analysing(pattern, yield* dissection(pattern, placesOf(plan, elimination))))
  yield { stage: 'Analysing', done: 1 }
  const shifted = weightedForm(plan, elimination, form, null, -tau, 1)
  yield { stage: 'Factoring', done: 0 }
  const factored = yield* factor(analysis, shifted)
  const { negative, zero } = inertia(factored)
  const space = { plan, bases, elimination, form, analysis, factor: factored, dimension: negative + zero, probe: null }
  yield { stage: 'Factoring', done: 1 }
  return { ...space, probe: space.dimension === 0 ? null : yield* probeOf(space) }
}

/** Where the unknowns lie: x y x y .. in working coordinates. */
function placesOf({ work }: Plan, { free }: Elimination): Float64Array {
  const at = new Float64Array(2 * free.length)
  free.forEach((node, u) => at.set(work.subarray(2 * node, 2 * node + 2), 2 * u))
  return at
}

/** Whether the flatness form couples the same unknowns: panels by their corners, corners by what they are made of. */
function samePattern({ plan: before, elimination: then }: LiftSpace, plan: Plan, now: Elimination): boolean {
  return same(before.panelStart, plan.panelStart) && same(before.corner, plan.corner) && same(then.start, now.start) && same(then.unknown, now.unknown)
}

export function same(a: Int32Array | Float64Array, b: Int32Array | Float64Array): boolean {
  if (a === b) return true
  if (a.length !== b.length) return false
  for (let i = 0; i < a.length; i += 1) if (a[i] !== b[i]) return false
  return true
}

function* probeOf(space: LiftSpace): Steps<Probe> {
  const { plan, bases, elimination } = space
  const lift = pulledIn(space, gaussians(plan.nodeCount, 7))
  yield { stage: 'Factoring', done: 1 }
  const rest = expand(elimination, solve(space.factor, reduce(elimination, applyForm(plan, bases, lift))))
  for (let i = 0; i < lift.length; i += 1) lift[i] -= rest[i]
  return { lift, rest, quotient: squaredResidual(plan, bases, lift) / dot(lift, lift) }
}

/** Cliques of the flatness form: the unknowns of each panel's corners, then those of each node. */
function* formPattern({ panelStart, corner, panelCount, nodeCount }: Plan, { start, unknown, free }: Elimination): Steps<FormPattern> {
  const cliqueStart = new Int32Array(panelCount + nodeCount + 1)
  const slotOf = new Int32Array(free.length).fill(-1)

  let entries = 0
  for (let c = 0; c < corner.length; c += 1) entries += start[corner[c] + 1] - start[corner[c]]
  const cliqueIndex = new Int32Array(entries + unknown.length)
  let filled = 0
  for (let p = 0; p < panelCount; p += 1) {
    const first = filled
    for (let c = panelStart[p]; c < panelStart[p + 1]; c += 1) {
      for (let t = start[corner[c]]; t < start[corner[c] + 1]; t += 1) {
        if (slotOf[unknown[t]] >= first) continue
        slotOf[unknown[t]] = filled
        cliqueIndex[filled++] = unknown[t]
      }
    }
    for (let s = first; s < filled; s += 1) slotOf[cliqueIndex[s]] = -1
    cliqueStart[p + 1] = filled
  }
  for (let node = 0; node < nodeCount; node += 1) {
    for (let t = start[node]; t < start[node + 1]; t += 1) cliqueIndex[filled++] = unknown[t]
    cliqueStart[panelCount + node + 1] = filled
  }
  const index = cliqueIndex.subarray(0, filled)
  yield { stage: 'Assembling', done: 0.05 }
  return { cliques: yield* cliquePatternSteps(free.length, cliqueStart, index), start: cliqueStart, index }
}

/**
 * T^T Q T by panels: with B = I - 11^T/k - e1 e1^T - e2 e2^T and T_p the panel's rows of T, the block is T_p^T B T_p. `known`:
 * its pattern, null: to be found.
 */
export function* reducedForm(plan: Plan, bases: PanelBases, elimination: Elimination, known: FormPattern | null = null): Steps<ReducedForm> {
  const { panelCount } = plan
  const { cliques, start: cliqueStart, index: cliqueIndex } = known ?? (yield* formPattern(plan, elimination))
  const slotOf = new Int32Array(elimination.free.length).fill(-1)

  const flatness = new Float64Array(cliques.pattern.row.length)
  let at = 0
  for (let p = 0; p < panelCount; p += panelsPerStep) {
    yield { stage: 'Assembling', done: 0.5 + (0.5 * p) / panelCount }
    at = addBlocks(flatness, cliques.position, at, plan, bases, elimination, cliqueStart, cliqueIndex, slotOf, p, Math.min(panelCount, p + panelsPerStep))
  }
  return { cliques, start: cliqueStart, index: cliqueIndex, flatness }
}

/** Panels between two yields: some 10 ms. */
const panelsPerStep = 8192

/** Adds the blocks of panels first .. last, whose places in the pattern begin at position[at]; returns where the next begin. */
function addBlocks(
  flatness: Float64Array, position: Int32Array, begin: number, plan: Plan, bases: PanelBases, elimination: Elimination,
  cliqueStart: Int32Array, cliqueIndex: Int32Array, slotOf: Int32Array, firstPanel: number, lastPanel: number,
): number {
  const { panelStart } = plan
  let at = begin
  let rows = new Float64Array(64)
  for (let p = firstPanel; p < lastPanel; p += 1) {
    const from = panelStart[p], to = panelStart[p + 1]
    const count = to - from
    const first = cliqueStart[p]
    const unknowns = cliqueStart[p + 1] - first
    if (count > 3 && unknowns > 0) {
      // rows: T_p with 1/sqrt(k), e1, e2 projected out of its columns; the block is rows^T rows.
      if (rows.length < count * unknowns) rows = new Float64Array(2 * count * unknowns)
      projectedRows(rows, plan, bases, elimination, cliqueIndex, p, first, unknowns, slotOf)
      for (let a = 0; a < unknowns; a += 1) {
        for (let b = a; b < unknowns; b += 1) {
          let sum = 0
          for (let k = 0; k < count; k += 1) sum += rows[a * count + k] * rows[b * count + k]
          flatness[position[at++]] += sum
        }
      }
    } else {
      at += (unknowns * (unknowns + 1)) / 2
    }
  }
  return at
}

/** Fills rows[a * k ..] with (I - 11^T/k - e1 e1^T - e2 e2^T) T_p's column a, for the panel's k corners. */
function projectedRows(
  rows: Float64Array, plan: Plan, bases: PanelBases, elimination: Elimination,
  cliqueIndex: Int32Array, panel: number, first: number, unknowns: number, slotOf: Int32Array,
): void {
  const { panelStart, corner } = plan
  const { start, unknown, weight } = elimination
  const { e } = bases
  const from = panelStart[panel]
  const count = panelStart[panel + 1] - from
  rows.fill(0, 0, count * unknowns)
  for (let a = 0; a < unknowns; a += 1) slotOf[cliqueIndex[first + a]] = a
  for (let k = 0; k < count; k += 1) {
    const node = corner[from + k]
    for (let t = start[node]; t < start[node + 1]; t += 1) rows[slotOf[unknown[t]] * count + k] += weight[t]
  }
  for (let a = 0; a < unknowns; a += 1) {
    slotOf[cliqueIndex[first + a]] = -1
    const base = a * count
    let mean = 0, a1 = 0, a2 = 0
    for (let k = 0; k < count; k += 1) {
      mean += rows[base + k]
      a1 += rows[base + k] * e[2 * (from + k)]
      a2 += rows[base + k] * e[2 * (from + k) + 1]
    }
    mean /= count
    for (let k = 0; k < count; k += 1) rows[base + k] -= mean + a1 * e[2 * (from + k)] + a2 * e[2 * (from + k) + 1]
  }
}

/**
 * mu T^T Q T + shift T^T M T on the form's pattern; `metric` is the diagonal of M (length nodeCount), null for I.
 */
export function weightedForm(
  plan: Plan, elimination: Elimination, form: ReducedForm, metric: Float64Array | null, shift: number, mu: number,
): Float64Array {
  const { start, weight } = elimination
  const { position } = form.cliques
  const values = form.flatness.slice()
  if (mu !== 1) for (let i = 0; i < values.length; i += 1) values[i] *= mu
  let nodeEntries = 0
  for (let node = 0; node < plan.nodeCount; node += 1) {
    const k = start[node + 1] - start[node]
    nodeEntries += (k * (k + 1)) / 2
  }
  let at = position.length - nodeEntries
  for (let node = 0; node < plan.nodeCount; node += 1) {
    const m = shift * (metric === null ? 1 : metric[node])
    for (let a = start[node]; a < start[node + 1]; a += 1) {
      for (let b = a; b < start[node + 1]; b += 1) values[position[at++]] += m * weight[a] * weight[b]
    }
  }
  return values
}

/** T y per column (length nodeCount * columns). */
export function expand(elimination: Elimination, y: Float64Array, columns = 1): Float64Array {
  const { start, unknown, weight, free } = elimination
  const nodeCount = start.length - 1
  const out = new Float64Array(nodeCount * columns)
  for (let column = 0; column < columns; column += 1) {
    const from = column * free.length, to = column * nodeCount
    for (let node = 0; node < nodeCount; node += 1) {
      let sum = 0
      for (let t = start[node]; t < start[node + 1]; t += 1) sum += weight[t] * y[from + unknown[t]]
      out[to + node] = sum
    }
  }
  return out
}

/** T^T h per column (length unknowns * columns). */
export function reduce(elimination: Elimination, heights: Float64Array, columns = 1): Float64Array {
  const { start, unknown, weight, free } = elimination
  const nodeCount = start.length - 1
  const out = new Float64Array(free.length * columns)
  for (let column = 0; column < columns; column += 1) {
    const to = column * free.length, from = column * nodeCount
    for (let node = 0; node < nodeCount; node += 1) {
      for (let t = start[node]; t < start[node + 1]; t += 1) out[to + unknown[t]] += weight[t] * heights[from + node]
    }
  }
  return out
}

/**
 * Heights less what is not flat in them, to first order: h - T K^-1 T^T Q h, per column. What is not a lift shrinks by
 * tau / (lambda - tau); what is one stays to the last digits, since Q h holds nothing of it. Conditions that h keeps stay kept.
 */
export function flattened(space: LiftSpace, heights: Float64Array, columns = 1): Float64Array {
  const { elimination, plan, bases } = space
  const n = plan.nodeCount
  const formed = new Float64Array(heights.length)
  for (let column = 0; column < columns; column += 1) formed.set(applyForm(plan, bases, heights.subarray(column * n, (column + 1) * n)), column * n)
  const correction = expand(elimination, solve(space.factor, reduce(elimination, formed, columns), columns), columns)
  return heights.map((height, i) => height - correction[i])
}

/** -tau T K^-1 T^T h, by one solve: the projection, but that what is no lift is left at tau / lambda of itself. */
export function pulledIn(space: LiftSpace, heights: Float64Array): Float64Array {
  const y = solve(space.factor, reduce(space.elimination, heights))
  for (let i = 0; i < y.length; i += 1) y[i] *= -tau
  return expand(space.elimination, y)
}

/**
 * Lifts that keep the conditions with all their values zero, near to `columns` vectors of heights stored one after another
 * (length nodeCount * columns): the least-squares projection, good to 1e-3 among the lifts (the solve at tau = 1e-13 leaves
 * so much) and flat to (tau / lambda)^2. Where the lift itself must be right, correct by the projection of what is left.
 */
export function projected(space: LiftSpace, heights: Float64Array, columns = 1): Float64Array {
  if (space.dimension === 0) return new Float64Array(heights.length)
  const { elimination } = space
  const y = solve(space.factor, reduce(elimination, heights, columns), columns)
  for (let i = 0; i < y.length; i += 1) y[i] *= -tau
  return flattened(space, expand(elimination, y, columns), columns)
}
