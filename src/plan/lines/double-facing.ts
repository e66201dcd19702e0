/** Sides that face each other across a bar or a gap of constant width. Only what shares a cell of a grid is compared. */
import { densityGrid, segmentsByCell } from '../../base/geometry/grid-index.ts'
import { barTaper, facingCosine } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import type { Sides } from './double-sides.ts'

export interface Facing {
  readonly other: number
  /** Distance across; 0 for one edge that two panes share. */
  readonly width: number
  /** Where along the side (as lengths from its start) the other faces it. */
  readonly from: number
  readonly to: number
  /** A point of the line midway, and its direction (a unit vector along the side). */
  readonly x: number
  readonly y: number
  readonly ux: number
  readonly uy: number
}

/** Per side: what faces it nearest, in order along it. */
export type FacingSides = readonly (readonly Facing[])[]

/** `widest`: how far across is looked; `slack`: how exactly the drawing is known. */
export function* facingSides(sides: Sides, widest: number, slack: number): Steps<FacingSides> {
  const { ax, ay, bx, by } = sides
  const count = ax.length
  const x = new Float64Array(2 * count)
  const y = new Float64Array(2 * count)
  x.set(ax)
  x.set(bx, count)
  y.set(ay)
  y.set(by, count)
  const first = Int32Array.from({ length: count }, (_, s) => s)
  const grid = densityGrid(x, y, 2 * count, Math.max(1, Math.ceil(Math.sqrt(2 * count))))
  const cells = segmentsByCell(grid, x, y, first, first.map((s) => s + count), widest)
  const cellsOf: number[][] = Array.from({ length: count }, () => [])
  for (let cell = 0; cell + 1 < cells.start.length; cell += 1) {
    for (let k = cells.start[cell]; k < cells.start[cell + 1]; k += 1) cellsOf[cells.item[k]].push(cell)
  }
  const seenBy = new Int32Array(count).fill(-1)
  const out: Facing[][] = []
  let compared = 0
  for (let s = 0; s < count; s += 1) {
    const found: Facing[] = []
    for (const cell of cellsOf[s]) {
      for (let k = cells.start[cell]; k < cells.start[cell + 1]; k += 1) {
        const t = cells.item[k]
        if (t === s || seenBy[t] === s) continue
        seenBy[t] = s
        compared += 1
        // Two edges that no pane is beside bound no bar.
        const facing = sides.pane[s] < 0 && sides.pane[t] < 0 ? null : faces(sides, s, t, widest, slack)
        if (facing !== null) found.push(facing)
      }
    }
    out.push(nearest(found))
    if (compared > 100_000) {
      compared = 0
      yield { stage: 'Looking for bars', done: s / count }
    }
  }
  return out
}

/** How side t faces side s, null when it does not: it runs the other way, beyond s's outer side, at an even distance. */
function faces({ ax, ay, bx, by }: Sides, s: number, t: number, widest: number, slack: number): Facing | null {
  const length = Math.hypot(bx[s] - ax[s], by[s] - ay[s])
  const lengthOther = Math.hypot(bx[t] - ax[t], by[t] - ay[t])
  if (length === 0 || lengthOther === 0) return null
  const ux = (bx[s] - ax[s]) / length, uy = (by[s] - ay[s]) / length
  const vx = (bx[t] - ax[t]) / lengthOther, vy = (by[t] - ay[t]) / lengthOther
  if (ux * vx + uy * vy > -facingCosine) return null
  const alongA = (ax[t] - ax[s]) * ux + (ay[t] - ay[s]) * uy
  const alongB = (bx[t] - ax[s]) * ux + (by[t] - ay[s]) * uy
  const from = Math.max(0, alongB), to = Math.min(length, alongA)
  if (!(to - from > 2 * slack)) return null
  // Outwards is to the right of s.
  const outA = (ax[t] - ax[s]) * uy - (ay[t] - ay[s]) * ux
  const outB = (bx[t] - ax[s]) * uy - (by[t] - ay[s]) * ux
  const outAt = (along: number): number => outA + ((along - alongA) / (alongB - alongA)) * (outB - outA)
  const atFrom = outAt(from), atTo = outAt(to)
  const width = (atFrom + atTo) / 2
  if (!(width >= -slack && width <= widest) || to - from < width / 2) return null
  if (Math.abs(atTo - atFrom) > Math.max(2 * slack, barTaper * width)) return null
  const middle = (from + to) / 2
  let dx = ux * length - vx * lengthOther, dy = uy * length - vy * lengthOther
  const size = Math.hypot(dx, dy)
  dx /= size
  dy /= size
  const half = width / 2
  return {
    other: t, width: width <= slack ? 0 : width, from, to,
    x: ax[s] + middle * ux + half * uy, y: ay[s] + middle * uy - half * ux, ux: dx, uy: dy,
  }
}

/** What is not hidden behind something nearer, in order along the side. */
function nearest(found: Facing[]): Facing[] {
  if (found.length > 1) found.sort((f, g) => f.width - g.width || f.from - g.from || f.other - g.other)
  const kept: Facing[] = []
  for (const facing of found) {
    let hidden = 0
    for (const { from, to } of kept) hidden += Math.max(0, Math.min(to, facing.to) - Math.max(from, facing.from))
    if (2 * hidden < facing.to - facing.from) kept.push(facing)
  }
  return kept.sort((f, g) => f.from - g.from)
}
