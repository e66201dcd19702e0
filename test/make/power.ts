/**
 * Power diagrams over a rectangle, by brute force: each cell is the rectangle cut by the half planes of all other sites. The
 * planes z = 2 s . p - |s|^2 + w lift every such diagram, exactly (Aurenhammer, SIAM J. Comput. 16 (1987) 78-96).
 */
import type { Points } from './plans.ts'

export interface Site {
  readonly x: number
  readonly y: number
  readonly weight: number
}

export interface Diagram {
  readonly points: Points
  readonly faces: readonly (readonly number[])[]
}

/** Cells of the sites inside [0, width] x [0, depth]; corners nearer than a millionth of the width are one. */
export function powerDiagram(sites: readonly Site[], width: number, depth: number): Diagram {
  const points: [number, number][] = []
  const index = (x: number, y: number): number => {
    const known = points.findIndex(([px, py]) => Math.hypot(px - x, py - y) < 1e-6 * width)
    return known >= 0 ? known : points.push([x, y]) - 1
  }
  const faces = sites.map((site) => {
    let cell: [number, number][] = [
      [0, 0],
      [width, 0],
      [width, depth],
      [0, depth],
    ]
    for (const other of sites) {
      if (other === site) continue
      const [a, b] = [2 * (other.x - site.x), 2 * (other.y - site.y)]
      const c = other.x ** 2 + other.y ** 2 - other.weight - site.x ** 2 - site.y ** 2 + site.weight
      cell = below(cell, a, b, c)
    }
    return cell.map(([x, y]) => index(x, y)).filter((node, k, all) => node !== all[(k + 1) % all.length])
  })
  return { points, faces: faces.filter((face) => face.length > 2) }
}

/** The part of a convex cell where a x + b y <= c. */
function below(cell: readonly (readonly [number, number])[], a: number, b: number, c: number): [number, number][] {
  return cell.flatMap((p, k): [number, number][] => {
    const q = cell[(k + 1) % cell.length]!
    const [sp, sq] = [a * p[0] + b * p[1] - c, a * q[0] + b * q[1] - c]
    const kept: [number, number][] = sp <= 0 ? [[p[0], p[1]]] : []
    const t = sp / (sp - sq)
    if (sp * sq < 0) kept.push([p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1])])
    return kept
  })
}

/** Length of the shortest edge. */
export function shortestEdge({ points, faces }: Diagram): number {
  return Math.min(
    ...faces.flatMap((face) =>
      face.map((node, k) => {
        const [p, q] = [points[node]!, points[face[(k + 1) % face.length]!]!]
        return Math.hypot(p[0] - q[0], p[1] - q[1])
      }),
    ),
  )
}
