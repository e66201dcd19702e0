/**
 * Plans whose panels differ a thousandfold in size, with counts that are known: cells about graded sites (a paraboloid's
 * heights lift every Voronoi diagram, G. Voronoi 1908; and in general position nothing else does but tilts), and quads
 * between graded lines, shaken, whose count is a formula.
 */
import { Delaunay } from 'd3-delaunay'
import { random } from '../../src/base/random.ts'
import type { TestPlan } from '../base/sparse/plans.ts'
import { planOf } from '../base/sparse/plans.ts'

/** Where line t of 0 .. 1 lies on a side of length 1, bays growing a thousandfold from first to last. */
const graded = (t: number): number => (1000 ** t - 1) / 999

/** side x side cells; sites are graded along both axes. */
export function gradedCells(side: number, seed = 1): TestPlan {
  const next = random(seed)
  const sites = new Float64Array(2 * side * side)
  for (let k = 0; k < sites.length; k += 2) {
    const i = k >> 1
    sites[k] = graded((Math.floor(i / side) + 0.25 + 0.5 * next()) / side)
    sites[k + 1] = graded(((i % side) + 0.25 + 0.5 * next()) / side)
  }
  const voronoi = new Delaunay(sites).voronoi([0, 0, 1, 1])
  const numbers = new Map<string, number>()
  const nodes: [number, number][] = []
  const faces: number[][] = []
  for (let i = 0; i < side * side; i += 1) {
    const face: number[] = []
    for (const [x, y] of voronoi.cellPolygon(i).slice(1)) {
      // Corners that neighbours share differ by rounding, on the outline; the least bay is above 1e-5, joints a millionth of it.
      const key = `${Math.round(x! * 1e13)} ${Math.round(y! * 1e13)}`
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

/** columns x rows quads, each node up to 15 % of its own bay off its lines. */
export function gradedQuads(columns: number, rows: number, seed = 1): TestPlan {
  const next = random(seed)
  const at = (line: number, lines: number): number => {
    const bay = graded((line + 1) / lines) - graded(line / lines)
    return graded(line / lines) + 0.15 * bay * (2 * next() - 1)
  }
  const points: [number, number][] = []
  for (let i = 0; i <= columns; i += 1) for (let j = 0; j <= rows; j += 1) points.push([at(i, columns), at(j, rows)])
  const node = (i: number, j: number): number => i * (rows + 1) + j
  const faces: number[][] = []
  for (let i = 0; i < columns; i += 1) for (let j = 0; j < rows; j += 1) faces.push([node(i, j), node(i + 1, j), node(i + 1, j + 1), node(i, j + 1)])
  return planOf(points, faces)
}

/** The lifts of columns x rows quads in general position, tilts included: two lines of nodes fix all others. */
export const quadLifts = (columns: number, rows: number): number => columns + rows + 1
