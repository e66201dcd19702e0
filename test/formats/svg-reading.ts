/** What the tests of SVG and GeoJSON share: markup in, plain lists out. Shares no geometry with the reader. */
import type { Problem } from '../../src/base/result.ts'
import { finish } from '../../src/base/steps.ts'
import type { Format, FormatOptions } from '../../src/formats/format.ts'
import { svg } from '../../src/formats/svg.ts'
import type { Drawing, Loops } from '../../src/plan/drawing.ts'

export type Point = [x: number, y: number]

const plain: FormatOptions = { layers: null, sagitta: 0.005, metresPerUnit: null }

export function drawingOf(format: Format, text: string, options: Partial<FormatOptions> = {}): Drawing {
  const read = finish(format.read(text, { name: 'drawn', bytes: new Uint8Array() }, { ...plain, ...options }))
  if (!read.ok) throw new Error(JSON.stringify(read.problem))
  return read.value
}

export function problemOf(format: Format, text: string, options: Partial<FormatOptions> = {}): Problem {
  const read = finish(format.read(text, { name: 'drawn', bytes: new Uint8Array() }, { ...plain, ...options }))
  if (read.ok) throw new Error('was read')
  return read.problem
}

const names = 'xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink"'

/** A page of 100 mm square whose user unit is the mm: a point (x, y) of the markup lies at (x, 100 - y). */
export const sheet = (inside: string): string =>
  `<svg ${names} width="100mm" height="100mm" viewBox="0 0 100 100">${inside}</svg>`

export const drawn = (inside: string, options: Partial<FormatOptions> = {}): Drawing => drawingOf(svg, sheet(inside), options)
export const refusal = (inside: string, options: Partial<FormatOptions> = {}): Problem => problemOf(svg, sheet(inside), options)

const at = (drawing: Drawing, point: number): Point => [drawing.points[3 * point]!, drawing.points[3 * point + 1]!]

export function loopPoints(drawing: Drawing, loops: Loops): Point[][] {
  return Array.from(loops.layer, (_, i) => Array.from(loops.point.slice(loops.start[i], loops.start[i + 1]), (point) => at(drawing, point)))
}

export const outlines = (drawing: Drawing): Point[][] => loopPoints(drawing, drawing.outlines)
export const holes = (drawing: Drawing): Point[][] => loopPoints(drawing, drawing.holes)

export function segments(drawing: Drawing): [Point, Point][] {
  return Array.from(drawing.segmentLayer, (_, i) => [at(drawing, drawing.segments[2 * i]!), at(drawing, drawing.segments[2 * i + 1]!)])
}

/** Points of the segments as one chain, when each starts where the one before ends. */
export function chain(drawing: Drawing): Point[] {
  const all = segments(drawing)
  return all.length === 0 ? [] : [all[0]![0], ...all.map(([, to]) => to)]
}

/** Shoelace formula; positive counter-clockwise. */
export function area(loop: readonly Point[]): number {
  return loop.reduce((sum, [x, y], i) => {
    const [u, v] = loop[(i + 1) % loop.length]!
    return sum + (x * v - u * y) / 2
  }, 0)
}
