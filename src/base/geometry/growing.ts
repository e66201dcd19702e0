/** Lists of numbers of unknown length in typed arrays: the room doubles when it is full. */

export class GrowingInts {
  length = 0
  private room: Int32Array

  constructor(capacity = 64) {
    this.room = new Int32Array(Math.max(1, capacity))
  }

  push(value: number): void {
    if (this.length === this.room.length) {
      const wider = new Int32Array(2 * this.length)
      wider.set(this.room)
      this.room = wider
    }
    this.room[this.length] = value
    this.length += 1
  }

  /** The values so far, without copying: valid until the next push. */
  values(): Int32Array {
    return this.room.subarray(0, this.length)
  }
}

export class GrowingFloats {
  length = 0
  private room: Float64Array

  constructor(capacity = 64) {
    this.room = new Float64Array(Math.max(1, capacity))
  }

  push(value: number): void {
    if (this.length === this.room.length) {
      const wider = new Float64Array(2 * this.length)
      wider.set(this.room)
      this.room = wider
    }
    this.room[this.length] = value
    this.length += 1
  }

  values(): Float64Array {
    return this.room.subarray(0, this.length)
  }
}
