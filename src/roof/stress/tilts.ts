/**
 * Tilts: lifts with no stress, one affine function per part. A node that parts share ties their tilts, for it has one
 * height; conditions tie them further. What is left is 3 per part less the rank of all these rows.
 */
import { rankWeight } from '../../base/geometry/tolerance.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Rows } from '../conditions/rows.ts'

/** Dimension of the tilts that keep the rows with all values zero; `rows` null: nothing is held. */
export function tiltDimension(plan: Plan, rows: Rows | null): number {
  return 3 * plan.partCount - boundTilts(plan, rows).length
}

/** Most parts for which tilts are written out: their basis is (3 parts)^2 numbers. */
const mostParts = 100

/**
 * Heights (length nodeCount) of independent tilts that keep the rows with all values zero, as many as `tiltDimension`
 * says; none for plans of more than a hundred parts.
 */
export function freeTilts(plan: Plan, rows: Rows | null): Float64Array[] {
  if (plan.partCount > mostParts) return []
  const basis = boundTilts(plan, rows)
  const bound = basis.length
  const partOfNode = nodeParts(plan)
  for (let k = 0; k < 3 * plan.partCount; k += 1) {
    const unit = new Float64Array(3 * plan.partCount)
    unit[k] = 1
    addIndependent(basis, unit)
  }
  return basis.slice(bound).map((tilt) => Float64Array.from({ length: plan.nodeCount }, (_, node) => {
    const at = 3 * partOfNode[node]
    return tilt[at] + tilt[at + 1] * plan.work[2 * node] + tilt[at + 2] * plan.work[2 * node + 1]
  }))
}

/** Orthonormal rows on the tilts (three numbers a part) that ties between parts and conditions are made of. */
function boundTilts(plan: Plan, rows: Rows | null): Float64Array[] {
  const full = 3 * plan.partCount
  const basis: Float64Array[] = []
  for (const tie of tiesBetweenParts(plan)) addIndependent(basis, tie)
  if (rows !== null) {
    const partOfNode = nodeParts(plan)
    for (let r = 0; r + 1 < rows.start.length && basis.length < full; r += 1) {
      const row = new Float64Array(full)
      for (let k = rows.start[r]; k < rows.start[r + 1]; k += 1) addAffine(row, plan, rows.node[k], partOfNode[rows.node[k]], rows.weight[k])
      addIndependent(basis, row)
    }
  }
  return basis
}

/** Adds weight times the affine coordinates (1, x, y) of a node, seen from its part. */
function addAffine(row: Float64Array, plan: Plan, node: number, part: number, weight: number): void {
  row[3 * part] += weight
  row[3 * part + 1] += weight * plan.work[2 * node]
  row[3 * part + 2] += weight * plan.work[2 * node + 1]
}

/** Gram-Schmidt, twice: the row joins the orthonormal basis when something of it is left. */
function addIndependent(basis: Float64Array[], row: Float64Array): void {
  const before = length(row)
  for (let pass = 0; pass < 2; pass += 1) {
    for (const other of basis) {
      let share = 0
      for (let i = 0; i < row.length; i += 1) share += other[i] * row[i]
      for (let i = 0; i < row.length; i += 1) row[i] -= share * other[i]
    }
  }
  const after = length(row)
  // A row that was small to begin with (a straight run's, on a tilt) is judged against heights of size 1.
  if (after > rankWeight * Math.max(before, 1)) basis.push(row.map((value) => value / after))
}

const length = (row: Float64Array): number => Math.sqrt(row.reduce((sum, value) => sum + value * value, 0))

/** Part of the first panel at each node. */
function nodeParts(plan: Plan): Int32Array {
  const partOf = new Int32Array(plan.nodeCount)
  for (let p = plan.panelCount - 1; p >= 0; p -= 1) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) partOf[plan.corner[c]] = plan.partOf[p]
  }
  return partOf
}

/** For each node that k parts share, k - 1 rows: the first part's height there less another's. */
function tiesBetweenParts(plan: Plan): Float64Array[] {
  if (plan.partCount === 1) return []
  const first = nodeParts(plan)
  const ties = new Map<string, Float64Array>()
  for (let p = 0; p < plan.panelCount; p += 1) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const node = plan.corner[c], part = plan.partOf[p]
      const key = `${node} ${part}`
      if (first[node] === part || ties.has(key)) continue
      const row = new Float64Array(3 * plan.partCount)
      addAffine(row, plan, node, first[node], 1)
      addAffine(row, plan, node, part, -1)
      ties.set(key, row)
    }
  }
  return [...ties.values()]
}
