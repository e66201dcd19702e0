/**
 * Affine maps of space, for blocks put in place and for entities drawn in a plane of their own.
 * A Placing is 3 x 4, by rows: x' = m0 x + m1 y + m2 z + m3, and so on.
 */
export type Placing = readonly number[]

export type Vector = readonly [x: number, y: number, z: number]

export const inPlace: Placing = [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0]

/** a after b: (a b)(p) = a(b(p)). */
export function after(a: Placing, b: Placing): Placing {
  const out: number[] = []
  for (let i = 0; i < 12; i += 4) {
    for (let j = 0; j < 4; j += 1) out.push(a[i] * b[j] + a[i + 1] * b[j + 4] + a[i + 2] * b[j + 8] + (j === 3 ? a[i + 3] : 0))
  }
  return out
}

/** The image of a point. */
export function placedPoint(m: Placing, x: number, y: number, z: number): [x: number, y: number, z: number] {
  return [m[0] * x + m[1] * y + m[2] * z + m[3], m[4] * x + m[5] * y + m[6] * z + m[7], m[8] * x + m[9] * y + m[10] * z + m[11]]
}

/** The image of a direction: the same without the shift. */
export function placedVector(m: Placing, [x, y, z]: Vector): [x: number, y: number, z: number] {
  return [m[0] * x + m[1] * y + m[2] * z, m[4] * x + m[5] * y + m[6] * z, m[8] * x + m[9] * y + m[10] * z]
}

export const shift = (x: number, y: number, z: number): Placing => [1, 0, 0, x, 0, 1, 0, y, 0, 0, 1, z]

/** Below this, x and y of a normal count as zero when its plane's axes are chosen; the reference fixes it. */
const nearZ = 1 / 64

/**
 * The axes of an entity's own plane, from its extrusion direction n by the arbitrary axis algorithm:
 * x = Y cross n where n is within 1/64 of the z axis, else Z cross n; y = n cross x; all of length 1.
 * Null for no direction at all.
 *
 * Source: DXF reference, "Arbitrary axis algorithm".
 */
export function ownPlane(direction: Vector): Placing | null {
  if (direction[0] === 0 && direction[1] === 0 && direction[2] > 0) return inPlace
  const n = unit(direction)
  if (n === null) return null
  const near = Math.abs(n[0]) < nearZ && Math.abs(n[1]) < nearZ
  const x = unit(near ? [n[2], 0, -n[0]] : [-n[1], n[0], 0])
  if (x === null) return null
  const y = cross(n, x)
  return [x[0], y[0], n[0], 0, x[1], y[1], n[1], 0, x[2], y[2], n[2], 0]
}

export function cross(a: Vector, b: Vector): [x: number, y: number, z: number] {
  return [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
}

function unit([x, y, z]: Vector): Vector | null {
  const length = Math.hypot(x, y, z)
  return length > 0 && Number.isFinite(length) ? [x / length, y / length, z / length] : null
}

/** cos and sin of degrees, exact at multiples of 90. */
export function turn(degrees: number): [cos: number, sin: number] {
  const within = degrees % 360
  const whole = within < 0 ? within + 360 : within
  if (whole === 0) return [1, 0]
  if (whole === 90) return [0, 1]
  if (whole === 180) return [-1, 0]
  if (whole === 270) return [0, -1]
  const angle = (within * Math.PI) / 180
  return [Math.cos(angle), Math.sin(angle)]
}

/** What an insert does to its block: scaled, turned about z by degrees, moved to `point` (T R S). */
export function insertion(point: Vector, degrees: number, scale: Vector): Placing {
  const [c, s] = turn(degrees)
  return [c * scale[0], -s * scale[1], 0, point[0], s * scale[0], c * scale[1], 0, point[1], 0, 0, scale[2], point[2]]
}
