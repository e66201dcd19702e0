/**
 * Geometric nested dissection: the plan is cut in two across its longer side, the unknowns on the cut come last, and each
 * half is cut again. O(n log n) fill and O(n^1.5) operations on planar graphs (A. George, SIAM J. Numer. Anal. 10, 1973;
 * R. Lipton, D. Rose, R. Tarjan, SIAM J. Numer. Anal. 16, 1979).
 */
import { assert } from '../assert.ts'
import type { Steps } from '../steps.ts'
import { Cover } from './cover.ts'
import type { Pattern } from './matrix.ts'
import { neighbours, type Neighbours } from './neighbours.ts'
import { places } from './places.ts'

/** An elimination order with the tree of pieces it came from; children come before their parents. */
export interface Ordering {
  /** rank[i]: place of unknown i in the elimination. */
  readonly rank: Int32Array
  /** Piece t eliminates the unknowns of rank first[t] .. first[t + 1), possibly none. */
  readonly first: Int32Array
  /** parent[t] > t: the piece whose cut made piece t; -1 at the root. */
  readonly parent: Int32Array
}

/** Pieces of at most this many unknowns are not cut further. */
const smallPiece = 16
const candidates = 24
const tried = 3
const widest = 0.12

/** The elimination order of a pattern whose unknown i lies at (coordinates[2 i], coordinates[2 i + 1]). */
export function* dissection(pattern: Pattern, coordinates: Float64Array): Steps<Ordering> {
  const { size } = pattern
  assert(coordinates.length === 2 * size, 'two coordinates an unknown')
  const graph = neighbours(pattern)
  const axes = [axis(graph, coordinates, 0), axis(graph, coordinates, 1)] as const
  yield { stage: 'Ordering', done: 0.1 }
  const label = new Int32Array(size)
  const cover = new Cover(size)
  const rank = new Int32Array(size)
  const best = new Int32Array(size)
  const spare = new Int32Array(size)
  // Pieces in preorder, right child first, so that reading them backwards gives children before parents, ranks ascending.
  const from = [0]
  const to = [size]
  const parentOf = [-1]
  const last = [size]
  const ownCount: number[] = []
  const stack = [0]
  let turn = performance.now()
  const order: number[] = []
  let ranked = 0
  const thresholds = new Int32Array(candidates)
  const scores = new Float64Array(candidates)
  const leftBehind = new Int32Array(candidates)
  const rightBehind = new Int32Array(candidates)
  while (stack.length > 0) {
    const t = stack.pop() as number
    order.push(t)
    const a = from[t] as number
    const b = to[t] as number
    const n = b - a
    const end = last[t] as number
    if (n <= smallPiece) {
      const sorted = axes[0].sorted
      for (let k = a; k < b; k++) rank[sorted[k] as number] = end - n + k - a
      ownCount[t] = n
      ranked += n
      continue
    }
    const spanX = (coordinates[2 * (axes[0].sorted[b - 1] as number)] as number) - (coordinates[2 * (axes[0].sorted[a] as number)] as number)
    const spanY = (coordinates[2 * (axes[1].sorted[b - 1] as number) + 1] as number) - (coordinates[2 * (axes[1].sorted[a] as number) + 1] as number)
    const main = spanY > spanX ? axes[1] : axes[0]
    const cross = spanY > spanX ? axes[0] : axes[1]
    // Candidate cuts
    const half = a + (n >> 1)
    const reach = Math.floor(widest * n)
    const count = Math.min(candidates, 2 * reach + 1)
    for (let q = 0; q < count; q++) {
      const k = count === 1 ? half : half - reach + Math.round((2 * reach * q) / (count - 1))
      thresholds[q] = main.place[main.sorted[k] as number] as number
      leftBehind[q] = 0
      rightBehind[q] = 0
    }
    let q = 0
    for (let k = a; k < b; k++) {
      const v = main.sorted[k] as number
      const at = main.place[v] as number
      while (q < count && (thresholds[q] as number) <= at) q++
      const high = main.high[v] as number
      for (let c = q; c < count && (thresholds[c] as number) <= high; c++) leftBehind[c] = (leftBehind[c] as number) + 1
      const low = main.low[v] as number
      for (let c = q - 1; c >= 0 && (thresholds[c] as number) > low; c--) rightBehind[c] = (rightBehind[c] as number) + 1
    }
    for (let c = 0; c < count; c++) {
      const offset = count === 1 ? 0 : Math.abs((2 * c) / (count - 1) - 1) * widest
      scores[c] = Math.min(leftBehind[c] as number, rightBehind[c] as number) * (1 + 4 * offset * offset)
    }
    let bestCount = -1
    let bestThreshold = 0
    let bestScore = Infinity
    for (let round = 0; round < Math.min(tried, count); round++) {
      let c = 0
      for (let d = 1; d < count; d++) if ((scores[d] as number) < (scores[c] as number)) c = d
      if (scores[c] === Infinity) break
      scores[c] = Infinity
      const threshold = thresholds[c] as number
      cover.clear()
      for (let k = a; k < b; k++) {
        const v = main.sorted[k] as number
        if ((main.place[v] as number) >= threshold) break
        if ((main.high[v] as number) < threshold) continue
        const begin = graph.start[v] as number
        const stop = graph.start[v + 1] as number
        const open = cover.open(stop - begin)
        let at = open
        for (let p = begin; p < stop; p++) {
          const u = graph.other[p] as number
          if (label[u] === t && (main.place[u] as number) >= threshold) cover.edge[at++] = u
        }
        if (at > open) cover.close(v, at)
      }
      cover.solve()
      const offset = count === 1 ? 0 : Math.abs((2 * c) / (count - 1) - 1) * widest
      const score = cover.count * (1 + 4 * offset * offset)
      if (score < bestScore) {
        bestScore = score
        bestCount = cover.count
        bestThreshold = threshold
        for (let m = 0; m < cover.count; m++) best[m] = cover.members[m] as number
      }
    }
    const leftPiece = from.length
    const rightPiece = leftPiece + 1
    // labels: separators get -1
    for (let m = 0; m < bestCount; m++) label[best[m] as number] = -1
    let lefts = 0
    let rights = 0
    for (let k = a; k < b; k++) {
      const v = main.sorted[k] as number
      if (label[v] === -1) continue
      if ((main.place[v] as number) < bestThreshold) {
        label[v] = leftPiece
        main.sorted[a + lefts++] = v
      } else {
        label[v] = rightPiece
        spare[rights++] = v
      }
    }
    for (let k = 0; k < rights; k++) main.sorted[a + lefts + k] = spare[k] as number
    let l = 0
    let r = 0
    let s = 0
    for (let k = a; k < b; k++) {
      const v = cross.sorted[k] as number
      if (label[v] === leftPiece) cross.sorted[a + l++] = v
      else if (label[v] === rightPiece) spare[r++] = v
      else rank[v] = end - bestCount + s++
    }
    for (let k = 0; k < r; k++) cross.sorted[a + l + k] = spare[k] as number
    ownCount[t] = bestCount
    ranked += bestCount
    from.push(a, a + lefts)
    to.push(a + lefts, a + lefts + rights)
    parentOf.push(t, t)
    last.push(end - bestCount - rights, end - bestCount)
    stack.push(leftPiece, rightPiece)
    if (performance.now() - turn > 40) {
      yield { stage: 'Ordering', done: ranked / size }
      turn = performance.now()
    }
  }
  const total = order.length
  const number = new Int32Array(total)
  for (let k = 0; k < total; k++) number[order[k] as number] = total - 1 - k
  const first = new Int32Array(total + 1)
  const parent = new Int32Array(total)
  for (let k = 0; k < total; k++) {
    const t = order[total - 1 - k] as number
    first[k + 1] = (first[k] as number) + (ownCount[t] as number)
    parent[k] = t === 0 ? -1 : (number[parentOf[t] as number] as number)
  }
  return { rank, first, parent }
}

function axis(graph: Neighbours, coordinates: Float64Array, which: 0 | 1): { sorted: Int32Array; place: Int32Array; low: Int32Array; high: Int32Array } {
  const { sorted, place } = places(coordinates, which)
  const size = sorted.length
  const low = new Int32Array(size)
  const high = new Int32Array(size)
  for (let v = 0; v < size; v++) {
    let l = place[v] as number
    let h = l
    for (let p = graph.start[v] as number; p < (graph.start[v + 1] as number); p++) {
      const at = place[graph.other[p] as number] as number
      if (at < l) l = at
      if (at > h) h = at
    }
    low[v] = l
    high[v] = h
  }
  return { sorted, place, low, high }
}
