/**
 * One record of a DXF as a shape: LINE, POINT, 3DFACE, LWPOLYLINE, CIRCLE, ARC, ELLIPSE, SPLINE, MESH, INSERT. All else
 * becomes a shape of kind 'other', to be counted. (POLYLINE spans several records: dxf-polyline.ts.)
 *
 * Which entities draw heights: those whose points are points of space (LINE where its z is not 0, POINT, 3DFACE, MESH,
 * 3D polylines, SPLINE and ELLIPSE likewise), and flat ones whose plane is not level. A flat figure's elevation is where
 * its sheet lies, not a height.
 *
 * Source: DXF reference, releases 12 to 2018, ENTITIES section.
 */
import type { Arc, Curve } from './chords.ts'
import { bulged, placedCurve, placedPoints, pointAtAngle, pointAtDegrees } from './dxf-curves.ts'
import { head, plane, tilted } from './dxf-head.ts'
import { meshShape } from './dxf-mesh.ts'
import { after, cross, insertion, inPlace, placedPoint, placedVector, type Placing, type Vector } from './dxf-placing.ts'
import type { DxfRecords } from './dxf-records.ts'
import type { Insert, Mark, Mesh, Other, Path, Shape } from './dxf-shapes.ts'
import { splineShape } from './dxf-spline.ts'

/** The shape of the current record. Where its data make no sense, the record's problem says so. */
export function shapeOf(record: DxfRecords): Shape {
  switch (record.kind) {
    case 'LINE': return line(record)
    case 'LWPOLYLINE': return lightPolyline(record)
    case '3DFACE': return face(record)
    case 'POINT': return mark(record)
    case 'INSERT': return insert(record)
    case 'CIRCLE': return circle(record)
    case 'ARC': return circularArc(record)
    case 'ELLIPSE': return ellipse(record)
    case 'SPLINE': return splineShape(record)
    case 'MESH': return meshShape(record)
    default: return other(record)
  }
}

export const other = (record: DxfRecords): Other => ({ shape: 'other', ...head(record) })

function line(record: DxfRecords): Path {
  const [from, to] = [record.needed(10), record.needed(11)]
  return { shape: 'path', ...head(record), points: [...from, ...to], curves: null, closed: false, heights: from[2] !== 0 || to[2] !== 0 }
}

function mark(record: DxfRecords): Mark {
  return { shape: 'mark', ...head(record), point: record.needed(10) }
}

/**
 * Corners 10 11 12 13; where the last two are one, a triangle. Bits 1 2 4 8 of code 70 hide the edges from each; the last
 * edge of a triangle is the one from the fourth corner, though some programs mark the third.
 */
function face(record: DxfRecords): Mesh {
  const corners = [record.needed(10), record.needed(11), record.needed(12)]
  const last = record.point(13)
  const bits = record.integer(70, 0)
  const triangle = last === null || last.every((value, k) => value === corners[2][k])
  if (!triangle) corners.push(last)
  const hidden = triangle ? [bits & 1, (bits >> 1) & 1, (bits & 12) === 0 ? 0 : 1] : [0, 1, 2, 3].map((i) => (bits >> i) & 1)
  const count = corners.length
  return {
    shape: 'mesh', ...head(record), points: corners.flat(), start: [0, count], corner: corners.map((_, i) => i),
    hidden: bits === 0 ? null : hidden,
  }
}

/** Vertices by code 10, each with its own 20 and bulge 42; elevation 38; bit 1 of code 70 closes it. */
function lightPolyline(record: DxfRecords): Path {
  const m = plane(record)
  const z = record.number(38, 0)
  const corners: number[] = []
  const bulges: number[] = []
  for (let i = 0; i < record.count; i += 1) {
    switch (record.codes[i]) {
      case 10:
        corners.push(record.numberAt(i), NaN, z)
        bulges.push(0)
        break
      case 20:
        if (corners.length > 0) corners[corners.length - 2] = record.numberAt(i)
        break
      case 42:
        if (bulges.length > 0) bulges[bulges.length - 1] = record.numberAt(i)
    }
  }
  if (corners.some(Number.isNaN)) record.refuse('incomplete', 'a vertex has no y (code 20)')
  return polyline(record, m, corners, bulges, (record.integer(70, 0) & 1) === 1, tilted(m))
}

/** A path through corners (in the plane m, x y z ..) with a bulge each. */
export function polyline(
  record: DxfRecords, m: Placing, corners: readonly number[], bulges: readonly number[], closed: boolean, heights: boolean,
  described = head(record),
): Path {
  const count = bulges.length
  if (count < 2) record.refuse('incomplete', 'it has fewer than two vertices', 'leave it out or export the file again', described.line)
  let curves: (Curve | null)[] | null = null
  if (bulges.some((bulge) => bulge !== 0)) {
    const at = (i: number): Vector => [corners[3 * i], corners[3 * i + 1], corners[3 * i + 2]]
    curves = []
    for (let i = 0; i < (closed ? count : count - 1); i += 1) {
      const curve = bulged(at(i), at((i + 1) % count), bulges[i])
      curves.push(curve === null ? null : placedCurve(m, curve))
    }
  }
  return { shape: 'path', ...described, points: m === inPlace ? corners : placedPoints(m, corners), curves, closed, heights }
}

function circle(record: DxfRecords): Path {
  const m = plane(record)
  const arc = roundArc(record, m)
  const round = { centre: arc.centre, radius: record.number(40, 0) }
  return { shape: 'path', ...head(record), points: pointAtDegrees(arc, 0), curves: [arc], closed: true, heights: tilted(m), round }
}

/** Counter-clockwise from 50 to 51 (degrees) about the centre, in its own plane. */
function circularArc(record: DxfRecords): Path {
  const m = plane(record)
  const from = record.number(50, 0)
  const to = record.number(51, 360)
  const full = roundArc(record, m)
  const sweep = positive(to - from, 360)
  const arc: Arc = { ...full, from: (from * Math.PI) / 180, to: ((from + sweep) * Math.PI) / 180 }
  const start = pointAtDegrees(full, from)
  if (sweep === 360) return wholeTurn(record, start, arc, tilted(m))
  return partTurn(record, [...start, ...pointAtDegrees(full, to)], arc, tilted(m))
}

function roundArc(record: DxfRecords, m: Placing): Arc {
  const centre = record.needed(10)
  const radius = record.number(40, 0)
  if (!(radius > 0) && record.problem === null) record.refuse('no-radius', 'its radius (code 40) is not a positive number', 'leave it out')
  const [a, b] = [placedVector(m, [radius, 0, 0]), placedVector(m, [0, radius, 0])]
  return { kind: 'arc', centre: placedPoint(m, ...centre), a, b, from: 0, to: 2 * Math.PI }
}

/** Centre 10, end of the major axis 11 from it (both in space), ratio 40, from 41 to 42 in radians of the parameter. */
function ellipse(record: DxfRecords): Path {
  const centre = record.needed(10)
  const a = record.needed(11)
  const ratio = record.number(40, 1)
  const axes = plane(record)
  const b = cross([axes[2], axes[6], axes[10]], a)
  if (!(Math.hypot(...b) > 0) || ratio === 0) record.refuse('no-radius', 'it has an axis of no length', 'leave it out')
  const from = record.number(41, 0)
  const to = record.number(42, 2 * Math.PI)
  const sweep = positive(to - from, 2 * Math.PI)
  const arc: Arc = { kind: 'arc', centre, a, b: [ratio * b[0], ratio * b[1], ratio * b[2]], from, to: from + sweep }
  const start = pointAtAngle(arc, from)
  return sweep > 2 * Math.PI - wholeTurnSlack
    ? wholeTurn(record, start, arc, tilted(axes))
    : partTurn(record, [...start, ...pointAtAngle(arc, arc.to)], arc, tilted(axes))
}

/** Radians by which a written whole turn may fall short of 2 pi: files have some ten digits of it. */
const wholeTurnSlack = 1e-9

function wholeTurn(record: DxfRecords, start: readonly number[], arc: Arc, heights: boolean): Path {
  return { shape: 'path', ...head(record), points: start, curves: [turned(arc)], closed: true, heights }
}

function partTurn(record: DxfRecords, ends: readonly number[], arc: Arc, heights: boolean): Path {
  return { shape: 'path', ...head(record), points: ends, curves: [arc], closed: false, heights }
}

/** A full turn that starts anywhere, as one that starts at angle 0: its axes turned along. */
function turned(arc: Arc): Arc {
  if (arc.from === 0) return { ...arc, to: 2 * Math.PI }
  const c = Math.cos(arc.from)
  const s = Math.sin(arc.from)
  const mix = (p: number, q: number): Vector => [p * arc.a[0] + q * arc.b[0], p * arc.a[1] + q * arc.b[1], p * arc.a[2] + q * arc.b[2]]
  return { ...arc, a: mix(c, s), b: mix(-s, c), from: 0, to: 2 * Math.PI }
}

/** The turn in (0, full]. */
function positive(turn: number, full: number): number {
  const rest = turn % full
  return rest <= 0 ? rest + full : rest
}

/** Largest count of columns or rows of one insert; DXF stores them in 16 bits. */
const mostCopies = 32767

function insert(record: DxfRecords): Insert {
  const m = plane(record)
  const turn = record.number(50, 0)
  const scale: Vector = [record.number(41, 1), record.number(42, 1), record.number(43, 1)]
  const columns = record.integer(70, 1)
  const rows = record.integer(71, 1)
  if (columns > mostCopies || rows > mostCopies) {
    const message = `it asks for ${columns} x ${rows} copies, more than ${mostCopies} a side`
    record.refuse('too-many', message, 'explode the block or leave it out')
  }
  const placing = after(m, insertion(record.needed(10), turn, scale))
  const along = insertion([0, 0, 0], turn, [1, 1, 1])
  const step = (x: number, y: number): Vector => placedVector(m, placedVector(along, [x, y, 0]))
  return {
    shape: 'insert', ...head(record), block: record.word(2), placing, columns: Math.max(1, columns), rows: Math.max(1, rows),
    columnStep: step(record.number(44, 0), 0), rowStep: step(0, record.number(45, 0)),
  }
}
