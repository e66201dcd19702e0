/**
 * Path data: the commands M L H V C S Q T A Z, absolute and relative, handed on as absolute ones without short forms
 * (SVG 2, section 9.3; the grammar of 9.3.9, and a trailing point as in "1." which SVG 1.1 also allows).
 */
import type { Steps } from '../base/steps.ts'
import { NumberScanner } from './svg-numbers.ts'
import { quoted } from './text-quote.ts'

/** What draws: every point absolute, in user units. */
export interface Pen {
  /** Why drawing on is of no use, null while it is. */
  readonly fault: string | null
  move(x: number, y: number): void
  line(x: number, y: number): void
  quadratic(x1: number, y1: number, x: number, y: number): void
  cubic(x1: number, y1: number, x2: number, y2: number, x: number, y: number): void
  /** Radii, turn of the ellipse's axis in degrees, flags as in the file, end point. */
  arc(rx: number, ry: number, turn: number, large: boolean, sweep: boolean, x: number, y: number): void
  /** Back to the point of the last `move`. */
  close(): void
}

/** Where path data cannot be read on, and why. */
export interface PathFault {
  /** 1-based character of the path data. */
  readonly character: number
  readonly message: string
}

/** How many numbers one round of a command takes. */
const arity: Readonly<Record<string, number>> = { M: 2, L: 2, H: 1, V: 1, C: 6, S: 4, Q: 4, T: 2, A: 7, Z: 0 }

/** Commands between two turns: about a millisecond. */
const slice = 4096

/**
 * Draws the path data with the pen; null when all of it was read, or the pen wants no more. What comes before a fault has
 * been drawn.
 */
export function* drawnPath(data: string, pen: Pen): Steps<PathFault | null> {
  const scanner = new NumberScanner(data)
  const v = new Float64Array(7)
  let [x, y, startX, startY] = [0, 0, 0, 0]
  // The last control point, for the short forms: its reflection stands in only after a curve of the same degree.
  let [controlX, controlY] = [0, 0]
  let degree = 0
  let command = ''
  let count = 0
  const fault = (message: string): PathFault => ({ character: scanner.at + 1, message })

  scanner.skipBlanks()
  if (/^\s*none\s*$/.test(data)) return null
  while (!scanner.atEnd) {
    const letter = data[scanner.at] ?? ''
    if (/[A-Za-z]/.test(letter)) {
      if (!Object.hasOwn(arity, letter.toUpperCase())) return fault(`"${letter}" is no path command`)
      if (command === '' && letter.toUpperCase() !== 'M') return fault('path data starts with M or m')
      command = letter
      scanner.at += 1
      scanner.skipBlanks()
    } else if (command === '' || command === 'Z' || command === 'z') {
      return fault(command === '' ? 'path data starts with M or m' : 'a command is expected after Z')
    } else if (command === 'M' || command === 'm') {
      // Further pairs after a move are lines.
      command = command === 'M' ? 'L' : 'l'
    }

    const kind = command.toUpperCase()
    const needed = arity[kind] ?? 0
    for (let i = 0; i < needed; i += 1) {
      if (i > 0) scanner.skipSeparator()
      const isFlag = kind === 'A' && (i === 3 || i === 4)
      const value = isFlag ? scanner.flag() : scanner.number()
      if (value === null) {
        if (scanner.atEnd) return fault(`${command} needs ${needed} number${needed === 1 ? '' : 's'}, the data ends after ${i}`)
        const word = /^\S{1,12}/.exec(data.slice(scanner.at, scanner.at + 12))?.[0] ?? ''
        return fault(isFlag ? 'a flag of an arc is 0 or 1' : `a number is expected in place of ${quoted(word)}`)
      }
      if (!Number.isFinite(value)) return fault('a number is beyond the range of numbers')
      v[i] = value
    }
    const [p, q, r, s, t, u, w] = [v[0], v[1], v[2], v[3], v[4], v[5], v[6]]
    const [fromX, fromY] = command === kind ? [0, 0] : [x, y]

    switch (kind) {
      case 'M':
        x = fromX + p
        y = fromY + q
        startX = x
        startY = y
        pen.move(x, y)
        break
      case 'L':
        x = fromX + p
        y = fromY + q
        pen.line(x, y)
        break
      case 'H':
        x = fromX + p
        pen.line(x, y)
        break
      case 'V':
        y = fromY + p
        pen.line(x, y)
        break
      case 'C':
      case 'S': {
        const short = kind === 'S'
        const x1 = short ? (degree === 3 ? 2 * x - controlX : x) : fromX + p
        const y1 = short ? (degree === 3 ? 2 * y - controlY : y) : fromY + q
        controlX = fromX + (short ? p : r)
        controlY = fromY + (short ? q : s)
        x = fromX + (short ? r : t)
        y = fromY + (short ? s : u)
        pen.cubic(x1, y1, controlX, controlY, x, y)
        break
      }
      case 'Q':
      case 'T': {
        const short = kind === 'T'
        controlX = short ? (degree === 2 ? 2 * x - controlX : x) : fromX + p
        controlY = short ? (degree === 2 ? 2 * y - controlY : y) : fromY + q
        x = fromX + (short ? p : r)
        y = fromY + (short ? q : s)
        pen.quadratic(controlX, controlY, x, y)
        break
      }
      case 'A':
        x = fromX + u
        y = fromY + w
        pen.arc(p, q, r, s === 1, t === 1, x, y)
        break
      case 'Z':
        x = startX
        y = startY
        pen.close()
        break
    }
    degree = kind === 'C' || kind === 'S' ? 3 : kind === 'Q' || kind === 'T' ? 2 : 0

    const end = scanner.at
    scanner.skipSeparator()
    const next = data[scanner.at] ?? ''
    if (data.slice(end, scanner.at).includes(',') && (next === '' || /[A-Za-z]/.test(next))) {
      return fault('a number is expected after the comma')
    }
    count += 1
    if (count % slice === 0) {
      if (pen.fault !== null) return null
      yield { stage: 'Reading', done: scanner.at / data.length }
    }
  }
  return null
}
