/**
 * A DXF as its sections hold it: unit, layers, blocks, and the entities of the model, nothing put in place yet.
 *
 * Source: DXF reference, releases 12 to 2018, HEADER, TABLES, BLOCKS and ENTITIES sections.
 */
import type { Unit } from '../base/length.ts'
import { fail, ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { shapeOf } from './dxf-entities.ts'
import { colourOf, lineTypeOf } from './dxf-look.ts'
import { polylineShapes } from './dxf-polyline.ts'
import { damaged, DxfRecords } from './dxf-records.ts'
import type { Block, Insert, Shape } from './dxf-shapes.ts'
import { textShape } from './dxf-words.ts'

export interface DxfFile {
  /** Unit stated by $INSUNITS: null where there is none, a name for people where it is one that is not read. */
  readonly unit: Unit | { readonly name: string } | null
  /** By name in lower case. */
  readonly layers: ReadonlyMap<string, Layer>
  /** By name in lower case. */
  readonly blocks: ReadonlyMap<string, Block>
  readonly shapes: readonly Shape[]
}

export interface Layer {
  readonly name: string
  readonly frozen: boolean
  readonly off: boolean
  /** As looks have them. */
  readonly colour: string
  readonly lineType: string
}

/** What is drawn in no colour and no line type of its own, on a layer that the file does not describe. */
export const plainColour = '7'
export const plainLine = 'CONTINUOUS'

const recordsPerStep = 5_000

export function* dxfFile(text: string): Steps<Result<DxfFile>> {
  const record = new DxfRecords(text)
  const shapes: Shape[] = []
  const layers = new Map<string, Layer>()
  const blocks = new Map<string, Block>()
  let unit: DxfFile['unit'] = null
  let section = ''
  let block: Block | null = null
  let entitiesMet = false
  let count = 0
  // Attributes follow the block that they belong to.
  let insert: Insert | null = null
  while (record.advance()) {
    if (++count % recordsPerStep === 0) yield { stage: 'Reading', done: record.share }
    switch (record.kind) {
      case 'SECTION':
        section = record.word(2).toUpperCase()
        if (section === 'HEADER') unit = statedUnit(record)
        if (section === 'ENTITIES') entitiesMet = true
        continue
      case 'ENDSEC':
        section = ''
        continue
    }
    if (section === '') record.refuse('outside-section', 'it stands in no section', damaged)
    else if (section === 'TABLES' && record.kind === 'LAYER') addLayer(record, layers)
    else if (section === 'BLOCKS' && record.kind === 'BLOCK') {
      block = newBlock(record)
      // The first definition of a name counts: a second one would change what stands already.
      if (!blocks.has(block.name.toLowerCase())) blocks.set(block.name.toLowerCase(), block)
    } else if (section === 'BLOCKS' && record.kind === 'ENDBLK') block = null
    else if (section === 'ENTITIES' || (section === 'BLOCKS' && block !== null)) {
      const into: Shape[] = block?.shapes ?? shapes
      if (record.kind === 'POLYLINE') {
        const found = yield* polylineShapes(record)
        for (const shape of found) into.push(shape)
      } else if (record.kind === 'TEXT' || record.kind === 'MTEXT' || record.kind === 'ATTRIB') into.push(textShape(record, insert))
      else if (record.kind !== 'SEQEND') {
        const shape = shapeOf(record)
        insert = shape.shape === 'insert' ? shape : null
        into.push(shape)
      }
    }
  }
  if (record.problem !== null) return { ok: false, problem: record.problem }
  if (!entitiesMet) return fail('nothing-drawn', 'the file has no ENTITIES section', null, 'export the drawing again, with its entities')
  return ok({ unit, layers, blocks, shapes })
}

/** $INSUNITS, by its number. US survey feet differ from feet by 2 in a million, which is millimetres at survey coordinates. */
const unitsByNumber: Readonly<Record<number, Unit | string>> = {
  1: 'in', 2: 'ft', 3: 'miles', 4: 'mm', 5: 'cm', 6: 'm', 7: 'kilometres', 8: 'microinches', 9: 'mils', 10: 'yards',
  11: 'angstroms', 12: 'nanometres', 13: 'microns', 14: 'decimetres', 15: 'decametres', 16: 'hectometres', 17: 'gigametres',
  18: 'astronomical units', 19: 'light years', 20: 'parsecs',
  21: 'US survey feet', 22: 'US survey inches', 23: 'US survey yards', 24: 'US survey miles',
}

/** The HEADER section is one record: names (9), each followed by its values. */
function statedUnit(record: DxfRecords): DxfFile['unit'] {
  for (let i = 0; i + 1 < record.count; i += 1) {
    if (record.codes[i] !== 9 || record.value(i).toUpperCase() !== '$INSUNITS') continue
    const number = record.integerAt(i + 1)
    if (number === 0) return null
    const name = unitsByNumber[number] ?? `number ${number}`
    return name === 'mm' || name === 'cm' || name === 'm' || name === 'in' || name === 'ft' ? name : { name }
  }
  return null
}

/** Bit 1 of code 70: frozen. A negative colour (62): off. */
function addLayer(record: DxfRecords, layers: Map<string, Layer>): void {
  const name = record.word(2)
  layers.set(name.toLowerCase(), {
    name, frozen: (record.integer(70, 0) & 1) !== 0, off: record.integer(62, 7) < 0, colour: colourOf(record) ?? plainColour, lineType: lineTypeOf(record) ?? plainLine,
  })
}

/** Bits 4 and 16 of code 70: its content is in another file. */
function newBlock(record: DxfRecords): Block {
  return { name: record.word(2), base: record.point(10) ?? [0, 0, 0], external: (record.integer(70, 0) & 4) !== 0, shapes: [] }
}
