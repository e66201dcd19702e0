/** Lists of numbers of unknown length in typed arrays: the room doubles when it is full, so a push costs O(1). */

/** Doubles. */
export class Doubles {
  length = 0
  private room: Float64Array

  constructor(capacity = 64) {
    this.room = new Float64Array(Math.max(1, capacity))
  }

  push(value: number): void {
    if (this.length === this.room.length) this.room = enlarged(this.room, new Float64Array(2 * this.length))
    this.room[this.length++] = value
  }

  at(i: number): number {
    return this.room[i]
  }

  set(i: number, value: number): void {
    this.room[i] = value
  }

  /** The numbers so far, without copying: valid until the next push. */
  view(): Float64Array {
    return this.room.subarray(0, this.length)
  }

  /** A copy of the numbers so far. */
  array(): Float64Array {
    return this.room.slice(0, this.length)
  }
}

/** 32-bit integers. */
export class Integers {
  length = 0
  private room: Int32Array

  constructor(capacity = 64) {
    this.room = new Int32Array(Math.max(1, capacity))
  }

  push(value: number): void {
    if (this.length === this.room.length) this.room = enlarged(this.room, new Int32Array(2 * this.length))
    this.room[this.length++] = value
  }

  at(i: number): number {
    return this.room[i]
  }

  set(i: number, value: number): void {
    this.room[i] = value
  }

  /** The numbers so far, without copying: valid until the next push. */
  view(): Int32Array {
    return this.room.subarray(0, this.length)
  }

  /** A copy of the numbers so far. */
  array(): Int32Array {
    return this.room.slice(0, this.length)
  }
}

function enlarged<T extends Float64Array | Int32Array>(from: T, to: T): T {
  to.set(from)
  return to
}
