/**
 * The extend-add of the multifrontal method (I. Duff, J. Reid 1983): a child's Schur complement is added into its parent's
 * front, row by row to where the parent keeps that row. Columns that are pivots of the parent go to its panel before it is
 * eliminated; the others are added to the parent's own Schur complement after that has been written as a product, which
 * saves filling it with zeros first.
 */
import type { Analysis } from './analyse.ts'
import { four, triangle } from './layout.ts'

/** Adds the columns of `child` that are pivots of its parent. */
export function addPivotal(data: Float64Array, analysis: Analysis, child: number): void {
  const { inParent, boundaryStart, schur } = analysis
  const parent = analysis.parent[child] as number
  const begin = boundaryStart[child] as number
  const rows = (boundaryStart[child + 1] as number) - begin
  const p = four((analysis.first[parent + 1] as number) - (analysis.first[parent] as number))
  const panel = analysis.panel[parent] as number
  const below = panel + triangle(p >> 2)
  const pivotal = pivotalRows(inParent, begin, rows, p)
  let from = schur[child] as number
  for (let i = 0; i < rows; i += 4) {
    if (i >= pivotal && i + 4 <= rows) {
      fourRows(
        data, from, inParent, begin, 0, pivotal,
        boundaryRow(below, inParent[begin + i] as number, p), boundaryRow(below, inParent[begin + i + 1] as number, p),
        boundaryRow(below, inParent[begin + i + 2] as number, p), boundaryRow(below, inParent[begin + i + 3] as number, p),
      )
    } else {
      for (let r = 0; r < 4 && i + r < rows; r++) {
        const q = inParent[begin + i + r] as number
        const to = q < p ? panel + triangle(q >> 2) + (q & 3) : boundaryRow(below, q, p)
        oneRow(data, from + r, inParent, begin, 0, Math.min(pivotal, i + r + 1), to)
      }
    }
    from += 4 * (i + 4)
  }
}

/** Adds the rest: the rows and columns of `child` that lie on its parent's boundary too. */
export function addBoundary(data: Float64Array, analysis: Analysis, child: number): void {
  const { inParent, boundaryStart, schur } = analysis
  const parent = analysis.parent[child] as number
  const begin = boundaryStart[child] as number
  const rows = (boundaryStart[child + 1] as number) - begin
  const p = four((analysis.first[parent + 1] as number) - (analysis.first[parent] as number))
  const pivotal = pivotalRows(inParent, begin, rows, p)
  const base = (schur[parent] as number) - 4 * p
  for (let i = pivotal & ~3; i < rows; i += 4) {
    const from = (schur[child] as number) + triangle(i >> 2)
    if (i >= pivotal && i + 4 <= rows) {
      const r0 = triangleRow(base, inParent[begin + i] as number, p)
      const r1 = triangleRow(base, inParent[begin + i + 1] as number, p)
      const r2 = triangleRow(base, inParent[begin + i + 2] as number, p)
      const r3 = triangleRow(base, inParent[begin + i + 3] as number, p)
      fourRows(data, from, inParent, begin, pivotal, i, r0, r1, r2, r3)
      for (let r = 0; r < 4; r++) oneRow(data, from + r, inParent, begin, i, i + r + 1, r === 0 ? r0 : r === 1 ? r1 : r === 2 ? r2 : r3)
    } else {
      for (let r = Math.max(0, pivotal - i); r < 4 && i + r < rows; r++) {
        oneRow(data, from + r, inParent, begin, pivotal, i + r + 1, triangleRow(base, inParent[begin + i + r] as number, p))
      }
    }
  }
}

/** How many of a child's rows are pivots of the parent; rows ascend, so they come first. */
function pivotalRows(inParent: Int32Array, begin: number, rows: number, p: number): number {
  let low = 0
  let high = rows
  while (low < high) {
    const middle = (low + high) >> 1
    if ((inParent[begin + middle] as number) < p) low = middle + 1
    else high = middle
  }
  return low
}

/** Where row q of a front with p pivots begins: among the boundary rows of the panel, and in the Schur complement. */
const boundaryRow = (below: number, q: number, p: number): number => below + ((q - p) >> 2) * 4 * p + (q & 3)
const triangleRow = (base: number, q: number, p: number): number => base + triangle((q - p) >> 2) + (q & 3)

function oneRow(data: Float64Array, from: number, inParent: Int32Array, begin: number, firstColumn: number, end: number, to: number): void {
  for (let j = firstColumn; j < end; j++) {
    const at = to + 4 * (inParent[begin + j] as number)
    data[at] = (data[at] as number) + (data[from + 4 * j] as number)
  }
}

function fourRows(
  data: Float64Array, from: number, inParent: Int32Array, begin: number, firstColumn: number, end: number,
  r0: number, r1: number, r2: number, r3: number,
): void {
  for (let j = firstColumn; j < end; j++) {
    const to = 4 * (inParent[begin + j] as number)
    const at = from + 4 * j
    data[r0 + to] = (data[r0 + to] as number) + (data[at] as number)
    data[r1 + to] = (data[r1 + to] as number) + (data[at + 1] as number)
    data[r2 + to] = (data[r2 + to] as number) + (data[at + 2] as number)
    data[r3 + to] = (data[r3 + to] as number) + (data[at + 3] as number)
  }
}
