/** The basic shapes of SVG (SVG 2, chapter 10) and paths, drawn with the tracer. */
import type { Steps } from '../base/steps.ts'
import { svgLength, userUnits, NumberScanner } from './svg-numbers.ts'
import { drawnPath } from './svg-path.ts'
import type { Tracer } from './svg-tracer.ts'
import { quoted } from './text-quote.ts'
import { attribute, type XmlElement } from './xml.ts'

/** Size in user units of what percentages are shares of; null where the file does not say. */
export interface Viewport {
  readonly width: number
  readonly height: number
}

/** What is 100 %: the width, the height, or the mean of both for lengths along neither (SVG 2, section 8.9). */
export type Axis = 'x' | 'y' | 'both'

export const shapeNames: ReadonlySet<string> = new Set(['rect', 'circle', 'ellipse', 'line', 'polyline', 'polygon', 'path'])

/** The lengths of one element, declared or as attributes; keeps the first fault. */
export class Lengths {
  fault: string | null = null
  private readonly element: XmlElement
  private readonly declared: ReadonlyMap<string, string>
  private readonly viewport: Viewport | null

  constructor(element: XmlElement, declared: ReadonlyMap<string, string>, viewport: Viewport | null) {
    this.element = element
    this.declared = declared
    this.viewport = viewport
  }

  /** As written; null where it is absent or "auto". */
  text(name: string): string | null {
    const text = (this.declared.get(name) ?? attribute(this.element, name))?.trim() ?? ''
    return text === '' || text === 'auto' ? null : text
  }

  /** In user units; null where it is absent or "auto". */
  optional(name: string, axis: Axis): number | null {
    const text = this.text(name)
    if (text === null) return null
    const length = svgLength(text)
    if (length === null) return this.refuse(`${name} is no length that can be read: ${quoted(text)}`)
    const units = userUnits(length, this.whole(axis))
    if (units === null) return this.refuse(`${name} is a share of the page, and the file does not say how large that is`)
    if (!Number.isFinite(units)) return this.refuse(`${name} is beyond the range of numbers`)
    return units
  }

  /** In user units, 0 where it is absent. */
  coordinate(name: string, axis: Axis): number {
    return this.optional(name, axis) ?? 0
  }

  /** Not negative, 0 where it is absent. */
  size(name: string, axis: Axis): number {
    const value = this.coordinate(name, axis)
    if (value < 0) this.refuse(`${name} is negative`)
    return value
  }

  private whole(axis: Axis): number | null {
    if (this.viewport === null) return null
    const { width, height } = this.viewport
    return axis === 'x' ? width : axis === 'y' ? height : Math.sqrt((width * width + height * height) / 2)
  }

  private refuse(message: string): null {
    this.fault ??= message
    return null
  }
}

/** Draws the shape; returns why it cannot be read, or null. */
export function* drawnShape(element: XmlElement, lengths: Lengths, tracer: Tracer): Steps<string | null> {
  switch (element.name) {
    case 'rect':
      rectangle(lengths, tracer)
      break
    case 'circle': {
      const r = lengths.size('r', 'both')
      if (r > 0) tracer.ellipse(lengths.coordinate('cx', 'x'), lengths.coordinate('cy', 'y'), r, r)
      break
    }
    case 'ellipse': {
      const [rx, ry] = radii(lengths)
      if (rx > 0 && ry > 0) tracer.ellipse(lengths.coordinate('cx', 'x'), lengths.coordinate('cy', 'y'), rx, ry)
      break
    }
    case 'line':
      tracer.move(lengths.coordinate('x1', 'x'), lengths.coordinate('y1', 'y'))
      tracer.line(lengths.coordinate('x2', 'x'), lengths.coordinate('y2', 'y'))
      break
    case 'polyline':
    case 'polygon': {
      const fault = yield* drawnPoints(attribute(element, 'points') ?? '', tracer)
      if (fault !== null) return fault
      if (element.name === 'polygon') tracer.close()
      break
    }
    default: {
      const fault = yield* drawnPath(attribute(element, 'd') ?? '', tracer)
      if (fault !== null) return `path data, character ${fault.character}: ${fault.message}`
    }
  }
  return lengths.fault ?? tracer.fault
}

/** rx and ry; one that is not given equals the other (SVG 2, section 10.2). */
function radii(lengths: Lengths): [number, number] {
  const rx = lengths.text('rx') === null ? null : lengths.size('rx', 'x')
  const ry = lengths.text('ry') === null ? null : lengths.size('ry', 'y')
  return [rx ?? ry ?? 0, ry ?? rx ?? 0]
}

function rectangle(lengths: Lengths, tracer: Tracer): void {
  const [x, y, w, h] = [lengths.coordinate('x', 'x'), lengths.coordinate('y', 'y'), lengths.size('width', 'x'), lengths.size('height', 'y')]
  const [rxGiven, ryGiven] = radii(lengths)
  if (w === 0 || h === 0) return
  const rx = Math.min(rxGiven, w / 2)
  const ry = Math.min(ryGiven, h / 2)
  const round = rx > 0 && ry > 0
  const corner = (toX: number, toY: number): void => {
    if (round) tracer.arc(rx, ry, 0, false, true, toX, toY)
  }
  const [a, b] = round ? [rx, ry] : [0, 0]
  tracer.move(x + a, y)
  tracer.line(x + w - a, y)
  corner(x + w, y + b)
  tracer.line(x + w, y + h - b)
  corner(x + w - a, y + h)
  tracer.line(x + a, y + h)
  corner(x, y + h - b)
  tracer.line(x, y + b)
  corner(x + a, y)
  tracer.close()
}

/** Points between two turns: about a millisecond. */
const slice = 4096

function* drawnPoints(text: string, tracer: Tracer): Steps<string | null> {
  const scanner = new NumberScanner(text)
  let x = 0
  scanner.skipBlanks()
  for (let count = 0; !scanner.atEnd; count += 1) {
    const value = scanner.number()
    const place = `points, character ${scanner.at + 1}`
    if (value === null) return `${place}: a number is expected in place of ${quoted(text.slice(scanner.at, scanner.at + 12))}`
    if (!Number.isFinite(value)) return `${place}: a number is beyond the range of numbers`
    scanner.skipSeparator()
    if (count % 2 === 0) {
      if (scanner.atEnd) return 'points has an odd count of numbers'
      x = value
    } else if (count === 1) tracer.move(x, value)
    else tracer.line(x, value)
    if (count % slice === 0) yield { stage: 'Reading', done: scanner.at / text.length }
  }
  return null
}
