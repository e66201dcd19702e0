/**
 * Splines as Bezier pieces: B-splines by their knots, and the cubic through given points. Both are exact: the pieces are
 * the same curve.
 */
import type { Bezier } from './chords.ts'

/** Degrees up to here are read; drawing programs go to about 11. */
export const highestDegree = 25

/**
 * The pieces of a (rational) B-spline over its domain [u_d, u_n]: piece k, on a knot span [s, t] of length above 0, has
 * the control points f(s^(d-j), t^j), j = 0 .. d, f the polar form (blossom) by de Boor's recursion in homogeneous
 * coordinates. `points` x y z .. (n of them), knots n + d + 1 in order, weights positive or null.
 *
 * Source: L. Ramshaw, Blossoms are polar forms, 1989; C. de Boor, A practical guide to splines, 1978.
 */
export function bezierPieces(
  degree: number, knots: readonly number[], points: readonly number[], weights: readonly number[] | null,
): Bezier[] {
  const count = points.length / 3
  const pieces: Bezier[] = []
  const polar = new Float64Array(4 * (degree + 1))
  for (let span = degree; span < count; span += 1) {
    const s = knots[span]
    const t = knots[span + 1]
    if (!(t > s)) continue
    const controls: number[] = []
    const ownWeights: number[] = []
    for (let j = 0; j <= degree; j += 1) {
      for (let i = 0; i <= degree; i += 1) {
        const from = span - degree + i
        const w = weights === null ? 1 : weights[from]
        for (let k = 0; k < 3; k += 1) polar[4 * i + k] = w * points[3 * from + k]
        polar[4 * i + 3] = w
      }
      for (let r = 1; r <= degree; r += 1) {
        const at = r <= degree - j ? s : t
        for (let i = degree; i >= r; i -= 1) {
          const low = knots[span - degree + i]
          const high = knots[span + i - r + 1]
          const share = (at - low) / (high - low)
          for (let k = 0; k < 4; k += 1) polar[4 * i + k] = (1 - share) * polar[4 * i - 4 + k] + share * polar[4 * i + k]
        }
      }
      const w = polar[4 * degree + 3]
      for (let k = 0; k < 3; k += 1) controls.push(polar[4 * degree + k] / w)
      ownWeights.push(w)
    }
    pieces.push({ kind: 'bezier', points: controls, weights: weights === null ? null : ownWeights })
  }
  return pieces
}

/** Ends of a cubic through points: its curvature is 0 there (null), or its direction is given. */
export interface CubicEnds {
  readonly start: readonly number[] | null
  readonly end: readonly number[] | null
}

/**
 * The twice continuously differentiable cubic through points x y z .., its parameter the length of the chords. Open: with
 * the given ends. Closed: periodic, the last piece runs back to the first point. Points in a row must differ.
 *
 * With h_i the chord lengths, d_i = (p_(i+1) - p_i) / h_i and m_i the slopes:
 *   h_i m_(i-1) + 2 (h_(i-1) + h_i) m_i + h_(i-1) m_(i+1) = 3 (h_i d_(i-1) + h_(i-1) d_i),
 *   natural ends 2 m_0 + m_1 = 3 d_0.
 * Source: C. de Boor, A practical guide to splines, 1978, chapter IV.
 */
export function cubicThrough(points: readonly number[], closed: boolean, ends: CubicEnds): Bezier[] {
  const n = points.length / 3
  const pieces = closed ? n : n - 1
  const h = new Float64Array(pieces)
  for (let i = 0; i < pieces; i += 1) h[i] = Math.hypot(...[0, 1, 2].map((k) => points[3 * ((i + 1) % n) + k] - points[3 * i + k]))
  const slopes = [0, 1, 2].map((k) => {
    const p = Float64Array.from({ length: n }, (_, i) => points[3 * i + k])
    return closed ? periodicSlopes(p, h) : openSlopes(p, h, unitPart(ends.start, k), unitPart(ends.end, k))
  })
  return Array.from({ length: pieces }, (_, i) => {
    const next = (i + 1) % n
    const controls: number[] = []
    for (const [at, share] of [[i, 0], [i, h[i] / 3], [next, -h[i] / 3], [next, 0]]) {
      for (let k = 0; k < 3; k += 1) controls.push(points[3 * at + k] + share * slopes[k][at])
    }
    return { kind: 'bezier', points: controls, weights: null }
  })
}

function unitPart(direction: readonly number[] | null, k: number): number | null {
  const length = direction === null ? 0 : Math.hypot(...direction)
  return direction === null || !(length > 0) ? null : direction[k] / length
}

/** Slopes of one coordinate, ends natural (null) or given. */
function openSlopes(p: Float64Array, h: Float64Array, start: number | null, end: number | null): Float64Array {
  const n = p.length
  const [low, middle, high, right] = [new Float64Array(n), new Float64Array(n), new Float64Array(n), new Float64Array(n)]
  for (let i = 1; i < n - 1; i += 1) {
    low[i] = h[i]
    middle[i] = 2 * (h[i - 1] + h[i])
    high[i] = h[i - 1]
    right[i] = 3 * ((h[i] * (p[i] - p[i - 1])) / h[i - 1] + (h[i - 1] * (p[i + 1] - p[i])) / h[i])
  }
  middle[0] = start === null ? 2 : 1
  high[0] = start === null ? 1 : 0
  right[0] = start === null ? (3 * (p[1] - p[0])) / h[0] : start
  middle[n - 1] = end === null ? 2 : 1
  low[n - 1] = end === null ? 1 : 0
  right[n - 1] = end === null ? (3 * (p[n - 1] - p[n - 2])) / h[n - 2] : end
  return tridiagonal(low, middle, high, right)
}

/**
 * Slopes of one coordinate round a closed curve. The cyclic matrix is a tridiagonal one plus a product u v^T
 * (J. Sherman and W. J. Morrison, 1950).
 */
function periodicSlopes(p: Float64Array, h: Float64Array): Float64Array {
  const n = p.length
  const [low, middle, high, right] = [new Float64Array(n), new Float64Array(n), new Float64Array(n), new Float64Array(n)]
  for (let i = 0; i < n; i += 1) {
    const before = h[(i + n - 1) % n]
    low[i] = h[i]
    middle[i] = 2 * (before + h[i])
    high[i] = before
    right[i] = 3 * ((h[i] * (p[i] - p[(i + n - 1) % n])) / before + (before * (p[(i + 1) % n] - p[i])) / h[i])
  }
  const [corner, other] = [low[0], high[n - 1]]
  const gamma = -middle[0]
  middle[0] -= gamma
  middle[n - 1] -= (corner * other) / gamma
  const u = new Float64Array(n)
  u[0] = gamma
  u[n - 1] = other
  const x = tridiagonal(low, middle, high, right)
  const z = tridiagonal(low, middle, high, u)
  const share = (x[0] + (corner * x[n - 1]) / gamma) / (1 + z[0] + (corner * z[n - 1]) / gamma)
  return x.map((value, i) => value - share * z[i])
}

/** Solves low_i x_(i-1) + middle_i x_i + high_i x_(i+1) = right_i; the matrix is diagonally dominant, so no pivots. */
function tridiagonal(low: Float64Array, middle: Float64Array, high: Float64Array, right: Float64Array): Float64Array {
  const n = middle.length
  const c = new Float64Array(n)
  const x = new Float64Array(n)
  for (let i = 0; i < n; i += 1) {
    const pivot = i === 0 ? middle[0] : middle[i] - low[i] * c[i - 1]
    c[i] = high[i] / pivot
    x[i] = (right[i] - (i === 0 ? 0 : low[i] * x[i - 1])) / pivot
  }
  for (let i = n - 2; i >= 0; i -= 1) x[i] -= c[i] * x[i + 1]
  return x
}
