/**
 * A drawing of faces that share their points and need no repair, told from one that does at a fraction of the cost of
 * arranging its lines. Nothing is decided here but "clean" or "not shown to be": then the drawing goes the long way.
 *
 * Each panel is simple and counter-clockwise, and each edge has one panel on either side or is on the rim; so the number of
 * panels over a point is the winding number of the rim about it, the shared edges cancelling. Where the rim is one outer loop
 * with its void loops, and they neither cross nor touch, that number is 0 or 1: no two panels overlap, no edges cross. What
 * lies within the snap distance of a node lies in its own panels or beyond sides of theirs that are as near; for the rim,
 * which has the open beyond it, it is looked up.
 */
import { crossProperly } from '../../base/geometry/segment-crossing.ts'
import { meanWidth } from '../../base/geometry/polygon-width.ts'
import { signedArea } from '../../base/geometry/polygon-area.ts'
import type { Unit } from '../../base/length.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing } from '../drawing.ts'
import { crossings, lineIndex, touchingNodes } from './cuts.ts'
import type { LineFrame } from './frame.ts'
import { joinedPoints } from './joined.ts'
import { nodesStayApart } from './nodes-apart.ts'
import type { Plan } from '../plan.ts'
import { planFromFacesSteps, type Subdivision } from '../subdivision.ts'

/** Panels between two yields: a millisecond. */
const panelsPerStep = 20_000

/** The plan of a clean mesh, null where it is not shown to be one. */
export function* cleanMesh(drawing: Drawing, frame: LineFrame, unit: Unit): Steps<Subdivision | null> {
  const { outlines: { start, point }, holes, segments } = drawing
  const panels = start.length - 1
  // Outlines with points of their own are to be joined first.
  if (panels < 1 || holes.line.length > 0 || segments.length > 0 || drawing.points.length >= 3 * point.length) return null
  const corner = turned(frame, start, point)
  if (corner === null) return null
  yield { stage: 'Building the plan', done: 0.1 }
  const made = yield* planFromFacesSteps({ unit, x: frame.planX, y: frame.planY, start, corner })
  if (!made.ok) return null
  const { plan, pointOfNode } = made.value
  // Where most edges are on the rim the outlines may be bars or panes drawn apart.
  const rimEdges = plan.edgeCount - plan.jointCount
  if (2 * rimEdges >= plan.edgeCount || !isOneSheet(plan)) return null
  const x = new Float64Array(plan.nodeCount), y = new Float64Array(plan.nodeCount)
  for (let node = 0; node < plan.nodeCount; node += 1) {
    x[node] = frame.x[pointOfNode[node]]
    y[node] = frame.y[pointOfNode[node]]
  }
  const crowded = new Uint8Array(plan.nodeCount)
  for (let from = 0; from < panels; from += panelsPerStep) {
    yield { stage: 'Building the plan', done: 0.5 + (0.4 * from) / panels }
    if (!areSimple(plan, x, y, frame.snap, from, Math.min(panels, from + panelsPerStep), crowded)) return null
  }
  if (!(yield* nodesStayApart(plan, x, y, frame, crowded))) return null
  return (yield* rimIsApart(plan, x, y, frame)) ? made.value : null
}

/** The outlines' points, each loop counter-clockwise from the point it begins with; null where one is a strip. */
function turned({ x, y, snap }: LineFrame, start: Int32Array, point: Int32Array): Int32Array | null {
  const corner = point.slice()
  for (let i = 0; i + 1 < start.length; i += 1) {
    const from = start[i], to = start[i + 1]
    if (!(meanWidth(x, y, point, from, to) > snap)) return null
    if (signedArea(x, y, point, from, to) < 0) corner.subarray(from + 1, to).reverse()
  }
  return corner
}

/** Whether the rim is one outer loop with its voids, and passes no node twice. */
function isOneSheet({ rimIsVoid, rimPasses }: Plan): boolean {
  let outer = 0
  for (const isVoid of rimIsVoid) outer += 1 - isVoid
  return outer === 1 && rimPasses.every((passes) => passes < 2)
}

/**
 * Whether panels [low, high) are simple; marks the nodes that have a side no longer than the snap distance, or one of their
 * panels' other sides within it.
 */
function areSimple({ panelStart, corner }: Plan, x: Float64Array, y: Float64Array, snap: number, low: number, high: number, crowded: Uint8Array): boolean {
  const least = snap * snap
  for (let p = low; p < high; p += 1) {
    const from = panelStart[p], to = panelStart[p + 1]
    for (let k = from; k < to; k += 1) {
      const end = k + 1 < to ? k + 1 : from
      const ax = x[corner[k]], ay = y[corner[k]]
      const ux = x[corner[end]] - ax, uy = y[corner[end]] - ay
      const square = ux * ux + uy * uy
      if (!(square > least)) {
        crowded[corner[k]] = 1
        crowded[corner[end]] = 1
      }
      for (let m = from; m < to; m += 1) {
        if (m === k || m === end) continue
        const vx = x[corner[m]] - ax, vy = y[corner[m]] - ay
        const along = ux * vx + uy * vy
        const across = ux * vy - uy * vx
        // Squared distance to the side: to its first end where the foot lies before it; the next side has the other.
        if (along <= 0 ? !(vx * vx + vy * vy > least) : along < square && !(across * across > least * square)) crowded[corner[m]] = 1
      }
    }
    if (!isConvex(x, y, corner, from, to) && crossesItself(x, y, corner, from, to)) return false
  }
  return true
}

/** Whether a loop turns left at every corner and goes round once. */
function isConvex(x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number): boolean {
  let falls = 0
  let ux = x[corner[from]] - x[corner[to - 1]], uy = y[corner[from]] - y[corner[to - 1]]
  for (let k = from; k < to; k += 1) {
    const end = k + 1 < to ? k + 1 : from
    const vx = x[corner[end]] - x[corner[k]], vy = y[corner[end]] - y[corner[k]]
    if (!(ux * vy - uy * vx > 0)) return false
    // The direction passes the negative x axis once a turn.
    if (uy >= 0 && vy < 0) falls += 1
    ux = vx
    uy = vy
  }
  return falls === 1
}

function crossesItself(x: Float64Array, y: Float64Array, corner: Int32Array, from: number, to: number): boolean {
  for (let k = from; k < to; k += 1) {
    const a = corner[k], b = corner[k + 1 < to ? k + 1 : from]
    for (let m = from; m < k - 1; m += 1) {
      const c = corner[m], d = corner[m + 1]
      if (d !== a && c !== b && crossProperly(x[a], y[a], x[b], y[b], x[c], y[c], x[d], y[d])) return true
    }
  }
  return false
}

/** Whether the rim's edges neither cross nor touch, and no two of its nodes would be joined. */
function* rimIsApart({ origin, rimHalf, nodeCount }: Plan, x: Float64Array, y: Float64Array, frame: LineFrame): Steps<boolean> {
  const onRim = new Int32Array(nodeCount).fill(-1)
  // The loops pass each node once, so their edges and nodes are equally many.
  rimHalf.forEach((half, k) => { onRim[origin[half]] = k })
  const lines = {
    x: Float64Array.from(rimHalf, (half) => x[origin[half]]), y: Float64Array.from(rimHalf, (half) => y[origin[half]]),
    a: Int32Array.from(rimHalf, (half) => onRim[origin[half]]), b: Int32Array.from(rimHalf, (half) => onRim[origin[half ^ 1]]),
  }
  const { pointOf } = yield* joinedPoints(lines.x, lines.y, lines.a, lines.b, frame)
  if (pointOf.length < rimHalf.length) return false
  const index = yield* lineIndex(lines, frame.snap + 4 * frame.rounding)
  const touched = yield* touchingNodes(lines, index, frame.snap)
  if (!touched.ok || touched.value.edge.length > 0) return false
  const crossed = yield* crossings(lines, index, frame.snap)
  return crossed.ok && crossed.value.cuts.edge.length === 0
}
