/** All formats that are read, and which of them a file is. To add one, add it to the list. */
import { fail, ok, placed, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Drawing } from '../plan/drawing.ts'
import { dxf } from './dxf.ts'
import type { Format, FormatOptions, Source } from './format.ts'
import { geojson } from './geojson.ts'
import { obj } from './obj.ts'
import { refused } from './recognise-refused.ts'
import { svg } from './svg.ts'
import { decodedText } from './text-encoding.ts'

export const formats: readonly Format[] = [dxf, obj, svg, geojson]

/** Characters of the head by which a format is recognised: long enough for a licence in comments before the first line. */
const headLength = 1 << 16

/** A file's format and its text. */
export interface Recognised {
  readonly format: Format
  readonly text: string
}

/**
 * The format of a file by its content; the name decides only where the content fits several formats or none. Fails for
 * empty, binary and unknown files, each with its cure.
 */
export function recognise(source: Source): Result<Recognised> {
  const { name, bytes } = source
  if (bytes.length === 0) return fail('empty-file', 'the file is empty', { file: name }, 'export it again')
  const known = refused(source)
  if (known !== null) return { ok: false, problem: known }
  const decoded = decodedText(source)
  if (!decoded.ok) return decoded
  const text = decoded.value
  const head = text.slice(0, headLength)
  if (head.trim() === '' && text.trim() === '') {
    return fail('empty-file', 'the file holds nothing but blank space', { file: name }, 'export it again')
  }
  const named = (format: Format): boolean => format.extensions.some((extension) => name.toLowerCase().endsWith(`.${extension}`))
  const fitting = formats.filter((format) => format.recognises(head))
  const format = fitting.find(named) ?? fitting[0] ?? formats.find(named)
  if (format === undefined) {
    const titles = formats.map(({ title }) => title)
    return fail('unknown-format', 'the content is of no format that is read', { file: name }, `give a plan as ${oneOf(titles)}`)
  }
  return ok({ format, text })
}

/** Recognises and reads a file; every problem names it. */
export function* readDrawing(source: Source, options: FormatOptions): Steps<Result<Drawing>> {
  const recognised = recognise(source)
  if (!recognised.ok) return recognised
  const { format, text } = recognised.value
  const drawing = yield* format.read(text, source, options)
  return drawing.ok ? drawing : { ok: false, problem: placed(drawing.problem, { file: source.name }) }
}

/** "A, B or C". */
function oneOf(words: readonly string[]): string {
  return words.length < 2 ? words.join('') : `${words.slice(0, -1).join(', ')} or ${words[words.length - 1]}`
}
