/**
 * TEXT, MTEXT and ATTRIB of a DXF as words at a place. A line of text is anchored at its left end (10) unless it is
 * justified (72, 73), then at its second point (11); 50 turns it, 40 is the height of its capitals.
 *
 * Source: DXF reference, releases 12 to 2018, ENTITIES section, TEXT, MTEXT, ATTRIB.
 */
import { head, plane } from './dxf-head.ts'
import { placedPoint, turn } from './dxf-placing.ts'
import type { DxfRecords } from './dxf-records.ts'
import type { Insert, Other, Text } from './dxf-shapes.ts'
import { dxfText } from './dxf-text.ts'

/** Width of a letter in heights: the middle of a text is found by it, nothing is measured by it. */
const letterWidth = 0.7

/** Longest text that is kept; labels are short. */
const longest = 400

/** `insert`: the block whose attribute it is. Words are no part of a plan: one that makes no sense is counted and stops nothing. */
export function textShape(record: DxfRecords, insert: Insert | null): Text | Other {
  const before = record.problem
  const shape = words(record, insert)
  if (record.problem === before) return shape
  record.problem = before
  return { shape: 'other', ...head(record) }
}

function words(record: DxfRecords, insert: Insert | null): Text {
  const isMany = record.kind === 'MTEXT'
  const text = plainText(isMany ? manyLines(record) : record.word(1), isMany)
  const m = plane(record)
  const height = Math.abs(record.number(40, 0))
  const [across, up] = isMany ? [0, 0] : [record.integer(72, 0), record.integer(record.kind === 'ATTRIB' ? 74 : 73, 0)]
  const second = isMany ? null : record.point(11)
  const isLeft = second === null || (across === 0 && up === 0)
  const at = isLeft ? record.needed(10) : second
  const [c, s] = isMany ? directionOf(record) : turn(record.number(50, 0))
  const width = letterWidth * height * text.length
  // Attachment of MTEXT: 1 to 9 in rows from the top left; of TEXT: 72 left, centre, right, 73 line, bottom, middle, top.
  const attached = isMany ? record.integer(71, 1) - 1 : 0
  const alongShare = isMany ? 0.5 - (attached % 3) / 2 : isLeft || across === 0 ? 0.5 : across === 2 ? -0.5 : 0
  const upShare = isMany ? Math.floor(attached / 3) / 2 - 0.5 : isLeft || up < 2 ? (across === 4 ? 0 : 0.5) : up === 2 ? 0 : -0.5
  const [along, rise] = [alongShare * width, upShare * height]
  const middle = placedPoint(m, at[0] + c * along - s * rise, at[1] + s * along + c * rise, at[2])
  const tag = record.kind === 'ATTRIB' ? record.word(2) : null
  const block = insert === null ? null : placedPoint(insert.placing, 0, 0, 0)
  return { shape: 'text', ...head(record), text, at: placedPoint(m, ...at), middle, height, tag, block: tag === null ? null : block }
}

/** A long MTEXT comes in pieces of code 3 before its last one of code 1. */
function manyLines(record: DxfRecords): string {
  let text = ''
  for (let i = record.find(3); i >= 0 && text.length < longest; i = record.find(3, i + 1)) text += dxfText(record.value(i))
  return text + record.word(1)
}

/** Direction of an MTEXT: a vector (11), else an angle (50). */
function directionOf(record: DxfRecords): [number, number] {
  const along = record.point(11)
  const size = along === null ? 0 : Math.hypot(along[0], along[1])
  return along !== null && size > 0 ? [along[0] / size, along[1] / size] : turn(record.number(50, 0))
}

/** The words without the codes of their look: \P and \~ are blanks, \A1; \H2.5x; \fName; and braces are dropped. */
function plainText(text: string, isMany: boolean): string {
  const cut = text.slice(0, longest)
  if (!isMany) return cut.trim()
  return cut
    .replace(/\\[P~]/g, ' ')
    .replace(/\\[ACcFfHhpQTW][^;]{0,80};/g, '')
    .replace(/\\S([^;]{0,40});/g, '$1')
    .replace(/\\[LlOoKk]/g, '')
    .replace(/\\([\\{}])/g, '$1')
    .replace(/[{}]/g, '')
    .trim()
}
