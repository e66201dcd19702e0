/**
 * Symbolic analysis: what the factor of a pattern needs, whatever the values. The elimination tree and the row patterns by
 * walks up the tree (J. Liu, SIAM J. Matrix Anal. Appl. 11, 1990; T. A. Davis, "Direct Methods for Sparse Linear Systems",
 * SIAM 2006, chapter 4).
 */
import type { Pattern } from './matrix.ts'
import type { Ordering } from './order.ts'

export interface Analysis {
  readonly pattern: Pattern
  readonly ordering: Ordering
  /** In elimination order, the upper triangle by columns: rows up[upStart[k] .. upStart[k + 1]) <= k, values[source[p]]. */
  readonly upStart: Int32Array
  readonly up: Int32Array
  readonly source: Int32Array
  /** parent[k]: next unknown in the elimination that column k of L touches, -1 for roots. */
  readonly parent: Int32Array
  /** Column k of L fills places columnStart[k] .. columnStart[k + 1), without the unit diagonal. */
  readonly columnStart: Int32Array
}

/** The analysis of a pattern in a given order; reused for any values. */
export function analyse(pattern: Pattern, ordering: Ordering): Analysis {
  const { size, start, row } = pattern
  const { rank } = ordering
  const upStart = new Int32Array(size + 2)
  for (let j = 0; j < size; j++) {
    for (let p = start[j] as number; p < (start[j + 1] as number); p++) {
      const k = Math.max(rank[row[p] as number] as number, rank[j] as number)
      upStart[k + 2] = (upStart[k + 2] as number) + 1
    }
  }
  for (let k = 2; k < upStart.length; k++) upStart[k] = (upStart[k] as number) + (upStart[k - 1] as number)
  const up = new Int32Array(row.length)
  const source = new Int32Array(row.length)
  for (let j = 0; j < size; j++) {
    for (let p = start[j] as number; p < (start[j + 1] as number); p++) {
      const a = rank[row[p] as number] as number
      const b = rank[j] as number
      const k = Math.max(a, b)
      const at = upStart[k + 1] as number
      up[at] = Math.min(a, b)
      source[at] = p
      upStart[k + 1] = at + 1
    }
  }
  const parent = new Int32Array(size).fill(-1)
  const seen = new Int32Array(size).fill(-1)
  const count = new Int32Array(size)
  for (let k = 0; k < size; k++) {
    seen[k] = k
    for (let p = upStart[k] as number; p < (upStart[k + 1] as number); p++) {
      for (let i = up[p] as number; seen[i] !== k; i = parent[i] as number) {
        if (parent[i] === -1) parent[i] = k
        count[i] = (count[i] as number) + 1
        seen[i] = k
      }
    }
  }
  const columnStart = new Int32Array(size + 1)
  for (let k = 0; k < size; k++) columnStart[k + 1] = (columnStart[k] as number) + (count[k] as number)
  return { pattern, ordering, upStart: upStart.subarray(0, size + 1), up, source, parent, columnStart }
}
