/**
 * Linear rows on the node heights: sum of weight * h over a row's nodes = value. Heights h = (z - datum) / span, so that a
 * value is a height in spans above the datum; rows are scaled so that their largest weight is about 1.
 *
 * A row with several entries reads "this node by its anchors": the node first, then the anchors, which are the same for
 * all rows that tie one set of nodes together (`bodies.ts` relies on it).
 */

export interface Rows {
  /** Row i has the entries start[i] .. start[i + 1) of node and weight (length: rows + 1). */
  readonly start: Int32Array
  readonly node: Int32Array
  readonly weight: Float64Array
  /** Right-hand side of each row. */
  readonly value: Float64Array
  /** Index of the condition, in the list that was given, of each row. */
  readonly condition: Int32Array
}

export const rowCount = (rows: Rows): number => rows.value.length

/** Takes one row of the condition at hand. */
export type Emit = (nodes: readonly number[], weights: readonly number[], value: number) => void

/** A list of rows that grows. */
export function rowList(): { emit(condition: number): Emit; rows(): Rows } {
  const start = [0]
  const node: number[] = []
  const weight: number[] = []
  const value: number[] = []
  const condition: number[] = []
  return {
    emit: (of) => (nodes, weights, right) => {
      for (let i = 0; i < nodes.length; i += 1) {
        node.push(nodes[i])
        weight.push(weights[i])
      }
      start.push(node.length)
      value.push(right)
      condition.push(of)
    },
    rows: () => ({
      start: Int32Array.from(start),
      node: Int32Array.from(node),
      weight: Float64Array.from(weight),
      value: Float64Array.from(value),
      condition: Int32Array.from(condition),
    }),
  }
}

/** The rows and, after them, those of another list with these numbers. */
export function joined(rows: Rows, others: Rows, which: readonly number[]): Rows {
  const entries = which.flatMap((r) => Array.from({ length: others.start[r + 1] - others.start[r] }, (_, k) => others.start[r] + k))
  const start = new Int32Array(rows.start.length + which.length)
  start.set(rows.start)
  which.forEach((r, k) => (start[rows.start.length + k] = start[rows.start.length + k - 1] + others.start[r + 1] - others.start[r]))
  const both = (a: ArrayLike<number>, b: ArrayLike<number>, pick: readonly number[]): number[] => [...Array.from(a), ...pick.map((k) => b[k])]
  return {
    start,
    node: Int32Array.from(both(rows.node, others.node, entries)),
    weight: Float64Array.from(both(rows.weight, others.weight, entries)),
    value: Float64Array.from(both(rows.value, others.value, which)),
    condition: Int32Array.from(both(rows.condition, others.condition, which)),
  }
}
