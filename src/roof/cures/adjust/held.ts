/** Heights that conditions tie to others, as rows of the adjustment: node n lies at particular + sum weight * (free heights). */
import type { Plan } from '../../../plan/plan.ts'
import type { Elimination } from '../../conditions/eliminate.ts'
import type { RowBlock } from './rows.ts'

/** One row a tied node; held nodes have no row, since they do not move. */
export function tiedBlock(plan: Plan, elimination: Elimination): RowBlock {
  const { start, unknown, weight, free, particular } = elimination
  const isFree = new Uint8Array(plan.nodeCount)
  for (const node of free) isFree[node] = 1
  const tied: number[] = []
  const counts: number[] = []
  const node: number[] = []
  const at: number[] = []
  for (let n = 0; n < plan.nodeCount; n += 1) {
    if (isFree[n] === 1 || start[n] === start[n + 1]) continue
    tied.push(n)
    counts.push(1 + start[n + 1] - start[n])
    at.push(plan.work[2 * n], plan.work[2 * n + 1])
    node.push(n)
    for (let t = start[n]; t < start[n + 1]; t += 1) node.push(free[unknown[t]])
  }
  return {
    counts: Int32Array.from(counts), node: Int32Array.from(node), at: Float64Array.from(at),
    give: 0,
    fill({ heights }, { cz, right }, firstEntry, firstRow) {
      let e = firstEntry
      tied.forEach((n, i) => {
        let wanted = particular[n]
        cz[e++] = 1
        for (let t = start[n]; t < start[n + 1]; t += 1) {
          cz[e++] = -weight[t]
          wanted += weight[t] * heights[free[unknown[t]]]
        }
        right[firstRow + i] = wanted - heights[n]
      })
    },
  }
}
