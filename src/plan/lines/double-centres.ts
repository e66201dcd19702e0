/**
 * Panes widened to the centre lines round them: every side moves to the line midway to what it faces, every corner to where
 * the lines of its two sides meet. At a crossing of bars all panes so come to one node; where a bar ends on another, the
 * node of the two panes beside it lies on the side of the third. A side that faces nothing stays where it is.
 */
import { Doubles } from '../../base/growing.ts'
import { bendSine } from '../../base/geometry/tolerance.ts'
import type { Facing, FacingSides } from './double-facing.ts'
import type { Sides } from './double-sides.ts'

export interface Outlines {
  /** Outline p has the points start[p] .. start[p + 1), in the sides' coordinates. */
  readonly start: Int32Array
  readonly x: Float64Array
  readonly y: Float64Array
}

interface Line {
  readonly x: number
  readonly y: number
  readonly ux: number
  readonly uy: number
}

/** `widest` as for `facingSides`; `scale`: corners are rounded to multiples of 1 / scale, so that rounding leaves no kinks. */
export function widenedPanes(sides: Sides, facing: FacingSides, widest: number, scale: number): Outlines {
  const start = new Int32Array(sides.start.length)
  const x = new Doubles()
  const y = new Doubles()
  for (let p = 0; p + 1 < sides.start.length; p += 1) {
    const own = sidesThatStay(sides, facing, p)
    own.forEach((s, k) => {
      const before = own[(k + own.length - 1) % own.length]
      const [cx, cy] = corner(
        lineAtEnd(sides, facing[before], before, widest), lineAtStart(sides, facing[s], s, widest),
        (sides.bx[before] + sides.ax[s]) / 2, (sides.by[before] + sides.ay[s]) / 2, widest,
      )
      x.push(Math.round(cx * scale) / scale)
      y.push(Math.round(cy * scale) / scale)
    })
    start[p + 1] = x.length
  }
  return { start, x: x.array(), y: y.array() }
}

/**
 * The sides of a pane less those that only the ends of bars make at its corners: they face nothing and are no longer than
 * the bars beside them are wide.
 */
function sidesThatStay(sides: Sides, facing: FacingSides, pane: number): number[] {
  const from = sides.start[pane], to = sides.start[pane + 1]
  let broadest = 0
  for (let s = from; s < to; s += 1) for (const { width } of facing[s]) broadest = Math.max(broadest, width)
  const all = Array.from({ length: to - from }, (_, k) => from + k)
  const stay = all.filter((s) => facing[s].length > 0 || Math.hypot(sides.bx[s] - sides.ax[s], sides.by[s] - sides.ay[s]) > broadest)
  return stay.length < 3 ? all : stay
}

/** An end of a side belongs to a strip that begins within this many widths of it: acute crossings cut strips short. */
const reaches = 4

function lineAtStart(sides: Sides, facing: readonly Facing[], s: number, widest: number): Line {
  const first = facing.at(0)
  return first !== undefined && first.from <= reaches * Math.max(first.width, widest) ? first : own(sides, s)
}

function lineAtEnd(sides: Sides, facing: readonly Facing[], s: number, widest: number): Line {
  const length = Math.hypot(sides.bx[s] - sides.ax[s], sides.by[s] - sides.ay[s])
  let last: Facing | undefined
  for (const f of facing) if (last === undefined || f.to > last.to) last = f
  return last !== undefined && length - last.to <= reaches * Math.max(last.width, widest) ? last : own(sides, s)
}

function own({ ax, ay, bx, by }: Sides, s: number): Line {
  const length = Math.hypot(bx[s] - ax[s], by[s] - ay[s])
  return { x: ax[s], y: ay[s], ux: (bx[s] - ax[s]) / length, uy: (by[s] - ay[s]) / length }
}

/** Where the lines cross; when they run alike, midway between the corner's feet on the two. */
function corner(p: Line, q: Line, cx: number, cy: number, widest: number): [number, number] {
  const sine = p.ux * q.uy - p.uy * q.ux
  if (Math.abs(sine) >= bendSine) {
    const along = ((q.x - p.x) * q.uy - (q.y - p.y) * q.ux) / sine
    const x = p.x + along * p.ux, y = p.y + along * p.uy
    if (Math.hypot(x - cx, y - cy) <= (2 * widest) / Math.abs(sine)) return [x, y]
  }
  const [px, py] = foot(p, cx, cy)
  const [qx, qy] = foot(q, cx, cy)
  return [(px + qx) / 2, (py + qy) / 2]
}

function foot({ x, y, ux, uy }: Line, cx: number, cy: number): [number, number] {
  const along = (cx - x) * ux + (cy - y) * uy
  return [x + along * ux, y + along * uy]
}
