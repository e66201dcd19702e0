/**
 * Hatching as lines clipped to their panel, in the plan's own coordinates. Clipped here and not by the painter, so that
 * canvas, SVG and print show the same strokes and the roof can lift them with the panel they lie in. Strokes hang on one
 * origin for the whole plan: they stay where they are while the drawing is moved.
 */
import type { Hatch } from './reading.ts'

/** x0 y0 x1 y1 .. of the strokes; a dot is a stroke of no length. */
export type Segments = number[]

/** Long and short batter strokes, as shares of the panel along the fall. */
const longStroke = 0.58
const shortStroke = 0.3

/**
 * Adds the strokes of one panel. `polygon`: x y x y .. about the plan's centre; `px`: length of one screen pixel in the
 * polygon's unit; (gx, gy): gradient of the panel, for hatches that follow the fall.
 */
export function hatchPolygon(into: Segments, polygon: Float64Array, hatch: Hatch, px: number, gx: number, gy: number): void {
  switch (hatch.kind) {
    case 'batter': {
      const slope = Math.hypot(gx, gy)
      if (slope === 0) return
      // Along the fall (downhill) is t, across it is u.
      parallel(polygon, -gx / slope, -gy / slope, hatch.spacing * px, 0, (ux, uy, dx, dy, t0, t1, k) => {
        const length = (t1 - t0) * (k % 2 === 0 ? longStroke : shortStroke)
        into.push(ux + dx * t0, uy + dy * t0, ux + dx * (t0 + length), uy + dy * (t0 + length))
      })
      return
    }
    case 'water': {
      parallel(polygon, 1, 0, 5.5 * px, 0, (ux, uy, dx, dy, t0, t1, k) => {
        const period = 12 * px
        const shift = k % 2 === 0 ? 0 : period / 2
        for (let n = Math.floor((t0 - shift) / period); n * period + shift < t1; n += 1) {
          const from = Math.max(t0, n * period + shift)
          const to = Math.min(t1, n * period + shift + 8 * px)
          if (to - from > px) into.push(ux + dx * from, uy + dy * from, ux + dx * to, uy + dy * to)
        }
      })
      return
    }
    case 'lines': return lines(into, polygon, hatch.angle, hatch.spacing * px, 0)
    case 'cross':
      lines(into, polygon, 45, hatch.spacing * px, 0)
      return lines(into, polygon, 135, hatch.spacing * px, 0)
    case 'double':
      lines(into, polygon, 45, hatch.spacing * px, 0)
      return lines(into, polygon, 45, hatch.spacing * px, 2.4 * px)
    case 'dots': {
      const step = hatch.spacing * px
      parallel(polygon, 1, 0, step, 0, (ux, uy, dx, dy, t0, t1, k) => {
        const shift = k % 2 === 0 ? 0 : step / 2
        for (let n = Math.ceil((t0 - shift) / step); n * step + shift < t1; n += 1) {
          const t = n * step + shift
          into.push(ux + dx * t, uy + dy * t, ux + dx * t, uy + dy * t)
        }
      })
    }
  }
}

function lines(into: Segments, polygon: Float64Array, angle: number, spacing: number, offset: number): void {
  const turn = (angle * Math.PI) / 180
  parallel(polygon, Math.cos(turn), Math.sin(turn), spacing, offset, (ux, uy, dx, dy, t0, t1) => {
    into.push(ux + dx * t0, uy + dy * t0, ux + dx * t1, uy + dy * t1)
  })
}

/**
 * Calls `each` with the stretches [t0, t1] inside the polygon of the lines u = k spacing + offset along the unit vector
 * (dx, dy): where each line enters and leaves by the even-odd rule. (ux, uy) is the point t = 0 of line k.
 */
function parallel(
  polygon: Float64Array, dx: number, dy: number, spacing: number, offset: number,
  each: (ux: number, uy: number, dx: number, dy: number, t0: number, t1: number, k: number) => void,
): void {
  const n = polygon.length / 2
  let least = Infinity
  let most = -Infinity
  for (let i = 0; i < n; i += 1) {
    const u = polygon[2 * i + 1] * dx - polygon[2 * i] * dy
    if (u < least) least = u
    if (u > most) most = u
  }
  for (let k = Math.ceil((least - offset) / spacing); k * spacing + offset < most; k += 1) {
    const u = k * spacing + offset
    const crossings: number[] = []
    for (let i = 0, j = n - 1; i < n; j = i, i += 1) {
      const ua = polygon[2 * j + 1] * dx - polygon[2 * j] * dy
      const ub = polygon[2 * i + 1] * dx - polygon[2 * i] * dy
      if (ua > u === ub > u) continue
      const ta = polygon[2 * j] * dx + polygon[2 * j + 1] * dy
      const tb = polygon[2 * i] * dx + polygon[2 * i + 1] * dy
      crossings.push(ta + ((u - ua) / (ub - ua)) * (tb - ta))
    }
    crossings.sort((a, b) => a - b)
    for (let c = 0; c + 1 < crossings.length; c += 2) each(-dy * u, dx * u, dx, dy, crossings[c], crossings[c + 1], k)
  }
}
