/**
 * Corner deviation: the largest distance of a corner from the least-squares plane of the others, what glass people call the
 * fourth corner. Corners whose removal leaves the others in one line in plan are skipped: a panel is a graph over its plan,
 * and three corners of a straight side that are a little off line in height do not support it.
 */
import { collinearSine } from './tolerance.ts'
import { leastSquaresPlane } from './least-squares-plane.ts'

const plane = new Float64Array(6)

/** Largest such distance for `count` corners x y z .. from `offset`, in their own unit; 0 for triangles. */
export function cornerDeviation(points: Float64Array, offset: number, count: number): number {
  if (count <= 3) return 0
  if (count === 4) return fourthCorner(points, offset)
  let most = 0
  for (let skip = 0; skip < count; skip += 1) {
    if (inLine(points, offset, count, skip)) continue
    leastSquaresPlane(points, offset, count, skip, plane)
    const at = offset + 3 * skip
    const off = (points[at] - plane[0]) * plane[3] + (points[at + 1] - plane[1]) * plane[4] + (points[at + 2] - plane[2]) * plane[5]
    most = Math.max(most, Math.abs(off))
  }
  return most
}

/** Whether the other corners lie in one line in plan: no corner off the longest chord from the first by more than the sine. */
function inLine(p: Float64Array, offset: number, count: number, skip: number): boolean {
  const first = offset + (skip === 0 ? 3 : 0)
  let far = first
  let length = 0
  for (let k = 0; k < count; k += 1) {
    const at = offset + 3 * k
    const distance = k === skip ? 0 : Math.hypot(p[at] - p[first], p[at + 1] - p[first + 1])
    if (distance > length) {
      length = distance
      far = at
    }
  }
  const dx = p[far] - p[first], dy = p[far + 1] - p[first + 1]
  for (let k = 0; k < count; k += 1) {
    const at = offset + 3 * k
    if (k !== skip && Math.abs(dx * (p[at + 1] - p[first + 1]) - dy * (p[at] - p[first])) > collinearSine * length * length) return false
  }
  return true
}

/** For a quad the plane of the other three is exact: distance = |six times the tetrahedron| / |twice the triangle|. */
function fourthCorner(p: Float64Array, offset: number): number {
  let most = 0
  for (let skip = 0; skip < 4; skip += 1) {
    const a = offset + 3 * ((skip + 1) & 3), b = offset + 3 * ((skip + 2) & 3), c = offset + 3 * ((skip + 3) & 3), d = offset + 3 * skip
    const ux = p[b] - p[a], uy = p[b + 1] - p[a + 1], uz = p[b + 2] - p[a + 2]
    const vx = p[c] - p[a], vy = p[c + 1] - p[a + 1], vz = p[c + 2] - p[a + 2]
    const nx = uy * vz - uz * vy, ny = uz * vx - ux * vz, nz = ux * vy - uy * vx
    if (Math.abs(nz) <= collinearSine * Math.max(ux * ux + uy * uy, vx * vx + vy * vy)) continue
    const off = nx * (p[d] - p[a]) + ny * (p[d + 1] - p[a + 1]) + nz * (p[d + 2] - p[a + 2])
    most = Math.max(most, Math.abs(off) / Math.sqrt(nx * nx + ny * ny + nz * nz))
  }
  return most
}
