/**
 * Heights of a second surface over the nodes of a plan: the surface's faces, cut into triangles from their first corner,
 * lie in the cells of a grid; each node is read from the triangle it lies in.
 */
import { bin, densityGrid, type Grid } from '../base/geometry/grid-index.ts'
import type { Drawing } from './drawing.ts'
import type { Plan } from './plan.ts'

/** A node this far outside a triangle (in shares of its size) still counts as in it: rims are drawn to millimetres. */
const outside = 1e-3

/**
 * Height over each node, NaN where the surface does not reach (length nodeCount). `factor` takes lengths of the surface's
 * drawing to the plan's unit.
 */
export function surfaceHeights(plan: Plan, surface: Drawing, factor: number): Float64Array {
  const { points, outlines } = surface
  const { centreX, centreY } = plan.frame
  const x = Float64Array.from({ length: points.length / 3 }, (_, i) => points[3 * i] * factor - centreX)
  const y = Float64Array.from({ length: points.length / 3 }, (_, i) => points[3 * i + 1] * factor - centreY)
  const triangles: number[] = []
  for (let f = 0; f + 1 < outlines.start.length; f += 1) {
    for (let k = outlines.start[f] + 1; k + 1 < outlines.start[f + 1]; k += 1) {
      triangles.push(outlines.point[outlines.start[f]], outlines.point[k], outlines.point[k + 1])
    }
  }
  const grid = densityGrid(x, y, x.length, Math.max(1, Math.round(Math.sqrt(triangles.length / 6))))
  const cells = trianglesByCell(grid, x, y, triangles)
  return Float64Array.from({ length: plan.nodeCount }, (_, node) => {
    const px = plan.x[node] - centreX, py = plan.y[node] - centreY
    let best = NaN
    let least = outside
    for (const t of cells.get(bin(grid.rowBorder, py) * grid.columns + bin(grid.columnBorder, px)) ?? []) {
      const [a, b, c] = [triangles[3 * t], triangles[3 * t + 1], triangles[3 * t + 2]]
      const area = (x[b] - x[a]) * (y[c] - y[a]) - (y[b] - y[a]) * (x[c] - x[a])
      if (area === 0) continue
      const wb = ((px - x[a]) * (y[c] - y[a]) - (py - y[a]) * (x[c] - x[a])) / area
      const wc = ((x[b] - x[a]) * (py - y[a]) - (y[b] - y[a]) * (px - x[a])) / area
      const off = Math.max(0, -wb, -wc, wb + wc - 1)
      if (off > least || (off === least && !Number.isNaN(best))) continue
      least = off
      best = (points[3 * a + 2] + wb * (points[3 * b + 2] - points[3 * a + 2]) + wc * (points[3 * c + 2] - points[3 * a + 2])) * factor
    }
    return best
  })
}

/** Triangles by each cell that their box touches. */
function trianglesByCell(grid: Grid, x: Float64Array, y: Float64Array, triangles: readonly number[]): Map<number, number[]> {
  const cells = new Map<number, number[]>()
  for (let t = 0; 3 * t < triangles.length; t += 1) {
    const corners = [triangles[3 * t], triangles[3 * t + 1], triangles[3 * t + 2]]
    const xs = corners.map((corner) => x[corner]), ys = corners.map((corner) => y[corner])
    const margin = outside * (Math.max(...xs) - Math.min(...xs) + Math.max(...ys) - Math.min(...ys))
    for (let row = bin(grid.rowBorder, Math.min(...ys) - margin); row <= bin(grid.rowBorder, Math.max(...ys) + margin); row += 1) {
      for (let column = bin(grid.columnBorder, Math.min(...xs) - margin); column <= bin(grid.columnBorder, Math.max(...xs) + margin); column += 1) {
        const cell = row * grid.columns + column
        const list = cells.get(cell)
        if (list === undefined) cells.set(cell, [t])
        else list.push(t)
      }
    }
  }
  return cells
}
