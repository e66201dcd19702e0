/**
 * Lengths and their units. A length that a user types may carry a unit ("1.2m", "1200 mm", "4' 6\"", "1,25 m");
 * without one it is in the unit that the place where it is typed says.
 */
import { fail, ok, type Result } from './result.ts'

export type Unit = 'mm' | 'cm' | 'm' | 'in' | 'ft'

/** Metres in one of each unit; exact by definition (international inch, 1959). */
export const metres: Readonly<Record<Unit, number>> = { mm: 0.001, cm: 0.01, m: 1, in: 0.0254, ft: 0.3048 }

export const units = Object.keys(metres) as readonly Unit[]

export function isUnit(text: string): text is Unit {
  return Object.hasOwn(metres, text)
}

/** The factor that takes a length from one unit to another. */
export function conversion(from: Unit, to: Unit): number {
  // Powers of ten are divided, not multiplied, so that 1 mm to m is exactly 1/1000.
  return from === to ? 1 : metres[from] >= metres[to] ? metres[from] / metres[to] : 1 / (metres[to] / metres[from])
}

const number = String.raw`[+-]?(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][+-]?\d+)?`
const withUnit = new RegExp(String.raw`^(${number})\s*(mm|cm|m|in|ft|"|')?$`)
const feetAndInches = /^([+-]?)(\d+)\s*(?:'|ft)\s*(\d+(?:[.,]\d+)?)?(?:\s*(\d+)\s*\/\s*(\d+))?\s*(?:"|in)?$/

/**
 * Reads a length as people type it and returns it in the unit `to`; a bare number is taken to be in `bare`.
 * A minus sign may also be the typographic one. Fails with code "not-a-length".
 */
export function parseLength(text: string, bare: Unit, to: Unit): Result<number> {
  const typed = text.trim().replace(/\u2212/g, '-').replace(/[\u2032\u2019]/g, "'").replace(/[\u2033\u201d]/g, '"')
  const simple = withUnit.exec(typed)
  if (simple !== null) {
    const value = Number((simple[1] ?? '').replace(',', '.'))
    const suffix = simple[2] === '"' ? 'in' : simple[2] === "'" ? 'ft' : simple[2]
    const from = suffix !== undefined && isUnit(suffix) ? suffix : bare
    if (Number.isFinite(value)) return ok(value * conversion(from, to))
  }
  const mixed = feetAndInches.exec(typed)
  if (mixed !== null && mixed[5] !== '0') {
    const fraction = mixed[4] === undefined ? 0 : Number(mixed[4]) / Number(mixed[5])
    const inches = 12 * Number(mixed[2]) + Number((mixed[3] ?? '0').replace(',', '.')) + fraction
    return ok((mixed[1] === '-' ? -1 : 1) * inches * conversion('in', to))
  }
  return fail('not-a-length', `"${text}" is not a length`, null, `write it like 1.2m, 1200mm or 4' 6"`)
}
