/**
 * Mirror lines of a plan: lines that take nodes, edges, panels and voids to their like, within the plan tolerance.
 *
 * A mirror line passes through the centroid of the nodes and keeps distances from it, so it takes the nodes of one distance
 * to one another. Of the distances that are far enough out to tell a direction, the one with fewest nodes is taken: each of
 * its nodes, as the image of the first, gives one line to try. That finds every line, in O(n log n) for each tried.
 */
import { NearPoints } from '../base/geometry/near-points.ts'
import { conversion } from '../base/length.ts'
import { finish, type Steps } from '../base/steps.ts'
import type { Plan } from './plan.ts'

export interface MirrorLine {
  /** A point of the line in the plan's unit and place, and its direction, in radians from +x, 0 <= angle < pi. */
  readonly x: number
  readonly y: number
  readonly angle: number
  /** Image of each node, edge and panel (length nodeCount, edgeCount, panelCount); joints go to joints. */
  readonly node: Int32Array
  readonly edge: Int32Array
  readonly panel: Int32Array
  /** Largest distance of a node from the image of its image's place, in the plan's unit. */
  readonly misfit: number
}

/** Nodes nearer to the centroid than this share of the farthest tell a direction badly. */
const farEnough = 0.4

/** A line from two nodes alone is off by their own misfit, magnified from their distance to the farthest node's. */
const firstLook = 4

/** Mirror lines, by angle; none where the plan has none. */
export function mirrorLines(plan: Plan, tolerance_mm: number): MirrorLine[] {
  return finish(mirrorLineSteps(plan, tolerance_mm))
}

/** The same as work that can be stopped: a large round roof has as many lines to try as rim nodes. */
export function* mirrorLineSteps(plan: Plan, tolerance_mm: number): Steps<MirrorLine[]> {
  const tolerance = tolerance_mm * conversion('mm', plan.unit)
  const n = plan.nodeCount
  const [cx, cy] = [mean(plan.x), mean(plan.y)]
  const radius = Float64Array.from(plan.x, (x, i) => Math.hypot(x - cx, plan.y[i] - cy))
  yield { stage: 'Looking for symmetry', done: 0 }
  const ring = smallestRing(radius, tolerance)
  const points = new NearPoints(firstLook * tolerance, n)
  for (let i = 0; i < n; i += 1) points.add(plan.x[i], plan.y[i])
  yield { stage: 'Looking for symmetry', done: 0 }
  let halves: Map<number, number> | null = null
  const found: MirrorLine[] = []
  const first = ring[0]
  for (const [k, other] of ring.entries()) {
    yield { stage: 'Looking for symmetry', done: k / ring.length }
    const toward = (i: number): number => Math.atan2(plan.y[i] - cy, plan.x[i] - cx)
    const line = yield* lineNear(plan, points, () => (halves ??= halfEdges(plan)), cx, cy, (toward(first) + toward(other)) / 2, tolerance)
    if (line !== null && !found.some(({ angle }) => Math.abs(Math.sin(angle - line.angle)) < 1e-6)) found.push(line)
  }
  return found.sort((a, b) => a.angle - b.angle)
}

/** A node, and the others at its distance from the centroid: of the distances far enough out that with the fewest, of these the farthest. */
function smallestRing(radius: Float64Array, tolerance: number): number[] {
  const order = Array.from(radius.keys()).sort((a, b) => radius[b] - radius[a])
  let best = 0, bestLow = 0, bestHigh = Infinity, low = 0, high = 0
  for (let k = 0; k < order.length && radius[order[k]] >= farEnough * radius[order[0]]; k += 1) {
    while (radius[order[low]] - radius[order[k]] > 2 * tolerance) low += 1
    while (high < order.length && radius[order[k]] - radius[order[high]] <= 2 * tolerance) high += 1
    if (high - low < bestHigh - bestLow) [best, bestLow, bestHigh] = [k, low, high]
  }
  return [order[best], ...order.slice(bestLow, best), ...order.slice(best + 1, bestHigh)]
}

/** The mirror line next to a line through the centroid; null: there is none. */
function* lineNear(
  plan: Plan, points: NearPoints, halves: () => Map<number, number>, cx: number, cy: number, tried: number, tolerance: number,
): Steps<MirrorLine | null> {
  const rough = images(plan, points, cx, cy, tried)
  if (rough === null) return null
  yield { stage: 'Looking for symmetry', done: 0.5 }
  // Node and image make twice the line's angle: z_i z_j = r^2 e^(2 i angle), weighted by r^2.
  let re = 0, im = 0
  rough.forEach((j, i) => {
    const [ax, ay, bx, by] = [plan.x[i] - cx, plan.y[i] - cy, plan.x[j] - cx, plan.y[j] - cy]
    re += ax * bx - ay * by
    im += ax * by + ay * bx
  })
  const angle = (((Math.atan2(im, re) / 2) % Math.PI) + Math.PI) % Math.PI
  const [c, s] = [Math.cos(2 * angle), Math.sin(2 * angle)]
  let misfit = 0
  for (let i = 0; i < rough.length; i += 1) {
    if (rough[rough[i]] !== i) return null
    const [dx, dy] = [plan.x[i] - cx, plan.y[i] - cy]
    misfit = Math.max(misfit, Math.hypot(cx + c * dx + s * dy - plan.x[rough[i]], cy + s * dx - c * dy - plan.y[rough[i]]))
  }
  if (misfit > tolerance) return null
  yield { stage: 'Looking for symmetry', done: 0.6 }
  const edges = halves()
  yield { stage: 'Looking for symmetry', done: 0.8 }
  const faces = imagesOfFaces(plan, rough, edges)
  return faces === null ? null : { x: cx, y: cy, angle, node: rough, ...faces, misfit }
}

/** The node at the image of each; null where some image has none. */
function images(plan: Plan, points: NearPoints, cx: number, cy: number, angle: number): Int32Array | null {
  const [c, s] = [Math.cos(2 * angle), Math.sin(2 * angle)]
  const out = new Int32Array(plan.nodeCount)
  for (let i = 0; i < out.length; i += 1) {
    const [dx, dy] = [plan.x[i] - cx, plan.y[i] - cy]
    const image = points.nearest(cx + c * dx + s * dy, cy + s * dx - c * dy)
    if (image < 0) return null
    out[i] = image
  }
  return out
}

/** Half-edges by the nodes that they run between. */
function halfEdges(plan: Plan): Map<number, number> {
  const found = new Map<number, number>()
  for (let h = 0; h < 2 * plan.edgeCount; h += 1) found.set(plan.origin[h] * plan.nodeCount + plan.origin[h ^ 1], h)
  return found
}

/** A half-edge's image runs the other way round, so that what lay on its left lies on the image's left. */
function imagesOfFaces(plan: Plan, node: Int32Array, halves: Map<number, number>): { edge: Int32Array; panel: Int32Array } | null {
  const edge = new Int32Array(plan.edgeCount)
  const panel = new Int32Array(plan.panelCount).fill(-1)
  for (let h = 0; h < 2 * plan.edgeCount; h += 1) {
    const image = halves.get(node[plan.origin[h ^ 1]] * plan.nodeCount + node[plan.origin[h]])
    if (image === undefined) return null
    const [of, to] = [plan.panelOf[h], plan.panelOf[image]]
    if (of < 0 !== to < 0) return null
    if (of >= 0) {
      if (panel[of] >= 0 && panel[of] !== to) return null
      panel[of] = to
    }
    edge[h >> 1] = image >> 1
  }
  return { edge, panel }
}

const mean = (values: Float64Array): number => values.reduce((sum, value) => sum + value, 0) / values.length
