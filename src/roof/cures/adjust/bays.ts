/**
 * Equal bays: along a straight run whose nodes are drawn at even distances, each stays in the middle of the two beside it,
 *     u . (p(k-1) - 2 p(k) + p(k+1)) = what it is as drawn,
 * with u along the run; across it the straight runs see to themselves.
 */
import { nearlyStraight } from '../../../base/geometry/tolerance.ts'
import type { Steps } from '../../../base/steps.ts'
import { equalBays, evenly } from '../../../plan/regular/equal.ts'
import { straightness } from '../../../plan/regular/lines.ts'
import { runsOf } from '../../../plan/runs.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { RowBlock } from './rows.ts'

/** Three nodes one bay apart each, and the direction of their run. */
export interface Bays {
  /** before, middle, after: three a row. */
  readonly nodes: Int32Array
  /** ux uy: two a row. */
  readonly along: Float64Array
}

/** Bays that are equal within `tolerance` (spans). `mayMove`: whether a node can move at all; rows of nodes that cannot are left out. */
export function* baysKept(plan: Plan, tolerance: number, mayMove: (node: number) => boolean): Steps<Bays> {
  const runs = yield* runsOf(plan)
  if (!runs.areMeant) return { nodes: new Int32Array(0), along: new Float64Array(0) }
  const off = straightness(plan.work, runs, new Uint8Array(runs.node.length).fill(1))
  const isStraight = Uint8Array.from(off, (worst) => (worst <= nearlyStraight * tolerance ? 1 : 0))
  const groups = yield* equalBays(plan, plan.work, runs, isStraight, tolerance, tolerance)
  const nodes: number[] = [], along: number[] = []
  const known = new Set<string>()
  for (let g = 0; g + 1 < groups.start.length; g += 1) {
    if (groups.off[g] > tolerance) continue
    const { ux, uy } = evenly(plan.work, groups, g)
    for (let k = groups.start[g] + 1; k + 1 < groups.start[g + 1]; k += 1) {
      const [a, b, c] = [groups.node[k - 1], groups.node[k], groups.node[k + 1]]
      const key = `${Math.min(a, c)} ${b} ${Math.max(a, c)}`
      if (known.has(key) || ![a, b, c].some(mayMove)) continue
      known.add(key)
      nodes.push(a, b, c)
      along.push(ux, uy)
    }
  }
  return { nodes: Int32Array.from(nodes), along: Float64Array.from(along) }
}

export function baysBlock(plan: Plan, { nodes, along }: Bays): RowBlock {
  const count = along.length / 2
  const weight = [1, -2, 1]
  const uneven = (work: Float64Array, i: number): number => {
    let sum = 0
    for (let k = 0; k < 3; k += 1) sum += weight[k] * (along[2 * i] * work[2 * nodes[3 * i + k]] + along[2 * i + 1] * work[2 * nodes[3 * i + k] + 1])
    return sum
  }
  const drawn = Float64Array.from({ length: count }, (_, i) => uneven(plan.work, i))
  return {
    counts: new Int32Array(count).fill(3), node: nodes, give: 0,
    at: Float64Array.from({ length: 2 * count }, (_, j) => plan.work[2 * nodes[3 * (j >> 1) + 1] + (j & 1)]),
    fill({ work }, { cx, cy, right }, firstEntry, firstRow) {
      for (let i = 0; i < count; i += 1) {
        for (let k = 0; k < 3; k += 1) {
          cx[firstEntry + 3 * i + k] = weight[k] * along[2 * i]
          cy[firstEntry + 3 * i + k] = weight[k] * along[2 * i + 1]
        }
        right[firstRow + i] = drawn[i] - uneven(work, i)
      }
    },
  }
}
