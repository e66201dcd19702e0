/** A project as the plan of a job: its plan is read already, so nothing is joined, cut or traced again. */
import { fail, ok, placed, type Result } from '../base/result.ts'
import type { Source } from '../formats/format.ts'
import { decodedText } from '../formats/text-encoding.ts'
import type { Options } from '../plan/project/options.ts'
import type { Project } from '../plan/project/project-record.ts'
import { documentKind, readProject } from '../plan/project/read-project.ts'
import { withVoids } from '../plan/project/turned-face.ts'
import { readOptionsOf } from '../plan/project/wishes.ts'

/** Longest blank start of a document: what people put before the first brace. */
const headLength = 256

/** The project in a file, null where the file is something else. A brief in the place of a plan is refused. */
export function projectIn(source: Source): Result<Project> | null {
  const isNamedOne = /\.panewise\.json$/i.test(source.name)
  if (!isNamedOne && !source.bytes.subarray(0, headLength).includes('{'.charCodeAt(0))) return null
  const text = decodedText(source)
  const kind = text.ok ? documentKind(text.value) : null
  if (kind === 'brief') return fail('brief-as-plan', 'this is a brief, not a plan', { file: source.name }, 'give it with --brief, beside a plan')
  if (!isNamedOne && kind === null) return null
  return text.ok ? readProject(text.value, source.name) : text
}

/** The project with the voids that options and brief name, and what else of the options there is to say. */
export function withOptions(project: Project, options: Options, file: string): Result<{ project: Project; notices: readonly string[] }> {
  const { unit } = project.faces
  if (options.unit !== null && options.unit !== unit) {
    return fail('unit-settled', `the plan of this project is in ${unit}`, { file, field: '--unit' }, `leave --unit out, or read the drawing "${project.name}" anew`)
  }
  if (options.scale !== null || options.scaleFrom !== null) {
    const field = options.scale === null ? '--scale-from' : '--scale'
    return fail('unit-settled', 'the plan of this project has its true size', { file, field }, `leave ${field} out, or read the drawing "${project.name}" anew`)
  }
  const made = withVoids(project, readOptionsOf(project.brief, options, unit).voids)
  if (!made.ok) return { ok: false, problem: placed(made.problem, { file }) }
  const idle = [
    ...(options.layers === null ? [] : ['--layer']), ...((options.colours ?? null) === null ? [] : ['--colour']), ...((options.lineTypes ?? null) === null ? [] : ['--line-type']),
    ...((options.window ?? null) === null ? [] : ['--window']), ...((options.between ?? null) === null ? [] : ['--between']), ...((options.inside ?? null) === null ? [] : ['--inside']), ...(options.snap_mm === null ? [] : ['--snap']),
    ...(options.sagitta_mm === null ? [] : ['--sagitta']), ...(options.accept.length === 0 ? [] : ['--accept']), ...(options.leave.length === 0 ? [] : ['--leave']),
  ]
  const notices = idle.length === 0 ? [] : [`The plan of a project is as it was accepted: ${idle.join(', ')} ${idle.length === 1 ? 'changes' : 'change'} nothing.`]
  return ok({ project: made.value, notices })
}
