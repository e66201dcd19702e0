/**
 * What carries known heights from node to node: each panel, and each condition that ties nodes to each other. A body is a
 * set of nodes whose heights are known but for a few numbers:
 *
 *   dim 1: h_n = c + offset_n             (equal levels, a fall or a plane of known gradient without a level)
 *   dim 2: h_n = c + d t_n                (a straight run, t_n along it)
 *   dim 3: h_n = c + g . p_n              (a panel, panels in one plane)
 *
 * So dim known heights in general position give the rest.
 */
import type { Plan } from '../../plan/plan.ts'
import { rowCount, type Rows } from './rows.ts'

export interface Bodies {
  readonly count: number
  readonly dim: Uint8Array
  /** Condition of the body, -1: it is the panel of the same index (bodies 0 .. panelCount - 1 are the panels). */
  readonly condition: Int32Array
  /** Nodes of body b: node[start[b] .. start[b + 1]); offset_n and t_n beside them (0 where the dim has none). */
  readonly start: Int32Array
  readonly node: Int32Array
  readonly offset: Float64Array
  readonly t: Float64Array
}

/**
 * The bodies of a plan and its hard rows. A row with several entries reads "this node by its anchors": the node first,
 * then one, two or three anchors; rows of one condition with the same anchors make one body.
 */
export function bodiesOf(plan: Plan, rows: Rows): Bodies {
  const dim: number[] = []
  const condition: number[] = []
  const start = [0]
  const node: number[] = []
  const offset: number[] = []
  const t: number[] = []
  const put = (n: number, off: number, along: number): void => {
    node.push(n)
    offset.push(off)
    t.push(along)
  }
  for (let p = 0; p < plan.panelCount; p += 1) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) put(plan.corner[c], 0, 0)
    dim.push(3)
    condition.push(-1)
    start.push(node.length)
  }
  let anchorRow = -1
  for (let r = 0; r < rowCount(rows); r += 1) {
    const [from, to] = [rows.start[r], rows.start[r + 1]]
    if (to - from < 2) continue
    if (anchorRow < 0 || !sameAnchors(rows, anchorRow, r)) {
      if (anchorRow >= 0) start.push(node.length)
      anchorRow = r
      dim.push(to - from - 1)
      condition.push(rows.condition[r])
      for (let i = from + 1; i < to; i += 1) put(rows.node[i], 0, i - from - 1)
    }
    const scale = rows.weight[from]
    put(rows.node[from], rows.value[r] / scale, to - from === 3 ? -rows.weight[from + 2] / scale : 0)
  }
  if (anchorRow >= 0) start.push(node.length)
  return {
    count: dim.length,
    dim: Uint8Array.from(dim),
    condition: Int32Array.from(condition),
    start: Int32Array.from(start),
    node: Int32Array.from(node),
    offset: Float64Array.from(offset),
    t: Float64Array.from(t),
  }
}

function sameAnchors(rows: Rows, a: number, b: number): boolean {
  const length = rows.start[a + 1] - rows.start[a]
  if (rows.condition[a] !== rows.condition[b] || length !== rows.start[b + 1] - rows.start[b]) return false
  for (let i = 1; i < length; i += 1) if (rows.node[rows.start[a] + i] !== rows.node[rows.start[b] + i]) return false
  return true
}

/** The bodies at each node: body[start[n] .. start[n + 1]). */
export function bodiesAt(bodies: Bodies, nodeCount: number): { start: Int32Array; body: Int32Array } {
  const start = new Int32Array(nodeCount + 1)
  for (const n of bodies.node) start[n + 1] += 1
  for (let n = 0; n < nodeCount; n += 1) start[n + 1] += start[n]
  const next = start.slice(0, nodeCount)
  const body = new Int32Array(bodies.node.length)
  for (let b = 0; b < bodies.count; b += 1) {
    for (let i = bodies.start[b]; i < bodies.start[b + 1]; i += 1) {
      const n = bodies.node[i]
      body[next[n]] = b
      next[n] += 1
    }
  }
  return { start, body }
}
