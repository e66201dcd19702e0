/**
 * Points that are found again when something comes near them: a hash of square cells four reaches wide, so that a search
 * mostly looks into one cell. Holds any extent, since cells are hashed and not stored.
 */
export class NearPoints {
  count = 0
  private px: Float64Array
  private py: Float64Array
  /** Next point in the same slot, -1 at the end. */
  private following: Int32Array
  /** First point of each slot. */
  private first: Int32Array
  private readonly cell: number

  /** `reach`: how far `nearest` looks; positive, in the unit of the coordinates. */
  constructor(readonly reach: number, capacity = 64) {
    this.cell = 4 * reach
    const room = 2 ** Math.ceil(Math.log2(Math.max(32, capacity)))
    this.px = new Float64Array(room)
    this.py = new Float64Array(room)
    this.following = new Int32Array(room)
    this.first = new Int32Array(2 * room).fill(-1)
  }

  /** Coordinates so far, without copying: valid until the next `add`. */
  get x(): Float64Array {
    return this.px.subarray(0, this.count)
  }

  get y(): Float64Array {
    return this.py.subarray(0, this.count)
  }

  /** Adds a point, whatever is near, and returns its index. */
  add(x: number, y: number): number {
    const index = this.count
    if (index === this.px.length) this.widen()
    this.px[index] = x
    this.py[index] = y
    this.count += 1
    this.link(index)
    return index
  }

  /** Index of the nearest point within `within` (at most the reach), the lowest of equally near ones; -1 when there is none. */
  nearest(x: number, y: number, within: number = this.reach): number {
    const { cell, first, px, py, following } = this
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

  /** Indices of all points within the reach, in no particular order. */
  within(x: number, y: number): number[] {
    const { cell, first, px, py, following, reach } = this
    const out: number[] = []
    const slots = new Set<number>()
    for (const row of [Math.floor((y - reach) / cell), Math.floor((y + reach) / cell)]) {
      for (const column of [Math.floor((x - reach) / cell), Math.floor((x + reach) / cell)]) slots.add(slot(column, row, first.length))
    }
    // The reach is a quarter of a cell, so the four corners name every cell.
    for (const at of slots) {
      for (let i = first[at]; i >= 0; i = following[i]) if ((px[i] - x) ** 2 + (py[i] - y) ** 2 <= reach * reach) out.push(i)
    }
    return out
  }

  private link(index: number): void {
    const at = slot(Math.floor(this.px[index] / this.cell), Math.floor(this.py[index] / this.cell), this.first.length)
    this.following[index] = this.first[at]
    this.first[at] = index
  }

  private widen(): void {
    const room = 2 * this.px.length
    const { px, py } = this
    this.px = new Float64Array(room)
    this.px.set(px)
    this.py = new Float64Array(room)
    this.py.set(py)
    this.following = new Int32Array(room)
    this.first = new Int32Array(2 * room).fill(-1)
    for (let i = 0; i < this.count; i += 1) this.link(i)
  }
}

/** Slot of a cell; `slots` is a power of two. */
function slot(column: number, row: number, slots: number): number {
  let hash = Math.imul(column | 0, 0x9e3779b1) ^ Math.imul(row | 0, 0x85ebca6b)
  hash ^= hash >>> 15
  hash = Math.imul(hash, 0x2c1b3c6d)
  return (hash ^ (hash >>> 13)) & (slots - 1)
}
