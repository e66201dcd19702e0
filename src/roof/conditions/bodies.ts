/**
 * What carries known heights from node to node: each panel, and each condition that ties nodes to each other. A body is a
 * set of nodes whose heights are known but for a few numbers:
 *
 *   dim 1: h_n = c + offset_n             (equal levels, a fall or a plane of known gradient without a level)
 *   dim 2: h_n = c + d t_n                (a straight run, t_n along it)
 *   dim 3: h_n = c + g . p_n + offset_n   (a panel, panels in one plane; with a form force: a plane and corners that lie
 *                                          so high over it)
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
  const most = plan.panelCount + rowCount(rows)
  const entries = plan.corner.length + rows.node.length
  const dim = new Uint8Array(most)
  const condition = new Int32Array(most).fill(-1)
  const start = new Int32Array(most + 1)
  const node = new Int32Array(entries)
  const offset = new Float64Array(entries)
  const t = new Float64Array(entries)

  node.set(plan.corner)
  start.set(plan.panelStart)
  dim.fill(3, 0, plan.panelCount)
  let count = plan.panelCount
  let at = plan.corner.length
  let anchorRow = -1
  for (let r = 0; r < rowCount(rows); r += 1) {
    const [from, to] = [rows.start[r], rows.start[r + 1]]
    if (to - from < 2) continue
    if (anchorRow < 0 || !sameAnchors(rows, anchorRow, r)) {
      anchorRow = r
      dim[count] = to - from - 1
      condition[count] = rows.condition[r]
      count += 1
      for (let i = from + 1; i < to; i += 1) {
        node[at] = rows.node[i]
        t[at] = i - from - 1
        at += 1
      }
    }
    const scale = rows.weight[from]
    node[at] = rows.node[from]
    offset[at] = rows.value[r] / scale
    t[at] = to - from === 3 ? -rows.weight[from + 2] / scale : 0
    at += 1
    start[count] = at
  }
  return {
    count, dim: dim.subarray(0, count), condition: condition.subarray(0, count), start: start.subarray(0, count + 1),
    node: node.subarray(0, at), offset: offset.subarray(0, at), t: t.subarray(0, at),
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
