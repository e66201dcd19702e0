/**
 * Hard rows solved for as many heights as they fix: h = particular + T y, with y the heights of the remaining nodes. So
 * conditions are met exactly and need no penalty.
 *
 * Sparse row elimination (Gauss), rows kept as U with unit pivots, then back substitution into a fully reduced T
 * (Davis, "Direct Methods for Sparse Linear Systems", SIAM 2006, chapters 3 and 6; the pivot choice after Markowitz 1957:
 * sparse columns first among weights that are large enough). Each reduced row keeps the factors that reduced it, so that a
 * row which ends as 0 = misfit can name the conditions that it combines.
 */
import { clashHeight, epsilon, rankWeight } from '../../base/geometry/tolerance.ts'
import { rowHeap } from './row-heap.ts'
import { rowCount, type Rows } from './rows.ts'

export interface Elimination {
  /** Node of each remaining unknown, ascending. */
  readonly free: Int32Array
  /** Row n of T: the entries start[n] .. start[n + 1) of unknown and weight (length: nodes + 1); none: node n is held. */
  readonly start: Int32Array
  readonly unknown: Int32Array
  readonly weight: Float64Array
  /** Height of each node when all unknowns are 0. */
  readonly particular: Float64Array
}

/** Conditions that contradict each other, and by how much (in spans) the last of them is missed when the others are kept. */
export interface RowClash {
  readonly conditions: readonly string[]
  readonly misfit: number
}

/** A weight below this many roundings of 1 is what cancellation leaves and is dropped. */
const dropped = 64 * epsilon

/** A pivot is at least this share of its row's largest weight: what the growth of weights costs against fill. */
const pivotShare = 0.25

/**
 * Reduces the rows of a plan with `nodeCount` nodes. `names` are those of the conditions that the rows index. Rows that
 * repeat others are dropped; rows that contradict others are dropped too and returned as clashes, one per set of
 * conditions with its largest misfit.
 */
export function eliminate(rows: Rows, nodeCount: number, names: readonly string[]): { elimination: Elimination; clashes: RowClash[] } {
  const clashes = new Map<string, RowClash>()
  const clash = (conditions: Iterable<number>, misfit: number): void => {
    const set = [...new Set(conditions)].sort((a, b) => a - b)
    const key = set.join()
    if (misfit > (clashes.get(key)?.misfit ?? 0)) clashes.set(key, { conditions: set.map((c) => names[c] ?? String(c)), misfit })
  }
  const held = heldHeights(rows, nodeCount, clash)
  const upper = reduce(rows, nodeCount, held, clash)
  return { elimination: substituted(upper, held, nodeCount), clashes: [...clashes.values()] }
}

interface HeldHeights {
  readonly height: Float64Array
  /** The row that holds each node, -1: none. */
  readonly row: Int32Array
}

/** Rows with one entry give their node's height at once, to the last digit; the first one rules. */
function heldHeights(rows: Rows, nodeCount: number, clash: (conditions: Iterable<number>, misfit: number) => void): HeldHeights {
  const height = new Float64Array(nodeCount)
  const row = new Int32Array(nodeCount).fill(-1)
  for (let r = 0; r < rowCount(rows); r += 1) {
    const at = rows.start[r]
    if (rows.start[r + 1] - at !== 1) continue
    const n = rows.node[at]
    const value = rows.value[r] / rows.weight[at]
    if (row[n] < 0) {
      row[n] = r
      height[n] = value
    } else if (Math.abs(value - height[n]) > clashHeight) {
      clash([rows.condition[row[n]], rows.condition[r]], Math.abs(value - height[n]))
    }
  }
  return { height, row }
}

/** Reduced rows in the order in which they were made; each reads h_pivot + sum weight * h_node = value. */
interface Upper {
  readonly pivot: number[]
  readonly value: number[]
  /** Entries of U row k besides its pivot: start[k] .. start[k + 1). */
  readonly start: number[]
  readonly node: number[]
  readonly weight: number[]
}

function reduce(rows: Rows, nodeCount: number, held: HeldHeights, clash: (conditions: Iterable<number>, misfit: number) => void): Upper {
  const upper: Upper = { pivot: [], value: [], start: [0], node: [], weight: [] }
  // How row k was made: its source row, what it was divided by, and the earlier rows taken off with their factors.
  const source: number[] = []
  const divisor: number[] = []
  const taken = { start: [0], row: [] as number[], factor: [] as number[] }

  const order: number[] = []
  const uses = new Int32Array(nodeCount)
  for (let r = 0; r < rowCount(rows); r += 1) {
    if (rows.start[r + 1] - rows.start[r] < 2) continue
    order.push(r)
    for (let i = rows.start[r]; i < rows.start[r + 1]; i += 1) uses[rows.node[i]] += 1
  }
  order.sort((a, b) => rows.start[a + 1] - rows.start[a] - (rows.start[b + 1] - rows.start[b]) || a - b)

  const pivotRow = new Int32Array(nodeCount).fill(-1)
  const work = new Float64Array(nodeCount)
  const inWork = new Uint8Array(nodeCount)
  const list: number[] = []
  const waiting = rowHeap()
  const add = (n: number, weight: number): void => {
    if (inWork[n] === 0) {
      inWork[n] = 1
      list.push(n)
      if (pivotRow[n] >= 0) waiting.push(pivotRow[n])
    }
    work[n] += weight
  }

  for (const r of order) {
    let value = rows.value[r]
    for (let i = rows.start[r]; i < rows.start[r + 1]; i += 1) {
      const n = rows.node[i]
      if (held.row[n] >= 0) value -= rows.weight[i] * held.height[n]
      else add(n, rows.weight[i])
    }
    // U row k holds no pivot of the rows before it, so one pass in rising order takes off all of them.
    for (let k = waiting.pop(); k >= 0; k = waiting.pop()) {
      const n = upper.pivot[k]
      const factor = work[n]
      work[n] = 0
      if (Math.abs(factor) <= dropped) continue
      value -= factor * upper.value[k]
      for (let i = upper.start[k]; i < upper.start[k + 1]; i += 1) add(upper.node[i], -factor * upper.weight[i])
      taken.row.push(k)
      taken.factor.push(factor)
    }
    const n = pivotOf(list, work, uses)
    if (n < 0) {
      if (Math.abs(value) > clashHeight) {
        clash(combined(rows, held, r, taken, source, divisor), Math.abs(value))
      }
      taken.row.length = taken.start[taken.start.length - 1]
      taken.factor.length = taken.row.length
    } else {
      const by = work[n]
      pivotRow[n] = upper.pivot.length
      upper.pivot.push(n)
      upper.value.push(value / by)
      for (const other of list) {
        if (other === n || Math.abs(work[other]) <= dropped) continue
        upper.node.push(other)
        upper.weight.push(work[other] / by)
      }
      upper.start.push(upper.node.length)
      source.push(r)
      divisor.push(by)
      taken.start.push(taken.row.length)
    }
    for (const other of list) {
      work[other] = 0
      inWork[other] = 0
    }
    list.length = 0
  }
  return upper
}

/** The node to solve a reduced row for, -1 when nothing of the row is left. Ties: the larger weight, then the lower node. */
function pivotOf(list: readonly number[], work: Float64Array, uses: Int32Array): number {
  let largest = 0
  for (const n of list) largest = Math.max(largest, Math.abs(work[n]))
  if (largest <= rankWeight) return -1
  let best = -1
  for (const n of list) {
    const size = Math.abs(work[n])
    if (size < pivotShare * largest) continue
    if (best < 0 || (uses[n] - uses[best] || Math.abs(work[best]) - size || n - best) < 0) best = n
  }
  return best
}

/**
 * The conditions whose rows add up to the contradiction: row r less the rows taken off it, each of which is a source row
 * less rows taken off it, and so on back; a source row counts when its factor does not cancel, a held node likewise.
 */
function combined(
  rows: Rows, held: HeldHeights, r: number,
  taken: { start: number[]; row: number[]; factor: number[] }, source: readonly number[], divisor: readonly number[],
): Set<number> {
  const onRow = new Map<number, number>([[r, 1]])
  const onUpper = new Float64Array(source.length)
  for (let i = taken.start[source.length]; i < taken.row.length; i += 1) onUpper[taken.row[i]] -= taken.factor[i]
  for (let k = source.length - 1; k >= 0; k -= 1) {
    const factor = onUpper[k] / divisor[k]
    if (factor === 0) continue
    onRow.set(source[k], (onRow.get(source[k]) ?? 0) + factor)
    for (let i = taken.start[k]; i < taken.start[k + 1]; i += 1) onUpper[taken.row[i]] -= factor * taken.factor[i]
  }
  const onHeld = new Map<number, number>()
  const conditions = new Set<number>()
  for (const [row, factor] of onRow) {
    if (Math.abs(factor) <= rankWeight) continue
    conditions.add(rows.condition[row])
    for (let i = rows.start[row]; i < rows.start[row + 1]; i += 1) {
      const n = rows.node[i]
      if (held.row[n] >= 0) onHeld.set(n, (onHeld.get(n) ?? 0) + factor * rows.weight[i])
    }
  }
  for (const [n, factor] of onHeld) if (Math.abs(factor) > rankWeight) conditions.add(rows.condition[held.row[n]])
  return conditions
}

/**
 * Back substitution: from the last reduced row to the first, each pivot in terms of the free nodes alone; then T and the
 * particular heights by node.
 */
function substituted(upper: Upper, held: HeldHeights, nodeCount: number): Elimination {
  const rank = upper.pivot.length
  const pivotRow = new Int32Array(nodeCount).fill(-1)
  for (let k = 0; k < rank; k += 1) pivotRow[upper.pivot[k]] = k
  const unknownOf = new Int32Array(nodeCount).fill(-1)
  let open = 0
  for (let n = 0; n < nodeCount; n += 1) if (held.row[n] < 0 && pivotRow[n] < 0) unknownOf[n] = open++
  const free = new Int32Array(open)
  for (let n = 0; n < nodeCount; n += 1) if (unknownOf[n] >= 0) free[unknownOf[n]] = n

  // Expressions of the pivots, last first: entries exprStart[k] .. exprEnd[k] on unknowns, and a constant.
  const unknown: number[] = []
  const weight: number[] = []
  const exprStart = new Int32Array(rank)
  const exprEnd = new Int32Array(rank)
  const constant = new Float64Array(rank)
  const work = new Float64Array(free.length)
  const inWork = new Uint8Array(free.length)
  const list: number[] = []
  const add = (u: number, by: number): void => {
    if (inWork[u] === 0) {
      inWork[u] = 1
      list.push(u)
    }
    work[u] += by
  }
  for (let k = rank - 1; k >= 0; k -= 1) {
    let value = upper.value[k]
    for (let i = upper.start[k]; i < upper.start[k + 1]; i += 1) {
      const n = upper.node[i]
      const by = upper.weight[i]
      const later = pivotRow[n]
      if (later < 0) add(unknownOf[n], -by)
      else {
        value -= by * constant[later]
        for (let j = exprStart[later]; j < exprEnd[later]; j += 1) add(unknown[j], -by * weight[j])
      }
    }
    constant[k] = value
    exprStart[k] = unknown.length
    list.sort((a, b) => a - b)
    for (const u of list) {
      if (Math.abs(work[u]) > dropped) {
        unknown.push(u)
        weight.push(work[u])
      }
      work[u] = 0
      inWork[u] = 0
    }
    list.length = 0
    exprEnd[k] = unknown.length
  }

  const start = new Int32Array(nodeCount + 1)
  const particular = new Float64Array(nodeCount)
  const outUnknown = new Int32Array(unknown.length + free.length)
  const outWeight = new Float64Array(unknown.length + free.length)
  let at = 0
  for (let n = 0; n < nodeCount; n += 1) {
    const k = pivotRow[n]
    if (held.row[n] >= 0) particular[n] = held.height[n]
    else if (k < 0) {
      outUnknown[at] = unknownOf[n]
      outWeight[at++] = 1
    } else {
      particular[n] = constant[k]
      for (let j = exprStart[k]; j < exprEnd[k]; j += 1) {
        outUnknown[at] = unknown[j]
        outWeight[at++] = weight[j]
      }
    }
    start[n + 1] = at
  }
  return { free, start, unknown: outUnknown, weight: outWeight, particular }
}
