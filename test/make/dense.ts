/**
 * The dense twin roads, for small plans: singular values by ml-matrix. They share the plan and nothing else with the sparse
 * solver; the flatness conditions are four-point determinants, not projections.
 */
import { Matrix, SVD } from 'ml-matrix'
import type { Plan } from '../../src/plan/plan.ts'
import { closure } from '../../src/roof/stress/closure.ts'

/** Rank by the gap in singular values: below 1e-9 of the largest. */
export function rank(rows: number[][], columns: number): number {
  if (rows.length === 0) return 0
  const values = new SVD(new Matrix(rows), { autoTranspose: true, computeLeftSingularVectors: false, computeRightSingularVectors: false }).diagonal
  return values.slice(0, columns).filter((value) => value > 1e-9 * values[0]!).length
}

/** Rows of the four-points-coplanar conditions: for each panel a base triangle as large as can be, and every other corner. */
export function flatnessRows(plan: Plan): number[][] {
  const rows: number[][] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    const nodes = Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]))
    const at = (node: number): [number, number] => [plan.work[2 * node]!, plan.work[2 * node + 1]!]
    const area = (a: number, b: number, c: number): number => {
      const [ax, ay] = at(a), [bx, by] = at(b), [cx, cy] = at(c)
      return (bx - ax) * (cy - ay) - (by - ay) * (cx - ax)
    }
    let base: [number, number, number] = [nodes[0]!, nodes[1]!, nodes[2]!]
    for (const a of nodes) for (const b of nodes) for (const c of nodes) if (area(a, b, c) > area(...base)) base = [a, b, c]
    for (const node of nodes) {
      if (base.includes(node)) continue
      // Barycentric: z(node) = sum of the base heights by areas.
      const [a, b, c] = base
      const whole = area(a, b, c)
      const row = new Array<number>(plan.nodeCount).fill(0)
      row[node] = 1
      row[a] = -area(node, b, c) / whole
      row[b] = -area(a, node, c) / whole
      row[c] = -area(a, b, node) / whole
      rows.push(row)
    }
  }
  return rows
}

/** dim(lifts) from the four-point conditions. */
export function dimensionOfLifts(plan: Plan): number {
  return plan.nodeCount - rank(flatnessRows(plan), plan.nodeCount)
}

/** Dimension of the equilibrium stresses: joints less rank of the closure conditions, forces scaled by joint length. */
export function closureFreedom(plan: Plan): number {
  const { start, joint, value } = closure(plan)
  const rows: number[][] = []
  for (let r = 0; r + 1 < start.length; r += 1) {
    const row = new Array<number>(plan.jointCount).fill(0)
    for (let k = start[r]!; k < start[r + 1]!; k += 1) row[joint[k]!] = value[k]!
    const size = Math.hypot(...row)
    if (size > 0) rows.push(row.map((entry) => entry / size))
  }
  return plan.jointCount - rank(rows, plan.jointCount)
}
