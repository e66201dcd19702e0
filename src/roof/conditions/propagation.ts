/**
 * Propagation of known heights: a panel with three known corners that are not in line is known, hence all its corners,
 * hence perhaps its neighbours; conditions that tie nodes pass heights on likewise. What is reached is the same in every
 * roof that meets the hard conditions, by reasoning that a person can follow panel by panel, and exact: no rank is decided.
 * Breadth first, so that the way to each panel is a shortest one.
 */
import { clashHeight, epsilon, planeSine } from '../../base/geometry/tolerance.ts'
import type { Plan } from '../../plan/plan.ts'
import { anchors, doubleArea } from './anchors.ts'
import { bodiesAt, bodiesOf, type Bodies } from './bodies.ts'
import { rowCount, type Rows } from './rows.ts'

/** A node that would have to lie at two heights. */
export interface Contradiction {
  /** The panel on which they meet, -1 when a condition brings them together. */
  readonly panel: number
  readonly node: number
  /** Height that panel or condition gives the node, and the one that it has, in spans above the datum. */
  readonly given: number
  readonly has: number
  /** |given - has|, in spans. */
  readonly misfit: number
  /** The three or fewer nodes from which `given` follows. */
  readonly support: readonly number[]
  /** Indices of the conditions from which it all follows, ascending. */
  readonly conditions: readonly number[]
}

export interface Propagation {
  /** Step at which each node became known: 0 held, -1 never. */
  readonly nodeStep: Int32Array
  /** Its height in spans above the datum; NaN where it is not known. */
  readonly height: Float64Array
  /** Step at which each panel became known, from 1; -1 never. */
  readonly panelStep: Int32Array
  /** No height is held: heights count from one of the nodes that a condition ties, and only differences are known. */
  readonly relative: boolean
  /** All panels are known: there is one roof, or none, but for its height where `relative`. */
  readonly forced: boolean
  /** Those of the first step that has any: later ones follow from them. */
  readonly contradictions: readonly Contradiction[]
  /** Conditions from which the planes of these panels follow, ascending. */
  conditionsOf(panels: Iterable<number>): number[]
}

/** What follows from the hard rows on this plan. O(corners + entries). */
export function propagation(plan: Plan, rows: Rows): Propagation {
  const bodies = bodiesOf(plan, rows)
  const at = bodiesAt(bodies, plan.nodeCount)
  const nodeStep = new Int32Array(plan.nodeCount).fill(-1)
  const height = new Float64Array(plan.nodeCount).fill(NaN)
  // Bound of the rounding in each height: long chains may magnify it, and no contradiction is claimed within it.
  const rounding = new Float64Array(plan.nodeCount)
  const bodyStep = new Int32Array(bodies.count).fill(-1)
  // Where each known node came from: -2 - condition for a held one, else the body.
  const source = new Int32Array(plan.nodeCount).fill(-1)
  const support = new Int32Array(3 * bodies.count).fill(-1)

  let frontier: number[] = []
  const know = (n: number, value: number, error: number, step: number, from: number): void => {
    nodeStep[n] = step
    height[n] = value
    rounding[n] = error
    source[n] = from
    frontier.push(n)
  }
  for (let r = 0; r < rowCount(rows); r += 1) {
    if (rows.start[r + 1] - rows.start[r] !== 1) continue
    const n = rows.node[rows.start[r]]
    const value = rows.value[r] / rows.weight[rows.start[r]]
    if (nodeStep[n] < 0) know(n, value, epsilon * Math.abs(value), 0, -2 - rows.condition[r])
  }
  const relative = frontier.length === 0
  if (relative) {
    const gauge = largestOffsetBody(bodies, plan.panelCount)
    if (gauge >= 0) know(bodies.node[bodies.start[gauge]], 0, 0, 0, -2 - bodies.condition[gauge])
  }

  const contradictions: Contradiction[] = []
  const on = { value: 0, error: 0 }
  for (let step = 1; frontier.length > 0; step += 1) {
    const ready: number[] = []
    frontier.sort((a, b) => a - b)
    for (const n of frontier) {
      for (let i = at.start[n]; i < at.start[n + 1]; i += 1) {
        const b = at.body[i]
        if (bodyStep[b] >= 0 || !settles(plan, bodies, b, n, support)) continue
        bodyStep[b] = step
        ready.push(b)
      }
    }
    frontier = []
    const first = contradictions.length === 0
    for (const b of ready) {
      const known = nodesKnown(bodies, b, nodeStep, step)
      const basis = basisOf(plan, bodies, b, known, support)
      for (let i = bodies.start[b]; i < bodies.start[b + 1]; i += 1) {
        const n = bodies.node[i]
        heightOn(plan, bodies, i, basis, height, rounding, on)
        const { value, error } = on
        if (nodeStep[n] < 0) know(n, value, error, step, b)
        else if (first && Math.abs(value - height[n]) > Math.max(clashHeight, 100 * (error + rounding[n]))) {
          contradictions.push({
            panel: b < plan.panelCount ? b : -1,
            node: n,
            given: value,
            has: height[n],
            misfit: Math.abs(value - height[n]),
            support: basis.map((entry) => bodies.node[entry]),
            conditions: conditionsBehind([b], [n]),
          })
        }
      }
    }
  }

  /** Walks back from bodies and nodes to the conditions that hold or tie. */
  function conditionsBehind(fromBodies: readonly number[], fromNodes: readonly number[]): number[] {
    const conditions = new Set<number>()
    const seenBody = new Set<number>(fromBodies)
    const seenNode = new Set<number>(fromNodes)
    const openBodies = [...fromBodies]
    const openNodes = [...fromNodes]
    for (;;) {
      const b = openBodies.pop()
      if (b !== undefined) {
        if (bodies.condition[b] >= 0) conditions.add(bodies.condition[b])
        for (let i = 3 * b; i < 3 * b + 3; i += 1) {
          const n = support[i]
          if (n >= 0 && !seenNode.has(n)) {
            seenNode.add(n)
            openNodes.push(n)
          }
        }
        continue
      }
      const n = openNodes.pop()
      if (n === undefined) return [...conditions].sort((p, q) => p - q)
      if (source[n] <= -2) conditions.add(-2 - source[n])
      else if (source[n] >= 0 && !seenBody.has(source[n])) {
        seenBody.add(source[n])
        openBodies.push(source[n])
      }
    }
  }

  const panelStep = bodyStep.slice(0, plan.panelCount)
  return {
    nodeStep, height, panelStep, relative, contradictions,
    forced: panelStep.every((step) => step >= 0),
    conditionsOf: (panels) => conditionsBehind([...panels].filter((p) => panelStep[p] >= 0), []),
  }
}

/** The condition body of dim 1 with the most nodes, the first of them in a tie; -1: none. */
function largestOffsetBody(bodies: Bodies, from: number): number {
  let best = -1
  let most = 0
  for (let b = from; b < bodies.count; b += 1) {
    const size = bodies.start[b + 1] - bodies.start[b]
    if (bodies.dim[b] === 1 && size > most) {
      most = size
      best = b
    }
  }
  return best
}

/**
 * Whether body b is settled now that its node n is known. Keeps in `support` the two known nodes that lie farthest apart
 * so far as seen from the first: a third one beside their line settles a plane.
 */
function settles(plan: Plan, bodies: Bodies, b: number, n: number, support: Int32Array): boolean {
  const [first, second] = [support[3 * b], support[3 * b + 1]]
  if (first < 0) {
    support[3 * b] = n
    return bodies.dim[b] === 1
  }
  if (bodies.dim[b] === 2) return Math.abs(alongOf(bodies, b, n) - alongOf(bodies, b, first)) > planeSine
  if (second < 0) {
    support[3 * b + 1] = n
    return false
  }
  const reach = squaredDistance(plan, first, n)
  const apart = squaredDistance(plan, first, second)
  const longest = Math.max(reach, apart, squaredDistance(plan, second, n))
  if (Math.abs(doubleArea(plan, first, second, n)) > planeSine * longest) return true
  if (reach > apart) support[3 * b + 1] = n
  return false
}

function squaredDistance({ work }: Plan, a: number, b: number): number {
  return (work[2 * a] - work[2 * b]) ** 2 + (work[2 * a + 1] - work[2 * b + 1]) ** 2
}

function alongOf(bodies: Bodies, b: number, n: number): number {
  for (let i = bodies.start[b]; i < bodies.start[b + 1]; i += 1) if (bodies.node[i] === n) return bodies.t[i]
  return 0
}

/** Entries of the body whose nodes were known before this step. */
function nodesKnown(bodies: Bodies, b: number, nodeStep: Int32Array, step: number): number[] {
  const known: number[] = []
  for (let i = bodies.start[b]; i < bodies.start[b + 1]; i += 1) {
    const at = nodeStep[bodies.node[i]]
    if (at >= 0 && at < step) known.push(i)
  }
  return known
}

/** The known entries, one per dim, that lie best apart; their nodes are written to `support`. */
function basisOf(plan: Plan, bodies: Bodies, b: number, known: readonly number[], support: Int32Array): readonly number[] {
  let basis: readonly number[]
  if (known.length === bodies.dim[b]) basis = known
  else if (bodies.dim[b] === 1) basis = [known[0]]
  else if (bodies.dim[b] === 2) {
    const sorted = [...known].sort((i, j) => bodies.t[i] - bodies.t[j])
    basis = [sorted[0], sorted[sorted.length - 1]]
  } else {
    const nodes = anchors(plan, Int32Array.from(known, (i) => bodies.node[i]))
    basis = nodes.map((n) => known.find((i) => bodies.node[i] === n) ?? known[0])
  }
  for (let k = 0; k < 3; k += 1) support[3 * b + k] = k < basis.length ? bodies.node[basis[k]] : -1
  return basis
}

/** The height of entry i's node by the basis, and a bound of its rounding, into `out`. */
function heightOn(
  plan: Plan, bodies: Bodies, i: number, basis: readonly number[], height: Float64Array, rounding: Float64Array, out: { value: number; error: number },
): void {
  const [a, b, c] = basis
  out.value = 0
  out.error = 0
  if (b === undefined) {
    const step = bodies.offset[i] - bodies.offset[a]
    out.value = step
    out.error = epsilon * Math.abs(step)
    take(out, 1, 1, height[bodies.node[a]], rounding[bodies.node[a]])
  } else if (c === undefined) {
    const t = (bodies.t[i] - bodies.t[a]) / (bodies.t[b] - bodies.t[a])
    take(out, 1 - t, 1, height[bodies.node[a]], rounding[bodies.node[a]])
    take(out, t, 1, height[bodies.node[b]], rounding[bodies.node[b]])
  } else {
    const [p, q, r, n] = [bodies.node[a], bodies.node[b], bodies.node[c], bodies.node[i]]
    const whole = doubleArea(plan, p, q, r)
    const sharpness = Math.max(1, squaredDistance(plan, p, q) / Math.abs(whole))
    const u = doubleArea(plan, q, r, n) / whole
    const v = doubleArea(plan, r, p, n) / whole
    // The heights less their offsets lie in one plane.
    out.value = bodies.offset[i]
    out.error = epsilon * Math.abs(out.value)
    take(out, u, sharpness, height[p] - bodies.offset[a], rounding[p])
    take(out, v, sharpness, height[q] - bodies.offset[b], rounding[q])
    take(out, 1 - u - v, sharpness, height[r] - bodies.offset[c], rounding[r])
  }
}

/** Adds a share of a height: its own bound, and a few roundings in the share, the more the flatter the triangle. */
function take(out: { value: number; error: number }, share: number, sharpness: number, height: number, rounding: number): void {
  out.value += share * height
  out.error += Math.abs(share) * rounding + 8 * epsilon * Math.max(Math.abs(share), sharpness) * Math.abs(height)
}
