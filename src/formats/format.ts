/**
 * One file per format, one interface. A format turns bytes into a Drawing; it knows no file system and no DOM.
 * To add one: write `formats/<name>.ts`, export a Format, list it in `formats/all.ts`.
 */
import type { Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Drawing } from '../plan/drawing.ts'

/** The bytes of a file and the name it goes by in sentences. */
export interface Source {
  readonly name: string
  readonly bytes: Uint8Array
}

export interface FormatOptions {
  /** Only entities on these layers are taken (compared without case); null takes all that are on and not frozen. */
  readonly layers: readonly string[] | null
  /** Largest distance between a curve and its chords, in metres of the thing drawn. */
  readonly sagitta: number
  /** Metres in one unit of the file, when the user has said so; null: the file's own word, else metres. */
  readonly metresPerUnit: number | null
}

export interface Format {
  /** For people: "DXF". */
  readonly title: string
  /** Lower case, without the dot. */
  readonly extensions: readonly string[]
  /** Whether the content (not the name) is of this format, judged from the decoded head of the file. */
  recognises(head: string): boolean
  /** Reads the text. Fails with a Problem whose place has the line or entity; never throws on bad input. */
  read(text: string, source: Source, options: FormatOptions): Steps<Result<Drawing>>
}
