/** Typed arrays that grow: for readers that do not know beforehand how much a file holds. Doubling keeps a push O(1). */

/** Doubles. */
export class Doubles {
  private values = new Float64Array(64)
  length = 0

  push(value: number): void {
    if (this.length === this.values.length) this.values = enlarged(this.values, new Float64Array(2 * this.length))
    this.values[this.length++] = value
  }

  at(i: number): number {
    return this.values[i]
  }

  set(i: number, value: number): void {
    this.values[i] = value
  }

  /** A copy of what was pushed. */
  array(): Float64Array {
    return this.values.slice(0, this.length)
  }
}

/** 32-bit integers. */
export class Integers {
  private values = new Int32Array(64)
  length = 0

  push(value: number): void {
    if (this.length === this.values.length) this.values = enlarged(this.values, new Int32Array(2 * this.length))
    this.values[this.length++] = value
  }

  at(i: number): number {
    return this.values[i]
  }

  set(i: number, value: number): void {
    this.values[i] = value
  }

  /** A copy of what was pushed. */
  array(): Int32Array {
    return this.values.slice(0, this.length)
  }
}

function enlarged<T extends Float64Array | Int32Array>(from: T, to: T): T {
  to.set(from)
  return to
}
