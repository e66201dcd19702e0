/**
 * A grid over points and segments whose lines follow the density: columns and rows are cut at quantiles of the points'
 * coordinates. A plain uniform grid was dropped: one stray line at the origin of a survey drawing put the whole plan into
 * a single cell. A cell is row * columns + column.
 */
import { GrowingInts } from './growing.ts'

export interface Grid {
  /** Inner borders, ascending: column c lies between border c - 1 and border c; a value on a border belongs above it. */
  readonly columnBorder: Float64Array
  readonly rowBorder: Float64Array
  readonly columns: number
  readonly rows: number
}

/** What lies in each cell: item[start[cell] .. start[cell + 1]), ascending. */
export interface Cells {
  readonly start: Int32Array
  readonly item: Int32Array
}

/** A grid of about `lines` columns and rows over the first `count` points. */
export function densityGrid(x: Float64Array, y: Float64Array, count: number, lines: number): Grid {
  const columnBorder = borders(x, count, lines)
  const rowBorder = borders(y, count, lines)
  return { columnBorder, rowBorder, columns: columnBorder.length + 1, rows: rowBorder.length + 1 }
}

function borders(values: Float64Array, count: number, lines: number): Float64Array {
  const stride = Math.max(1, Math.floor(count / (64 * lines)))
  const sample = new Float64Array(Math.ceil(count / stride))
  for (let i = 0; i < sample.length; i += 1) sample[i] = values[i * stride]
  sample.sort()
  const out: number[] = []
  for (let k = 1; k < lines; k += 1) {
    let at = Math.floor((k * sample.length) / lines)
    while (at > 0 && at < sample.length && sample[at] === sample[at - 1]) at += 1
    if (at < 1 || at >= sample.length) continue
    // Halfway between two values, so that points seldom lie on a border.
    const border = sample[at - 1] + (sample[at] - sample[at - 1]) / 2
    if (out.length === 0 || border > out[out.length - 1]) out.push(border)
  }
  return Float64Array.from(out)
}

/** Number of borders at or below the value: the column or row that it falls into. */
export function bin(border: Float64Array, value: number): number {
  let low = 0
  let high = border.length
  while (low < high) {
    const middle = (low + high) >>> 1
    if (border[middle] <= value) low = middle + 1
    else high = middle
  }
  return low
}

export function pointsByCell(grid: Grid, x: Float64Array, y: Float64Array, count: number): Cells {
  const cell = new Int32Array(count)
  const item = new Int32Array(count)
  for (let i = 0; i < count; i += 1) {
    cell[i] = bin(grid.rowBorder, y[i]) * grid.columns + bin(grid.columnBorder, x[i])
    item[i] = i
  }
  return byCell(cell, item, grid.columns * grid.rows)
}

/** Every cell that the segments a[i] - b[i] come within `pad` of (a few more at corners). */
export function segmentsByCell(grid: Grid, x: Float64Array, y: Float64Array, a: Int32Array, b: Int32Array, pad: number): Cells {
  const { columnBorder, rowBorder, columns } = grid
  const cell = new GrowingInts(4 * a.length)
  const item = new GrowingInts(4 * a.length)
  for (let i = 0; i < a.length; i += 1) {
    const forward = x[a[i]] <= x[b[i]]
    const p = forward ? a[i] : b[i]
    const q = forward ? b[i] : a[i]
    const firstColumn = bin(columnBorder, x[p] - pad)
    const lastColumn = bin(columnBorder, x[q] + pad)
    const low = Math.min(y[p], y[q])
    const high = Math.max(y[p], y[q])
    const firstRow = bin(rowBorder, low - pad)
    const lastRow = bin(rowBorder, high + pad)
    const oneRow = firstRow === lastRow
    const slope = x[q] > x[p] ? (y[q] - y[p]) / (x[q] - x[p]) : 0
    // Within a pad of a column the segment rises by at most the pad times its slope; steep ones stay inside low .. high.
    for (let column = firstColumn; column <= lastColumn; column += 1) {
      let from = firstRow
      let to = lastRow
      if (!oneRow && firstColumn !== lastColumn) {
        const left = column === 0 ? -Infinity : columnBorder[column - 1] - pad
        const right = column === columns - 1 ? Infinity : columnBorder[column] + pad
        const atLeft = left <= x[p] ? y[p] : y[p] + slope * (left - x[p])
        const atRight = right >= x[q] ? y[q] : y[p] + slope * (right - x[p])
        from = bin(rowBorder, Math.max(low, Math.min(atLeft, atRight)) - pad)
        to = bin(rowBorder, Math.min(high, Math.max(atLeft, atRight)) + pad)
      }
      for (let row = from; row <= to; row += 1) {
        cell.push(row * columns + column)
        item.push(i)
      }
    }
  }
  return byCell(cell.values(), item.values(), columns * grid.rows)
}

/** Cells that `segmentsByCell` would fill, roughly: columns plus rows that each segment spans. */
export function cellsSpanned(grid: Grid, x: Float64Array, y: Float64Array, a: Int32Array, b: Int32Array): number {
  let sum = a.length
  for (let i = 0; i < a.length; i += 1) {
    sum += Math.abs(bin(grid.columnBorder, x[a[i]]) - bin(grid.columnBorder, x[b[i]]))
    sum += Math.abs(bin(grid.rowBorder, y[a[i]]) - bin(grid.rowBorder, y[b[i]]))
  }
  return sum
}

/** Counting sort of (cell, item) pairs. */
function byCell(cell: Int32Array, item: Int32Array, cells: number): Cells {
  const start = new Int32Array(cells + 1)
  for (let k = 0; k < cell.length; k += 1) start[cell[k] + 1] += 1
  for (let c = 0; c < cells; c += 1) start[c + 1] += start[c]
  const fill = start.slice(0, cells)
  const sorted = new Int32Array(item.length)
  for (let k = 0; k < cell.length; k += 1) sorted[fill[cell[k]]++] = item[k]
  return { start, item: sorted }
}
