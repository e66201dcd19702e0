/**
 * Where edges must be cut: at nodes that lie on them and where they cross. Only what shares a cell of a grid is compared,
 * never all against all.
 */
import { cellsSpanned, bin, densityGrid, pointsByCell, segmentsByCell, type Cells, type Grid } from '../../base/geometry/grid-index.ts'
import { Doubles, Integers } from '../../base/growing.ts'
import { NearPoints } from '../../base/geometry/near-points.ts'
import { crossProperly, crossingPoint } from '../../base/geometry/segment-crossing.ts'
import { mostCrossings, mostPairs, mostTouches, splitSine } from '../../base/geometry/tolerance.ts'
import { fail, ok, type Result } from '../../base/result.ts'
import type { Steps } from '../../base/steps.ts'

/** Cut k: edge[k] passes node[k]. */
export class Cuts {
  readonly edge = new Integers()
  readonly node = new Integers()
  /** How far the node lay from the edge. */
  readonly gap = new Doubles()

  add(edge: number, node: number, gap: number): void {
    this.edge.push(edge)
    this.node.push(node)
    this.gap.push(gap)
  }
}

/** Nodes and the edges between them; nodes are only ever added. */
export interface LineWork {
  x: Float64Array
  y: Float64Array
  a: Int32Array
  b: Int32Array
}

export interface LineIndex {
  readonly grid: Grid
  readonly edges: Cells
}

/** Comparisons between two yields: some milliseconds. */
const comparisonsPerStep = 200_000

/** The grid and which edges come within `pad` of each cell. */
export function* lineIndex({ x, y, a, b }: LineWork, pad: number): Steps<LineIndex> {
  // About two cells an edge; fewer when long edges would fill too many of them.
  let lines = Math.max(1, Math.ceil(Math.sqrt(2 * a.length)))
  let grid = densityGrid(x, y, x.length, lines)
  const filled = cellsSpanned(grid, x, y, a, b)
  const room = 8 * a.length + 1_000_000
  if (filled > room) {
    lines = Math.max(1, Math.floor((lines * room) / filled))
    grid = densityGrid(x, y, x.length, lines)
  }
  yield { stage: 'Joining lines', done: 0.1 }
  const edges = segmentsByCell(grid, x, y, a, b, pad)
  yield { stage: 'Joining lines', done: 0.2 }
  return { grid, edges }
}

/**
 * Every node that lies within `reach` of the inside of an edge that does not end there. A node that a short edge ties to
 * an end of that edge only touches it when both run nearly alike: plans have edges shorter than the snap distance.
 */
export function* touchingNodes({ x, y, a, b }: LineWork, { grid, edges }: LineIndex, reach: number): Steps<Result<Cuts>> {
  const nodes = pointsByCell(grid, x, y, x.length)
  const cuts = new Cuts()
  const tied = ties(a, b)
  const inUse = new Uint8Array(x.length)
  for (let e = 0; e < a.length; e += 1) {
    inUse[a[e]] = 1
    inUse[b[e]] = 1
  }
  let compared = 0
  let pairs = 0
  for (let cell = 0; cell + 1 < edges.start.length; cell += 1) {
    const nodesFrom = nodes.start[cell]
    const nodesTo = nodes.start[cell + 1]
    if (nodesFrom === nodesTo) continue
    compared += (edges.start[cell + 1] - edges.start[cell]) * (nodesTo - nodesFrom)
    if (compared > comparisonsPerStep) {
      pairs += compared
      compared = 0
      if (pairs > mostPairs || cuts.edge.length > mostTouches) return tooManyLines(x[nodes.item[nodesFrom]], y[nodes.item[nodesFrom]])
      yield { stage: 'Joining lines', done: 0.2 + (0.3 * cell) / edges.start.length }
    }
    for (let k = edges.start[cell]; k < edges.start[cell + 1]; k += 1) {
      const edge = edges.item[k]
      const ax = x[a[edge]], ay = y[a[edge]]
      const ux = x[b[edge]] - ax, uy = y[b[edge]] - ay
      const square = ux * ux + uy * uy
      const reachAcross = reach * Math.sqrt(square)
      for (let n = nodesFrom; n < nodesTo; n += 1) {
        const node = nodes.item[n]
        if (node === a[edge] || node === b[edge] || inUse[node] === 0) continue
        const vx = x[node] - ax, vy = y[node] - ay
        const along = ux * vx + uy * vy
        if (!(along > 0 && along < square)) continue
        const across = Math.abs(ux * vy - uy * vx)
        if (across > reachAcross) continue
        const gap = across / Math.sqrt(square)
        if (gap > 0) {
          const nearEnd = 2 * along <= square ? a[edge] : b[edge]
          const far = Math.sqrt((x[node] - x[nearEnd]) ** 2 + (y[node] - y[nearEnd]) ** 2)
          if (gap > splitSine * far && tied(node, nearEnd)) continue
        }
        cuts.add(edge, node, gap)
      }
    }
  }
  return ok(cuts)
}

/**
 * Every proper crossing as two cuts at one node, new nodes being appended to `lines`. A crossing within `reach` of a node
 * uses that node, so that three lines through nearly one point share one. Fails when lines cross too often to be a plan.
 */
export function* crossings(lines: LineWork, { grid, edges }: LineIndex, reach: number): Steps<Result<{ cuts: Cuts; newNodes: number }>> {
  const { x, y, a, b } = lines
  const oldCount = x.length
  const cuts = new Cuts()
  let near: NearPoints | null = null
  let pairs = 0
  let compared = 0
  let found = 0
  const at = new Float64Array(2)
  const nodeAt = (px: number, py: number): number => {
    if (near === null) {
      near = new NearPoints(reach, 2 * oldCount)
      for (let i = 0; i < oldCount; i += 1) near.add(x[i], y[i])
    }
    const node = near.nearest(px, py)
    return node >= 0 ? node : near.add(px, py)
  }
  for (let cell = 0; cell + 1 < edges.start.length; cell += 1) {
    const from = edges.start[cell]
    const to = edges.start[cell + 1]
    const column = cell % grid.columns
    const row = (cell - column) / grid.columns
    for (let k = from + 1; k < to; k += 1) {
      const e = edges.item[k]
      const ea = a[e], eb = b[e]
      const ax = x[ea], ay = y[ea], bx = x[eb], by = y[eb]
      const left = Math.min(ax, bx), right = Math.max(ax, bx), low = Math.min(ay, by), high = Math.max(ay, by)
      for (let l = from; l < k; l += 1) {
        const f = edges.item[l]
        const fa = a[f], fb = b[f]
        if (fa === ea || fa === eb || fb === ea || fb === eb) continue
        const cx = x[fa], dx = x[fb]
        if ((cx < left && dx < left) || (cx > right && dx > right)) continue
        const cy = y[fa], dy = y[fb]
        if ((cy < low && dy < low) || (cy > high && dy > high)) continue
        if (!crossProperly(ax, ay, bx, by, cx, cy, dx, dy)) continue
        crossingPoint(ax, ay, bx, by, cx, cy, dx, dy, at)
        // Two edges may share several cells: the crossing is taken in its own.
        if (bin(grid.columnBorder, at[0]) !== column || bin(grid.rowBorder, at[1]) !== row) continue
        found += 1
        if (found > mostCrossings) {
          return fail('too-many-crossings', `lines cross more than ${mostCrossings.toLocaleString('en')} times`, { at: [at[0], at[1]] },
            'a plan has far fewer: choose the layers of its joints with --layer')
        }
        const end = nearestEnd(x, y, ea, eb, fa, fb, at, reach)
        if (end === ea || end === eb) cuts.add(f, end, 0)
        else if (end >= 0) cuts.add(e, end, 0)
        else {
          const node = nodeAt(at[0], at[1])
          cuts.add(e, node, 0)
          cuts.add(f, node, 0)
        }
      }
      pairs += k - from
      compared += k - from
      if (compared > comparisonsPerStep) {
        compared = 0
        if (pairs > mostPairs) {
          return tooManyLines(ax, ay)
        }
        yield { stage: 'Joining lines', done: 0.5 + (0.5 * cell) / edges.start.length }
      }
    }
  }
  const grown = near as NearPoints | null
  if (grown !== null) {
    lines.x = grown.x.slice()
    lines.y = grown.y.slice()
  }
  return ok({ cuts, newNodes: lines.x.length - oldCount })
}

/** Whether an edge joins two nodes; the table is made when it is first asked for. */
function ties(a: Int32Array, b: Int32Array): (m: number, n: number) => boolean {
  let known: Set<number> | null = null
  const key = (m: number, n: number): number => Math.min(m, n) * 2 ** 26 + Math.max(m, n)
  return (m, n) => {
    if (known === null) {
      known = new Set()
      for (let e = 0; e < a.length; e += 1) known.add(key(a[e], b[e]))
    }
    return known.has(key(m, n))
  }
}

function tooManyLines(x: number, y: number): Result<never> {
  return fail('too-many-lines', 'too many lines run side by side or over each other to be a plan', { at: [x, y] }, 'choose the layers of its joints with --layer')
}

/** The nearest of four nodes within `reach` of the point, -1 when none is. */
function nearestEnd(x: Float64Array, y: Float64Array, ea: number, eb: number, fa: number, fb: number, at: Float64Array, reach: number): number {
  let best = -1
  let bestSquare = reach * reach
  for (let k = 0; k < 4; k += 1) {
    const node = k === 0 ? ea : k === 1 ? eb : k === 2 ? fa : fb
    const square = (x[node] - at[0]) ** 2 + (y[node] - at[1]) ** 2
    if (square <= bestSquare) {
      best = node
      bestSquare = square
    }
  }
  return best
}
