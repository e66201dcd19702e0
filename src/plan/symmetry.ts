/**
 * Lines in which a plan is its own mirror image, or nearly. Every such line passes through the mean of the nodes, and maps a
 * node onto one that lies as far from it: one node whose distance few others share gives few lines to try. Each that fits
 * roughly is fitted to its pairs by least squares and tried again strictly, with edges and panels.
 *
 * Tried and dropped: axes of inertia as the only lines (a square has four), and all pairs of a distance (1,000 rim nodes of
 * a round roof make half a million).
 */
import type { Steps } from '../base/steps.ts'
import { NearPoints } from '../base/geometry/near-points.ts'
import type { Plan } from './plan.ts'

export interface MirrorLine {
  /** A point of the line, in the plan's coordinates .. */
  readonly point: readonly [x: number, y: number]
  /** .. and its direction, a unit vector with x > 0, or x = 0 and y = 1. */
  readonly direction: readonly [x: number, y: number]
  /** Node that each node is mirrored onto; nodes on the line are their own. */
  readonly image: Int32Array
  /** The largest distance of a mirrored node from its image, in the plan's unit: making them meet moves each half as far. */
  readonly misfit: number
}

/** Distance, in tolerances, within which images are looked for first: the line through the mean and one pair is that rough. */
const roughly = 8

/** The node that lines are tried with lies at least this share of the farthest node's distance from the mean, so that it gives their direction. */
const farShare = 0.5

/** Nodes between two yields. */
const nodesPerStep = 20_000

/** All mirror lines whose misfit is at most `tolerance` (plan's unit), by the angle of their direction from -90 to 90 degrees. */
export function* mirrorLines(plan: Plan, tolerance: number): Steps<MirrorLine[]> {
  const { work, nodeCount, frame } = plan
  const within = Math.max(tolerance / frame.span, 1e-12)
  let cx = 0, cy = 0
  for (let n = 0; n < nodeCount; n += 1) {
    cx += work[2 * n] / nodeCount
    cy += work[2 * n + 1] / nodeCount
  }
  const from = Float64Array.from({ length: nodeCount }, (_, n) => Math.hypot(work[2 * n] - cx, work[2 * n + 1] - cy))
  const order = Int32Array.from(from.keys()).sort((m, n) => from[n] - from[m] || m - n)
  yield { stage: 'Looking for symmetry', done: 0 }
  const peers = fewestPeers(order, from, 3 * within)
  const near = new NearPoints(roughly * within, nodeCount)
  for (let n = 0; n < nodeCount; n += 1) near.add(work[2 * n], work[2 * n + 1])
  let edges: EdgeOfEnds | null = null
  const first = peers[0]
  const found = new Map<number, MirrorLine>()
  for (const [k, peer] of peers.entries()) {
    yield { stage: 'Looking for symmetry', done: k / peers.length }
    // The line through the mean that halves the angle between the two nodes.
    const twice = Math.atan2(work[2 * first + 1] - cy, work[2 * first] - cx) + Math.atan2(work[2 * peer + 1] - cy, work[2 * peer] - cx)
    const rough = yield* images(work, near, order, { cx, cy, twice }, roughly * within, false)
    if (rough === null) continue
    const line = fittedLine(work, rough, cx, cy)
    const image = yield* images(work, near, order, line, within, true)
    if (image === null || found.has(image[first])) continue
    edges ??= edgesByEnds(plan)
    if (!mirrorsPanels(plan, edges, image)) continue
    found.set(image[first], mirrorLine(plan, line, image))
  }
  const angle = ({ direction: [x, y] }: MirrorLine): number => Math.atan2(y, x)
  return [...found.values()].sort((p, q) => angle(p) - angle(q))
}

/** The line through (cx, cy) whose direction has the angle twice / 2. */
interface Line {
  readonly cx: number
  readonly cy: number
  readonly twice: number
}

/** Among nodes far from the mean, those of the distance that the fewest share, within `within`; the first is one that all the others are near. */
function fewestPeers(order: Int32Array, from: Float64Array, within: number): number[] {
  let best = 0, fewest = Infinity, low = 0, high = 0
  for (let k = 0; k < order.length && from[order[k]] >= farShare * from[order[0]]; k += 1) {
    while (from[order[low]] - from[order[k]] > within) low += 1
    while (high < order.length && from[order[k]] - from[order[high]] <= within) high += 1
    if (high - low < fewest) [best, fewest] = [k, high - low]
  }
  const peers = [order[best]]
  order.forEach((n) => { if (n !== order[best] && Math.abs(from[n] - from[order[best]]) <= within) peers.push(n) })
  return peers
}

/**
 * Node nearest to each mirrored node, in pairs when `strictly`; null as soon as one has none `within`. Farthest nodes first,
 * which fail soonest.
 */
function* images(work: Float64Array, near: NearPoints, order: Int32Array, { cx, cy, twice }: Line, within: number, strictly: boolean): Steps<Int32Array | null> {
  const c = Math.cos(twice), s = Math.sin(twice)
  const image = new Int32Array(order.length).fill(-1)
  for (let k = 0; k < order.length; k += 1) {
    if (k % nodesPerStep === nodesPerStep - 1) yield { stage: 'Looking for symmetry', done: k / order.length }
    const n = order[k]
    const dx = work[2 * n] - cx, dy = work[2 * n + 1] - cy
    const m = near.nearest(cx + c * dx + s * dy, cy + s * dx - c * dy, within)
    if (m < 0 || (strictly && image[m] >= 0 && image[m] !== n)) return null
    image[n] = m
  }
  if (strictly) for (let n = 0; n < image.length; n += 1) if (image[image[n]] !== n) return null
  return image
}

/**
 * The line that mirrors nodes p nearest to their images q, by least squares: through the mean, at the angle a that makes
 * sum q . R(a) p greatest, R(a) = [[cos 2a, sin 2a], [sin 2a, -cos 2a]].
 */
function fittedLine(work: Float64Array, image: Int32Array, cx: number, cy: number): Line {
  let c = 0, s = 0
  for (let n = 0; n < image.length; n += 1) {
    const px = work[2 * n] - cx, py = work[2 * n + 1] - cy
    const qx = work[2 * image[n]] - cx, qy = work[2 * image[n] + 1] - cy
    c += qx * px - qy * py
    s += qx * py + qy * px
  }
  return { cx, cy, twice: Math.atan2(s, c) }
}

function mirrorLine({ work, frame }: Plan, { cx, cy, twice }: Line, image: Int32Array): MirrorLine {
  const c = Math.cos(twice), s = Math.sin(twice)
  let misfit = 0
  for (let n = 0; n < image.length; n += 1) {
    const dx = work[2 * n] - cx, dy = work[2 * n + 1] - cy, m = image[n]
    misfit = Math.max(misfit, Math.hypot(cx + c * dx + s * dy - work[2 * m], cy + s * dx - c * dy - work[2 * m + 1]))
  }
  // cos and sin of the half angle, in (-90, 90] degrees; lines along an axis to the last digit where they are.
  const [x, y] = [Math.cos(twice / 2), Math.sin(twice / 2)]
  const sign = x > 1e-15 || (Math.abs(x) <= 1e-15 && y > 0) ? 1 : -1
  return {
    point: [frame.centreX + cx * frame.span, frame.centreY + cy * frame.span],
    direction: [Math.abs(x) <= 1e-15 ? 0 : sign * x, Math.abs(y) <= 1e-15 ? 0 : sign * y],
    image, misfit: misfit * frame.span,
  }
}

/** Half-edge from node a to node b by a * nodeCount + b. */
type EdgeOfEnds = ReadonlyMap<number, number>

function edgesByEnds({ origin, nodeCount }: Plan): EdgeOfEnds {
  const edges = new Map<number, number>()
  for (let h = 0; h < origin.length; h += 1) edges.set(origin[h] * nodeCount + origin[h ^ 1], h)
  return edges
}

/** Whether every edge is mirrored onto an edge, with a panel where it has one: from b' to a' as from a to b. */
function mirrorsPanels({ origin, panelOf, nodeCount }: Plan, edges: EdgeOfEnds, image: Int32Array): boolean {
  for (let h = 0; h < origin.length; h += 1) {
    const other = edges.get(image[origin[h ^ 1]] * nodeCount + image[origin[h]])
    if (other === undefined || panelOf[h] < 0 !== panelOf[other] < 0) return false
  }
  return true
}
