/**
 * MESH of a DXF: vertices (92, then 10 20 30 each) and faces (93 numbers of code 90: a count, then that many vertices, and
 * again). A mesh that is to be smoothed (91) is read as its cage, the level that people drew.
 *
 * Source: DXF reference, ENTITIES section, MESH.
 */
import { head } from './dxf-head.ts'
import type { DxfRecords } from './dxf-records.ts'
import type { Mesh } from './dxf-shapes.ts'

export function meshShape(record: DxfRecords): Mesh {
  const points: number[] = []
  const start = [0]
  const corner: number[] = []
  const vertices = record.find(92)
  const faces = record.find(93, vertices + 1)
  for (let i = vertices + 1; i < faces; i += 1) {
    const code = record.codes[i]
    if (code === 10) points.push(record.numberAt(i), 0, 0)
    else if (code === 20 && points.length > 0) points[points.length - 2] = record.numberAt(i)
    else if (code === 30 && points.length > 0) points[points.length - 1] = record.numberAt(i)
  }
  if (vertices < 0 || faces < 0 || record.integerAt(vertices) !== points.length / 3) {
    const stated = vertices < 0 ? 'no number of vertices' : `${record.value(vertices)} vertices`
    record.refuse('incomplete', `it states ${stated} and has ${points.length / 3}`)
    return { shape: 'mesh', ...head(record), points, start, corner, hidden: null }
  }
  const end = faces + 1 + record.integerAt(faces)
  for (let i = faces + 1; i < end && record.problem === null; ) {
    const size = i < record.count && record.codes[i] === 90 ? record.integerAt(i) : 0
    if (size < 3 || i + size >= Math.min(end, record.count + 1) || i + size >= record.count) {
      record.refuse('incomplete', 'its list of faces ends in the middle of a face')
      break
    }
    for (let k = 1; k <= size; k += 1) {
      const vertex = record.integerAt(i + k)
      if (record.codes[i + k] !== 90 || vertex < 0 || 3 * vertex >= points.length) {
        record.refuse('index-out-of-range', `a face names vertex ${vertex}, but there are ${points.length / 3} (counted from 0)`)
      }
      corner.push(vertex)
    }
    start.push(corner.length)
    i += size + 1
  }
  const level = record.integer(91, 0)
  const described = head(record)
  return { shape: 'mesh', ...described, kind: level > 0 ? 'MESH (smooth)' : 'MESH', points, start, corner, hidden: null }
}
