/**
 * Random conditions on a plan, each with its rows written out densely from its definition, so that the program's own rows
 * have a twin. Rows are on working heights h = z / span, datum 0.
 */
import type { Plan } from '../../src/plan/plan.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { coplanarRows, cornersOf, dot } from './dense-roof.ts'

export interface Drawn {
  readonly condition: Condition
  readonly rows: number[][]
  readonly values: number[]
}

type Next = () => number
const below = (next: Next, n: number): number => Math.floor(next() * n)
const nodeName = (node: number): string => `N${node + 1}`

/** The row of these weights by node, all others 0. */
function row(plan: Plan, ...entries: readonly (readonly [node: number, weight: number])[]): number[] {
  const out = new Array<number>(plan.nodeCount).fill(0)
  for (const [node, weight] of entries) out[node]! += weight
  return out
}

/**
 * A condition of a random kind. `roof`: heights that it is to agree with where it has values (working heights of a lift);
 * null: values are drawn too, so that conditions may clash.
 */
export function randomCondition(plan: Plan, next: Next, name: string, roof: readonly number[] | null, soft: number | null): Drawn {
  const { span } = plan.frame
  const node = (): number => below(next, plan.nodeCount)
  const draw = below(next, 8)
  const nodes = [...new Set(Array.from({ length: 1 + below(next, 3) }, node))]
  const levelAt = (n: number): number => (roof === null ? 0.2 * (next() - 0.5) : roof[n]!)
  switch (draw) {
    case 0: {
      const rim = rimNodes(plan)
      return {
        condition: { kind: 'level', name, soft, at: { rim: 'outer' }, level: 0 },
        rows: rim.map((n) => row(plan, [n, 1])),
        values: rim.map(() => 0),
      }
    }
    case 1:
    case 2: {
      const height = levelAt(nodes[0]!)
      const [n] = nodes as [number]
      return {
        condition: { kind: 'level', name, soft, at: { nodes: [nodeName(n)] }, level: height * span },
        rows: [row(plan, [n, 1])],
        values: [height],
      }
    }
    case 3: {
      const pair = [...new Set([...nodes, (nodes[0]! + 1) % plan.nodeCount])]
      return {
        condition: { kind: 'equal', name, soft, at: { nodes: pair.map(nodeName) } },
        rows: pair.slice(1).map((n) => row(plan, [n, 1], [pair[0]!, -1])),
        values: pair.slice(1).map(() => 0),
      }
    }
    case 4: {
      const panels = [...new Set([below(next, plan.panelCount), below(next, plan.panelCount)])]
      const rows = coplanarRows(plan, [...new Set(panels.flatMap((p) => cornersOf(plan, p)))])
      return {
        condition: { kind: 'coplanar', name, soft, at: { panels: panels.map((p) => `P${p + 1}`) } },
        rows,
        values: rows.map(() => 0),
      }
    }
    case 5: {
      const joint = below(next, plan.jointCount)
      const rows = coplanarRows(plan, [
        ...new Set([plan.panelOf[2 * joint]!, plan.panelOf[2 * joint + 1]!].flatMap((p) => cornersOf(plan, p))),
      ])
      return { condition: { kind: 'flush', name, soft, at: { joints: [`J${joint + 1}`] } }, rows, values: rows.map(() => 0) }
    }
    case 6: {
      // The plane of a panel in the roof, or one with a pitch of its own.
      const panel = below(next, plan.panelCount)
      const corners = cornersOf(plan, panel)
      const [gx, gy] = roof === null ? [0.3 * (next() - 0.5), 0.3 * (next() - 0.5)] : gradient(plan, corners, roof)
      const pitch_deg = Math.atan(Math.hypot(gx, gy)) * (180 / Math.PI)
      const bearing_deg = Math.atan2(-gx, -gy) * (180 / Math.PI)
      const first = corners[0]!
      const rest = corners.slice(1)
      return {
        condition: { kind: 'plane', name, soft, at: { panels: [`P${panel + 1}`] }, pitch_deg, bearing_deg },
        rows: rest.map((n) => row(plan, [n, 1], [first, -1])),
        values: rest.map(
          (n) => gx * (plan.work[2 * n]! - plan.work[2 * first]!) + gy * (plan.work[2 * n + 1]! - plan.work[2 * first + 1]!),
        ),
      }
    }
    default:
      return runCondition(plan, next, name, soft)
  }
}

/** A straight run or a fall between two nodes. */
function runCondition(plan: Plan, next: Next, name: string, soft: number | null): Drawn {
  let run: { node: number; along: number }[] = []
  for (let attempt = 0; attempt < 20 && run.length < 3; attempt += 1) {
    run = between(plan, below(next, plan.nodeCount), below(next, plan.nodeCount))
  }
  const [first, last] = [run[0]!, run[run.length - 1]!]
  const at = { run: [nodeName(first.node), nodeName(last.node)] }
  if (run.length >= 3 && next() < 0.7) {
    const inner = run.slice(1, -1)
    return {
      condition: { kind: 'straight', name, soft, at },
      rows: inner.map(({ node, along }) => {
        const t = along / last.along
        return row(plan, [node, 1], [first.node, t - 1], [last.node, -t])
      }),
      values: inner.map(() => 0),
    }
  }
  const per_mille = Math.round(40 * (next() - 0.5))
  const rest = run.slice(1)
  return {
    condition: { kind: 'fall', name, soft, at, per_mille, level: null },
    rows: rest.map(({ node }) => row(plan, [node, 1], [first.node, -1])),
    values: rest.map(({ along }) => (-per_mille / 1000) * along),
  }
}

/** Nodes on the segment from one node to another (within a micrometre of the span), in order. */
function between(plan: Plan, from: number, to: number): { node: number; along: number }[] {
  const other = from === to ? (from + 1) % plan.nodeCount : to
  const [px, py] = [plan.work[2 * from]!, plan.work[2 * from + 1]!]
  const [dx, dy] = [plan.work[2 * other]! - px, plan.work[2 * other + 1]! - py]
  const length = Math.hypot(dx, dy)
  const within = Math.max(1e-6, 0.001 / plan.frame.span)
  return Array.from({ length: plan.nodeCount }, (_, node) => {
    const [qx, qy] = [plan.work[2 * node]! - px, plan.work[2 * node + 1]! - py]
    return { node, along: (qx * dx + qy * dy) / length, off: Math.abs(qx * dy - qy * dx) / length }
  })
    .filter(({ along, off }) => off <= within && along > -within && along < length + within)
    .sort((a, b) => a.along - b.along)
}

/** Nodes on the outer rims: every rim loop that runs clockwise. */
function rimNodes(plan: Plan): number[] {
  const found = new Set<number>()
  for (let loop = 0; loop + 1 < plan.rimStart.length; loop += 1) {
    const round = [...plan.rimHalf.slice(plan.rimStart[loop], plan.rimStart[loop + 1])].map((half) => plan.origin[half]!)
    const twice = round.reduce((sum, a, k) => {
      const b = round[(k + 1) % round.length]!
      return sum + plan.work[2 * a]! * plan.work[2 * b + 1]! - plan.work[2 * b]! * plan.work[2 * a + 1]!
    }, 0)
    if (twice < 0) for (const node of round) found.add(node)
  }
  return [...found]
}

function gradient(plan: Plan, corners: readonly number[], heights: readonly number[]): readonly [number, number] {
  // Least squares over all corners: exact for a lift.
  const mean = (of: (n: number) => number): number => corners.reduce((sum, n) => sum + of(n), 0) / corners.length
  const [mx, my, mz] = [mean((n) => plan.work[2 * n]!), mean((n) => plan.work[2 * n + 1]!), mean((n) => heights[n]!)]
  const xs = corners.map((n) => plan.work[2 * n]! - mx),
    ys = corners.map((n) => plan.work[2 * n + 1]! - my),
    zs = corners.map((n) => heights[n]! - mz)
  const [xx, xy, yy, xz, yz] = [dot(xs, xs), dot(xs, ys), dot(ys, ys), dot(xs, zs), dot(ys, zs)]
  const det = xx * yy - xy * xy
  return [(xz * yy - yz * xy) / det, (yz * xx - xz * xy) / det]
}
