/**
 * One front: assembled from its children, its pivots eliminated, its Schur complement formed. In parts of bounded work, so
 * that a large front can be interrupted.
 *
 * Pivots go in blocks. Within a block, four columns at a time are first brought up to date with those on their left in the
 * block, then eliminated; a finished block is subtracted from all columns on its right and from the Schur complement, in
 * blocks of rows that stay in cache (J. Dongarra, J. Du Croz, S. Hammarling, I. Duff 1990; K. Goto, R. van de Geijn, ACM
 * Trans. Math. Softw. 34, 2008).
 */
import type { Analysis } from './analyse.ts'
import { addBoundary, addPivotal } from './assemble.ts'
import { four, triangle } from './layout.ts'
import { eliminateFour, scaleBelow, type PivotRules } from './pivots.ts'
import type { Store } from './store.ts'

/** In slivers of four: 64 columns and 256 rows of a block make 128 kB. */
const blockColumns = 16
const blockRows = 64

/** Numbers of scratch room that the elimination needs: a block of four rows of L, scaled. */
export const scratchNumbers = 16 * blockColumns

/** What an elimination works in. */
export interface Rooms {
  readonly analysis: Analysis
  /** L and the Schur complements as laid out, and behind them (from analysis.storeSize on) scratch room for four columns of a front. */
  readonly store: Store
  /** D: pivot[pivotAt[t] .. pivotAt[t + 1]) are front t's pivots, filled up with ones to a multiple of four. */
  readonly pivot: Float64Array
  readonly pivotAt: Int32Array
  /** |a_ii| of the pivots, beside them. */
  readonly scale: Float64Array
}

export class Elimination {
  /** Operations of the part done last. */
  work = 0
  private t = 0
  /** Pivots that are unknowns of the matrix, pivots and boundary rows in slivers. */
  private pivots = 0
  private S = 0
  private R = 0
  /** In the store: the front's panel, its boundary rows, its Schur complement. In `pivot`: its first pivot. */
  private panel = 0
  private below = 0
  private complement = 0
  private at = 0

  constructor(private readonly rooms: Rooms, private readonly rules: PivotRules) {}

  /** Takes up front t and adds what its children left on its pivots. */
  begin(t: number): void {
    const { analysis, store: { data }, pivotAt } = this.rooms
    const { first, boundaryStart, panel, schur, childStart, children } = analysis
    this.t = t
    this.pivots = (first[t + 1] as number) - (first[t] as number)
    this.S = four(this.pivots) >> 2
    this.R = four((boundaryStart[t + 1] as number) - (boundaryStart[t] as number)) >> 2
    this.panel = panel[t] as number
    this.below = this.panel + triangle(this.S)
    this.complement = schur[t] as number
    this.at = pivotAt[t] as number
    const end = childStart[t + 1] as number
    for (let q = childStart[t] as number; q < end; q++) addPivotal(data, analysis, children[q] as number)
  }

  /** Does part `part` (0 at first) and returns the next one, -1 when there is none. */
  advance(part: number): number {
    const rowBlocks = Math.ceil(this.R / blockRows) + 1
    const from = Math.floor(part / rowBlocks) * blockColumns
    const step = part % rowBlocks
    if (from >= this.S) {
      // Many small fronts take time as well.
      this.work = 1000
      return -1
    }
    const to = Math.min(this.S, from + blockColumns)
    if (step === 0) {
      this.eliminate(from, to)
      this.updatePanel(from, to)
    } else this.updateSchur(from, to, (step - 1) * blockRows, Math.min(this.R, step * blockRows))
    return part + 1
  }

  /** Adds what the children left on the boundary, once all parts are done. */
  end(): void {
    const { analysis, store: { data } } = this.rooms
    const { childStart, children } = analysis
    const end = childStart[this.t + 1] as number
    for (let q = childStart[this.t] as number; q < end; q++) addBoundary(data, analysis, children[q] as number)
  }

  /** Eliminates the slivers of columns [from, to). */
  private eliminate(from: number, to: number): void {
    const { S, R, panel, below, at, rules } = this
    const { store: { data }, pivot, scale } = this.rooms
    for (let s = from; s < to; s++) {
      if (s > from) this.subtract(from, s, s)
      const corner = panel + triangle(s) + 16 * s
      const here = at + 4 * s
      eliminateFour(data, corner, pivot, here, scale, this.pivots - 4 * s, rules)
      scaleBelow(data, corner, pivot, here, panel + triangle(s + 1) + 16 * s, 16 * (s + 2), 16, S - s - 1)
      scaleBelow(data, corner, pivot, here, below + 16 * s, 16 * S, 0, R)
    }
    this.work = 64 * (to - from) * (to - from) * (S + R)
  }

  /** Subtracts the eliminated columns [from, to) from those on their right in the panel. */
  private updatePanel(from: number, to: number): void {
    for (let s = to; s < this.S; s++) this.subtract(from, to, s)
    this.work += 128 * (to - from) * (this.S - to) * (this.S + this.R)
  }

  /** Subtracts the columns [from, to) from the column sliver s of the panel, from its diagonal down. */
  private subtract(from: number, to: number, s: number): void {
    const { S, R, panel, below, at } = this
    const { analysis: { storeSize: b }, store: { data, update }, pivot } = this.rooms
    const corner = panel + triangle(s)
    const depth = 4 * (to - from)
    scaled(data, corner + 16 * from, pivot, at + 4 * from, b, depth)
    update(corner + 16 * from, 16 * (s + 1), 16, b, 0, corner + 16 * s, 16 * (s + 1), 16, S - s, depth, 1)
    if (R > 0) update(below + 16 * from, 16 * S, 0, b, 0, below + 16 * s, 16 * S, 0, R, depth, 1)
  }

  /** Subtracts the columns [from, to) from the row slivers [low, high) of the Schur complement; the first block writes it. */
  private updateSchur(from: number, to: number, low: number, high: number): void {
    const { S, below, complement, at } = this
    const { analysis: { storeSize: b }, store: { data, update }, pivot } = this.rooms
    const depth = 4 * (to - from)
    const rows = below + 16 * from
    for (let j = 0; j < high; j++) {
      const s = j > low ? j : low
      scaled(data, rows + 16 * S * j, pivot, at + 4 * from, b, depth)
      update(rows + 16 * S * s, 16 * S, 0, b, 0, complement + triangle(s) + 16 * j, 16 * (s + 1), 16, high - s, depth, from)
    }
    this.work = 16 * depth * (high - low) * (high + low + 2)
  }
}

/** b[4 k + j] = a[4 k + j] d_k: four rows of L, ready to be multiplied from the right. */
function scaled(data: Float64Array, a: number, pivot: Float64Array, at: number, b: number, depth: number): void {
  for (let k = 0; k < depth; k++) {
    const d = pivot[at + k] as number
    data[b + 4 * k] = (data[a + 4 * k] as number) * d
    data[b + 4 * k + 1] = (data[a + 4 * k + 1] as number) * d
    data[b + 4 * k + 2] = (data[a + 4 * k + 2] as number) * d
    data[b + 4 * k + 3] = (data[a + 4 * k + 3] as number) * d
  }
}
