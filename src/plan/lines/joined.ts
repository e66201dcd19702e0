/**
 * The points of a drawing become nodes: what lies within the snap distance of a node belongs to it. Points are taken in
 * file order and never chained, so a row of points closer than the snap distance keeps its length; and the two ends of a
 * line that is drawn are never joined, so a plan with edges shorter than the snap distance keeps them.
 */
import { NearPoints } from '../../base/geometry/near-points.ts'
import type { Steps } from '../../base/steps.ts'
import { Places } from './words.ts'

export interface JoinedPoints {
  /** Node of each point, -1 for points that no line uses. */
  readonly nodeOf: Int32Array
  /** Point whose coordinates the node has: a node lies where a point was drawn. */
  readonly pointOf: Int32Array
  /** Nodes that gathered points farther apart than rounding, with the largest move. */
  readonly joined: Places
}

export interface JoinOptions {
  readonly snap: number
  /** Points this near are one whatever the lines say, and their moves are not noted. */
  readonly silent: number
}

/** Points between two yields. */
const pointsPerStep = 20_000

/**
 * `x`, `y` per point; line i is drawn from point a[i] to b[i], -1 for lines left out. Of a node's points those coordinates win that occur most
 * often, then those nearest to the mean.
 */
export function* joinedPoints(x: Float64Array, y: Float64Array, a: Int32Array, b: Int32Array, { snap, silent }: JoinOptions): Steps<JoinedPoints> {
  const inUse = new Uint8Array(x.length)
  for (const list of [a, b]) for (let i = 0; i < list.length; i += 1) if (list[i] >= 0) inUse[list[i]] = 1

  // First what is one point but for rounding ..
  const spots = new NearPoints(silent, x.length)
  const spotOf = new Int32Array(x.length).fill(-1)
  const firstPoint = new Int32Array(x.length)
  let uneven = false
  for (let i = 0; i < x.length; i += 1) {
    if (i % pointsPerStep === 0) yield { stage: 'Joining points', done: (0.5 * i) / x.length }
    if (inUse[i] === 0) continue
    let spot = spots.nearest(x[i], y[i])
    if (spot < 0) {
      spot = spots.add(x[i], y[i])
      firstPoint[spot] = i
    } else if (x[i] !== x[firstPoint[spot]] || y[i] !== y[firstPoint[spot]]) uneven = true
    spotOf[i] = spot
  }

  // .. then what lies within the snap distance and is not told apart by a line.
  const nodes = new NearPoints(snap, spots.count)
  const nodeOfSpot = new Int32Array(spots.count)
  const pointOf = new Int32Array(spots.count)
  let links: Links | null = null
  for (let spot = 0; spot < spots.count; spot += 1) {
    if (spot % pointsPerStep === 0) yield { stage: 'Joining points', done: 0.5 + (0.5 * spot) / spots.count }
    const i = firstPoint[spot]
    let node = nodes.nearest(x[i], y[i])
    if (node >= 0) {
      links ??= linksOf(spots.count, spotOf, a, b)
      node = untiedNode(nodes, x[i], y[i], links, spot, nodeOfSpot)
    }
    if (node < 0) {
      node = nodes.add(x[i], y[i])
      pointOf[node] = i
    } else uneven = true
    nodeOfSpot[spot] = node
  }
  const nodeOf = spotOf
  for (let i = 0; i < x.length; i += 1) if (spotOf[i] >= 0) nodeOf[i] = nodeOfSpot[spotOf[i]]
  const joined = new Places()
  if (uneven) {
    for (const [node, members] of spreadNodes(x, y, nodeOf, pointOf)) {
      const chosen = middlePoint(x, y, members)
      pointOf[node] = chosen
      let moved = 0
      for (const i of members) moved = Math.max(moved, Math.hypot(x[i] - x[chosen], y[i] - y[chosen]))
      if (moved > silent) joined.note(x[chosen], y[chosen], moved)
    }
  }
  return { nodeOf, pointOf: pointOf.slice(0, nodes.count), joined }
}

/** Spots that lines tie to each spot: spot[start[s] .. start[s + 1]). */
interface Links {
  readonly start: Int32Array
  readonly spot: Int32Array
}

function linksOf(count: number, spotOf: Int32Array, a: Int32Array, b: Int32Array): Links {
  const start = new Int32Array(count + 1)
  for (let i = 0; i < a.length; i += 1) {
    if (a[i] < 0) continue
    start[spotOf[a[i]] + 1] += 1
    start[spotOf[b[i]] + 1] += 1
  }
  for (let s = 0; s < count; s += 1) start[s + 1] += start[s]
  const fill = start.slice(0, count)
  const spot = new Int32Array(start[count])
  for (let i = 0; i < a.length; i += 1) {
    if (a[i] < 0) continue
    spot[fill[spotOf[a[i]]]++] = spotOf[b[i]]
    spot[fill[spotOf[b[i]]]++] = spotOf[a[i]]
  }
  return { start, spot }
}

/** The nearest node within the snap distance to which no line from this spot leads, -1 when there is none. */
function untiedNode(nodes: NearPoints, px: number, py: number, { start, spot }: Links, from: number, nodeOfSpot: Int32Array): number {
  const tied = new Set<number>()
  // Spots that come later have no node yet.
  for (let k = start[from]; k < start[from + 1]; k += 1) if (spot[k] < from) tied.add(nodeOfSpot[spot[k]])
  const { x, y } = nodes
  let best = -1, bestSquare = Infinity
  for (const node of nodes.within(px, py)) {
    const square = (x[node] - px) ** 2 + (y[node] - py) ** 2
    if (tied.has(node) || square > bestSquare || (square === bestSquare && node > best)) continue
    best = node
    bestSquare = square
  }
  return best
}

/** The points of every node whose points are not identical. */
function spreadNodes(x: Float64Array, y: Float64Array, nodeOf: Int32Array, pointOf: Int32Array): Map<number, number[]> {
  const members = new Map<number, number[]>()
  for (let i = 0; i < nodeOf.length; i += 1) {
    const node = nodeOf[i]
    if (node >= 0 && (x[i] !== x[pointOf[node]] || y[i] !== y[pointOf[node]])) members.set(node, [])
  }
  for (let i = 0; i < nodeOf.length; i += 1) members.get(nodeOf[i])?.push(i)
  return members
}

function middlePoint(x: Float64Array, y: Float64Array, members: readonly number[]): number {
  const copies = new Map<string, number>()
  const key = (i: number): string => `${x[i]} ${y[i]}`
  let meanX = 0, meanY = 0
  for (const i of members) {
    copies.set(key(i), (copies.get(key(i)) ?? 0) + 1)
    meanX += (x[i] - x[members[0]]) / members.length
    meanY += (y[i] - y[members[0]]) / members.length
  }
  meanX += x[members[0]]
  meanY += y[members[0]]
  let best = members[0], bestCopies = 0, bestDistance = Infinity
  for (const i of members) {
    const times = copies.get(key(i)) ?? 0
    const distance = Math.hypot(x[i] - meanX, y[i] - meanY)
    if (times > bestCopies || (times === bestCopies && distance < bestDistance)) {
      best = i
      bestCopies = times
      bestDistance = distance
    }
  }
  return best
}
