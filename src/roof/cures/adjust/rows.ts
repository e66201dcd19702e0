/**
 * Linearised conditions of an adjustment: sparse rows over the moves (dx, dy, dz) of the nodes,
 *     sum cx dx + cy dy + cz dz = right.
 * Rows come in blocks, each of one kind; the values of a row change from step to step, its nodes do not.
 */

export interface MoveRows {
  /** Row r has the entries start[r] .. start[r + 1) of node, cx, cy, cz (length: rows + 1). */
  readonly start: Int32Array
  readonly node: Int32Array
  readonly cx: Float64Array
  readonly cy: Float64Array
  readonly cz: Float64Array
  /** What the row has to bring: minus the present misfit (length: rows). */
  readonly right: Float64Array
}

/** The nodes of a block's rows, which stay; `fill` writes coefficients and right-hand sides from entry and row on. */
export interface RowBlock {
  /** Entries of each row (length: rows). */
  readonly counts: Int32Array
  /** Nodes of all rows, one row after another. */
  readonly node: Int32Array
  /** Where each row lies, for the order of elimination: x y x y .. (length 2 * rows). */
  readonly at: Float64Array
  /** How much a row gives for a unit of its multiplier: it is then met but for give * multiplier. 0: met exactly. */
  readonly give: number
  fill(state: State, rows: MoveRows, entry: number, row: number): void
}

/** Where the nodes are: positions x y x y .. in working coordinates, heights in spans. */
export interface State {
  readonly work: Float64Array
  readonly heights: Float64Array
}

/** Blocks one after another, all values zero, and where each begins. */
export interface StackedRows {
  readonly rows: MoveRows
  readonly blocks: readonly RowBlock[]
  readonly firstRow: readonly number[]
  readonly firstEntry: readonly number[]
  readonly at: Float64Array
  /** By row (length: rows). */
  readonly give: Float64Array
}

export function stacked(blocks: readonly RowBlock[]): StackedRows {
  const firstRow: number[] = []
  const firstEntry: number[] = []
  let rowCount = 0, entryCount = 0
  for (const { counts, node } of blocks) {
    firstRow.push(rowCount)
    firstEntry.push(entryCount)
    rowCount += counts.length
    entryCount += node.length
  }
  const start = new Int32Array(rowCount + 1)
  const node = new Int32Array(entryCount)
  const at = new Float64Array(2 * rowCount)
  const give = new Float64Array(rowCount)
  blocks.forEach((block, b) => {
    node.set(block.node, firstEntry[b])
    at.set(block.at, 2 * firstRow[b])
    give.fill(block.give, firstRow[b], firstRow[b] + block.counts.length)
    for (let r = 0; r < block.counts.length; r += 1) start[firstRow[b] + r + 1] = start[firstRow[b] + r] + block.counts[r]
  })
  const values = (): Float64Array => new Float64Array(entryCount)
  return { rows: { start, node, cx: values(), cy: values(), cz: values(), right: new Float64Array(rowCount) }, blocks, firstRow, firstEntry, at, give }
}

/** Coefficients and right-hand sides of all blocks at this state. */
export function filled({ rows, blocks, firstRow, firstEntry }: StackedRows, state: State): void {
  blocks.forEach((block, b) => block.fill(state, rows, firstEntry[b], firstRow[b]))
}
