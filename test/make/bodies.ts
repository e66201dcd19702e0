/**
 * Convex bodies seen from above: vertices from their published coordinates, faces found by brute force, and of these the
 * ones that look up, projected straight down. Shares no code with src but the record of a plan.
 */
import type { Plan } from '../../src/plan/plan.ts'
import { plan } from './plans.ts'

export type Vector = readonly [x: number, y: number, z: number]

export const golden = (1 + Math.sqrt(5)) / 2

const dot = (a: Vector, b: Vector): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
const minus = (a: Vector, b: Vector): Vector => [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
const cross = (a: Vector, b: Vector): Vector => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
const unit = (a: Vector): Vector => {
  const size = Math.hypot(...a)
  return [a[0] / size, a[1] / size, a[2] / size]
}

/** All signs of the coordinates, each vertex once. */
export function signed(...vertices: readonly Vector[]): Vector[] {
  const found = new Map<string, Vector>()
  for (const [x, y, z] of vertices) {
    for (let bits = 0; bits < 8; bits += 1) {
      const v = [bits & 1 ? -x : x, bits & 2 ? -y : y, bits & 4 ? -z : z].map((value) => value + 0) as unknown as Vector
      found.set(v.join(), v)
    }
  }
  return [...found.values()]
}

/** The three cyclic permutations. */
export const cyclic = ([x, y, z]: Vector): Vector[] => [
  [x, y, z],
  [y, z, x],
  [z, x, y],
]
/** All six permutations. */
export const permuted = ([x, y, z]: Vector): Vector[] => [...cyclic([x, y, z]), ...cyclic([y, x, z])]

/** Faces of the convex hull as vertex indices, counter-clockwise from outside, each with its unit normal. */
export function hullFaces(vertices: readonly Vector[]): { corners: number[]; normal: Vector }[] {
  const faces = new Map<string, { corners: number[]; normal: Vector }>()
  const n = vertices.length
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < n; j += 1) {
      for (let k = j + 1; k < n; k += 1) {
        if (i === j || i === k) continue
        const normal = cross(minus(vertices[j]!, vertices[i]!), minus(vertices[k]!, vertices[i]!))
        if (Math.hypot(...normal) < 1e-9) continue
        const up = unit(normal)
        const reach = vertices.map((v) => dot(up, minus(v, vertices[i]!)))
        if (Math.max(...reach) > 1e-9) continue
        const on = [...reach.keys()].filter((v) => reach[v]! > -1e-9)
        const key = on.join()
        if (!faces.has(key)) faces.set(key, { corners: round(vertices, on, up), normal: up })
      }
    }
  }
  return [...faces.values()]
}

/** The vertices of a face in order round their middle. */
function round(vertices: readonly Vector[], on: readonly number[], normal: Vector): number[] {
  const middle = [0, 1, 2].map((axis) => on.reduce((sum, v) => sum + vertices[v]![axis]!, 0) / on.length) as unknown as Vector
  const u = unit(minus(vertices[on[0]!]!, middle))
  const w = cross(normal, u)
  const angle = (v: number): number => Math.atan2(dot(minus(vertices[v]!, middle), w), dot(minus(vertices[v]!, middle), u))
  return [...on].sort((a, b) => angle(a) - angle(b))
}

/** The upper half of a body as a plan, and the body's height at each node (length nodeCount). */
export function seenFrom(vertices: readonly Vector[], up: Vector): { plan: Plan; height: Float64Array } {
  const z = unit(up)
  const x = unit(cross(Math.abs(z[0]) < 0.9 ? [1, 0, 0] : [0, 1, 0], z))
  const y = cross(z, x)
  const turned = vertices.map((v): Vector => [dot(x, v), dot(y, v), dot(z, v)])
  const faces = hullFaces(turned).filter(({ normal }) => normal[2] > 1e-9)
  const of = plan(
    turned.map((v) => [v[0], v[1]] as const),
    faces.map(({ corners }) => corners),
  )
  // A view straight down may put two vertices on one point: the upper one is meant.
  const height = Float64Array.from(of.x, (px, node) =>
    Math.max(...turned.filter((v) => v[0] === px && v[1] === of.y[node]).map((v) => v[2])),
  )
  return { plan: of, height }
}
