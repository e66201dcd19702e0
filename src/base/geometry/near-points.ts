/**
 * Points that are found again when something comes near them: a hash of square cells four reaches wide, so that a search
 * mostly looks into one cell. Holds any extent, since cells are hashed and not stored.
 */
import { GrowingFloats, GrowingInts } from './growing.ts'

export class NearPoints {
  private readonly px: GrowingFloats
  private readonly py: GrowingFloats
  private readonly following: GrowingInts
  private first: Int32Array
  private readonly cell: number

  /** `reach`: how far `nearest` looks; positive, in the unit of the coordinates. */
  constructor(readonly reach: number, capacity = 64) {
    this.cell = 4 * reach
    this.px = new GrowingFloats(capacity)
    this.py = new GrowingFloats(capacity)
    this.following = new GrowingInts(capacity)
    this.first = new Int32Array(2 ** Math.ceil(Math.log2(2 * Math.max(32, capacity)))).fill(-1)
  }

  get count(): number {
    return this.px.length
  }

  /** Coordinates so far, without copying: valid until the next `add`. */
  get x(): Float64Array {
    return this.px.values()
  }

  get y(): Float64Array {
    return this.py.values()
  }

  /** Adds a point, whatever is near, and returns its index. */
  add(x: number, y: number): number {
    const index = this.px.length
    this.px.push(x)
    this.py.push(y)
    this.following.push(-1)
    if (2 * (index + 1) > this.first.length) this.widen()
    else this.link(index)
    return index
  }

  /** Index of the nearest point within `within` (at most the reach), the lowest of equally near ones; -1 when there is none. */
  nearest(x: number, y: number, within: number = this.reach): number {
    const { cell, first } = this
    const px = this.px.values()
    const py = this.py.values()
    const following = this.following.values()
    const left = Math.floor((x - within) / cell)
    const right = Math.floor((x + within) / cell)
    const top = Math.floor((y + within) / cell)
    let best = -1
    let bestSquare = within * within
    for (let row = Math.floor((y - within) / cell); row <= top; row += 1) {
      for (let column = left; column <= right; column += 1) {
        for (let i = first[slot(column, row, first.length)]; i >= 0; i = following[i]) {
          const square = (px[i] - x) ** 2 + (py[i] - y) ** 2
          if (square < bestSquare || (square === bestSquare && (best < 0 || i < best))) {
            best = i
            bestSquare = square
          }
        }
        // Far out a column may be too large to count on by one.
        if (column + 1 === column) return best
      }
      if (row + 1 === row) return best
    }
    return best
  }

  private link(index: number): void {
    const at = slot(Math.floor(this.px.values()[index] / this.cell), Math.floor(this.py.values()[index] / this.cell), this.first.length)
    this.following.values()[index] = this.first[at]
    this.first[at] = index
  }

  private widen(): void {
    this.first = new Int32Array(4 * this.first.length).fill(-1)
    for (let i = 0; i < this.px.length; i += 1) this.link(i)
  }
}

/** Slot of a cell; `slots` is a power of two. */
function slot(column: number, row: number, slots: number): number {
  let hash = Math.imul(column | 0, 0x9e3779b1) ^ Math.imul(row | 0, 0x85ebca6b)
  hash ^= hash >>> 15
  hash = Math.imul(hash, 0x2c1b3c6d)
  return (hash ^ (hash >>> 13)) & (slots - 1)
}
