/**
 * The curves of path data that need a form of their own: an elliptical arc between two points, and cubics that are
 * straight. Curves are taken to the plane of the drawing before they become chords, so that the sagitta holds there.
 */
import type { Arc, Triple } from './chords.ts'
import type { Affine } from './svg-transform.ts'

/**
 * The arc between two points as path data gives it; null when it is a straight line (a radius of zero, or no distance).
 * Radii too small to reach are enlarged until they do. Source: SVG 2, appendix B.2 (Elliptical arc parameter conversion).
 */
export function ellipticArc(
  x1: number, y1: number, rxGiven: number, ryGiven: number, turn: number, large: boolean, sweep: boolean, x2: number, y2: number,
): Arc | null {
  let rx = Math.abs(rxGiven)
  let ry = Math.abs(ryGiven)
  if (rx === 0 || ry === 0 || (x1 === x2 && y1 === y2)) return null
  const phi = ((turn % 360) * Math.PI) / 180
  const cosine = Math.cos(phi)
  const sine = Math.sin(phi)
  // Half the chord in the axes of the ellipse, in units of the radii: on the unit circle from here on.
  const dx = (x1 - x2) / 2
  const dy = (y1 - y2) / 2
  let p = (cosine * dx + sine * dy) / rx
  let q = (cosine * dy - sine * dx) / ry
  const reach = Math.hypot(p, q)
  if (reach > 1) {
    rx *= reach
    ry *= reach
    p /= reach
    q /= reach
  }
  // The centre lies across the chord: sqrt(1 / d^2 - 1) times the half chord turned by a quarter, d = |half chord|.
  const d2 = p * p + q * q
  // A radius beyond 10^8 chords: the arc is a straight line to nine digits, and its centre is lost in rounding.
  if (d2 < 1e-16 && !large) return null
  const across = (large === sweep ? -1 : 1) * Math.sqrt(Math.max(0, 1 / d2 - 1))
  const centreP = across * q
  const centreQ = -across * p
  const from = Math.atan2(q - centreQ, p - centreP)
  let to = Math.atan2(-q - centreQ, -p - centreP)
  if (sweep && to < from) to += 2 * Math.PI
  if (!sweep && to > from) to -= 2 * Math.PI
  // Ends that almost meet: rounding alone must not turn a whole ellipse into nothing, or nothing into a whole one.
  const span = Math.abs(to - from)
  if (large && span < Math.PI / 2) to += sweep ? 2 * Math.PI : -2 * Math.PI
  if (!large && span > 1.5 * Math.PI) return null
  return {
    kind: 'arc',
    centre: [cosine * rx * centreP - sine * ry * centreQ + (x1 + x2) / 2, sine * rx * centreP + cosine * ry * centreQ + (y1 + y2) / 2, 0],
    a: [cosine * rx, sine * rx, 0],
    b: [-sine * ry, cosine * ry, 0],
    from,
    to,
  }
}

/** The arc under an affine map: an arc of an ellipse again, over the same parameter. */
export function mappedArc({ kind, centre, a, b, from, to }: Arc, map: Affine): Arc {
  const turned = ([x, y]: Triple): Triple => [map[0] * x + map[2] * y, map[1] * x + map[3] * y, 0]
  const [x, y] = turned(centre)
  return { kind, centre: [x + map[4], y + map[5], 0], a: turned(a), b: turned(b), from, to }
}

/**
 * Whether a cubic (x0, y0, .. x3, y3) is a straight line from its start to its end, as some programs write all lines:
 * its control points lie between the ends and on the line to nine digits.
 */
export function isStraight(p: Float64Array): boolean {
  const dx = p[6] - p[0]
  const dy = p[7] - p[1]
  const square = dx * dx + dy * dy
  for (let i = 2; i <= 4; i += 2) {
    const along = (p[i] - p[0]) * dx + (p[i + 1] - p[1]) * dy
    const across = (p[i] - p[0]) * dy - (p[i + 1] - p[1]) * dx
    if (!(along >= 0 && along <= square && Math.abs(across) <= 1e-9 * square)) return false
  }
  return true
}
