/** What every entity of a DXF has: where it stands, on which layer, and the plane it is drawn in. */
import { inPlace, ownPlane, type Placing } from './dxf-placing.ts'
import { colourOf, lineTypeOf } from './dxf-look.ts'
import type { DxfRecords } from './dxf-records.ts'
import type { Common } from './dxf-shapes.ts'

export function head(record: DxfRecords): Common {
  return {
    layer: record.word(8, '0'),
    line: record.line,
    entity: record.name,
    kind: record.kind,
    invisible: record.integer(60, 0) === 1,
    onPaper: record.integer(67, 0) === 1,
    colour: colourOf(record),
    lineType: lineTypeOf(record),
  }
}

/** The entity's own plane by codes 210 220 230; a direction of no length is taken for the z axis, as it is the default. */
export function plane(record: DxfRecords): Placing {
  return ownPlane(record.point(210) ?? [0, 0, 1]) ?? inPlace
}

/** Whether figures of the plane have heights: its normal is not along z. */
export const tilted = (m: Placing): boolean => m[2] !== 0 || m[6] !== 0
