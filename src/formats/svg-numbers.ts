/**
 * Numbers, lists and lengths as SVG writes them (SVG 2, section 4.2 and 9.3.9; SVG 1.1, section 8.3.9): signs and points
 * part numbers without a blank, so that "1.5.5-3" is 1.5, 0.5 and -3.
 */

const number = /[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/y
const blanks = /[ \t\r\n\f]*/y
const separator = /[ \t\r\n\f]*,?[ \t\r\n\f]*/y

/** Reads numbers from a text, one after the other. */
export class NumberScanner {
  readonly text: string
  at = 0

  constructor(text: string) {
    this.text = text
  }

  /** Steps over blanks. */
  skipBlanks(): void {
    blanks.lastIndex = this.at
    if (blanks.test(this.text)) this.at = blanks.lastIndex
  }

  /** Steps over blanks and at most one comma. */
  skipSeparator(): void {
    separator.lastIndex = this.at
    if (separator.test(this.text)) this.at = separator.lastIndex
  }

  /** The number that starts here, null when none does; may be infinite when the text goes beyond the range of doubles. */
  number(): number | null {
    number.lastIndex = this.at
    const match = number.exec(this.text)
    if (match === null) return null
    this.at = number.lastIndex
    return Number(match[0])
  }

  /** The flag of an arc: one character, 0 or 1, which needs no separator after it. */
  flag(): number | null {
    const code = this.text.charCodeAt(this.at)
    if (code !== 48 && code !== 49) return null
    this.at += 1
    return code - 48
  }

  get atEnd(): boolean {
    return this.at >= this.text.length
  }
}

/** All numbers of a list, or null when anything else is in it or a number is not finite. */
export function numberList(text: string): number[] | null {
  const scanner = new NumberScanner(text)
  const out: number[] = []
  scanner.skipBlanks()
  while (!scanner.atEnd) {
    const value = scanner.number()
    if (value === null || !Number.isFinite(value)) return null
    out.push(value)
    const before = scanner.at
    scanner.skipSeparator()
    if (scanner.atEnd && scanner.text.slice(before).includes(',')) return null
  }
  return out
}

/** User units in one of each unit: CSS pixels, of which 96 are an inch by definition (CSS Values 4, section 6.2). */
const pixels: Readonly<Record<string, number>> = {
  '': 1,
  px: 1,
  in: 96,
  pt: 96 / 72,
  pc: 16,
  cm: 96 / 2.54,
  mm: 96 / 25.4,
  q: 96 / 101.6,
}

/** Millimetres in one of each physical unit; exact, so that a page of 180mm is 180 mm wide. */
const millimetres: Readonly<Record<string, number>> = { in: 25.4, pt: 25.4 / 72, pc: 25.4 / 6, cm: 10, mm: 1, q: 0.25 }

export const millimetresPerPixel = 25.4 / 96

export interface SvgLength {
  readonly value: number
  /** Lower case; "" for none, "%" for a share of the page. */
  readonly unit: string
}

const length = /^\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)(%|[a-zA-Z]*)\s*$/

/** A length as written, or null when it is none or its unit depends on a font or a window. */
export function svgLength(text: string): SvgLength | null {
  const match = length.exec(text)
  if (match === null) return null
  const value = Number(match[1])
  const unit = (match[2] ?? '').toLowerCase()
  if (!Number.isFinite(value) || (unit !== '%' && !Object.hasOwn(pixels, unit))) return null
  return { value, unit }
}

/** The length in user units; `whole` is what 100 % is, null where that is not known: then a share is null. */
export function userUnits({ value, unit }: SvgLength, whole: number | null): number | null {
  if (unit === '%') return whole === null ? null : (value / 100) * whole
  return value * (pixels[unit] ?? 1)
}

/** The length on paper in mm, with whether it was given in a physical unit; null for a share. */
export function paperLength({ value, unit }: SvgLength): { readonly mm: number; readonly physical: boolean } | null {
  if (unit === '%') return null
  const physical = millimetres[unit]
  return physical === undefined ? { mm: value * millimetresPerPixel, physical: false } : { mm: value * physical, physical: true }
}
