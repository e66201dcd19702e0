/**
 * Affine maps of the plane and the transform lists of SVG (SVG 1.1, section 7.6; CSS Transforms 1, section 8).
 * A map takes (x, y) to (a x + c y + e, b x + d y + f), in the order in which matrix() lists its numbers.
 */
import { NumberScanner } from './svg-numbers.ts'

export type Affine = readonly [a: number, b: number, c: number, d: number, e: number, f: number]

export const identity: Affine = [1, 0, 0, 1, 0, 0]

/** First `inner`, then `outer`: the product outer * inner of the two matrices. */
export function composed(outer: Affine, inner: Affine): Affine {
  const [a, b, c, d, e, f] = outer
  const [p, q, r, s, t, u] = inner
  return [a * p + c * q, b * p + d * q, a * r + c * s, b * r + d * s, a * t + c * u + e, b * t + d * u + f]
}

export const translation = (x: number, y: number): Affine => [1, 0, 0, 1, x, y]

/** Turn by an angle in degrees; exact at multiples of 90. */
function turn(degrees: number): Affine {
  const quarter = degrees / 90
  if (Number.isInteger(quarter)) {
    const k = ((quarter % 4) + 4) % 4
    const cosine = [1, 0, -1, 0][k] ?? 1
    const sine = [0, 1, 0, -1][k] ?? 0
    return [cosine, sine, -sine, cosine, 0, 0]
  }
  const angle = (degrees * Math.PI) / 180
  return [Math.cos(angle), Math.sin(angle), -Math.sin(angle), Math.cos(angle), 0, 0]
}

const tangent = (degrees: number): number => Math.tan((degrees * Math.PI) / 180)

/** The map of one function of the list, null when the count of its numbers is wrong or it is not of the plane. */
function single(name: string, v: readonly number[]): Affine | null {
  const [p = 0, q = 0, r = 0] = v
  switch (`${name} ${v.length}`) {
    case 'matrix 6':
      return [p, q, r, v[3] ?? 0, v[4] ?? 0, v[5] ?? 0]
    case 'translate 1':
    case 'translate 2':
      return translation(p, q)
    case 'translateX 1':
      return translation(p, 0)
    case 'translateY 1':
      return translation(0, p)
    case 'scale 1':
      return [p, 0, 0, p, 0, 0]
    case 'scale 2':
      return [p, 0, 0, q, 0, 0]
    case 'scaleX 1':
      return [p, 0, 0, 1, 0, 0]
    case 'scaleY 1':
      return [1, 0, 0, p, 0, 0]
    case 'rotate 1':
      return turn(p)
    case 'rotate 3':
      return composed(composed(translation(q, r), turn(p)), translation(-q, -r))
    case 'skewX 1':
      return [1, 0, tangent(p), 1, 0, 0]
    case 'skewY 1':
      return [1, tangent(p), 0, 1, 0, 0]
    case 'skew 1':
    case 'skew 2':
      return [1, tangent(q), tangent(p), 1, 0, 0]
    default:
      return null
  }
}

const opening = /[ \t\r\n\f,]*([A-Za-z]+)[ \t\r\n\f]*\(/y
const unit = /px|deg|grad|rad|turn/y
/** What a number with this unit is in user units or degrees. */
const unitFactor: Readonly<Record<string, number>> = { px: 1, deg: 1, grad: 0.9, rad: 180 / Math.PI, turn: 360 }
/** Longer lists than any drawing has. */
const mostFunctions = 1000

/** The map of a transform list, or null when it cannot be read. The rightmost function acts first. */
export function transformList(text: string): Affine | null {
  if (/^\s*(none)?\s*$/.test(text)) return identity
  const scanner = new NumberScanner(text)
  let map = identity
  for (let count = 0; count < mostFunctions; count += 1) {
    opening.lastIndex = scanner.at
    const match = opening.exec(text)
    if (match === null) return /^[ \t\r\n\f]*$/.test(text.slice(scanner.at)) ? map : null
    scanner.at = opening.lastIndex
    const values: number[] = []
    scanner.skipBlanks()
    while (text[scanner.at] !== ')') {
      const value = scanner.number()
      if (value === null || values.length === 6) return null
      unit.lastIndex = scanner.at
      const suffix = unit.exec(text)
      if (suffix !== null) scanner.at = unit.lastIndex
      values.push(value * (unitFactor[suffix?.[0] ?? 'px'] ?? 1))
      scanner.skipSeparator()
    }
    scanner.at += 1
    const next = single(match[1] ?? '', values)
    if (next === null) return null
    map = composed(map, next)
    if (!map.every(Number.isFinite)) return null
  }
  return null
}
