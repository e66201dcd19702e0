/**
 * The points of a drawing become nodes: what lies within the snap distance of a node belongs to it. Points are taken in
 * file order and never chained, so a row of points closer than the snap distance keeps its length; and the two ends of a
 * line that is drawn are never joined, so a plan with edges shorter than the snap distance keeps them.
 */
import { NearPoints } from '../base/geometry/near-points.ts'
import type { Steps } from '../base/steps.ts'
import { Places } from './line-work-words.ts'

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

  // First what is one point but for rounding; whatever lies near another spot is looked at again.
  const spots = new NearPoints(snap, x.length)
  const spotOf = new Int32Array(x.length).fill(-1)
  const firstPoint = new Int32Array(x.length)
  const crowded: number[] = []
  let uneven = false
  for (let i = 0; i < x.length; i += 1) {
    if (i % pointsPerStep === 0) yield { stage: 'Joining points', done: i / x.length }
    if (inUse[i] === 0) continue
    let spot = spots.nearest(x[i], y[i])
    if (spot >= 0) {
      const dx = x[i] - x[firstPoint[spot]], dy = y[i] - y[firstPoint[spot]]
      if (dx * dx + dy * dy > silent * silent) {
        crowded.push(spots.count)
        spot = -1
      } else if (dx !== 0 || dy !== 0) uneven = true
    }
    if (spot < 0) {
      spot = spots.add(x[i], y[i])
      firstPoint[spot] = i
    }
    spotOf[i] = spot
  }
  const centreOf = crowded.length === 0 ? null : centresOfSpots(spots, crowded, spotOf, a, b)

  const nodeOfSpot = new Int32Array(spots.count).fill(-1)
  const pointOf = new Int32Array(spots.count)
  let count = 0
  for (let spot = 0; spot < spots.count; spot += 1) {
    if (centreOf !== null && centreOf[spot] !== spot) continue
    pointOf[count] = firstPoint[spot]
    nodeOfSpot[spot] = count
    count += 1
  }
  const nodeOf = spotOf
  for (let i = 0; i < x.length; i += 1) if (spotOf[i] >= 0) nodeOf[i] = nodeOfSpot[centreOf === null ? spotOf[i] : centreOf[spotOf[i]]]
  const joined = new Places()
  if (centreOf !== null || uneven) {
    for (const [node, members] of spreadNodes(x, y, nodeOf, pointOf)) {
      pointOf[node] = middlePoint(x, y, members)
      const dx = members.map((i) => Math.hypot(x[i] - x[pointOf[node]], y[i] - y[pointOf[node]]))
      const moved = Math.max(...dx)
      if (moved > silent) joined.note(x[pointOf[node]], y[pointOf[node]], moved)
    }
  }
  return { nodeOf, pointOf: pointOf.slice(0, count), joined }
}

/** For each spot the spot that it joins, itself when none. */
function centresOfSpots(spots: NearPoints, crowded: readonly number[], spotOf: Int32Array, a: Int32Array, b: Int32Array): Int32Array {
  const centreOf = new Int32Array(spots.count)
  for (let spot = 0; spot < spots.count; spot += 1) centreOf[spot] = spot
  const isCrowded = new Set(crowded)
  const linked = new Map<number, number[]>()
  for (const spot of crowded) linked.set(spot, [])
  for (let i = 0; i < a.length; i += 1) {
    if (a[i] < 0) continue
    const p = spotOf[a[i]], q = spotOf[b[i]]
    if (isCrowded.has(p)) linked.get(p)?.push(q)
    if (isCrowded.has(q)) linked.get(q)?.push(p)
  }
  const { x, y } = spots
  for (const spot of crowded) {
    const taken = new Set((linked.get(spot) ?? []).filter((other) => other < spot).map((other) => centreOf[other]))
    let best = -1, bestSquare = Infinity
    for (const other of spots.within(x[spot], y[spot])) {
      if (other >= spot || centreOf[other] !== other || taken.has(other)) continue
      const square = (x[other] - x[spot]) ** 2 + (y[other] - y[spot]) ** 2
      if (square < bestSquare) {
        best = other
        bestSquare = square
      }
    }
    if (best >= 0) centreOf[spot] = best
  }
  return centreOf
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
