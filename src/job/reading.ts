/** From bytes to a plan and a brief: the first half of every job. */
import { conversion, metres } from '../base/length.ts'
import { ok, placed, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { readDrawing } from '../formats/all.ts'
import type { FormatOptions } from '../formats/format.ts'
import type { Drawing } from '../plan/drawing.ts'
import { emptyBrief, readBrief, type Brief } from '../plan/project/brief.ts'
import type { Options } from '../plan/project/options.ts'
import { withDrawnLevels } from '../plan/project/drawn-level-conditions.ts'
import { readOptionsOf } from '../plan/project/wishes.ts'
import { planOfLines } from '../plan/reading/which-lines.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import { projectIn, withOptions } from './project-reading.ts'
import type { Request } from './request.ts'

/** Largest distance of a curve from its chords where nobody says otherwise: 5 mm, our own choice. */
export const defaultSagitta_mm = 5

export interface Reading {
  readonly brief: Brief
  readonly read: ReadPlan
  /** Heights set by hand in a project (length nodeCount, NaN: none); null: none. */
  readonly target: Float64Array | null
  /** Layers of the drawing that were read from, by name. */
  readonly layers: readonly string[]
}

/** The plan and the brief of a request; a problem names the file it sits in. */
export function* reading(request: Request): Steps<Result<Reading>> {
  yield { stage: 'Reading', done: 0 }
  const brief = request.brief === null ? ok(emptyBrief) : readBrief(request.brief.text, request.brief.name)
  if (!brief.ok) return brief
  const project = projectIn(request.source)
  if (project !== null) {
    if (!project.ok) return project
    // A brief that is given takes the place of the project's, with all that was wished by hand.
    const asked = request.brief === null ? project.value : { ...project.value, brief: brief.value, target: null }
    const made = withOptions(asked, request.options, request.source.name)
    if (!made.ok) return made
    const { brief: own, target, read } = made.value.project
    return ok({ brief: own, read: { ...read, notices: [...read.notices, ...made.value.notices] }, target, layers: [''] })
  }
  const drawing = yield* readDrawing(request.source, formatOptions({ ...request.options, layers: request.options.layers ?? brief.value.lines?.layers ?? null }))
  if (!drawing.ok) return drawing
  const read = yield* planOfLines(drawing.value, readOptionsOf(brief.value, request.options, statedUnit(drawing.value)))
  if (!read.ok) return { ok: false, problem: placed(read.problem, { file: request.source.name }) }
  // A list of levels takes the place of those in the drawing.
  const { levels = [], plan, notices } = read.value
  if (request.options.levels !== null && levels.length > 0) {
    const said = 'The levels in the drawing are not held, since --levels gives others.'
    return ok({ brief: brief.value, read: { ...read.value, levels: [], notices: [...notices, said] }, target: null, layers: drawing.value.layers })
  }
  return ok({ brief: withDrawnLevels(brief.value, levels, plan.unit), read: read.value, target: null, layers: drawing.value.layers })
}

/** What readers of formats need to know of the options. */
export function formatOptions(options: Options): FormatOptions {
  const { unit, scale, layers, sagitta_mm } = options
  return {
    layers,
    sagitta: (sagitta_mm ?? defaultSagitta_mm) * conversion('mm', 'm'),
    metresPerUnit: unit === null && scale === null ? null : metres[unit ?? 'mm'] * (scale ?? 1),
  }
}

/** Lengths of a drawing on paper come out in metres whatever its page says. */
function statedUnit(drawing: Drawing): Drawing['unit'] {
  return drawing.onPaper ? 'm' : drawing.unit
}
