/** Reading for tests: text or bytes in, the drawing or the sentence of its problem out. */
import { readDrawing } from '../../src/formats/all.ts'
import type { FormatOptions } from '../../src/formats/format.ts'
import { sentence } from '../../src/base/result.ts'
import { finish } from '../../src/base/steps.ts'
import type { Drawing, Loops } from '../../src/plan/drawing.ts'

export const usual: FormatOptions = { layers: null, sagitta: 0.005, metresPerUnit: null }

export const bytesOf = (content: string | Uint8Array): Uint8Array =>
  typeof content === 'string' ? new TextEncoder().encode(content) : content

/** The drawing; throws the sentence where there is none. */
export function drawingOf(content: string | Uint8Array, name = 'plan.dxf', options: Partial<FormatOptions> = {}): Drawing {
  const read = finish(readDrawing({ name, bytes: bytesOf(content) }, { ...usual, ...options }))
  if (!read.ok) throw new Error(sentence(read.problem))
  return read.value
}

/** The sentence of the problem; throws where the content is read after all. */
export function sentenceOf(content: string | Uint8Array, name = 'plan.dxf', options: Partial<FormatOptions> = {}): string {
  const read = finish(readDrawing({ name, bytes: bytesOf(content) }, { ...usual, ...options }))
  if (read.ok) throw new Error('this is read without a problem')
  return sentence(read.problem)
}

export type Point = [x: number, y: number, z: number]

export const pointAt = ({ points }: Drawing, i: number): Point => [points[3 * i]!, points[3 * i + 1]!, points[3 * i + 2]!]

/** Corners of every outline. */
export function outlinesOf(drawing: Drawing, loops: Loops = drawing.outlines): Point[][] {
  return Array.from(loops.layer, (_, i) =>
    Array.from(loops.point.subarray(loops.start[i]!, loops.start[i + 1]!), (p) => pointAt(drawing, p)),
  )
}

/** Ends of every segment. */
export function segmentsOf(drawing: Drawing): [Point, Point][] {
  return Array.from(drawing.segmentLayer, (_, i) => [
    pointAt(drawing, drawing.segments[2 * i]!),
    pointAt(drawing, drawing.segments[2 * i + 1]!),
  ])
}

/** Distance of a point from the segment a b. */
export function distanceTo(p: Point, [a, b]: readonly [Point, Point]): number {
  const d = a.map((value, k) => b[k]! - value)
  const length = d.reduce((sum, value) => sum + value * value, 0)
  const along = length === 0 ? 0 : Math.min(1, Math.max(0, d.reduce((sum, value, k) => sum + value * (p[k]! - a[k]!), 0) / length))
  return Math.hypot(...p.map((value, k) => value - a[k]! - along * d[k]!))
}
