/** The values of options as people type them, each with a sentence when it is none. */
import { parseLength, units, isUnit, type Unit } from '../base/length.ts'
import { fail, ok, placed, type Result } from '../base/result.ts'
import { namedColour } from '../plan/project/colour-name.ts'
import type { ScaleFrom } from '../plan/project/options.ts'

const decimal = String.raw`[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?`

/** A number with a decimal point or comma; the typographic minus too. */
export function typedNumber(text: string, option: string): Result<number> {
  const plain = text.trim().replace(/\u2212/g, '-').replace(',', '.')
  if (new RegExp(`^${decimal}$`).test(plain) && Number.isFinite(Number(plain))) return ok(Number(plain))
  return fail('not-a-number', `"${text}" is not a number`, { field: option })
}

/** Degrees, with or without a degree sign. */
export function typedDegrees(text: string, option: string): Result<number> {
  return typedNumber(text.replace(/\s*(?:\u00b0|deg(?:rees)?)$/i, ''), option)
}

/** One of a few words, in any case. */
export function typedWord<T extends string>(text: string, words: readonly T[], option: string): Result<T> {
  const found = words.find((word) => word === text.trim().toLowerCase())
  if (found !== undefined) return ok(found)
  return fail('not-one-of', `"${text}" is not one of ${words.join(', ')}`, { field: option })
}

export function typedUnit(text: string, option: string): Result<Unit> {
  const word = text.trim().toLowerCase()
  return isUnit(word) ? ok(word) : fail('not-one-of', `"${text}" is not one of ${units.join(', ')}`, { field: option })
}

/** A length in mm; a bare number is in mm already. At least 0, more than 0 where `above` is set. */
export function typedMillimetres(text: string, option: string, above: boolean): Result<number> {
  const length = parseLength(text, 'mm', 'mm')
  if (!length.ok) return { ok: false, problem: placed(length.problem, { field: option }) }
  if (length.value > 0 || (length.value === 0 && !above)) return length
  return fail('out-of-range', `this length must be ${above ? 'more than 0' : '0 or more'}`, { field: option })
}

/** A length that stays as typed until the plan's unit is known; here it is only seen to be one. */
export function typedLength(text: string, option: string): Result<string> {
  const length = parseLength(text, 'm', 'm')
  return length.ok ? ok(text) : { ok: false, problem: placed(length.problem, { field: option }) }
}

/** N of "1:N" or "N", more than 0. */
export function typedScale(text: string, option: string): Result<number> {
  const number = typedNumber(text.trim().replace(/^1\s*[:/]\s*/, ''), option)
  if (number.ok && number.value > 0) return number
  return fail('not-a-scale', `"${text}" is not a scale`, { field: option }, 'write it like 1:100')
}

/** "X,Y" in the plan's unit; with decimal commas "X;Y". */
export function typedPoint(text: string, option: string): Result<readonly [number, number]> {
  const parts = text.includes(';') ? text.split(';') : text.split(',')
  const [x, y] = parts.map((part) => typedNumber(part, option))
  if (parts.length === 2 && x.ok && y.ok) return ok([x.value, y.value])
  return fail('not-a-point', `"${text}" is not a point`, { field: option }, "write it like 3.2,-4.5, in the plan's unit")
}

/** "X1,Y1,X2,Y2,LENGTH": two points in the drawing's own numbers and their true distance; with decimal commas between semicolons. */
export function typedScaleFrom(text: string, option: string): Result<ScaleFrom> {
  const parts = text.includes(';') ? text.split(';') : text.split(',')
  const numbers = parts.slice(0, 4).map((part) => typedNumber(part, option))
  const [x1, y1, x2, y2] = numbers
  const length = parts.length === 5 ? typedLength(parts[4].trim(), option) : null
  if (length !== null && length.ok && x1.ok && y1.ok && x2.ok && y2.ok) return ok({ from: [x1.value, y1.value], to: [x2.value, y2.value], length: length.value })
  return fail('not-a-scale', `"${text}" is not two points and a length`, { field: option }, 'write it like 0,0,250,0,12.5m')
}

/** A colour as looks of a drawing have it. */
export function typedColour(text: string, option: string): Result<string> {
  const colour = namedColour(text)
  return colour === null ? fail('not-a-colour', `"${text}" is not a colour`, { field: option }, 'write a name like red, a number from 1 to 255, or #ff8000') : ok(colour)
}

/** "X1,Y1,X2,Y2": two opposite corners in the plan's unit; with decimal commas between semicolons. */
export function typedWindow(text: string, option: string): Result<readonly [readonly [number, number], readonly [number, number]]> {
  const parts = text.includes(';') ? text.split(';') : text.split(',')
  const [x1, y1, x2, y2] = parts.map((part) => typedNumber(part, option))
  if (parts.length === 4 && x1.ok && y1.ok && x2.ok && y2.ok) return ok([[x1.value, y1.value], [x2.value, y2.value]])
  return fail('not-a-window', `"${text}" is not two points`, { field: option }, "write it like 0,0,12.5,8, in the plan's unit")
}

/** "LOW,HIGH": two heights in the plan's unit; with decimal commas between a semicolon. */
export function typedBetween(text: string, option: string): Result<readonly [number, number]> {
  const parts = text.includes(';') ? text.split(';') : text.split(',')
  const [low, high] = parts.map((part) => typedNumber(part, option))
  if (parts.length === 2 && low.ok && high.ok) return ok([low.value, high.value])
  return fail('not-two-heights', `"${text}" is not two heights`, { field: option }, "write them like 3.5,4, in the plan's unit")
}

/** A point where the text is one, else the name of a layer. */
export function typedInside(text: string, option: string): Result<string | readonly [number, number]> {
  const point = typedPoint(text, option)
  if (point.ok) return point
  return text.trim() === '' ? fail('not-a-point', 'there is neither a layer nor a point', { field: option }, 'name the layer of a closed line, or a point in one') : ok(text)
}

/** A whole number from 0 to `most`. */
export function typedCount(text: string, most: number, option: string): Result<number> {
  const count = Number(text)
  if (/^\d{1,3}$/.test(text.trim()) && count <= most) return ok(count)
  return fail('not-a-count', `"${text}" is not a whole number from 0 to ${most}`, { field: option })
}
