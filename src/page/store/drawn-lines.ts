/**
 * The lines of a drawing as they are in its file, before any repair: for the detail of a repair and for small pictures. Read
 * here in slices, since the worker keeps the plan that it made of them and not the lines.
 */
import { drive, cancelled } from '../../base/steps.ts'
import { readDrawing } from '../../formats/all.ts'

/** Chords within 5 mm, as everywhere; a main thread stays free with slices of 20 ms. */
const sagitta_m = 0.005
const sliceMs = 20

/** x0 y0 x1 y1 .. in the file's own unit and place; null when it cannot be read. */
export async function drawnLines(name: string, bytes: Uint8Array, signal?: AbortSignal): Promise<Float64Array | null> {
  const made = await drive(readDrawing({ name, bytes }, { layers: null, sagitta: sagitta_m, metresPerUnit: null }), { sliceMs, ...(signal === undefined ? {} : { signal }) })
  if (made === cancelled || !made.ok) return null
  const { points, segments, outlines, holes } = made.value
  const out: number[] = []
  const add = (a: number, b: number): void => { out.push(points[3 * a], points[3 * a + 1], points[3 * b], points[3 * b + 1]) }
  for (let i = 0; i < segments.length; i += 2) add(segments[i], segments[i + 1])
  for (const { start, point } of [outlines, holes]) {
    for (let l = 0; l + 1 < start.length; l += 1) {
      for (let k = start[l], before = start[l + 1] - 1; k < start[l + 1]; before = k, k += 1) add(point[before], point[k])
    }
  }
  return Float64Array.from(out)
}

/** Colours and line types that a drawing's lines have, each with how many; null when it cannot be read. */
export interface DrawnLooks {
  readonly colours: ReadonlyMap<string, number>
  readonly lineTypes: ReadonlyMap<string, number>
}

export async function drawnLooks(name: string, bytes: Uint8Array, signal?: AbortSignal): Promise<DrawnLooks | null> {
  const made = await drive(readDrawing({ name, bytes }, { layers: null, sagitta: sagitta_m, metresPerUnit: null }), { sliceMs, ...(signal === undefined ? {} : { signal }) })
  if (made === cancelled || !made.ok) return null
  const { looks = [], segmentLook, outlines } = made.value
  const colours = new Map<string, number>(), lineTypes = new Map<string, number>()
  const count = (look: number): void => {
    const own = looks[look]
    if (own === undefined) return
    colours.set(own.colour, (colours.get(own.colour) ?? 0) + 1)
    lineTypes.set(own.lineType, (lineTypes.get(own.lineType) ?? 0) + 1)
  }
  segmentLook?.forEach(count)
  outlines.look?.forEach(count)
  return { colours, lineTypes }
}

/** The lines as an SVG path fitted into a box, y down. */
export function linesPath(lines: Float64Array, width: number, height: number): string {
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity]
  for (let i = 0; i < lines.length; i += 2) {
    x0 = Math.min(x0, lines[i])
    x1 = Math.max(x1, lines[i])
    y0 = Math.min(y0, lines[i + 1])
    y1 = Math.max(y1, lines[i + 1])
  }
  const scale = Math.min((width - 4) / Math.max(x1 - x0, 1e-9), (height - 4) / Math.max(y1 - y0, 1e-9))
  const at = (x: number, y: number): string => `${(width / 2 + (x - (x0 + x1) / 2) * scale).toFixed(1)} ${(height / 2 - (y - (y0 + y1) / 2) * scale).toFixed(1)}`
  let path = ''
  for (let i = 0; i < lines.length; i += 4) path += `M${at(lines[i], lines[i + 1])}L${at(lines[i + 2], lines[i + 3])}`
  return path
}
