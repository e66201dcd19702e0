/** Levels to hold, from a list or from points on a layer of a drawing, as the options' record. */
import { fail, ok, placed, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { readDrawing } from '../formats/all.ts'
import { levelsFromCsv } from '../formats/levels-csv.ts'
import { decodedText } from '../formats/text-encoding.ts'
import type { Levels, Options } from '../plan/project/options.ts'
import { formatOptions } from './reading.ts'
import type { Request } from './request.ts'

/** The options with the levels of the request's file put in; unchanged where it names none. */
export function* withLevels(request: Request): Steps<Result<Options>> {
  const { levels, options } = request
  if (levels === null) return ok(options)
  const { source, layer } = levels
  const isList = /\.(csv|txt|tsv)$/i.test(source.name)
  const found = isList ? fromList(source) : yield* fromDrawing(request, source, layer)
  return found.ok ? ok({ ...options, levels: found.value }) : { ok: false, problem: placed(found.problem, { file: source.name }) }
}

function fromList(source: { name: string; bytes: Uint8Array }): Result<Levels> {
  const text = decodedText(source)
  if (!text.ok) return text
  const rows = levelsFromCsv(text.value, source.name)
  return rows.ok ? ok({ source: source.name, unit: null, rows: rows.value }) : rows
}

function* fromDrawing(request: Request, source: { name: string; bytes: Uint8Array }, layer: string | null): Steps<Result<Levels>> {
  const drawing = yield* readDrawing(source, { ...formatOptions(request.options), layers: layer === null ? null : [layer] })
  if (!drawing.ok) return drawing
  const { marks, points, unit } = drawing.value
  if (marks.length === 0) {
    return fail('no-levels', `there are no points${layer === null ? '' : ` on the layer "${layer}"`}`, { file: source.name }, 'name another layer with FILE#LAYER, or give a CSV list')
  }
  const rows = Array.from(marks, (point) => ({ name: null, at: [points[3 * point], points[3 * point + 1]] as const, level: points[3 * point + 2] }))
  return ok({ source: source.name, unit: request.options.unit ?? unit, rows })
}
