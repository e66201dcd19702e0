/**
 * Decimal numbers as files and sentences show them: no exponent, no minus zero, never NaN or infinity. A number that is
 * not finite here is a bug of ours; whoever writes a cell that may be empty says so beforehand.
 */
import { assert } from './assert.ts'
import type { Unit } from './length.ts'

/** Largest integer below which every integer is a double; 2^53. */
const exactIntegers = 9007199254740992

/** Decimals that show one micrometre in each unit: the default precision of written heights. */
export const micrometreDecimals: Readonly<Record<Unit, number>> = { mm: 3, cm: 4, m: 6, in: 5, ft: 6 }

/** Decimals that `--decimals` may ask for: 10^15 is the largest power of ten a double still multiplies without doubt. */
export const mostDecimals = 15

/**
 * round(value 10^d) / 10^d, ties away from zero. The result is the double nearest to that decimal, so its shortest
 * digits have at most d decimals. A value too large to have any of them comes back unchanged.
 */
export function rounded(value: number, decimals: number): number {
  const scale = 10 ** decimals
  const scaled = Math.abs(value) * scale
  if (!(scaled < exactIntegers)) return value
  const result = Math.round(scaled) / scale
  return value < 0 && result !== 0 ? -result : result
}

/** `rounded` of each value. */
export function allRounded(values: Float64Array, decimals: number): Float64Array {
  const scale = 10 ** decimals
  const out = values.slice()
  for (let i = 0; i < out.length; i += 1) {
    const scaled = Math.abs(out[i]) * scale
    if (!(scaled < exactIntegers)) continue
    const result = Math.round(scaled) / scale
    out[i] = out[i] < 0 && result !== 0 ? -result : result
  }
  return out
}

/** The shortest digits that read back as exactly this double, without an exponent. */
export function shortest(value: number): string {
  assert(Number.isFinite(value), 'a number to be written is finite')
  const text = value === 0 ? '0' : String(value)
  return text.includes('e') ? withoutExponent(text) : text
}

/** Fixed decimals; "-0.00" is written "0.00". */
export function fixed(value: number, decimals: number): string {
  assert(Number.isFinite(value), 'a number to be written is finite')
  const text = value.toFixed(decimals)
  if (text.includes('e')) return withoutExponent(text)
  return text.startsWith('-') && !/[1-9]/.test(text) ? text.slice(1) : text
}

/** At most `digits` significant digits, trailing zeros dropped, without an exponent. */
export function significant(value: number, digits: number): string {
  assert(Number.isFinite(value), 'a number to be written is finite')
  return shortest(Number(value.toPrecision(digits)))
}

/** "1.5e-7" as "0.00000015". */
function withoutExponent(text: string): string {
  const match = /^(-?)(\d)(?:\.(\d+))?e([+-]\d+)$/.exec(text)
  assert(match !== null, 'digits with an exponent are as the language writes them')
  const digits = (match[2] ?? '') + (match[3] ?? '')
  const point = 1 + Number(match[4])
  if (point <= 0) return `${match[1]}0.${'0'.repeat(-point)}${digits}`
  return `${match[1]}${digits.padEnd(point, '0')}`
}
