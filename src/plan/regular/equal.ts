/**
 * Equal bays: stretches of runs whose nodes lie at even distances, or nearly. Looked for among all nodes of a run, then among
 * those from which an edge leaves on one side: stems of a bond meet a run from above and from below at paces of their own.
 */
import { bayShare, nearlyStraight } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import { leavingEdges, type Runs } from '../runs.ts'
import type { Plan } from '../plan.ts'

/** Group g has the nodes node[start[g] .. start[g + 1]) in order, four or more: three bays. */
export interface EqualBays {
  readonly start: Int32Array
  readonly node: Int32Array
  /** Per entry of `node`: 0 where the node slipped and has no say in the others' places. */
  readonly weight: Uint8Array
  /** Run that each group lies on. */
  readonly run: Int32Array
  /** How far off even places the worst node of each group lies .. */
  readonly off: Float64Array
  /** .. and by how much its longest and shortest bay differ; in the unit of the coordinates. */
  readonly differ: Float64Array
}

/** Fewest bays that are called equal: two are by chance. */
const fewestBays = 3

/** Runs between two yields. */
const runsPerStep = 500

/**
 * Groups of nearly equal bays, exact ones included, along the runs that are nearly straight (`isStraight`, per run). `at`:
 * coordinates of the nodes, x0 y0 x1 y1 .., in whose unit all lengths are; `silent`: what is no misfit.
 */
export function* equalBays(plan: Plan, at: Float64Array, runs: Runs, isStraight: Uint8Array, tolerance: number, silent: number): Steps<EqualBays> {
  const start = [0]
  const node: number[] = [], run: number[] = []
  const sides = sidesOf(plan, at, runs)
  for (let r = 0; r < isStraight.length; r += 1) {
    if (r % runsPerStep === 0) yield { stage: 'Looking for equal bays', done: r / isStraight.length }
    if (isStraight[r] === 0) continue
    const whole = runs.node.subarray(runs.start[r], runs.start[r + 1])
    const groupOf = new Map<number, number>()
    const note = (from: Int32Array, a: number, b: number): void => {
      for (let k = a; k <= b; k += 1) node.push(from[k])
      start.push(node.length)
      run.push(r)
    }
    const isPartOf = (from: Int32Array, a: number, b: number): boolean => {
      const group = groupOf.get(from[a])
      if (group === undefined) return false
      for (let k = a; k <= b; k += 1) if (groupOf.get(from[k]) !== group) return false
      return true
    }
    for (const [a, b] of stretches(at, whole, tolerance, silent)) {
      for (let k = a; k <= b; k += 1) groupOf.set(whole[k], run.length)
      note(whole, a, b)
    }
    for (const side of [1, 2]) {
      const some = whole.filter((_, k) => (sides[runs.start[r] + k] & side) !== 0)
      if (some.length === whole.length) continue
      for (const [a, b] of stretches(at, some, tolerance, silent)) if (!isPartOf(some, a, b)) note(some, a, b)
    }
  }
  const groups = { start: Int32Array.from(start), node: Int32Array.from(node), weight: new Uint8Array(node.length).fill(1), run: Int32Array.from(run) }
  const off = new Float64Array(run.length), differ = new Float64Array(run.length)
  for (let g = 0; g < run.length; g += 1) {
    off[g] = farthestOff(at, { ...groups, off, differ }, g)
    if (off[g] > silent && weigh(at, { ...groups, off, differ }, g, silent)) off[g] = farthestOff(at, { ...groups, off, differ }, g)
    let least = Infinity, most = 0
    for (let k = start[g]; k + 1 < start[g + 1]; k += 1) {
      const bay = Math.hypot(at[2 * node[k + 1]] - at[2 * node[k]], at[2 * node[k + 1] + 1] - at[2 * node[k] + 1])
      least = Math.min(least, bay)
      most = Math.max(most, bay)
    }
    differ[g] = most - least
  }
  return { ...groups, off, differ }
}

/** Per entry of the runs: 1 when an edge leaves to the left of the run, 2 to the right, 3 both. */
function sidesOf(plan: Plan, at: Float64Array, { start, node }: Runs): Uint8Array {
  const { first, leaving } = leavingEdges(plan)
  const sides = new Uint8Array(node.length)
  for (let r = 0; r + 1 < start.length; r += 1) {
    for (let k = start[r]; k < start[r + 1]; k += 1) {
      const n = node[k]
      const before = k > start[r] ? node[k - 1] : -1, after = k + 1 < start[r + 1] ? node[k + 1] : -1
      const a = before < 0 ? n : before, b = after < 0 ? n : after
      const ux = at[2 * b] - at[2 * a], uy = at[2 * b + 1] - at[2 * a + 1]
      for (let i = first[n]; i < first[n + 1]; i += 1) {
        const m = plan.origin[leaving[i] ^ 1]
        if (m === before || m === after) continue
        sides[k] |= ux * (at[2 * m + 1] - at[2 * n + 1]) - uy * (at[2 * m] - at[2 * n]) > 0 ? 1 : 2
      }
    }
  }
  return sides
}

/** First and last of the nodes of each stretch of nearly equal bays. */
function stretches(at: Float64Array, node: Int32Array, tolerance: number, silent: number): [from: number, to: number][] {
  const bay = Float64Array.from({ length: Math.max(0, node.length - 1) }, (_, k) =>
    Math.hypot(at[2 * node[k + 1]] - at[2 * node[k]], at[2 * node[k + 1] + 1] - at[2 * node[k] + 1]))
  const found: [number, number][] = []
  for (let from = 0; from + fewestBays <= bay.length;) {
    let least = bay[from], most = bay[from], to = from + 1
    for (; to < bay.length; to += 1) {
      const low = Math.min(least, bay[to]), high = Math.max(most, bay[to])
      if (high - low > Math.min(nearlyStraight * tolerance, bayShare * low)) break
      least = low
      most = high
    }
    if (to - from >= fewestBays && !(most - least > silent && grows(bay.subarray(from, to)))) found.push([from, to])
    from = to - from >= fewestBays ? to : from + 1
  }
  return found
}

/** Whether every bay of four or more is longer than the one before, or every one shorter, by about as much: a pace that changes is meant. */
function grows(bay: Float64Array): boolean {
  if (bay.length < 4) return false
  let least = Infinity, most = -Infinity
  for (let k = 0; k + 1 < bay.length; k += 1) {
    least = Math.min(least, bay[k + 1] - bay[k])
    most = Math.max(most, bay[k + 1] - bay[k])
  }
  return least * most > 0 && Math.max(Math.abs(least), Math.abs(most)) <= evenGrowth * Math.min(Math.abs(least), Math.abs(most))
}

const evenGrowth = 3

export interface Evenly {
  /** Direction from the first node to the last .. */
  readonly ux: number
  readonly uy: number
  /** .. and the place of node k along it, first + k bay. */
  readonly first: number
  readonly bay: number
}

/** Even places nearest to a group's nodes, by least squares over those that have weight. */
export function evenly(at: Float64Array, { start, node, weight }: EqualBays, g: number): Evenly {
  const from = start[g], to = start[g + 1]
  const a = node[from], b = node[to - 1]
  const length = Math.hypot(at[2 * b] - at[2 * a], at[2 * b + 1] - at[2 * a + 1])
  const ux = (at[2 * b] - at[2 * a]) / length, uy = (at[2 * b + 1] - at[2 * a + 1]) / length
  const origin = ux * at[2 * a] + uy * at[2 * a + 1]
  let w = 0, k1 = 0, s1 = 0
  for (let k = from; k < to; k += 1) {
    w += weight[k]
    k1 += weight[k] * (k - from)
    s1 += weight[k] * (ux * at[2 * node[k]] + uy * at[2 * node[k] + 1] - origin)
  }
  let kk = 0, ks = 0
  for (let k = from; k < to; k += 1) {
    const off = k - from - k1 / w
    kk += weight[k] * off * off
    ks += weight[k] * off * (ux * at[2 * node[k]] + uy * at[2 * node[k] + 1] - origin)
  }
  const bay = ks / kk
  return { ux, uy, first: origin + (s1 - bay * k1) / w, bay }
}

/** Nodes of a group that are off their even places by more than `silent`. */
export function evenNodesOff(at: Float64Array, groups: EqualBays, g: number, silent: number): number[] {
  const { ux, uy, first, bay } = evenly(at, groups, g)
  const from = groups.start[g]
  return Array.from(groups.node.subarray(from, groups.start[g + 1])).filter((n, k) => Math.abs(ux * at[2 * n] + uy * at[2 * n + 1] - first - k * bay) > silent)
}

function farthestOff(at: Float64Array, groups: EqualBays, g: number): number {
  const { ux, uy, first, bay } = evenly(at, groups, g)
  let most = 0
  for (let k = groups.start[g]; k < groups.start[g + 1]; k += 1) {
    const n = groups.node[k]
    most = Math.max(most, Math.abs(ux * at[2 * n] + uy * at[2 * n + 1] - first - (k - groups.start[g]) * bay))
  }
  return most
}

/**
 * Gives the nodes of a group the weight 0 that are off the even places at which at least three others, and more than half,
 * lie as exactly as coordinates are written. True when there are such places. Paces of up to `mostTried` nodes are tried.
 */
function weigh(at: Float64Array, { start, node, weight }: EqualBays, g: number, silent: number): boolean {
  const from = start[g], count = start[g + 1] - from
  const a = node[from], b = node[start[g + 1] - 1]
  const length = Math.hypot(at[2 * b] - at[2 * a], at[2 * b + 1] - at[2 * a + 1])
  const ux = (at[2 * b] - at[2 * a]) / length, uy = (at[2 * b + 1] - at[2 * a + 1]) / length
  const place = Float64Array.from({ length: count }, (_, k) => ux * at[2 * node[from + k]] + uy * at[2 * node[from + k] + 1])
  const stride = Math.ceil(count / mostTried)
  let most = Math.max(2, Math.floor(count / 2))
  let best: [number, number] | null = null
  for (let i = 0; i < count; i += stride) {
    for (let j = i + stride; j < count; j += stride) {
      const bay = (place[j] - place[i]) / (j - i)
      let on = 0
      for (let k = 0; k < count; k += 1) if (Math.abs(place[k] - place[i] - (k - i) * bay) <= silent) on += 1
      if (on > most) [best, most] = [[i, j], on]
    }
  }
  if (best === null) return false
  const [i, j] = best
  const bay = (place[j] - place[i]) / (j - i)
  for (let k = 0; k < count; k += 1) weight[from + k] = Math.abs(place[k] - place[i] - (k - i) * bay) <= silent ? 1 : 0
  return true
}

const mostTried = 16
