/** Decimal numbers read out of a long text in place, without a string for each. */

/**
 * Coordinates beyond this are refused: doubles there are 1e-4 apart, so a drawing in mm still has a tenth of a
 * micrometre, and one in m a tenth of a millimetre. Survey coordinates are about 1e7 m, or 1e10 mm.
 */
export const farthest = 1e12

/** 10^0 .. 10^22: all powers of ten that are doubles without rounding. */
const powers = Float64Array.from({ length: 23 }, (_, k) => Number(`1e${k}`))

/** Digits whose integer is certainly a double. */
const exactDigits = 15

/**
 * The number written in text[start, end): sign, digits, point, digits, exponent. NaN when it is anything else, which
 * includes "nan", "inf" and numbers that overflow.
 *
 * The result is rounded correctly: m 10^k with m < 10^15 and |k| <= 22 is one multiplication or division of two exact
 * doubles (W. D. Clinger, How to read floating point numbers accurately, 1990); all else is left to the language.
 */
export function decimalIn(text: string, start: number, end: number): number {
  let at = start
  const sign = at < end ? text.charCodeAt(at) : 0
  if (sign === 45 || sign === 43) at += 1
  let mantissa = 0
  let digits = 0
  let significant = 0
  let exponent = 0
  let inFraction = false
  for (; at < end; at += 1) {
    const code = text.charCodeAt(at)
    if (code >= 48 && code <= 57) {
      digits += 1
      if (significant > 0 || code !== 48) significant += 1
      if (significant <= exactDigits) mantissa = 10 * mantissa + (code - 48)
      if (inFraction) exponent -= 1
    } else if (code === 46 && !inFraction) inFraction = true
    else break
  }
  if (digits === 0) return NaN
  if (at < end) {
    const letter = text.charCodeAt(at)
    if (letter !== 101 && letter !== 69) return NaN
    at += 1
    let negative = false
    if (at < end && (text.charCodeAt(at) === 45 || text.charCodeAt(at) === 43)) {
      negative = text.charCodeAt(at) === 45
      at += 1
    }
    if (at >= end) return NaN
    let written = 0
    for (; at < end; at += 1) {
      const code = text.charCodeAt(at)
      if (code < 48 || code > 57) return NaN
      written = Math.min(10 * written + (code - 48), 99999)
    }
    exponent += negative ? -written : written
  }
  let value: number
  if (significant <= exactDigits && exponent >= -22 && exponent <= 22) {
    value = exponent < 0 ? mantissa / powers[-exponent] : mantissa * powers[exponent]
    if (sign === 45) value = -value
  } else value = Number(text.slice(start, end))
  return Number.isFinite(value) ? value : NaN
}

/** The whole number written in text[start, end), NaN when it is anything else or beyond 2^31. */
export function integerIn(text: string, start: number, end: number): number {
  let at = start
  const sign = at < end ? text.charCodeAt(at) : 0
  if (sign === 45 || sign === 43) at += 1
  if (at >= end) return NaN
  let value = 0
  for (; at < end; at += 1) {
    const code = text.charCodeAt(at)
    if (code < 48 || code > 57) return NaN
    value = 10 * value + (code - 48)
    if (value > 2147483647) return NaN
  }
  return sign === 45 ? -value : value
}

export { quoted } from './text-quote.ts'
