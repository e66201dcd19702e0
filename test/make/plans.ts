/** Plans for tests, made in code: every one is invented or follows from its definition. */
import { Delaunay } from 'd3-delaunay'
import { planFromFaces } from '../../src/plan/subdivision.ts'
import type { Plan } from '../../src/plan/plan.ts'
import type { Unit } from '../../src/base/length.ts'
import { random } from '../../src/base/random.ts'

export type Points = readonly (readonly [number, number])[]

/** The plan with these points and faces (0-based); throws when it is not one. */
export function plan(points: Points, faces: readonly (readonly number[])[], unit: Unit = 'm'): Plan {
  const start = [0]
  for (const face of faces) start.push(start[start.length - 1]! + face.length)
  const made = planFromFaces({
    unit,
    x: Float64Array.from(points, (p) => p[0]),
    y: Float64Array.from(points, (p) => p[1]),
    start: Int32Array.from(start),
    corner: Int32Array.from(faces.flat()),
  })
  if (!made.ok) throw new Error(made.problem.message)
  return made.value.plan
}

/**
 * m x n quads; `loose` moves every node at random by up to that share of a bay; cells in `voids` (column, row) are left
 * out. Panels row by row from the bottom left.
 */
export function grid(m: number, n: number, options: { bay?: number; loose?: number; seed?: number; voids?: Points } = {}): Plan {
  const { bay = 1, loose = 0, seed = 1, voids = [] } = options
  const next = random(seed)
  const points: [number, number][] = []
  for (let j = 0; j <= n; j += 1) {
    for (let i = 0; i <= m; i += 1) points.push([(i + loose * (2 * next() - 1)) * bay, (j + loose * (2 * next() - 1)) * bay])
  }
  const at = (i: number, j: number): number => j * (m + 1) + i
  const faces: number[][] = []
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      if (voids.some(([a, b]) => a === i && b === j)) continue
      faces.push([at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)])
    }
  }
  return plan(points, faces)
}

/**
 * Voronoi cells of jittered sites over a rectangle of width : height = 3 : 2, clipped by mirrored sites, with the sites; by
 * d3-delaunay. The paraboloid's tangent planes at the sites are a lift, exactly.
 */
export function voronoi(count: number, seed: number): { plan: Plan; sites: Points } {
  const next = random(seed)
  const columns = Math.round(Math.sqrt(count * 1.5))
  const rows = Math.round(count / columns)
  const sites: [number, number][] = []
  for (let j = 0; j < rows; j += 1) for (let i = 0; i < columns; i += 1) sites.push([i + 0.15 + 0.7 * next(), j + 0.15 + 0.7 * next()])
  const mirrored: [number, number][] = [...sites]
  for (const [x, y] of sites) mirrored.push([-x, y], [2 * columns - x, y], [x, -y], [x, 2 * rows - y])
  const diagram = Delaunay.from(mirrored).voronoi([-columns, -rows, 2 * columns, 2 * rows])
  const points: [number, number][] = []
  const known = new Map<string, number>()
  const faces = sites.map((_, site) => {
    const polygon = diagram.cellPolygon(site)!.slice(0, -1) as [number, number][]
    const face = polygon.map(([x, y]) => {
      // Corners on the rim lie at 1e-17 to either side of 0: -0 and 0 are one place.
      const key = `${Number(x.toFixed(9)) + 0} ${Number(y.toFixed(9)) + 0}`
      const at = known.get(key) ?? points.push([x, y]) - 1
      known.set(key, at)
      return at
    })
    return face.filter((node, k) => node !== face[(k + 1) % face.length])
  })
  return { plan: plan(points, faces), sites }
}

export const cells = (count: number, seed: number): Plan => voronoi(count, seed).plan

/** Regular hexagons of side 1 in rows, columns x rows of them. */
export function honeycomb(columns: number, rows: number): Plan {
  const points: [number, number][] = []
  const known = new Map<string, number>()
  // Corners on a lattice of half widths and half sides, so that neighbours share them to the last digit.
  const at = (i: number, j: number): number => {
    const key = `${i} ${j}`
    const node = known.get(key) ?? points.push([(i * Math.sqrt(3)) / 2, j / 2]) - 1
    known.set(key, node)
    return node
  }
  const faces: number[][] = []
  for (let row = 0; row < rows; row += 1) {
    for (let column = 0; column < columns; column += 1) {
      const [i, j] = [2 * column + (row % 2), 3 * row]
      faces.push([at(i, j + 1), at(i + 1, j), at(i + 2, j + 1), at(i + 2, j + 3), at(i + 1, j + 4), at(i, j + 3)])
    }
  }
  return plan(points, faces)
}
