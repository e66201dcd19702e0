/**
 * POLYLINE of a DXF, with the VERTEX records up to SEQEND: flat ones with bulges, ones in space, meshes of rows and
 * columns, and polyface meshes.
 *
 * Bits of code 70 of the POLYLINE: 1 closed (in the first direction), 2 and 4 smoothed, 8 in space, 16 mesh of rows and
 * columns, 32 closed in the second direction, 64 polyface. Of a VERTEX: 8 put there by smoothing, 16 frame of the
 * smoothing (not drawn), 64 point of a mesh, 128 of a polyface mesh (without 64: a face).
 *
 * Source: DXF reference, ENTITIES section, POLYLINE and VERTEX.
 */
import type { Steps } from '../base/steps.ts'
import { polyline } from './dxf-entities.ts'
import { head, plane, tilted } from './dxf-head.ts'
import { damaged, type DxfRecords } from './dxf-records.ts'
import type { Common, Mesh, Shape } from './dxf-shapes.ts'

const recordsPerStep = 10_000

/** Vertices as they come. */
interface Vertices {
  /** x y z .., in the polyline's own coordinates. */
  readonly points: number[]
  readonly bulges: number[]
  readonly flags: number[]
  /** Faces of a polyface mesh: up to four numbers of points, negative where the edge from there is hidden. */
  readonly faces: number[][]
}

/** The shapes of the polyline at which the records stand; afterwards they stand at its SEQEND. */
export function* polylineShapes(record: DxfRecords): Steps<Shape[]> {
  const described = head(record)
  const flags = record.integer(70, 0)
  const m = plane(record)
  const elevation = record.number(30, 0)
  const sizes = [71, 72, 73, 74].map((code) => record.integer(code, 0))
  const found: Vertices = { points: [], bulges: [], flags: [], faces: [] }
  let count = 0
  for (;;) {
    if (!record.advance()) {
      record.refuse('incomplete', 'a POLYLINE has no SEQEND', damaged, described.line)
      return []
    }
    if (record.kind === 'SEQEND') break
    if (record.kind !== 'VERTEX') {
      record.refuse('incomplete', `${described.entity} has no SEQEND before this`, damaged)
      return []
    }
    vertex(record, (flags & 64) !== 0, found)
    if (record.problem !== null) return []
    if (++count % recordsPerStep === 0) yield { stage: 'Reading', done: record.share }
  }
  if ((flags & 64) !== 0) return polyface(record, described, found)
  if ((flags & 16) !== 0) return [rowsAndColumns(record, described, found, flags, sizes)]
  const drawn = [...found.bulges.keys()].filter((i) => (found.flags[i] & 16) === 0)
  const inSpace = (flags & 8) !== 0
  const corners = drawn.flatMap((i) => [found.points[3 * i], found.points[3 * i + 1], inSpace ? found.points[3 * i + 2] : elevation])
  const bulges = drawn.map((i) => (inSpace ? 0 : found.bulges[i]))
  const closed = (flags & 1) !== 0
  return inSpace
    ? [{ shape: 'path', ...described, points: corners, curves: null, closed, heights: true }]
    : [polyline(record, m, corners, bulges, closed, tilted(m), described)]
}

function vertex(record: DxfRecords, ofPolyface: boolean, found: Vertices): void {
  const flags = record.integer(70, 0)
  if (ofPolyface && (flags & 128) !== 0 && (flags & 64) === 0) {
    found.faces.push([71, 72, 73, 74].map((code) => record.integer(code, 0)).filter((index) => index !== 0))
    return
  }
  found.points.push(...record.needed(10))
  found.bulges.push(record.number(42, 0))
  found.flags.push(flags)
}

function polyface(record: DxfRecords, described: Common, { points, faces }: Vertices): Shape[] {
  const mesh = { points, start: [0], corner: [] as number[], hidden: [] as number[] }
  const count = points.length / 3
  let thin = 0
  for (const face of faces) {
    if (face.length < 3) {
      thin += 1
      continue
    }
    for (const index of face) {
      if (Math.abs(index) > count) {
        const message = `${described.entity} has a face with vertex ${Math.abs(index)}, but there are ${count}`
        record.refuse('index-out-of-range', message, 'export the file again', described.line)
        return []
      }
      mesh.corner.push(Math.abs(index) - 1)
      mesh.hidden.push(index < 0 ? 1 : 0)
    }
    mesh.start.push(mesh.corner.length)
  }
  const shapes: Shape[] = [{ shape: 'mesh', ...described, ...mesh, hidden: mesh.hidden.includes(1) ? mesh.hidden : null }]
  for (let i = 0; i < thin; i += 1) shapes.push({ shape: 'other', ...described, kind: 'POLYLINE face of two corners' })
  return shapes
}

/** Vertex (i, j) of m x n stands at i n + j; a smoothed mesh has its own m x n (73, 74) and hides its frame. */
function rowsAndColumns(record: DxfRecords, described: Common, found: Vertices, flags: number, sizes: readonly number[]): Mesh {
  const smooth = (flags & 4) !== 0
  const [m, n] = smooth ? [sizes[2], sizes[3]] : [sizes[0], sizes[1]]
  const drawn = [...found.flags.keys()].filter((i) => (found.flags[i] & 16) === 0)
  const mesh: Mesh & { start: number[]; corner: number[] } = {
    shape: 'mesh', ...described, points: drawn.flatMap((i) => found.points.slice(3 * i, 3 * i + 3)), start: [0], corner: [], hidden: null,
  }
  if (m < 2 || n < 2 || m * n !== drawn.length) {
    const message = `${described.entity} states ${m} x ${n} vertices and has ${drawn.length}`
    record.refuse('incomplete', message, 'export the file again', described.line)
    return mesh
  }
  const rows = (flags & 1) !== 0 ? m : m - 1
  const columns = (flags & 32) !== 0 ? n : n - 1
  for (let i = 0; i < rows; i += 1) {
    for (let j = 0; j < columns; j += 1) {
      const [below, right] = [((i + 1) % m) * n, (j + 1) % n]
      mesh.corner.push(i * n + j, below + j, below + right, i * n + right)
      mesh.start.push(mesh.corner.length)
    }
  }
  return mesh
}
