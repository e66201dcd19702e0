/** A detail: the plan about one place, magnified in a circle in the emptiest corner, as details stand on drawings. */
import type { Plan } from '../../plan/plan.ts'
import { Batch, dots, label, type Item } from './display-list.ts'
import { figure } from './figures.ts'
import { toSheet, type PlanWindow } from './plan-window.ts'

/** Radius on a sheet that has room; on a small one a fifth of its shorter side. */
const fullRadius = 72

export interface Detail {
  /** Middle of the circle on the sheet, and px to the plan unit in it. */
  readonly x: number
  readonly y: number
  readonly radius: number
  readonly scale: number
  readonly times: number
}

const rounds = [2, 3, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000, 10_000, 50_000]

interface Sheet {
  readonly width: number
  readonly height: number
}

/**
 * Where the detail about a plan point stands and how much it magnifies: so that the drawn line end that is off the place by
 * least (lines x0 y0 x1 y1 .. as drawn, null: not known) comes a quarter of the radius from it, else the shortest edge there
 * two thirds; in a round number of times, at least two.
 */
export function detailAt(plan: Plan, window: PlanWindow, at: readonly [number, number], lines: Float64Array | null, { width, height }: Sheet): Detail | null {
  const edge = shortestNear(plan, at)
  if (edge === 0) return null
  const detailRadius = Math.min(fullRadius, 0.2 * Math.min(width, height))
  const off = lines === null ? Infinity : endOff(lines, at, edge / 20)
  const wished = Number.isFinite(off) ? (0.28 * detailRadius) / (off * window.scale) : (0.67 * detailRadius) / (edge * window.scale)
  const times = rounds.filter((each) => each <= wished).pop() ?? 2
  const [px, py] = toSheet(window, at[0], at[1])
  const far = detailRadius + 22
  const [x, y] = [[width - far, height - far - 34], [far, height - far - 74], [width - far, far + 50], [far, far]]
    // The nearest corner that leaves the place itself in sight.
    .map(([cx, cy]) => ({ cx, cy, d: Math.hypot(cx - px, cy - py) })).filter(({ d }) => d > far + 12).sort((a, b) => a.d - b.d).map(({ cx, cy }) => [cx, cy])[0] ?? [width - far, height - far - 26]
  return { x, y, radius: detailRadius, scale: times * window.scale, times }
}

/** The detail with a leader from its place; edges are cut at the circle, `places` are ringed. */
export function detailItems(plan: Plan, window: PlanWindow, at: readonly [number, number], places: readonly (readonly [number, number])[], drawn: Float64Array | null, detail: Detail): Item[] {
  const { x, y, radius: r, scale, times } = detail
  const to = (px: number, py: number): readonly [number, number] => [x + (px - at[0]) * scale, y - (py - at[1]) * scale]
  const lines = new Batch()
  for (let e = 0; e < plan.edgeCount; e += 1) {
    const [a, b] = [plan.origin[2 * e], plan.origin[2 * e + 1]]
    const [ax, ay] = to(plan.x[a], plan.y[a])
    const [bx, by] = to(plan.x[b], plan.y[b])
    const cut = within(ax - x, ay - y, bx - x, by - y, r)
    if (cut !== null) lines.segment(ax + cut[0] * (bx - ax), ay + cut[0] * (by - ay), ax + cut[1] * (bx - ax), ay + cut[1] * (by - ay))
  }
  const asDrawn = new Batch()
  for (let i = 0; drawn !== null && i < drawn.length; i += 4) {
    const [ax, ay] = to(drawn[i], drawn[i + 1])
    const [bx, by] = to(drawn[i + 2], drawn[i + 3])
    const cut = within(ax - x, ay - y, bx - x, by - y, r)
    if (cut !== null) asDrawn.segment(ax + cut[0] * (bx - ax), ay + cut[0] * (by - ay), ax + cut[1] * (bx - ax), ay + cut[1] * (by - ay))
  }
  const rings: number[] = []
  for (const [wx, wy] of places) {
    const [px, py] = to(wx, wy)
    if (Math.hypot(px - x, py - y) < r - 6) rings.push(px, py)
  }
  const [px, py] = toSheet(window, at[0], at[1])
  const away = Math.hypot(px - x, py - y) || 1
  const leader = new Batch()
  if (away > r + 8) leader.segment(px + ((x - px) / away) * 5, py + ((y - py) / away) * 5, x + ((px - x) / away) * r, y + ((py - y) / away) * r)
  return [
    ...(leader.empty ? [] : [leader.strokes('water', 0.9)]),
    dots([x, y], r, 'paper', 'ink', 1.4),
    ...(lines.empty ? [] : [lines.strokes(asDrawn.empty ? 'thin' : 'before', asDrawn.empty ? 1.6 : 1)]),
    ...(asDrawn.empty ? [] : [asDrawn.strokes('thin', 1.6)]),
    ...(rings.length === 0 ? [] : [dots(rings, 6, null, 'fault', 1.4)]),
    label(x, y + r + 14, `${figure(times)} times as large`, { anchor: 'middle', plate: true }),
    ...(asDrawn.empty ? [] : [label(x, y + r + 27, 'as drawn; dotted: as read', { anchor: 'middle', plate: true })]),
  ]
}

/** The stretch t0 to t1 of the segment from a to b that lies within r of the origin; null: none. |a + t (b - a)|^2 = r^2. */
function within(ax: number, ay: number, bx: number, by: number, r: number): readonly [number, number] | null {
  const [dx, dy] = [bx - ax, by - ay]
  const a = dx * dx + dy * dy
  const half = ax * dx + ay * dy
  const root = half * half - a * (ax * ax + ay * ay - r * r)
  if (a === 0 || root <= 0) return null
  const t0 = Math.max(0, (-half - Math.sqrt(root)) / a)
  const t1 = Math.min(1, (-half + Math.sqrt(root)) / a)
  return t0 < t1 ? [t0, t1] : null
}

/** Least distance of a drawn line end from the place that is more than rounding and within `reach`; infinite: none. */
function endOff(lines: Float64Array, at: readonly [number, number], reach: number): number {
  let least = Infinity
  for (let i = 0; i < lines.length; i += 2) {
    const d = Math.hypot(lines[i] - at[0], lines[i + 1] - at[1])
    if (d > reach * 1e-4 && d < reach && d < least) least = d
  }
  return least
}

/** Length of the shortest edge at the node nearest to the place; 0: no node. */
function shortestNear({ x, y, nodeCount, origin, edgeCount }: Plan, at: readonly [number, number]): number {
  let node = -1
  let least = Infinity
  for (let i = 0; i < nodeCount; i += 1) {
    const d = (x[i] - at[0]) ** 2 + (y[i] - at[1]) ** 2
    if (d < least) {
      least = d
      node = i
    }
  }
  let shortest = Infinity
  for (let e = 0; e < edgeCount; e += 1) {
    const [a, b] = [origin[2 * e], origin[2 * e + 1]]
    if (a === node || b === node) shortest = Math.min(shortest, Math.hypot(x[b] - x[a], y[b] - y[a]))
  }
  return Number.isFinite(shortest) ? shortest : 0
}
