/**
 * Curves as chords that leave them by at most a given sagitta. A curve is one of three kinds, each of which an affine
 * map takes to the same kind, so that blocks may be scaled unevenly and the sagitta still holds in the drawing:
 *
 * - arc:    p(t) = c + cos t a + sin t b, of a circle or ellipse, t from `from` to `to`
 * - bow:    an arc given by its ends and the angle it turns through. With u the chord and v = u turned by 90 degrees,
 *           p(f) = start + sin(f/2) / sin(sweep/2) (cos((f - sweep)/2) u + sin((f - sweep)/2) v), f from 0 to sweep.
 *           No centre is needed, so an almost straight bow is as accurate as a round one.
 * - bezier: a rational Bezier curve of any degree (see chords-bezier.ts)
 *
 * All are given back as their interior points only: the ends are the drawing's own corners, unchanged.
 */
import { bezierInterior } from './chords-bezier.ts'

export type Triple = readonly [x: number, y: number, z: number]

export type Curve = Arc | Bow | Bezier

export interface Arc {
  readonly kind: 'arc'
  readonly centre: Triple
  readonly a: Triple
  readonly b: Triple
  /** Radians; the curve runs towards `to`, which may be the smaller. A turn of exactly 2 pi is a closed curve. */
  readonly from: number
  readonly to: number
}

export interface Bow {
  readonly kind: 'bow'
  readonly start: Triple
  readonly u: Triple
  readonly v: Triple
  /** Radians, counter-clockwise positive, not 0, less than a full turn. */
  readonly sweep: number
}

export interface Bezier {
  readonly kind: 'bezier'
  /** Control points x y z .. */
  readonly points: readonly number[]
  /** Positive weights, one a control point; null where all are 1. */
  readonly weights: readonly number[] | null
}

/** Chords that one curve may become; a sagitta that asks for more is a mistake or an attack. */
export const mostChords = 100_000

/** Rounding that must not add a chord when the angle is a whole number of steps. */
const slack = 1e-9

/**
 * The points between the ends of the curve, x y z .., so that no point of it is farther than `sagitta` from its chord.
 * Null when that takes more than `mostChords`.
 */
export function interiorPoints(curve: Curve, sagitta: number): number[] | null {
  switch (curve.kind) {
    case 'arc': return arcInterior(curve, sagitta)
    case 'bow': return bowInterior(curve, sagitta)
    case 'bezier': return bezierInterior(curve.points, curve.weights, sagitta, mostChords)
  }
}

/**
 * Chords for a turn through `sweep` on a radius r: steps d with r (1 - cos(d/2)) <= sagitta, that is
 * d = 4 asin sqrt(sagitta / 2r), and at most a quarter turn. For the affine image of a circle r is its largest radius:
 * a chord's deviation is the image of the circle's, so it grows at most by that factor.
 */
function turns(sweep: number, radius: number, sagitta: number): number {
  const step = radius <= sagitta ? Math.PI / 2 : Math.min(Math.PI / 2, 4 * Math.asin(Math.sqrt(sagitta / (2 * radius))))
  return Math.max(1, Math.ceil(Math.abs(sweep) / step - slack))
}

/** A closed curve takes a multiple of four chords, so that its extremes along its axes are kept. */
function arcInterior({ centre, a, b, from, to }: Arc, sagitta: number): number[] | null {
  const sweep = to - from
  let count = turns(sweep, largestRadius(a, b), sagitta)
  if (Math.abs(sweep) === 2 * Math.PI) count = 4 * Math.ceil(count / 4)
  if (!(count <= mostChords)) return null
  const out: number[] = []
  for (let i = 1; i < count; i += 1) {
    const share = (4 * i) / count
    const quarter = Math.abs(sweep) === 2 * Math.PI && from === 0 && Number.isInteger(share)
    const t = from + (sweep * i) / count
    const cos = quarter ? [1, 0, -1, 0][share] : Math.cos(t)
    const sin = quarter ? [0, 1, 0, -1][share] * Math.sign(sweep) : Math.sin(t)
    for (let k = 0; k < 3; k += 1) out.push(centre[k] + cos * a[k] + sin * b[k])
  }
  return out
}

function bowInterior({ start, u, v, sweep }: Bow, sagitta: number): number[] | null {
  const half = Math.sin(sweep / 2)
  const count = turns(sweep, largestRadius(u, v) / Math.abs(2 * half), sagitta)
  if (!(count <= mostChords)) return null
  const out: number[] = []
  for (let i = 1; i < count; i += 1) {
    const along = (sweep * i) / count
    const ratio = Math.sin(along / 2) / half
    const c = ratio * Math.cos((along - sweep) / 2)
    const s = ratio * Math.sin((along - sweep) / 2)
    for (let k = 0; k < 3; k += 1) out.push(start[k] + c * u[k] + s * v[k])
  }
  return out
}

/** The longest radius of the ellipse with conjugate radii a and b: the larger singular value of the matrix [a b]. */
function largestRadius(a: Triple, b: Triple): number {
  const aa = a[0] * a[0] + a[1] * a[1] + a[2] * a[2]
  const bb = b[0] * b[0] + b[1] * b[1] + b[2] * b[2]
  const ab = a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
  return Math.sqrt((aa + bb + Math.hypot(aa - bb, 2 * ab)) / 2)
}
