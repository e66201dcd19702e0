/**
 * The arrangement of a drawing's lines: edges that meet only at nodes. Rounds of cutting at touching nodes and crossings,
 * until a round finds nothing. The first round joins within the snap distance; each later one within a quarter of the one
 * before, so that nodes closer than the snap distance cannot bend two edges round each other for ever.
 *
 * The idea of snapping until nothing changes is that of iterated snap rounding (D. Halperin, E. Packer, Comput. Geom. 23,
 * 2002); nodes here keep the coordinates that were drawn and are not moved to pixel centres.
 */
import { Integers } from '../../base/growing.ts'
import { NearPoints } from '../../base/geometry/near-points.ts'
import { crossingPoint } from '../../base/geometry/segment-crossing.ts'
import { fail, ok, type Result } from '../../base/result.ts'
import type { Steps } from '../../base/steps.ts'
import { crossings, lineIndex, touchingNodes, type Cuts, type LineIndex, type LineWork } from './cuts.ts'
import { distinctEdges } from './distinct.ts'

export interface Arrangement {
  /** Nodes: first those given, then the crossings. */
  readonly x: Float64Array
  readonly y: Float64Array
  /** 1 for given nodes that were moved onto a line that they missed. */
  readonly moved: Uint8Array
  /** Node that stands for each given node: itself, unless moving brought it to another. */
  readonly sameAs: Int32Array
  /** Edge e runs from node a[e] to b[e]; its half-edges are 2 e (that way) and 2 e + 1. No edge occurs twice. */
  readonly a: Int32Array
  readonly b: Int32Array
  /** Half-edges along each line given: chain[chainStart[i] .. chainStart[i + 1]); none when its ends are one node. */
  readonly chainStart: Int32Array
  readonly chain: Int32Array
  /** Given nodes that came to lie on a line, and how far off it they were drawn (the largest per node). */
  readonly touchNode: Int32Array
  readonly touchGap: Float64Array
  readonly index: LineIndex
}

export interface ArrangementOptions {
  /** Nodes within this of a line come to lie on it, and crossings within this of a node are that node. */
  readonly snap: number
  /** What rounding leaves at the largest coordinate. */
  readonly rounding: number
}

const mostRounds = 24

/** The arrangement of the lines from node `a[i]` to `b[i]`. Fails when lines cross too often to be a plan. */
export function* arrangement(x: Float64Array, y: Float64Array, a: Int32Array, b: Int32Array, options: ArrangementOptions): Steps<Result<Arrangement>> {
  const { rounding } = options
  const given = x.length
  const distinct = distinctEdges(a, b)
  const lines: LineWork = { x: x.slice(), y: y.slice(), a: distinct.a, b: distinct.b }
  let chains = firstChains(distinct.half)
  const moved = new Uint8Array(given)
  const sameAs = new Int32Array(given)
  for (let node = 0; node < given; node += 1) sameAs[node] = node
  const gapOf = new Map<number, number>()
  let reach = options.snap
  yield { stage: 'Joining lines', done: 0.05 }
  for (let round = 0; round < mostRounds; round += 1) {
    const index = yield* lineIndex(lines, reach + 4 * rounding)
    const touched = yield* touchingNodes(lines, index, reach)
    if (!touched.ok) return touched
    const touches = touched.value
    noteTouches(touches, gapOf, given)
    if (round === 0) moveLooseEnds(lines, touches, moved, sameAs, options)
    const crossed = yield* crossings(lines, index, reach)
    if (!crossed.ok) return crossed
    const { cuts } = crossed.value
    noteTouches(cuts, gapOf, given)
    if (touches.edge.length === 0 && cuts.edge.length === 0) {
      const touchNode = Int32Array.from(gapOf.keys()).sort()
      const touchGap = Float64Array.from(touchNode, (node) => gapOf.get(node) ?? 0)
      return ok({ x: lines.x, y: lines.y, moved, sameAs, a: lines.a, b: lines.b, ...chains, touchNode, touchGap, index })
    }
    yield { stage: 'Joining lines', done: 1 }
    chains = cutEdges(lines, [touches, cuts], chains, sameAs)
    yield { stage: 'Joining lines', done: 0 }
    reach = Math.max(rounding, reach / 4)
  }
  return fail('tangled', 'lines lie so close together that they cannot be told apart', null, 'clean the drawing, or give a smaller --snap')
}

interface Chains {
  readonly chainStart: Int32Array
  readonly chain: Int32Array
}

function firstChains(half: Int32Array): Chains {
  const chainStart = new Int32Array(half.length + 1)
  const chain = new Int32Array(half.length)
  let filled = 0
  for (let i = 0; i < half.length; i += 1) {
    if (half[i] >= 0) chain[filled++] = half[i]
    chainStart[i + 1] = filled
  }
  return { chainStart, chain: chain.subarray(0, filled) }
}

function noteTouches(cuts: Cuts, gapOf: Map<number, number>, given: number): void {
  const node = cuts.node.view()
  const gap = cuts.gap.view()
  for (let k = 0; k < node.length; k += 1) {
    if (node[k] < given) gapOf.set(node[k], Math.max(gap[k], gapOf.get(node[k]) ?? 0))
  }
}

/**
 * A line that ends just before or behind another is lengthened or cut so that it ends on it, in its own direction: both
 * stay straight. Where the two run nearly alike the end moves square to the other line. An end that so comes to another
 * node becomes that node.
 */
function moveLooseEnds(lines: LineWork, touches: Cuts, moved: Uint8Array, sameAs: Int32Array, { snap, rounding }: ArrangementOptions): void {
  const { x, y, a, b } = lines
  const ends = new Int32Array(x.length)
  const origin = new Int32Array(x.length)
  for (let e = 0; e < a.length; e += 1) {
    ends[a[e]] += 1
    ends[b[e]] += 1
    origin[a[e]] = b[e]
    origin[b[e]] = a[e]
  }
  const edge = touches.edge.view()
  const node = touches.node.view()
  const gap = touches.gap.view()
  const nearest = new Map<number, number>()
  for (let k = 0; k < node.length; k += 1) {
    if (ends[node[k]] !== 1 || gap[k] <= rounding) continue
    const known = nearest.get(node[k])
    if (known === undefined || gap[k] < gap[known]) nearest.set(node[k], k)
  }
  if (nearest.size === 0) return
  const near = new NearPoints(snap, x.length)
  const nodeAt = new Int32Array(x.length)
  for (let n = 0; n < x.length; n += 1) if (!nearest.has(n)) nodeAt[near.add(x[n], y[n])] = n
  const at = new Float64Array(2)
  for (const [n, k] of nearest) {
    const p = a[edge[k]], q = b[edge[k]]
    crossingPoint(x[origin[n]], y[origin[n]], x[n], y[n], x[p], y[p], x[q], y[q], at)
    if (!(Math.hypot(at[0] - x[n], at[1] - y[n]) <= 2 * snap)) {
      const ux = x[q] - x[p], uy = y[q] - y[p]
      const share = ((x[n] - x[p]) * ux + (y[n] - y[p]) * uy) / (ux * ux + uy * uy)
      at[0] = x[p] + share * ux
      at[1] = y[p] + share * uy
    }
    x[n] = at[0]
    y[n] = at[1]
    moved[n] = 1
    const other = near.nearest(at[0], at[1])
    if (other >= 0) sameAs[n] = nodeAt[other]
    else nodeAt[near.add(at[0], at[1])] = n
  }
}

/** Replaces the edges that are cut by their pieces, drops repeats, and returns the lines' chains of the new edges. */
function cutEdges(lines: LineWork, all: readonly Cuts[], chains: Chains, sameAs: Int32Array): Chains {
  const same = (node: number): number => (node < sameAs.length ? sameAs[node] : node)
  const { x, y, a, b } = lines
  const cutStart = new Int32Array(a.length + 1)
  for (const cuts of all) for (const edge of cuts.edge.view()) cutStart[edge + 1] += 1
  for (let e = 0; e < a.length; e += 1) cutStart[e + 1] += cutStart[e]
  const cutNode = new Int32Array(cutStart[a.length])
  const fill = cutStart.slice(0, a.length)
  for (const cuts of all) {
    const edge = cuts.edge.view()
    const node = cuts.node.view()
    for (let k = 0; k < edge.length; k += 1) cutNode[fill[edge[k]]++] = node[k]
  }

  const pieceStart = new Int32Array(a.length + 1)
  const pieceA = new Integers(a.length + cutNode.length)
  const pieceB = new Integers(a.length + cutNode.length)
  for (let e = 0; e < a.length; e += 1) {
    let last = a[e]
    if (cutStart[e + 1] > cutStart[e]) {
      const ux = x[b[e]] - x[a[e]], uy = y[b[e]] - y[a[e]]
      const along = (n: number): number => ux * (x[n] - x[a[e]]) + uy * (y[n] - y[a[e]])
      const nodes = cutNode.subarray(cutStart[e], cutStart[e + 1])
      if (nodes.length > 1) nodes.sort((m, n) => along(m) - along(n) || m - n)
      for (const node of nodes) {
        if (node === last || node === a[e] || node === b[e]) continue
        pieceA.push(same(last))
        pieceB.push(same(node))
        last = node
      }
    }
    pieceA.push(same(last))
    pieceB.push(same(b[e]))
    pieceStart[e + 1] = pieceA.length
  }

  const distinct = distinctEdges(pieceA.view(), pieceB.view())
  lines.a = distinct.a
  lines.b = distinct.b
  const chain = new Integers(chains.chain.length + pieceA.length)
  const chainStart = new Int32Array(chains.chainStart.length)
  for (let i = 0; i + 1 < chainStart.length; i += 1) {
    for (let k = chains.chainStart[i]; k < chains.chainStart[i + 1]; k += 1) {
      const half = chains.chain[k]
      const from = pieceStart[half >> 1], to = pieceStart[(half >> 1) + 1]
      for (let step = 0; step < to - from; step += 1) {
        const piece = distinct.half[(half & 1) === 0 ? from + step : to - 1 - step]
        // Pieces whose ends are one node by now are gone.
        if (piece >= 0) chain.push(piece ^ (half & 1))
      }
    }
    chainStart[i + 1] = chain.length
  }
  return { chainStart, chain: chain.view() }
}
