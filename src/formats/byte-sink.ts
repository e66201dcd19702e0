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
/** 10^0 .. 10^22, all exact. */
const powersOfTen = [
  1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22,
]
/** Most decimals of `decimal`. */
const mostDecimals = 15
/** Digits that 32-bit arithmetic splits. */
const smallDigits = 9
const smallIntegers = 1e9

/** Room of a sink that is done, for the next one: fresh memory costs more than what is written into it. */
let spare: Uint8Array | null = null

export class ByteSink {
  private bytes: Uint8Array
  private length = 0
  private readonly encoder = new TextEncoder()

  constructor() {
    this.bytes = spare ?? new Uint8Array(1 << 16)
    spare = null
  }

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
    this.natural(Math.abs(value))
  }

  /**
   * A number with at most `decimals` decimals, trailing zeros kept or dropped; the decimal sign by its code. The value
   * is rounded as `rounded` does. Falls back to strings where value 10^d is no exact integer any more; d is at most 15.
   */
  decimal(value: number, decimals: number, keepZeros: boolean, point = 46): void {
    const scale = decimals <= mostDecimals ? powersOfTen[decimals] : NaN
    const scaled = Math.round(Math.abs(value) * scale)
    if (!(scaled < 9007199254740992)) {
      assert(Number.isFinite(value), 'a number to be written is finite')
      this.text((keepZeros ? fixed(value, decimals) : shortest(value)).replace('.', String.fromCharCode(point)))
      return
    }
    this.room(48)
    if (value < 0 && scaled !== 0) {
      this.bytes[this.length] = minus
      this.length += 1
    }
    this.shifted(scaled, decimals, keepZeros, point)
  }

  /** At most `digits` significant digits, zeros at the end dropped. */
  significant(value: number, digits: number, point = 46): void {
    const decimals = value === 0 ? 0 : digits - 1 - Math.floor(Math.log10(Math.abs(value)))
    if (decimals >= 0 && decimals <= mostDecimals) this.decimal(value, decimals, false, point)
    else this.text(significant(value, digits).replace('.', String.fromCharCode(point)))
  }

  /**
   * The shortest digits that read back as exactly this double. Where fifteen digits do, m 10^-d with m < 10^15 and 10^d exact,
   * they are found by one division, which is rounded correctly and therefore decides; no other fifteen digits read back as the
   * same double, so these less their zeros are the shortest. Else by a string.
   */
  shortest(value: number, point = 46): void {
    const size = Math.abs(value)
    if (size >= 1e-6 && size < 1e15) {
      let decimals = mostDecimals
      if (size >= 1) while (powersOfTen[mostDecimals - decimals] <= size) decimals -= 1
      else while (size * powersOfTen[decimals + 1 - mostDecimals] < 1) decimals += 1
      const scaled = Math.round(size * powersOfTen[decimals])
      if (scaled / powersOfTen[decimals] === size) {
        this.room(48)
        if (value < 0) {
          this.bytes[this.length] = minus
          this.length += 1
        }
        this.shifted(scaled, decimals, false, point)
        return
      }
    }
    this.text(point === 46 ? shortest(value) : shortest(value).replace('.', String.fromCharCode(point)))
  }

  /** The bytes so far, as an array of their own. The sink is not to be used afterwards. */
  done(): Uint8Array {
    const { bytes } = this
    spare = bytes
    return bytes.slice(0, this.length)
  }

  /** scaled 10^-decimals, for a natural number below 2^53. */
  private shifted(scaled: number, decimals: number, keepZeros: boolean, point: number): void {
    const scale = powersOfTen[decimals]
    // The quotient may be rounded up to the next integer: then the rest is negative and one is given back.
    const quotient = Math.floor(scaled / scale)
    const whole = quotient * scale > scaled ? quotient - 1 : quotient
    this.natural(whole)
    const rest = scaled - whole * scale
    if (decimals === 0 || (rest === 0 && !keepZeros)) return
    this.bytes[this.length] = point
    this.length += 1
    // From the left in groups that 32-bit arithmetic splits.
    let left = rest
    for (let places = decimals; places > 0; places -= smallDigits) {
      const count = places < smallDigits ? places : smallDigits
      const unit = powersOfTen[places - count]
      const group = Math.floor(left / unit)
      left -= group * unit
      this.group(group, count)
    }
    if (keepZeros) return
    while (this.bytes[this.length - 1] === zero) this.length -= 1
  }

  /** Digits of a natural number below 2^53. */
  private natural(value: number): void {
    let rest = value
    if (rest >= smallIntegers) {
      const high = Math.floor(rest / smallIntegers)
      this.natural(high)
      rest -= high * smallIntegers
      this.group(rest, smallDigits)
      return
    }
    let count = 1
    while (count < smallDigits && powersOfTen[count] <= rest) count += 1
    this.group(rest, count)
  }

  /** `count` digits of a natural number below 10^9, zeros in front. */
  private group(value: number, count: number): void {
    const { bytes } = this
    const start = this.length
    let rest = value | 0
    for (let at = start + count - 1; at >= start; at -= 1) {
      const next = (rest / 10) | 0
      bytes[at] = zero + rest - 10 * next
      rest = next
    }
    this.length = start + count
  }

  /** Makes room for `more` bytes. */
  private room(more: number): void {
    if (this.length + more <= this.bytes.length) return
    const larger = new Uint8Array(Math.max(2 * this.bytes.length, this.length + more))
    larger.set(this.bytes.subarray(0, this.length))
    this.bytes = larger
  }
}
