/**
 * A grid over points and segments whose lines follow the density: columns and rows are cut at quantiles of the points'
 * coordinates. A plain uniform grid was dropped: one stray line at the origin of a survey drawing put the whole plan into
 * a single cell. A cell is row * columns + column.
 */
import { Integers } from '../growing.ts'

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
  const column = bins(columnBorder, x)
  const row = bins(rowBorder, y)
  const cell = new Integers(4 * a.length)
  const item = new Integers(4 * a.length)
  for (let i = 0; i < a.length; i += 1) {
    const forward = x[a[i]] <= x[b[i]]
    const p = forward ? a[i] : b[i]
    const q = forward ? b[i] : a[i]
    const upward = y[p] <= y[q]
    const low = upward ? p : q
    const high = upward ? q : p
    const firstColumn = binBefore(columnBorder, column[p], x[p] - pad)
    const lastColumn = binAfter(columnBorder, column[q], x[q] + pad)
    const firstRow = binBefore(rowBorder, row[low], y[low] - pad)
    const lastRow = binAfter(rowBorder, row[high], y[high] + pad)
    const isShort = firstColumn === lastColumn || firstRow === lastRow || (lastColumn - firstColumn < 2 && lastRow - firstRow < 2)
    const slope = isShort ? 0 : (y[q] - y[p]) / (x[q] - x[p])
    for (let c = firstColumn; c <= lastColumn; c += 1) {
      let from = firstRow
      let to = lastRow
      // A pad wider than the column on both sides covers what the slope makes of the pad.
      if (!isShort && x[q] > x[p]) {
        const left = c === 0 ? -Infinity : columnBorder[c - 1] - pad
        const right = c === columns - 1 ? Infinity : columnBorder[c] + pad
        const atLeft = left <= x[p] ? y[p] : left >= x[q] ? y[q] : y[p] + slope * (left - x[p])
        const atRight = right >= x[q] ? y[q] : right <= x[p] ? y[p] : y[p] + slope * (right - x[p])
        from = Math.max(firstRow, bin(rowBorder, Math.min(atLeft, atRight) - pad))
        to = Math.min(lastRow, bin(rowBorder, Math.max(atLeft, atRight) + pad))
      }
      for (let r = from; r <= to; r += 1) {
        cell.push(r * columns + c)
        item.push(i)
      }
    }
  }
  return byCell(cell.view(), item.view(), columns * grid.rows)
}

function bins(border: Float64Array, values: Float64Array): Int32Array {
  const out = new Int32Array(values.length)
  for (let i = 0; i < out.length; i += 1) out[i] = bin(border, values[i])
  return out
}

/** The bin of a value that lies a little below one in bin `from`. */
function binBefore(border: Float64Array, from: number, value: number): number {
  let at = from
  while (at > 0 && border[at - 1] > value) at -= 1
  return at
}

/** The bin of a value that lies a little above one in bin `from`. */
function binAfter(border: Float64Array, from: number, value: number): number {
  let at = from
  while (at < border.length && border[at] <= value) at += 1
  return at
}

/** Segments looked at for an estimate. */
const sampleSize = 5000

/** Cells that `segmentsByCell` would fill, estimated from a sample: columns plus rows that each segment spans. */
export function cellsSpanned(grid: Grid, x: Float64Array, y: Float64Array, a: Int32Array, b: Int32Array): number {
  const stride = Math.ceil(a.length / sampleSize)
  let sum = 0
  let looked = 0
  for (let i = 0; i < a.length; i += stride) {
    sum += 1
    sum += Math.abs(bin(grid.columnBorder, x[a[i]]) - bin(grid.columnBorder, x[b[i]]))
    sum += Math.abs(bin(grid.rowBorder, y[a[i]]) - bin(grid.rowBorder, y[b[i]]))
    looked += 1
  }
  return looked === 0 ? 0 : (sum / looked) * a.length
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
