/**
 * Tilts: lifts with no stress, one affine function per part. A node that parts share ties their tilts, for it has one
 * height: one condition a shared node and further part, of which only the independent ones count.
 */
import { Matrix, SVD } from 'ml-matrix'
import type { Plan } from '../../plan/plan.ts'

/** Dimension of the tilts: 3 per part, less the rank of the ties between parts. */
export function tiltDimension(plan: Plan): number {
  const ties = tiesBetweenParts(plan)
  if (ties.length === 0) return 3 * plan.partCount
  // Parts that share nodes form clusters; most are small, so the rank is taken cluster by cluster.
  let rank = 0
  for (const cluster of clusters(plan.partCount, ties)) {
    const column = new Map(cluster.parts.map((part, i) => [part, 3 * i]))
    const rows = cluster.ties.map(({ node, first, second }) => {
      const row = new Array<number>(3 * cluster.parts.length).fill(0)
      const affine = [1, plan.work[2 * node], plan.work[2 * node + 1]]
      affine.forEach((value, k) => {
        row[(column.get(first) ?? 0) + k] = value
        row[(column.get(second) ?? 0) + k] = -value
      })
      return row
    })
    rank += new SVD(new Matrix(rows), { autoTranspose: true }).rank
  }
  return 3 * plan.partCount - rank
}

interface Tie {
  readonly node: number
  readonly first: number
  readonly second: number
}

/** For each node that k parts share, k - 1 ties from its first part to the others. */
function tiesBetweenParts(plan: Plan): Tie[] {
  const firstPart = new Int32Array(plan.nodeCount).fill(-1)
  const ties = new Map<string, Tie>()
  if (plan.partCount === 1) return []
  for (let p = 0; p < plan.panelCount; p += 1) {
    const part = plan.partOf[p]
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const node = plan.corner[c]
      if (firstPart[node] < 0) firstPart[node] = part
      else if (firstPart[node] !== part) ties.set(`${node} ${part}`, { node, first: firstPart[node], second: part })
    }
  }
  return [...ties.values()]
}

/** Groups of parts that ties connect, each with its ties. */
function clusters(partCount: number, ties: readonly Tie[]): { parts: number[]; ties: Tie[] }[] {
  const group = Int32Array.from({ length: partCount }, (_, i) => i)
  const root = (i: number): number => (group[i] === i ? i : (group[i] = root(group[i])))
  for (const { first, second } of ties) group[root(first)] = root(second)
  const found = new Map<number, { parts: number[]; ties: Tie[] }>()
  for (const tie of ties) {
    const key = root(tie.first)
    const cluster = found.get(key) ?? { parts: [], ties: [] }
    cluster.ties.push(tie)
    for (const part of [tie.first, tie.second]) if (!cluster.parts.includes(part)) cluster.parts.push(part)
    found.set(key, cluster)
  }
  return [...found.values()]
}
