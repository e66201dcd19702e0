/**
 * The order in which the conditions of an adjustment are eliminated. The conditions of one panel have the same nodes, so the
 * panels are ordered, a third as many unknowns with a ninth of the couplings, and each stands for its rows.
 */
import { cliquePattern } from '../../../base/sparse/cliques.ts'
import { dissection, type Ordering } from '../../../base/sparse/order.ts'
import type { Steps } from '../../../base/steps.ts'
import type { MoveRows } from './rows.ts'

/**
 * Nested dissection of the rows by where they lie, `at` (x y x y ..). rowsByNode[start[n] .. start[n + 1]): the rows of node n,
 * ascending.
 */
export function* rowOrdering(rows: MoveRows, at: Float64Array, start: Int32Array, rowsByNode: Int32Array): Steps<Ordering> {
  const { group, groupCount } = groups(rows)
  const places = new Float64Array(2 * groupCount)
  for (let r = 0; r < group.length; r += 1) {
    places[2 * group[r]] = at[2 * r]
    places[2 * group[r] + 1] = at[2 * r + 1]
  }
  // Rows of a group are consecutive, so they come one after another at every node.
  const nodeStart = new Int32Array(start.length)
  const members = new Int32Array(rowsByNode.length)
  let count = 0
  for (let n = 0; n + 1 < start.length; n += 1) {
    let latest = -1
    for (let i = start[n]; i < start[n + 1]; i += 1) {
      const g = group[rowsByNode[i]]
      if (g === latest) continue
      members[count++] = latest = g
    }
    nodeStart[n + 1] = count
  }
  const { pattern } = cliquePattern(groupCount, nodeStart, members.subarray(0, count))
  return spreadOut(yield* dissection(pattern, places), group, groupCount)
}

/** Number of each row's group: rows after one another with the same nodes. */
function groups({ start, node, right }: MoveRows): { group: Int32Array; groupCount: number } {
  const group = new Int32Array(right.length)
  let groupCount = 0
  for (let r = 0; r < group.length; r += 1) {
    const length = start[r + 1] - start[r]
    let isSame = r > 0 && start[r] - start[r - 1] === length
    for (let k = 0; isSame && k < length; k += 1) isSame = node[start[r] + k] === node[start[r - 1] + k]
    if (!isSame) groupCount += 1
    group[r] = groupCount - 1
  }
  return { group, groupCount }
}

/** The order of the rows from that of their groups. */
function spreadOut({ rank, first, parent }: Ordering, group: Int32Array, groupCount: number): Ordering {
  const before = new Int32Array(groupCount + 1)
  for (const g of group) before[rank[g] + 1] += 1
  for (let k = 1; k <= groupCount; k += 1) before[k] += before[k - 1]
  const firstRow = first.map((k) => before[k])
  const rowRank = new Int32Array(group.length)
  for (let r = 0; r < group.length; r += 1) rowRank[r] = before[rank[group[r]]]++
  return { rank: rowRank, first: firstRow, parent }
}
