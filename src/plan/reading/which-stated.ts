/** Lines chosen by the user: by colour, by line type, inside a closed line, within a window. What fits all that is stated stays. */
import { pointInPolygon } from '../../base/geometry/point-in-polygon.ts'
import { signedArea } from '../../base/geometry/polygon-area.ts'
import { fail, ok, type Result } from '../../base/result.ts'
import type { Drawing } from '../drawing.ts'
import type { ReadOptions } from '../read-plan.ts'
import { all, isEmpty, isWhole, type Kept } from './which-part.ts'

/** How near to the closed line, as a share of its extent, an end counts as on it. */
const onLine = 1e-6

/** What stays; null where nothing is stated. Fails where nothing is left: "no-such-colour", "no-such-line-type", "no-closed-line", "empty-window". */
export function statedLines(drawing: Drawing, { colours = null, lineTypes = null, window = null, between = null, inside = null }: ReadOptions, factor: number): Result<Kept | null> {
  if (colours === null && lineTypes === null && window === null && between === null && inside === null) return ok(null)
  const kept = all(drawing)
  const { points } = drawing
  if (colours !== null) {
    const wanted = new Set(colours)
    const there = new Set<string>()
    byLook(drawing, kept, ({ colour }) => {
      there.add(colour)
      return wanted.has(colour)
    })
    const missing = colours.find((colour) => !there.has(colour))
    if (missing !== undefined) return nothing('no-such-colour', `nothing is drawn in the colour ${missing}`, [...there], 'colours')
  }
  if (lineTypes !== null) {
    const wanted = new Set(lineTypes.map((name) => name.toUpperCase()))
    const there = new Set<string>()
    byLook(drawing, kept, ({ lineType }) => {
      there.add(lineType)
      return wanted.has(lineType)
    })
    const missing = [...wanted].find((name) => !there.has(name))
    if (missing !== undefined) return nothing('no-such-line-type', `nothing is drawn in the line type ${missing}`, [...there], 'line types')
  }
  if (window !== null) {
    const [[x1, y1], [x2, y2]] = window
    const [left, right, low, high] = [Math.min(x1, x2), Math.max(x1, x2), Math.min(y1, y2), Math.max(y1, y2)]
    byPoints(drawing, kept, (p) => {
      const x = points[3 * p] * factor, y = points[3 * p + 1] * factor
      return x >= left && x <= right && y >= low && y <= high
    })
    if (isEmpty(kept)) return fail('empty-window', 'nothing lies wholly within the window', { field: '--window' }, "give two opposite corners in the plan's coordinates")
  }
  if (between !== null) {
    const [low, high] = [Math.min(...between), Math.max(...between)]
    // Heights as typed: a micrometre of rounding on either side is none.
    const off = 1e-9 * Math.max(1, Math.abs(low), Math.abs(high))
    byPoints(drawing, kept, (p) => points[3 * p + 2] * factor >= low - off && points[3 * p + 2] * factor <= high + off)
    if (isEmpty(kept)) return fail('empty-window', 'nothing lies wholly between these heights', { field: '--between' }, "give two heights of the drawing in the plan's unit")
  }
  if (inside !== null) {
    const loop = closedLine(drawing, inside, factor)
    if (loop < 0) {
      return typeof inside === 'string'
        ? fail('no-closed-line', `there is no closed line on the layer "${inside}"`, { field: '--inside' }, 'name the layer of a closed polyline, or a point in it')
        : fail('no-closed-line', 'no closed line goes round this point', { field: '--inside' }, "give a point in the plan's coordinates, or the layer of the closed line")
    }
    withinLoop(drawing, kept, loop)
    if (isEmpty(kept)) return fail('empty-window', 'nothing lies inside the closed line', { field: '--inside' }, 'name another closed line')
  }
  return ok(isWhole(kept) ? null : kept)
}

function nothing(code: string, message: string, there: readonly string[], what: string): Result<never> {
  const names = there.filter((name) => name !== '').sort()
  return fail(code, message, null, names.length === 0 ? `this format says nothing of ${what}` : `the file has ${names.slice(0, 12).join(', ')}${names.length > 12 ? ` and ${names.length - 12} more` : ''}`)
}

const noLook = { kind: '', colour: '', lineType: '' }

function byLook({ looks = [], segmentLook, outlines, holes }: Drawing, kept: Kept, fits: (look: typeof noLook) => boolean): void {
  const verdict = looks.map(fits)
  if (looks.length === 0) fits(noLook)
  const judge = (list: Uint8Array, own: Int32Array | undefined): void => {
    for (let i = 0; i < list.length; i += 1) if (!(verdict[own?.[i] ?? 0] ?? false)) list[i] = 0
  }
  judge(kept.segments, segmentLook)
  judge(kept.outlines, outlines.look)
  judge(kept.holes, holes.look)
}

function byPoints({ segments, outlines, holes }: Drawing, kept: Kept, fits: (point: number) => boolean): void {
  for (let k = 0; k < segments.length; k += 1) if (kept.segments[k >> 1] === 1 && !fits(segments[k])) kept.segments[k >> 1] = 0
  for (const [list, own] of [[outlines, kept.outlines], [holes, kept.holes]] as const) {
    for (let i = 0; i < own.length; i += 1) {
      for (let k = list.start[i]; own[i] === 1 && k < list.start[i + 1]; k += 1) if (!fits(list.point[k])) own[i] = 0
    }
  }
}

/** The largest closed line on a layer, or the smallest round a point; -1: none. */
function closedLine({ points, outlines, layers }: Drawing, inside: string | readonly [number, number], factor: number): number {
  let best = -1, bestArea = 0
  const [x, y] = coordinates(points)
  for (let i = 0; i < outlines.layer.length; i += 1) {
    const area = Math.abs(signedArea(x, y, outlines.point, outlines.start[i], outlines.start[i + 1]))
    if (typeof inside === 'string') {
      if (layers[outlines.layer[i]].toLowerCase() === inside.toLowerCase() && area > bestArea) [best, bestArea] = [i, area]
    } else if ((best < 0 || area < bestArea) && area > 0) {
      if (pointInPolygon(inside[0] / factor, inside[1] / factor, x, y, outlines.point, outlines.start[i], outlines.start[i + 1]) > 0) [best, bestArea] = [i, area]
    }
  }
  return best
}

/** Keeps what lies inside the closed line or on it; the line itself stays only where lines inside end on it, as the rim does. */
function withinLoop(drawing: Drawing, kept: Kept, loop: number): void {
  const { points, segments, outlines } = drawing
  const [x, y] = coordinates(points)
  const from = outlines.start[loop], to = outlines.start[loop + 1]
  let extent = 0
  for (let k = from; k < to; k += 1) extent = Math.max(extent, Math.abs(x[outlines.point[k]] - x[outlines.point[from]]), Math.abs(y[outlines.point[k]] - y[outlines.point[from]]))
  const state = new Map<number, boolean>()
  const isOn = (p: number): boolean => {
    for (let k = from; k < to; k += 1) {
      const a = outlines.point[k], b = outlines.point[k + 1 < to ? k + 1 : from]
      const ux = x[b] - x[a], uy = y[b] - y[a]
      const size = ux * ux + uy * uy
      const share = size === 0 ? 0 : Math.max(0, Math.min(1, ((x[p] - x[a]) * ux + (y[p] - y[a]) * uy) / size))
      if (Math.hypot(x[p] - x[a] - share * ux, y[p] - y[a] - share * uy) <= onLine * extent) return true
    }
    return false
  }
  byPoints(drawing, kept, (p) => {
    const known = state.get(p)
    if (known !== undefined) return known
    const isIn = pointInPolygon(x[p], y[p], x, y, outlines.point, from, to) > 0 || isOn(p)
    state.set(p, isIn)
    return isIn
  })
  let ending = 0
  for (let k = 0; k < segments.length; k += 1) if (kept.segments[k >> 1] === 1 && isOn(segments[k])) ending += 1
  kept.outlines[loop] = ending > 2 ? 1 : 0
}

function coordinates(points: Float64Array): [Float64Array, Float64Array] {
  const count = points.length / 3
  return [Float64Array.from({ length: count }, (_, p) => points[3 * p]), Float64Array.from({ length: count }, (_, p) => points[3 * p + 1])]
}
