/**
 * Which lines meet which layers at all: a stroke that touches nothing can bound no face, and an office's drawing is mostly
 * hatches and letters. One pass over the drawing, so that what is measured layer by layer is what could be panels.
 *
 * Lines lie in hashed square cells of about twice their mean length, so that all of them together pass through few cells
 * however far apart they lie. Two that share a cell are compared by their sides: neither lies wholly on one side of the other.
 */
import type { Steps } from '../../base/steps.ts'

/** Of a cell with more lines than these all count as touching: a conservative end to comparing. */
const mostInCell = 128

/** Lines between two yields. */
const linesPerStep = 4_000

/** Bit of a class; with more than 31 some share one, and count as touched together. */
export const bitOf = (c: number): number => 1 << c % 31

/**
 * Per line the bits of the classes of the other lines that come within `reach` of it. `x`, `y` per point; line i runs from
 * point a[i] to b[i] and is of the class classOf[i].
 */
export function* touchedClasses(x: Float64Array, y: Float64Array, a: Int32Array, b: Int32Array, classOf: Int32Array, reach: number): Steps<Int32Array> {
  const count = a.length
  const touched = new Int32Array(count)
  let total = 0
  for (let i = 0; i < count; i += 1) total += Math.hypot(x[b[i]] - x[a[i]], y[b[i]] - y[a[i]])
  const cell = Math.max((2 * total) / Math.max(1, count), 8 * reach)
  if (!(cell > 0)) return touched.fill(-1)
  const slots = 2 ** Math.ceil(Math.log2(Math.max(64, 2 * count)))
  // Twice through the cells: once to count, once to fill.
  const start = new Int32Array(slots + 1)
  for (let i = 0; i < count; i += 1) eachCell(x[a[i]], y[a[i]], x[b[i]], y[b[i]], cell, reach, slots, (slot) => { start[slot + 1] += 1 })
  yield { stage: 'Sorting the lines', done: 0.2 }
  for (let s = 0; s < slots; s += 1) start[s + 1] += start[s]
  const fill = start.slice(0, slots)
  const line = new Int32Array(start[slots])
  for (let i = 0; i < count; i += 1) {
    eachCell(x[a[i]], y[a[i]], x[b[i]], y[b[i]], cell, reach, slots, (slot) => { line[fill[slot]++] = i })
    if (i % linesPerStep === 0) yield { stage: 'Sorting the lines', done: 0.2 + (0.3 * i) / count }
  }
  let since = 0
  for (let s = 0; s < slots; s += 1) {
    const from = start[s], to = start[s + 1]
    since += (to - from) * Math.min(to - from, mostInCell) + 1
    if (since > 20 * linesPerStep) {
      since = 0
      yield { stage: 'Sorting the lines', done: 0.5 + (0.5 * s) / slots }
    }
    if (to - from > mostInCell) {
      let all = 0
      for (let k = from; k < to; k += 1) all |= bitOf(classOf[line[k]])
      for (let k = from; k < to; k += 1) touched[line[k]] |= all
      continue
    }
    for (let k = from; k < to; k += 1) {
      const i = line[k]
      const own = bitOf(classOf[i])
      for (let m = k + 1; m < to; m += 1) {
        const j = line[m]
        const other = bitOf(classOf[j])
        if (i === j || ((touched[i] & other) !== 0 && (touched[j] & own) !== 0)) continue
        if (isApart(x, y, a[i], b[i], a[j], b[j], reach) || isApart(x, y, a[j], b[j], a[i], b[i], reach)) continue
        touched[i] |= other
        touched[j] |= own
      }
    }
  }
  return touched
}

/** Whether r s lies clear of p q: beside it, or before or behind it. */
function isApart(x: Float64Array, y: Float64Array, p: number, q: number, r: number, s: number, reach: number): boolean {
  const ux = x[q] - x[p], uy = y[q] - y[p]
  const length = Math.hypot(ux, uy)
  const off = reach * length
  const sideR = ux * (y[r] - y[p]) - uy * (x[r] - x[p]), sideS = ux * (y[s] - y[p]) - uy * (x[s] - x[p])
  if ((sideR > off && sideS > off) || (sideR < -off && sideS < -off)) return true
  const alongR = ux * (x[r] - x[p]) + uy * (y[r] - y[p]), alongS = ux * (x[s] - x[p]) + uy * (y[s] - y[p])
  const whole = length * length
  return (alongR < -off && alongS < -off) || (alongR > whole + off && alongS > whole + off)
}

/** Every cell that the line, widened by the reach, passes through, column by column; a cell may come twice by its hash. */
function eachCell(px: number, py: number, qx: number, qy: number, cell: number, reach: number, slots: number, visit: (slot: number) => void): void {
  const [lx, ly, rx, ry] = px <= qx ? [px, py, qx, qy] : [qx, qy, px, py]
  const first = Math.floor((lx - reach) / cell), last = Math.floor((rx + reach) / cell)
  const rise = rx > lx ? (ry - ly) / (rx - lx) : 0
  for (let column = first; column <= last; column += 1) {
    // Of the stretch over this column, widened.
    const from = Math.min(rx, Math.max(lx, column * cell - reach)), to = Math.max(lx, Math.min(rx, (column + 1) * cell + reach))
    const y1 = rx > lx ? ly + rise * (from - lx) : ly, y2 = rx > lx ? ly + rise * (to - lx) : ry
    const low = Math.floor((Math.min(y1, y2) - reach) / cell), high = Math.floor((Math.max(y1, y2) + reach) / cell)
    for (let row = low; row <= high; row += 1) {
      let hash = Math.imul(column | 0, 0x9e3779b1) ^ Math.imul(row | 0, 0x85ebca6b)
      hash ^= hash >>> 15
      hash = Math.imul(hash, 0x2c1b3c6d)
      visit((hash ^ (hash >>> 13)) & (slots - 1))
      if (row + 1 === row) return
    }
    if (column + 1 === column) return
  }
}
