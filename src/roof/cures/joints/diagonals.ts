/**
 * The cure "add diagonals": a few panels divided so that the roof can be raised as asked. Candidates come from the roof that
 * breaks the fewest panels (`diagonals-sparse.ts`); the shortest head of that list which frees a roof towards the asked rise is
 * taken, then every diagonal dropped that is not needed: folds c_d of the lifts gained are linear in the lift, so those that
 * can be 0 while the rise stays are found in one small dense elimination, without another factor. Never called fewest: that
 * question is combinatorial.
 */
import { tau } from '../../../base/geometry/tolerance.ts'
import { gaussians } from '../../../base/random.ts'
import { dot } from '../../../base/dot.ts'
import { factor, refactor, type Factor } from '../../../base/sparse/factor.ts'
import { inertia } from '../../../base/sparse/inertia.ts'
import { solve } from '../../../base/sparse/solve.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'
import { expand, projected, reduce, type LiftSpace } from '../../stress/lift-space.ts'
import { applyForm } from '../../stress/panel-bases.ts'
import { dividedForm, type DividedForm, type PanelWeight } from './diagonals-form.ts'
import { crossing, diagonalsOf, divisiblePanels, type Diagonal } from './diagonals-panels.ts'
import { sparseFolds } from './diagonals-sparse.ts'

export interface AddedDiagonals {
  readonly diagonals: readonly Diagonal[]
}

export interface DiagonalQuestion {
  readonly space: LiftSpace
  /** A roof under the conditions; null: there is none, and diagonals have to make one. */
  readonly start: Float64Array | null
  /** Heights to come near to (length nodeCount). */
  readonly wish: Float64Array
  /** The roof hangs: diagonals run so that they are valleys. */
  readonly down: boolean
}

/** Diagonals are a cure when they are few: at most so many, or so many of the panels. */
const leastDiagonals = 8
const mostShare = 0.25
/** So many times as many are tried together, most of which are then not needed. */
const mostTried = 4
/** A wish that leaves less than this share of itself beyond the lifts asks for no diagonals. */
const leastPull = 1e-6
/** Cosine between what the wish asks and what the diagonals give below which they do not serve it: one corner folded off costs next to nothing. */
const leastServed = 0.5
/** Lifts gained that are looked at together. */
const mostGained = 48
/** Of the largest fold: below this a diagonal is not used by a lift. */
const unused = 1e-6

/** Diagonals that free a roof towards the wish; null: none do. */
export function* addedDiagonals(question: DiagonalQuestion): Steps<AddedDiagonals | null> {
  const { space, start, wish, down } = question
  const { plan, bases } = space
  const panels = divisiblePanels(plan, bases)
  if (panels.length === 0) return null
  const form = dividedForm(space, panels, (heights) => applyForm(plan, bases, heights))
  const pull = start === null ? null : beyondLifts(space, start, wish)
  if (start !== null && pull === null) return null
  const most = Math.max(leastDiagonals, Math.floor(mostShare * plan.panelCount))
  const sparse = yield* sparseFolds(space, form, pull, most)
  if (sparse === null) return null
  const ranked = ranking(form, sparse.folds)
  if (ranked.length === 0) return null
  const trial = trialOf(space, form, pull)
  let taken: Chosen | null = null
  for (let count = 1; ; count = Math.min(2 * count, ranked.length)) {
    yield { stage: 'Trying diagonals', done: Math.min(1, count / ranked.length) }
    const set = withoutCrossings(form, ranked.slice(0, count))
    taken = yield* trial(set)
    if (taken !== null || count === ranked.length || count > mostTried * most) break
  }
  if (taken === null) return null
  return taken.set.length > most ? null : { diagonals: turned(plan, form, taken, down) }
}

/** t'' = wish less its nearest lift, in the heights that the conditions leave; null: nothing is left of it. */
function beyondLifts(space: LiftSpace, start: Float64Array, wish: Float64Array): Float64Array | null {
  const { elimination } = space
  const asked = wish.map((height, n) => height - start[n])
  let left = asked.slice()
  for (let pass = 0; pass < 3; pass += 1) {
    const lift = projected(space, left)
    left = left.map((height, n) => height - lift[n])
  }
  const size = Math.sqrt(dot(asked, asked))
  const reduced = reduce(elimination, left)
  return Math.sqrt(dot(reduced, reduced)) > leastPull * size ? left : null
}

interface Candidate {
  readonly place: number
  readonly which: number
  readonly fold: number
}

/** Diagonals by fold, largest first; ties by place, so that the same plan gives the same list. */
function ranking(form: DividedForm, folds: readonly Float64Array[]): Candidate[] {
  const list: Candidate[] = []
  form.panels.forEach((_, place) => folds[place].forEach((fold, which) => {
    if (fold > 0) list.push({ place, which, fold })
  }))
  return list.sort((a, b) => b.fold - a.fold || a.place - b.place || a.which - b.which)
}

function withoutCrossings(form: DividedForm, list: readonly Candidate[]): Candidate[] {
  const kept: Candidate[] = []
  const inPanel = new Map<number, Diagonal[]>()
  for (const each of list) {
    const diagonal = form.panels[each.place].diagonals[each.which]
    const others = inPanel.get(each.place) ?? []
    if (others.some((other) => crossing(diagonal, other))) continue
    inPanel.set(each.place, [...others, diagonal])
    kept.push(each)
  }
  return kept
}

interface Chosen {
  readonly set: readonly Candidate[]
  /** A roof, or a change of one, that uses all of them and rises (length nodeCount). */
  readonly heights: Float64Array
}

/** Whether a set of diagonals serves, and what of it is needed. */
function trialOf(space: LiftSpace, form: DividedForm, pull: Float64Array | null): (set: readonly Candidate[]) => Steps<Chosen | null> {
  const { elimination, analysis, plan } = space
  const n = plan.nodeCount
  let factored: Factor | null = null
  return function* (set) {
    const weight = weightOf(form, set)
    const values = form.values(weight, -tau)
    if (factored === null) factored = yield* factor(analysis, values)
    else yield* refactor(factored, values)
    const found = factored
    const { negative, zero } = inertia(found)
    const gained = negative + zero - space.dimension
    const back = (heights: Float64Array, columns: number): Float64Array => expand(elimination, solve(found, reduce(elimination, heights, columns), columns), columns)
    const flat = (heights: Float64Array, columns: number): Float64Array => {
      const formed = new Float64Array(heights.length)
      for (let c = 0; c < columns; c += 1) formed.set(form.apply(weight, heights.subarray(c * n, (c + 1) * n)), c * n)
      const off = back(formed, columns)
      return heights.map((height, i) => height - off[i])
    }
    /** Heights to the nearest lift of the divided plan. */
    const lifted = (heights: Float64Array, columns: number): Float64Array => flat(flat(back(heights, columns).map((value) => -tau * value), columns), columns)
    const foldsOf = (heights: Float64Array): Float64Array => foldsAlong(form, set, heights)

    if (pull === null) {
      let roof = flat(elimination.particular, 1)
      for (let pass = 0; pass < 3; pass += 1) roof = flat(roof, 1)
      if (!isFlat(form, weight, roof)) return null
      const probes = gained > 0 ? lifted(gaussians(n * Math.min(gained, mostGained), 41), Math.min(gained, mostGained)) : new Float64Array(0)
      return neededForOne(set, roof, probes, n, foldsOf)
    }
    if (gained <= 0) return null
    const towards = lifted(pull, 1)
    const served = Math.sqrt(Math.max(0, dot(towards, pull)) / dot(pull, pull))
    if (!(served > leastServed)) return null
    const columns = Math.min(gained, mostGained) - 1
    // What the lifts that were there already have of them is left out: it folds no diagonal.
    const fresh = (heights: Float64Array, count: number): Float64Array => {
      const old = projected(space, heights, count)
      return heights.map((height, i) => height - old[i])
    }
    const probes = columns > 0 ? fresh(lifted(gaussians(n * columns, 41), columns), columns) : new Float64Array(0)
    return neededToServe(set, [fresh(towards, 1), ...Array.from({ length: columns }, (_, k) => probes.slice(k * n, (k + 1) * n))], foldsOf, pull)
  }
}

/** W of a panel with the chosen diagonals: the projector on what they do not allow. */
function weightOf(form: DividedForm, set: readonly Candidate[]): PanelWeight {
  const weights = new Map<number, Float64Array>()
  for (const { place, which } of set) {
    const { allowed, corners } = form.panels[place]
    const m = corners - 3
    let w = weights.get(place)
    if (w === undefined) {
      w = new Float64Array(m * m)
      for (let i = 0; i < m; i += 1) w[i * m + i] = 1
      weights.set(place, w)
    }
    // W <- W - u u^T, u = W v over its length: Gram-Schmidt on projectors.
    const u = new Float64Array(m)
    for (let i = 0; i < m; i += 1) for (let j = 0; j < m; j += 1) u[i] += w[i * m + j] * allowed[which * m + j]
    const size = Math.hypot(...u)
    if (size < 1e-9) continue
    for (let i = 0; i < m; i += 1) for (let j = 0; j < m; j += 1) w[i * m + j] -= (u[i] / size) * (u[j] / size)
  }
  return (place) => weights.get(place) ?? null
}

/** Fold along each diagonal of the set: c with N^T h = V c in its panel, least squares where it has several. */
function foldsAlong(form: DividedForm, set: readonly Candidate[], heights: Float64Array): Float64Array {
  const inPanel = new Map<number, number[]>()
  set.forEach(({ place }, k) => inPanel.set(place, [...(inPanel.get(place) ?? []), k]))
  const out = new Float64Array(set.length)
  for (const [place, members] of inPanel) {
    const m = form.panels[place].corners - 3
    const left = form.misfit(place, heights)
    const vectors = members.map((k) => form.panels[place].allowed.subarray(set[k].which * m, (set[k].which + 1) * m))
    // Few and well apart: Gram-Schmidt from the last backwards gives each coefficient.
    const basis: Float64Array[] = []
    const factors: number[][] = []
    for (const v of vectors) {
      const q = v.slice()
      const row: number[] = []
      for (const other of basis) {
        const share = dot(other, q)
        row.push(share)
        for (let i = 0; i < m; i += 1) q[i] -= share * other[i]
      }
      const size = Math.sqrt(dot(q, q))
      row.push(size)
      basis.push(size > 1e-12 ? q.map((value) => value / size) : q)
      factors.push(row)
    }
    const c = basis.map((q) => dot(q, left))
    for (let k = members.length - 1; k >= 0; k -= 1) {
      let value = c[k]
      for (let l = k + 1; l < members.length; l += 1) value -= factors[l][k] * out[members[l]]
      out[members[k]] = factors[k][k] > 1e-12 ? value / factors[k][k] : 0
    }
  }
  return out
}

function isFlat(form: DividedForm, weight: PanelWeight, heights: Float64Array): boolean {
  const off = dot(heights, form.apply(weight, heights))
  const mean = heights.reduce((sum, height) => sum + height, 0) / heights.length
  const size = heights.reduce((sum, height) => sum + (height - mean) ** 2, 0)
  return off <= tau * size + heights.length * 1e-18
}

/**
 * What is needed of the set so that the lifts gained still serve the wish: over an orthonormal basis u of them a fold is a row
 * c_s . a, and making it 0 takes the direction c_s away from what is left of the pull, p = (pull . u). Smallest folds first,
 * each stays 0 as long as |p| keeps the share asked. The roof is then sum p_k u_k, the best that is left.
 */
function neededToServe(set: readonly Candidate[], lifts: readonly Float64Array[], foldsOf: (heights: Float64Array) => Float64Array, pull: Float64Array): Chosen | null {
  const basis = orthonormal(lifts)
  const folds = basis.map(foldsOf)
  const least = leastServed * Math.sqrt(dot(pull, pull))
  let p = Float64Array.from(basis, (u) => dot(pull, u))
  if (!(Math.sqrt(dot(p, p)) > least)) return null
  const scale = Math.max(...folds.map((list) => list.reduce((most, c) => Math.max(most, Math.abs(c)), 0)))
  const gone: Float64Array[] = []
  for (const s of set.map((_, k) => k).sort((a, b) => set[a].fold - set[b].fold || b - a)) {
    const row = lessAll(Float64Array.from(folds, (list) => list[s]), gone)
    const size = Math.sqrt(dot(row, row))
    if (!(size > unused * scale)) continue
    const direction = row.map((value) => value / size)
    const share = dot(p, direction)
    const left = p.map((value, k) => value - share * direction[k])
    if (!(Math.sqrt(dot(left, left)) > least)) continue
    p = left
    gone.push(direction)
  }
  const heights = new Float64Array(pull.length)
  basis.forEach((u, k) => u.forEach((value, i) => (heights[i] += p[k] * value)))
  return { set: used(set, foldsOf(heights)), heights }
}

function used(set: readonly Candidate[], folds: Float64Array): Candidate[] {
  const largest = folds.reduce((most, c) => Math.max(most, Math.abs(c)), 0)
  return set.filter((_, s) => Math.abs(folds[s]) > unused * largest)
}

/** The vector less its parts along orthonormal ones, twice. */
function lessAll(vector: Float64Array, directions: readonly Float64Array[]): Float64Array {
  const left = vector.slice()
  for (let pass = 0; pass < 2; pass += 1) {
    for (const direction of directions) {
      const share = dot(left, direction)
      for (let k = 0; k < left.length; k += 1) left[k] -= share * direction[k]
    }
  }
  return left
}

function orthonormal(vectors: readonly Float64Array[]): Float64Array[] {
  const basis: Float64Array[] = []
  for (const vector of vectors) {
    const before = Math.sqrt(dot(vector, vector))
    const left = lessAll(vector, basis)
    const size = Math.sqrt(dot(left, left))
    if (size > unused * before) basis.push(left.map((value) => value / size))
  }
  return basis
}

/**
 * What is needed of the set so that there is a roof at all: over roofs base + sum a_k probe_k one fold after another, smallest
 * first, is made 0 where that leaves a roof. Gauss on the small system A a = r, a row a fold that is 0.
 */
function neededForOne(set: readonly Candidate[], base: Float64Array, probes: Float64Array, n: number, foldsOf: (heights: Float64Array) => Float64Array): Chosen {
  const g = probes.length / n
  const column = (k: number): Float64Array => probes.subarray(k * n, (k + 1) * n)
  const foldBase = foldsOf(base)
  const foldProbe = Array.from({ length: g }, (_, k) => foldsOf(column(k)))
  const rows: { a: Float64Array; r: number; pivot: number }[] = []
  const scale = Math.max(...foldBase.map(Math.abs))
  for (const s of set.map((_, k) => k).sort((a, b) => set[a].fold - set[b].fold || b - a)) {
    const size = Math.max(...foldProbe.map((list) => Math.abs(list[s])), Math.abs(foldBase[s]), unused * scale)
    const left = Float64Array.from(foldProbe, (list) => list[s] / size)
    let right = -foldBase[s] / size
    for (const row of rows) {
      const f = left[row.pivot]
      if (f === 0) continue
      for (let k = 0; k < g; k += 1) left[k] -= f * row.a[k]
      right -= f * row.r
    }
    const pivot = left.reduce((best, value, k) => (Math.abs(value) > Math.max(unused, best < 0 ? 0 : Math.abs(left[best])) ? k : best), -1)
    // No roof is left that does without this one, or it is 0 already.
    if (pivot < 0) continue
    const by = left[pivot]
    const fresh = { a: left.map((value) => value / by), r: right / by, pivot }
    for (const row of rows) {
      const f = row.a[pivot]
      if (f === 0) continue
      row.a.forEach((_, k) => (row.a[k] -= f * fresh.a[k]))
      row.r -= f * fresh.r
    }
    rows.push(fresh)
  }
  const heights = base.slice()
  // Free unknowns at 0; each row then reads a_pivot = r.
  for (const { r, pivot } of rows) column(pivot).forEach((value, i) => (heights[i] += r * value))
  return { set: used(set, foldsOf(heights)), heights }
}

/** Of the two diagonals of a quad the one that is a ridge (a valley where the roof hangs): no water is kept back by it. */
function turned(plan: Plan, form: DividedForm, { set, heights }: Chosen, down: boolean): Diagonal[] {
  return set.map(({ place, which }) => {
    const { panel, corners, diagonals } = form.panels[place]
    const both = corners === 4 ? diagonalsOf(plan, panel) : []
    if (both.length < 2) return diagonals[which]
    const [first, second] = both
    const z = (c: number): number => heights[plan.corner[plan.panelStart[panel] + c]]
    const higher = crossingHeight(plan, first, second, z) >= crossingHeight(plan, second, first, z)
    return higher !== down ? first : second
  }).sort((a, b) => a.panel - b.panel || a.from - b.from)
}

/** Height of `along` where `across` crosses it. */
function crossingHeight(plan: Plan, along: Diagonal, across: Diagonal, z: (corner: number) => number): number {
  const at = (c: number): readonly [number, number] => {
    const n = plan.corner[plan.panelStart[along.panel] + c]
    return [plan.work[2 * n], plan.work[2 * n + 1]]
  }
  const [ax, ay] = at(along.from), [bx, by] = at(along.to), [cx, cy] = at(across.from), [dx, dy] = at(across.to)
  const side = (x: number, y: number): number => (dx - cx) * (y - cy) - (dy - cy) * (x - cx)
  const t = side(ax, ay) / (side(ax, ay) - side(bx, by))
  return z(along.from) + t * (z(along.to) - z(along.from))
}
