/**
 * DXF, ASCII, releases 12 to 2018. What becomes of each entity:
 *
 * - taken:   LINE, LWPOLYLINE, POLYLINE (flat, in space, mesh of rows and columns, polyface), 3DFACE, MESH (its cage),
 *            POINT (as a mark), INSERT (unfolded: scale, mirror, turn, nesting, columns and rows)
 * - chorded: ARC, CIRCLE, ELLIPSE, SPLINE, and the bulges of polylines
 * - left out and counted: all else, and what lies on frozen or switched-off layers, in paper space, or is invisible
 *
 * Source: DXF reference, releases 12 to 2018.
 */
import { metres, type Unit } from '../base/length.ts'
import { fail, placed, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Drawing } from '../plan/drawing.ts'
import { dxfFile } from './dxf-file.ts'
import { placeModel } from './dxf-place.ts'
import { DxfSheet } from './dxf-sheet.ts'
import type { Format, FormatOptions, Source } from './format.ts'
import { LayerChoice } from './layer-choice.ts'

export const dxf: Format = { title: 'DXF', extensions: ['dxf'], recognises, read }

/** Comments (999), then code 0 and the word SECTION. */
function recognises(head: string): boolean {
  return /^\s*(?:999[ \t]*\n[^\n]*\n\s*)*0[ \t]*\n[ \t]*SECTION[ \t]*(?:\n|$)/i.test(head)
}

function* read(text: string, source: Source, options: FormatOptions): Steps<Result<Drawing>> {
  const read = yield* readText(text, options)
  return read.ok ? read : { ok: false, problem: placed(read.problem, { file: source.name }) }
}

function* readText(text: string, options: FormatOptions): Steps<Result<Drawing>> {
  const file = yield* dxfFile(text)
  if (!file.ok) return file
  const stated = file.value.unit
  if (stated !== null && typeof stated !== 'string' && options.metresPerUnit === null) {
    const message = `the drawing's unit is ${stated.name}, which is not read`
    return fail('unit-not-read', message, null, 'set it to mm, cm, m, in or ft, or say --unit')
  }
  const unit: Unit | null = typeof stated === 'string' ? stated : null
  const metresPerUnit = options.metresPerUnit ?? (unit === null ? 1 : metres[unit])
  const sheet = new DxfSheet(file.value.layers, new LayerChoice(options.layers), options.sagitta / metresPerUnit, options.sagitta)
  const done = yield* placeModel(file.value, sheet)
  return done.ok ? sheet.drawing(unit) : done
}
