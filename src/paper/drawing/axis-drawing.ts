/**
 * Building axes beside the plan: a bubble with the name off one end and a short line across to the rim. The line is not
 * drawn over the plan, where a joint lies on it anyway. A zoomed plan keeps its bubbles in sight, at the drawing's edge.
 */
import type { Axis } from '../../plan/axes.ts'
import { Batch, dots, label, type Item } from './display-list.ts'
import { toSheet, type PlanWindow } from './plan-window.ts'

const radius = 9
/** From the end of the axis to the middle of its bubble, and beyond its other end, px. */
const before = 30
const beyond = 9
/** Bubbles nearer than this, px, would touch: then only every second, fifth, tenth .. axis is named. */
const apart = 21

export interface AxisBubble {
  readonly axis: Axis
  readonly x: number
  readonly y: number
}

/** The area in which bubbles may stand. */
interface Sheet {
  readonly width: number
  readonly height: number
}

/** Middles of the bubbles that are shown. */
export function axisBubbles(axes: readonly Axis[], window: PlanWindow, sheet: Sheet): AxisBubble[] {
  const out: AxisBubble[] = []
  for (const kind of [axes.filter(isNumber), axes.filter((axis) => !isNumber(axis))]) {
    const spots = kind.map((axis) => ({ axis, ...line(axis, window, sheet) }))
    let least = Infinity
    for (let i = 1; i < spots.length; i += 1) least = Math.min(least, Math.hypot(spots[i].x - spots[i - 1].x, spots[i].y - spots[i - 1].y))
    const step = [1, 2, 5, 10, 20, 50].find((each) => each * Math.max(least, 0.1) >= apart) ?? 100
    for (const [i, spot] of spots.entries()) if (i % step === 0 && spot.seen) out.push({ axis: spot.axis, x: spot.x, y: spot.y })
  }
  return out
}

const isNumber = ({ name }: Axis): boolean => /^\d/.test(name)

export function axisItems(axes: readonly Axis[], window: PlanWindow, sheet: Sheet): Item[] {
  const lines = new Batch()
  const points: number[] = []
  const names: Item[] = []
  for (const { axis, x, y } of axisBubbles(axes, window, sheet)) {
    const { dx, dy, length } = line(axis, window, sheet)
    const [fx, fy] = toSheet(window, axis.from[0], axis.from[1])
    const gap = (fx - x) * dx + (fy - y) * dy
    if (gap > radius) lines.segment(x + dx * radius, y + dy * radius, fx, fy)
    lines.segment(fx + dx * length, fy + dy * length, fx + dx * (length + beyond), fy + dy * (length + beyond))
    points.push(x, y)
    names.push(label(x, y + 4, axis.name, { size: axis.name.length > 2 ? 10 : 11, tone: 'ink', anchor: 'middle', face: 'pen' }))
  }
  if (points.length === 0) return []
  return [lines.strokes('axis'), dots(points, radius, 'paper', 'ink2', 1), ...names]
}

/** Direction and length of an axis on the sheet, and its bubble: off its first end, or where it comes into the sheet. */
function line({ from, to }: Axis, window: PlanWindow, { width, height }: Sheet): { x: number; y: number; dx: number; dy: number; length: number; seen: boolean } {
  const [fx, fy] = toSheet(window, from[0], from[1])
  const [tx, ty] = toSheet(window, to[0], to[1])
  const length = Math.hypot(tx - fx, ty - fy) || 1
  const dx = (tx - fx) / length
  const dy = (ty - fy) / length
  const margin = radius + 3
  // The stretch t0 to t1 of the line from bubble to far end that lies on the sheet (Liang and Barsky 1984).
  let t0 = -before
  let t1 = length
  for (const [at, step, low, high] of [[fx, dx, margin, width - margin], [fy, dy, margin, height - margin]] as const) {
    if (Math.abs(step) < 1e-9) {
      if (at < low || at > high) t1 = -Infinity
      continue
    }
    const a = (low - at) / step
    const b = (high - at) / step
    t0 = Math.max(t0, Math.min(a, b))
    t1 = Math.min(t1, Math.max(a, b))
  }
  return { x: fx + dx * t0, y: fy + dy * t0, dx, dy, length, seen: t0 <= t1 }
}
