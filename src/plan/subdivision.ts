/**
 * A plan from its panels: panels as loops of points, every shared edge matching node for node, become half-edges, rim
 * loops, voids and parts. What the panels do in the plane (overlap, cross) is judged before, where the drawing is known.
 */
import { disjointSets } from '../base/disjoint-sets.ts'
import type { Unit } from '../base/length.ts'
import { fail, ok, type Place, type Result } from '../base/result.ts'
import { finish, type Steps } from '../base/steps.ts'
import { panelName } from './names.ts'
import type { Plan } from './plan.ts'

/** Face f has the points corner[start[f] .. start[f + 1]), either way round. Points that no face uses are dropped. */
export interface Faces {
  readonly unit: Unit
  readonly x: Float64Array
  readonly y: Float64Array
  readonly start: Int32Array
  readonly corner: Int32Array
  /** Nodes keep the order of the points, for points that are nodes of a plan already; else they are numbered by first use. */
  readonly ordered?: true
}

export interface Subdivision {
  readonly plan: Plan
  /** Point of the input behind each node. */
  readonly pointOfNode: Int32Array
}

/**
 * The subdivision with these panels. Nodes are numbered by first use or as given, panels as given.
 * Fails, with the place: "no-panels", "no-area", "corner-twice", "panels-overlap" (two panels on the same side of an
 * edge), "three-panels".
 */
export function planFromFaces(faces: Faces): Result<Subdivision> {
  return finish(planFromFacesSteps(faces))
}

/** The same in steps. */
export function* planFromFacesSteps(faces: Faces): Steps<Result<Subdivision>> {
  const panelCount = faces.start.length - 1
  if (panelCount < 1) return fail('no-panels', 'there is no closed panel')
  const { nodeOf, pointOfNode } = faces.ordered === true ? nodesInOrder(faces) : nodesByFirstUse(faces)
  const nodeCount = pointOfNode.length
  const x = new Float64Array(nodeCount)
  const y = new Float64Array(nodeCount)
  for (let n = 0; n < nodeCount; n += 1) {
    x[n] = faces.x[pointOfNode[n]]
    y[n] = faces.y[pointOfNode[n]]
  }
  const { work, frame } = workingCoordinates(x, y)

  yield { stage: 'Building the plan', done: 0.15 }
  const oriented = counterClockwise(faces, nodeOf, work, frame.span)
  if (!oriented.ok) return oriented
  const panelStart = faces.start.slice()
  const corner = oriented.value
  yield { stage: 'Building the plan', done: 0.25 }
  const paired = pairedEdges(panelStart, corner, nodeCount)
  if (!paired.ok) return fail(paired.problem.code, paired.problem.message, at(paired.problem.edge, paired.problem.names, x, y), paired.problem.cure)
  const { edgeCount, jointCount, origin, cornerHalf } = paired.value

  yield { stage: 'Building the plan', done: 0.4 }
  const next = new Int32Array(2 * edgeCount).fill(-1)
  const previous = new Int32Array(2 * edgeCount).fill(-1)
  const panelOf = new Int32Array(2 * edgeCount).fill(-1)
  for (let p = 0; p < panelCount; p += 1) {
    const last = panelStart[p + 1] - 1
    for (let c = panelStart[p], before = last; c <= last; before = c, c += 1) {
      next[cornerHalf[before]] = cornerHalf[c]
      previous[cornerHalf[c]] = cornerHalf[before]
      panelOf[cornerHalf[c]] = p
    }
  }
  yield { stage: 'Building the plan', done: 0.45 }
  const rims = rimLoops({ edgeCount, jointCount, origin, next, previous, panelOf }, work)
  const rimPasses = new Int32Array(nodeCount)
  for (const half of rims.rimHalf) rimPasses[origin[half]] += 1

  const { partOf, partCount } = parts(panelCount, jointCount, panelOf)
  const plan: Plan = {
    unit: faces.unit, nodeCount, panelCount, edgeCount, jointCount,
    x, y, work, frame, origin, next, panelOf, panelStart, corner, cornerHalf, ...rims, partOf, partCount, rimPasses,
  }
  return ok({ plan, pointOfNode })
}

function nodesByFirstUse(faces: Faces): { nodeOf: Int32Array; pointOfNode: Int32Array } {
  const nodeOf = new Int32Array(faces.x.length).fill(-1)
  const points = new Int32Array(faces.x.length)
  let count = 0
  for (const point of faces.corner) {
    if (nodeOf[point] >= 0) continue
    nodeOf[point] = count
    points[count] = point
    count += 1
  }
  return { nodeOf, pointOfNode: points.slice(0, count) }
}

function nodesInOrder(faces: Faces): { nodeOf: Int32Array; pointOfNode: Int32Array } {
  const nodeOf = new Int32Array(faces.x.length).fill(-1)
  for (const point of faces.corner) nodeOf[point] = 0
  const pointOfNode = Int32Array.from(nodeOf.keys()).filter((point) => nodeOf[point] === 0)
  pointOfNode.forEach((point, node) => (nodeOf[point] = node))
  return { nodeOf, pointOfNode }
}

/** Coordinates centred on the bounding box and divided by its longer side, so that survey offsets cost no digits. */
function workingCoordinates(x: Float64Array, y: Float64Array): Pick<Plan, 'work' | 'frame'> {
  let [left, right, bottom, top] = [Infinity, -Infinity, Infinity, -Infinity]
  for (let i = 0; i < x.length; i += 1) {
    if (x[i] < left) left = x[i]
    if (x[i] > right) right = x[i]
    if (y[i] < bottom) bottom = y[i]
    if (y[i] > top) top = y[i]
  }
  const span = Math.max(right - left, top - bottom)
  const centreX = left + (right - left) / 2
  const centreY = bottom + (top - bottom) / 2
  const work = new Float64Array(2 * x.length)
  for (let i = 0; i < x.length; i += 1) {
    work[2 * i] = (x[i] - centreX) / span
    work[2 * i + 1] = (y[i] - centreY) / span
  }
  return { work, frame: { centreX, centreY, span } }
}

/** The corners as nodes, each panel counter-clockwise from the corner that the file begins with. */
function counterClockwise(faces: Faces, nodeOf: Int32Array, work: Float64Array, span: number): Result<Int32Array> {
  const corner = new Int32Array(faces.corner.length)
  const seen = new Int32Array(work.length / 2).fill(-1)
  for (let f = 0; f + 1 < faces.start.length; f += 1) {
    const first = faces.start[f]
    const count = faces.start[f + 1] - first
    const place = (node: number): Place => ({ names: [panelName(f)], at: [faces.x[faces.corner[first + node]], faces.y[faces.corner[first + node]]] })
    let twiceArea = 0
    let longest = 0
    const x0 = work[2 * nodeOf[faces.corner[first]]]
    const y0 = work[2 * nodeOf[faces.corner[first]] + 1]
    for (let k = 0; k < count; k += 1) {
      const a = nodeOf[faces.corner[first + k]]
      const b = nodeOf[faces.corner[first + ((k + 1) % count)]]
      if (seen[a] === f) return fail('corner-twice', 'the panel passes one of its corners twice', place(k), 'draw it as two panels')
      seen[a] = f
      const ax = work[2 * a] - x0, ay = work[2 * a + 1] - y0
      const bx = work[2 * b] - x0, by = work[2 * b + 1] - y0
      twiceArea += ax * by - ay * bx
      longest = Math.max(longest, Math.hypot(bx - ax, by - ay))
    }
    // Rounding of the area is below count * longest^2 * 2^-50; a panel that thin has no plane of its own.
    if (count < 3 || !(Math.abs(twiceArea) > count * longest * longest * 2 ** -40)) {
      return fail('no-area', `the panel has no area (${(Math.abs(twiceArea) / 2 * span * span).toPrecision(2)} square units)`, place(0), 'delete it, or give it its corners')
    }
    for (let k = 0; k < count; k += 1) {
      corner[first + k] = nodeOf[faces.corner[twiceArea > 0 || k === 0 ? first + k : first + count - k]]
    }
  }
  return ok(corner)
}

interface Paired {
  readonly edgeCount: number
  readonly jointCount: number
  readonly origin: Int32Array
  readonly cornerHalf: Int32Array
}

interface PairingProblem {
  readonly code: string
  readonly message: string
  readonly cure: string
  readonly edge: readonly [number, number]
  readonly names: readonly string[]
}

/**
 * Matches the panels' sides into edges: sides in buckets by their lower node, each bucket sorted by the higher one, so
 * that equal sides are neighbours and edges come out in the order of their names.
 */
function pairedEdges(panelStart: Int32Array, corner: Int32Array, nodeCount: number): { ok: true; value: Paired } | { ok: false; problem: PairingProblem } {
  const sides = corner.length
  const head = new Int32Array(sides)
  const panelOfSide = new Int32Array(sides)
  for (let p = 0; p + 1 < panelStart.length; p += 1) {
    for (let c = panelStart[p]; c < panelStart[p + 1]; c += 1) {
      head[c] = corner[c + 1 < panelStart[p + 1] ? c + 1 : panelStart[p]]
      panelOfSide[c] = p
    }
  }
  const bucket = new Int32Array(nodeCount + 1)
  for (let c = 0; c < sides; c += 1) bucket[Math.min(corner[c], head[c]) + 1] += 1
  for (let i = 0; i < nodeCount; i += 1) bucket[i + 1] += bucket[i]
  const fill = bucket.slice(0, nodeCount)
  const sorted = new Int32Array(sides)
  for (let c = 0; c < sides; c += 1) {
    const low = Math.min(corner[c], head[c])
    const high = Math.max(corner[c], head[c])
    let slot = fill[low]
    fill[low] += 1
    // Insertion keeps equal sides in panel order; a bucket holds a handful of sides.
    while (slot > bucket[low] && Math.max(corner[sorted[slot - 1]], head[sorted[slot - 1]]) > high) {
      sorted[slot] = sorted[slot - 1]
      slot -= 1
    }
    sorted[slot] = c
  }

  const same = (a: number, b: number): boolean =>
    Math.min(corner[a], head[a]) === Math.min(corner[b], head[b]) && Math.max(corner[a], head[a]) === Math.max(corner[b], head[b])
  let edgeCount = 0
  let jointCount = 0
  for (let k = 0; k < sides; ) {
    let end = k + 1
    while (end < sides && same(sorted[k], sorted[end])) end += 1
    const names = Array.from(sorted.subarray(k, end), (side) => panelName(panelOfSide[side]))
    const edge = [corner[sorted[k]], head[sorted[k]]] as const
    if (end - k > 2) {
      return { ok: false, problem: { code: 'three-panels', message: `${end - k} panels share one joint`, cure: 'a roof has two panels at a joint: delete or redraw one', edge, names } }
    }
    if (end - k === 2) {
      if (corner[sorted[k]] === corner[sorted[k + 1]]) {
        return { ok: false, problem: { code: 'panels-overlap', message: 'two panels lie on the same side of their shared edge, so they overlap', cure: 'delete one, or redraw its outline', edge, names } }
      }
      jointCount += 1
    }
    edgeCount += 1
    k = end
  }

  const origin = new Int32Array(2 * edgeCount)
  const cornerHalf = new Int32Array(sides)
  let joint = 0
  let rim = jointCount
  for (let k = 0; k < sides; ) {
    const first = sorted[k]
    const isJoint = k + 1 < sides && same(first, sorted[k + 1])
    const edge = isJoint ? joint++ : rim++
    origin[2 * edge] = Math.min(corner[first], head[first])
    origin[2 * edge + 1] = Math.max(corner[first], head[first])
    for (let end = k + (isJoint ? 2 : 1); k < end; k += 1) {
      cornerHalf[sorted[k]] = corner[sorted[k]] < head[sorted[k]] ? 2 * edge : 2 * edge + 1
    }
  }
  return { ok: true, value: { edgeCount, jointCount, origin, cornerHalf } }
}

function at(edge: readonly [number, number], names: readonly string[], x: Float64Array, y: Float64Array): Place {
  return { names, at: [(x[edge[0]] + x[edge[1]]) / 2, (y[edge[0]] + y[edge[1]]) / 2] }
}

/** What tracing the rims needs to know; `next` is completed for the half-edges without a panel. */
interface HalfEdges {
  readonly edgeCount: number
  readonly jointCount: number
  readonly origin: Int32Array
  readonly next: Int32Array
  readonly previous: Int32Array
  readonly panelOf: Int32Array
}

/**
 * Rim loops, traced along the panels: at its end a rim half-edge turns through the fan of panels beside it to the fan's
 * other border. Loops that run counter-clockwise have a void on their left, clockwise ones the outside.
 */
function rimLoops(halves: HalfEdges, work: Float64Array): Pick<Plan, 'rimStart' | 'rimHalf' | 'rimIsVoid'> {
  const { edgeCount, jointCount, origin, next, previous, panelOf } = halves
  const rimCount = edgeCount - jointCount
  const rimHalf = new Int32Array(rimCount)
  const starts = [0]
  const isVoid: number[] = []
  let filled = 0
  for (let edge = jointCount; edge < edgeCount; edge += 1) {
    const first = panelOf[2 * edge] < 0 ? 2 * edge : 2 * edge + 1
    if (next[first] >= 0) continue
    let twiceArea = 0
    let half = first
    do {
      rimHalf[filled++] = half
      const a = origin[half], b = origin[half ^ 1]
      twiceArea += work[2 * a] * work[2 * b + 1] - work[2 * a + 1] * work[2 * b]
      let out = previous[half ^ 1] ^ 1
      while (panelOf[out] >= 0) out = previous[out] ^ 1
      next[half] = out
      half = out
    } while (half !== first)
    starts.push(filled)
    isVoid.push(twiceArea > 0 ? 1 : 0)
  }
  return { rimStart: Int32Array.from(starts), rimHalf, rimIsVoid: Uint8Array.from(isVoid) }
}

/** Parts: panels that hang together across joints, numbered by their first panel. */
function parts(panelCount: number, jointCount: number, panelOf: Int32Array): { partOf: Int32Array; partCount: number } {
  const sets = disjointSets(panelCount)
  for (let joint = 0; joint < jointCount; joint += 1) sets.join(panelOf[2 * joint], panelOf[2 * joint + 1])
  const { setOf, setCount } = sets.numbered()
  return { partOf: setOf, partCount: setCount }
}
