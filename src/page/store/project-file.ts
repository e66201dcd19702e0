/** Documents to and from project files; other JSON is left to the readers of drawings. */
import { fail, type Result } from '../../base/result.ts'
import { projectLine, projectText } from '../../plan/project/project-text.ts'
import { documentKind, readProject } from '../../plan/project/read-project.ts'
import type { Doc } from './state.ts'

/** null where the bytes are no project of ours: GeoJSON is JSON too. */
export function openProject(name: string, bytes: Uint8Array): Result<Doc> | null {
  const text = new TextDecoder().decode(bytes)
  const kind = documentKind(text)
  if (kind === 'brief') return fail('brief-as-plan', 'this is a brief, not a plan', { file: name }, 'open its plan first, then the brief')
  return kind === 'project' || /\.panewise\.json$/i.test(name) ? readProject(text, name) : null
}

export const docText: (doc: Doc) => string = projectText

/** What the browser keeps. */
export const keptText: (doc: Doc) => string = projectLine

/** The name of the file to save to: the drawing's, without its ending. */
export const projectName = (doc: Doc): string => `${doc.name.replace(/(\.panewise)?\.[a-z0-9]{1,8}$/i, '')}.panewise.json`
