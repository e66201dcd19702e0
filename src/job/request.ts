/** What the outside asks of a job. */
import type { Source } from '../formats/format.ts'
import type { Options } from '../plan/project/options.ts'

export interface Request {
  readonly command: 'read' | 'check' | 'raise' | 'adjust' | 'balance'
  readonly source: Source
  readonly options: Options
  /** A brief as text, and the name it goes by. */
  readonly brief: { readonly name: string; readonly text: string } | null
  /** Levels to hold: a CSV, or points on a layer of a drawing (null: on all layers). */
  readonly levels: { readonly source: Source; readonly layer: string | null } | null
  /** The options as the user gave them, for the record in the summary. */
  readonly given: Readonly<Record<string, unknown>>
}
