/**
 * Collects the bytes of a text file. Numbers are put down digit by digit without a string of their own where that is
 * possible: at 100,000 panels the strings cost more than the digits.
 *
 * Tried and dropped: joining lines as strings and encoding once (three times as long, and twice the memory for a moment).
 */
import { fixed, shortest, significant } from '../base/decimal.ts'
import { assert } from '../base/assert.ts'

const zero = 48
const minus = 45
/** 10^0 .. 10^15, all exact. */
const powersOfTen = [1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15]
/** Integers below this are split into digits with 32-bit arithmetic. */
const smallIntegers = 2 ** 31

export class ByteSink {
  private bytes = new Uint8Array(1 << 16)
  private length = 0
  private readonly encoder = new TextEncoder()
  private readonly digits = new Uint8Array(24)

  /** Any text, as UTF-8. */
  text(text: string): void {
    this.room(3 * text.length)
    for (let i = 0; i < text.length; i += 1) {
      const code = text.charCodeAt(i)
      if (code > 127) {
        const end = this.length
        this.length = end + this.encoder.encodeInto(text.slice(i), this.bytes.subarray(end)).written
        return
      }
      this.bytes[this.length] = code
      this.length += 1
    }
  }

  /** One ASCII character by its code. */
  code(code: number): void {
    this.room(1)
    this.bytes[this.length] = code
    this.length += 1
  }

  /** An integer below 2^53. */
  integer(value: number): void {
    this.room(24)
    if (value < 0) {
      this.bytes[this.length] = minus
      this.length += 1
    }
    this.natural(Math.abs(value), 0)
  }

  /**
   * A number with at most `decimals` decimals, trailing zeros kept or dropped; the decimal sign by its code. The value
   * is rounded as `rounded` does. Falls back to strings where value 10^d is no exact integer any more; d is at most 15.
   */
  decimal(value: number, decimals: number, keepZeros: boolean, point = 46): void {
    const scale = powersOfTen[decimals] ?? NaN
    const scaled = Math.round(Math.abs(value) * scale)
    if (!(scaled < 9007199254740992)) {
      assert(Number.isFinite(value), 'a number to be written is finite')
      this.text((keepZeros ? fixed(value, decimals) : shortest(value)).replace('.', String.fromCharCode(point)))
      return
    }
    this.room(40)
    if (value < 0 && scaled !== 0) {
      this.bytes[this.length] = minus
      this.length += 1
    }
    // The quotient may be rounded up to the next integer: then the rest is negative and one is given back.
    const quotient = Math.floor(scaled / scale)
    const whole = quotient * scale > scaled ? quotient - 1 : quotient
    this.natural(whole, 0)
    let rest = scaled - whole * scale
    let places = decimals
    if (!keepZeros) {
      if (rest === 0) return
      while (rest % 10 === 0) {
        rest /= 10
        places -= 1
      }
    }
    if (places === 0) return
    this.bytes[this.length] = point
    this.length += 1
    this.natural(rest, places)
  }

  /** At most `digits` significant digits, zeros at the end dropped. */
  significant(value: number, digits: number, point = 46): void {
    const decimals = value === 0 ? 0 : digits - 1 - Math.floor(Math.log10(Math.abs(value)))
    if (decimals >= 0 && decimals < powersOfTen.length) this.decimal(value, decimals, false, point)
    else this.text(significant(value, digits).replace('.', String.fromCharCode(point)))
  }

  /** The shortest digits that read back as exactly this double. */
  shortest(value: number, point = 46): void {
    if (Number.isInteger(value) && Math.abs(value) < smallIntegers) this.integer(value)
    else this.text(point === 46 ? shortest(value) : shortest(value).replace('.', String.fromCharCode(point)))
  }

  /** The bytes so far, as an array of their own. */
  done(): Uint8Array {
    return this.bytes.slice(0, this.length)
  }

  /** Digits of a natural number, with zeros in front up to `width`. */
  private natural(value: number, width: number): void {
    let count = 0
    let rest = value
    while (rest >= smallIntegers) {
      const next = Math.floor(rest / 10)
      this.digits[count] = zero + (rest - 10 * next)
      count += 1
      rest = next
    }
    do {
      const next = (rest / 10) | 0
      this.digits[count] = zero + (rest - 10 * next)
      count += 1
      rest = next
    } while (rest > 0)
    while (count < width) {
      this.digits[count] = zero
      count += 1
    }
    for (let i = count - 1; i >= 0; i -= 1) {
      this.bytes[this.length] = this.digits[i]
      this.length += 1
    }
  }

  /** Makes room for `more` bytes. */
  private room(more: number): void {
    if (this.length + more <= this.bytes.length) return
    const larger = new Uint8Array(Math.max(2 * this.bytes.length, this.length + more))
    larger.set(this.bytes.subarray(0, this.length))
    this.bytes = larger
  }
}
