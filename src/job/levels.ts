/** Levels to hold, from a list or from the points, blocks and words of a drawing, as the options' record. */
import { fail, ok, placed, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { readDrawing } from '../formats/all.ts'
import { levelsFromCsv } from '../formats/levels-csv.ts'
import { decodedText } from '../formats/text-encoding.ts'
import type { Levels, LevelRow, Options } from '../plan/project/options.ts'
import { drawnLevels } from '../plan/reading/levels-drawn.ts'
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
  return rows.ok ? ok({ source: source.name, unit: null, ...rows.value }) : rows
}

function* fromDrawing(request: Request, source: { name: string; bytes: Uint8Array }, layer: string | null): Steps<Result<Levels>> {
  const drawing = yield* readDrawing(source, { ...formatOptions(request.options), layers: layer === null ? null : [layer] })
  if (!drawing.ok) return drawing
  const unit = request.options.unit ?? drawing.value.unit
  const { points, marks } = drawing.value
  const { marks: standing, words } = drawnLevels(drawing.value, 1, unit ?? 'm')
  // A file that was named for its levels means its points, at 0 too, and its words without a sign.
  const flat = standing.length + words.length > 0 ? [] : Array.from(marks, (point): LevelRow => ({ name: null, at: [points[3 * point], points[3 * point + 1]], level: points[3 * point + 2] }))
  const rows = [...[...standing, ...words].map(({ name, at: [at, ...elsewhere], level }): LevelRow => ({ name, at, elsewhere, level })), ...flat]
  if (rows.length === 0) {
    return fail('no-levels', `there are no points, blocks or words with levels${layer === null ? '' : ` on the layer "${layer}"`}`, { file: source.name }, 'name another layer with FILE#LAYER, or give a CSV list')
  }
  return ok({ source: source.name, unit, rows })
}
