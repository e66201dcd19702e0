/**
 * The points of a drawing become nodes: what lies within the snap distance of a node belongs to it. Points are taken in
 * file order and never chained, so a row of points closer than the snap distance keeps its length.
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

/** Points between two yields. */
const pointsPerStep = 20_000

/**
 * `x`, `y` per point; `used` names points in any order, repeats allowed. Of a node's points those coordinates win that
 * occur most often, then those nearest to the mean. Moves of at most `silent` are not noted.
 */
export function* joinedPoints(x: Float64Array, y: Float64Array, used: readonly Int32Array[], snap: number, silent: number): Steps<JoinedPoints> {
  const inUse = new Uint8Array(x.length)
  for (const list of used) for (const point of list) inUse[point] = 1
  const near = new NearPoints(snap, x.length)
  const nodeOf = new Int32Array(x.length).fill(-1)
  const first = new Int32Array(x.length)
  const isSpread = new Uint8Array(x.length)
  for (let i = 0; i < x.length; i += 1) {
    if (i % pointsPerStep === 0) yield { stage: 'Joining points', done: i / x.length }
    if (inUse[i] === 0) continue
    let node = near.nearest(x[i], y[i])
    if (node < 0) {
      node = near.add(x[i], y[i])
      first[node] = i
    } else {
      if (x[i] !== x[first[node]] || y[i] !== y[first[node]]) isSpread[node] = 1
    }
    nodeOf[i] = node
  }
  const pointOf = first.slice(0, near.count)
  const joined = new Places()
  const spreadNodes = membersOfSpread(nodeOf, isSpread, near.count)
  for (const [node, members] of spreadNodes) {
    const chosen = middlePoint(x, y, members)
    pointOf[node] = chosen
    let moved = 0
    for (const i of members) moved = Math.max(moved, Math.hypot(x[i] - x[chosen], y[i] - y[chosen]))
    if (moved > silent) joined.note(x[chosen], y[chosen], moved)
  }
  return { nodeOf, pointOf, joined }
}

/** The points of every node whose points are not identical. */
function membersOfSpread(nodeOf: Int32Array, isSpread: Uint8Array, count: number): Map<number, number[]> {
  const members = new Map<number, number[]>()
  for (let node = 0; node < count; node += 1) if (isSpread[node] === 1) members.set(node, [])
  if (members.size > 0) for (let i = 0; i < nodeOf.length; i += 1) members.get(nodeOf[i])?.push(i)
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
