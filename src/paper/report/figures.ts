/**
 * Figures in sentences for people, in plain characters that any terminal shows: metres with three decimals, flatness in
 * millimetres with two, degrees with one. Plans in inches or feet speak of feet.
 */
import { fixed, significant } from '../../base/decimal.ts'
import { conversion, type Unit } from '../../base/length.ts'

/** "1 panel", "12 panels". */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`
}

/** Lengths below this, in mm, are nothing that a builder could set out. */
const nothing_mm = 0.5

export const isNothing = (length: number, unit: Unit): boolean => Math.abs(length) * conversion(unit, 'mm') < nothing_mm

/** A length in the plan's unit: "2.400 m", "12.3 mm" when it is short, "less than 1 mm" when there is nothing to see. */
export function lengthWords(length: number, unit: Unit, decimals = 3): string {
  if (isNothing(length, unit)) return 'less than 1 mm'
  const mm = length * conversion(unit, 'mm')
  if (Math.abs(mm) < 100) return `${significant(Number(fixed(mm, 1)), 3)} mm`
  const people: Unit = unit === 'in' || unit === 'ft' ? 'ft' : 'm'
  return `${fixed(length * conversion(unit, people), decimals)} ${people}`
}

/** Smallest flatness that is given as a figure; what is below rounds to 0.00. */
const finest_mm = 0.005

export const isFlat = (mm: number): boolean => mm < finest_mm

/** A flatness in mm; never "0.00 mm". */
export function flatnessWords(mm: number): string {
  return isFlat(mm) ? 'better than 0.01 mm' : `${fixed(mm, 2)} mm`
}

export const degreesWords = (degrees: number): string => `${fixed(degrees, 1)} degrees`

/** A pure number whose size is what matters: "3.2e-16". */
export const sizeWords = (value: number): string => (value === 0 ? '0' : value.toExponential(1))

const winds = ['north', 'north-east', 'east', 'south-east', 'south', 'south-west', 'west', 'north-west']

/** The wind nearest to a bearing in degrees clockwise from north. */
export const windWords = (bearing: number): string => winds[Math.round((((bearing % 360) + 360) % 360) / 45) % 8] ?? 'north'

/** "a, b and c"; "a, b, c and 5 more" when there are more than `most`. */
export function listWords(words: readonly string[], most = 10): string {
  const shown = words.length <= most + 1 ? words : words.slice(0, most)
  const rest = words.length - shown.length
  const all = rest > 0 ? [...shown, `${rest} more`] : shown
  return all.length < 2 ? all.join('') : `${all.slice(0, -1).join(', ')} and ${all[all.length - 1]}`
}

/** A sentence out of a clause: a capital first, a full stop last. */
export function sentenceOf(clause: string): string {
  const text = clause.trim()
  return `${text.slice(0, 1).toUpperCase()}${text.slice(1)}${/[.!?]$/.test(text) ? '' : '.'}`
}
