/** Plans of any size for timing, and their matrices. Invented: cells about shaken grid points, and shaken quads. */
import { Delaunay } from 'd3-delaunay'
import { random } from '../../src/base/random.ts'
import { planOf, quads, type TestPlan } from '../base/sparse/plans.ts'

export const kinds = ['cells', 'quads'] as const
export type Kind = (typeof kinds)[number]

export function benchPlan(kind: Kind, panels: number): TestPlan {
  const side = Math.round(Math.sqrt(panels))
  return kind === 'quads' ? quads(side, side) : cells(side)
}

/** Voronoi cells of side x side points: with a paraboloid's heights such a plan always lifts, and in no other way but tilts. */
function cells(side: number): TestPlan {
  const next = random(1)
  const points = new Float64Array(2 * side * side)
  for (let k = 0; k < points.length; k += 2) {
    const i = k >> 1
    points[k] = Math.floor(i / side) + 0.2 + 0.6 * next()
    points[k + 1] = (i % side) + 0.2 + 0.6 * next()
  }
  const voronoi = new Delaunay(points).voronoi([0, 0, side, side])
  const numbers = new Map<string, number>()
  const nodes: [number, number][] = []
  const faces: number[][] = []
  for (let i = 0; i < side * side; i++) {
    const face: number[] = []
    for (const [x, y] of voronoi.cellPolygon(i).slice(1)) {
      const key = `${Math.round(x! * 1e7)} ${Math.round(y! * 1e7)}`
      let number = numbers.get(key)
      if (number === undefined) {
        number = nodes.length
        numbers.set(key, number)
        nodes.push([x!, y!])
      }
      if (!face.includes(number)) face.push(number)
    }
    faces.push(face)
  }
  return planOf(nodes, faces)
}
