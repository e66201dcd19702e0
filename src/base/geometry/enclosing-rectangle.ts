/**
 * The rectangle of least area around points. One of its sides lies along a side of the convex hull (H. Freeman,
 * R. Shapira, "Determining the minimum-area encasing rectangle for an arbitrary closed curve", CACM 18, 1975), so every
 * hull side is tried; the three other supports only move forward (rotating calipers: G. T. Toussaint, 1983).
 */
import { convexHull } from './convex-hull.ts'
import { areaTie } from './tolerance.ts'

export interface EnclosingRectangle {
  readonly centreX: number
  readonly centreY: number
  /** Unit vector along the longer side, in the half plane x > 0 (or straight up). */
  readonly axisX: number
  readonly axisY: number
  /** Half the longer and half the shorter side. */
  readonly halfLong: number
  readonly halfShort: number
}

/**
 * `points`: x0 y0 x1 y1 ..., at least one. Among rectangles of equal area the one whose longer side is nearer to the x
 * axis wins, and a square takes the axis nearer to x; of two equally near the one that climbs. Points on a line give a
 * rectangle without width.
 */
export function enclosingRectangle(points: Float64Array): EnclosingRectangle {
  const hull = convexHull(points)
  const count = hull.length
  const hx = Float64Array.from(hull, (i) => points[2 * i])
  const hy = Float64Array.from(hull, (i) => points[2 * i + 1])
  if (count === 1) return { centreX: hx[0], centreY: hy[0], axisX: 1, axisY: 0, halfLong: 0, halfShort: 0 }

  let best: EnclosingRectangle | null = null
  let right = 0, top = 0, left = 0
  const after = (k: number): number => (k + 1 < count ? k + 1 : 0)
  for (let k = 0; k < count; k += 1) {
    const length = Math.hypot(hx[after(k)] - hx[k], hy[after(k)] - hy[k])
    const ux = (hx[after(k)] - hx[k]) / length
    const uy = (hy[after(k)] - hy[k]) / length
    const along = (i: number): number => (hx[i] - hx[k]) * ux + (hy[i] - hy[k]) * uy
    const across = (i: number): number => (hy[i] - hy[k]) * ux - (hx[i] - hx[k]) * uy
    if (k === 0) right = 1
    for (let n = 0; n < count && along(after(right)) >= along(right); n += 1) right = after(right)
    if (k === 0) top = right
    for (let n = 0; n < count && across(after(top)) >= across(top); n += 1) top = after(top)
    if (k === 0) left = top
    for (let n = 0; n < count && along(after(left)) <= along(left); n += 1) left = after(left)
    const low = along(left)
    const high = along(right)
    const candidate = rectangle(hx[k], hy[k], ux, uy, low, high, across(top))
    if (best === null || better(candidate, best)) best = candidate
    if (count === 2) break
  }
  return best as EnclosingRectangle
}

/** The rectangle over along in [low, high], across in [0, width], seen from a corner and direction. */
function rectangle(x: number, y: number, ux: number, uy: number, low: number, high: number, width: number): EnclosingRectangle {
  const middle = (low + high) / 2
  const centreX = x + middle * ux - (width / 2) * uy
  const centreY = y + middle * uy + (width / 2) * ux
  const halfAlong = (high - low) / 2
  const halfAcross = width / 2
  const square = Math.abs(halfAlong - halfAcross) <= areaTie * halfAlong
  const turned = square ? nearerToX(-uy, ux, ux, uy) : halfAcross > halfAlong
  let axisX = turned ? -uy : ux
  let axisY = turned ? ux : uy
  if (axisX < 0 || (axisX === 0 && axisY < 0)) {
    axisX = -axisX
    axisY = -axisY
  }
  return {
    centreX, centreY, axisX: axisX + 0, axisY: axisY + 0,
    halfLong: Math.max(halfAlong, halfAcross), halfShort: Math.min(halfAlong, halfAcross),
  }
}

function better(one: EnclosingRectangle, other: EnclosingRectangle): boolean {
  const a = one.halfLong * one.halfShort
  const b = other.halfLong * other.halfShort
  if (Math.abs(a - b) > areaTie * Math.max(a, b)) return a < b
  return nearerToX(one.axisX, one.axisY, other.axisX, other.axisY)
}

/** Whether the first axis is nearer to x than the second; of two equally near ones the climbing one. */
function nearerToX(ax: number, ay: number, bx: number, by: number): boolean {
  const difference = Math.abs(ay) - Math.abs(by)
  if (Math.abs(difference) > areaTie) return difference < 0
  return Math.sign(ax) * ay > areaTie && Math.sign(bx) * by < -areaTie
}
