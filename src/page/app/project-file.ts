/** Documents to and from project files; other JSON is left to the readers of drawings. */
import type { Result } from '../../base/result.ts'
import { projectText, readProject } from '../../plan/project/project.ts'
import type { Doc } from './state.ts'

/** null where the bytes are no project of ours: GeoJSON is JSON too. */
export function openProject(name: string, bytes: Uint8Array): Result<Doc> | null {
  const text = new TextDecoder().decode(bytes)
  if (!/"panewise"\s*:\s*"project"/.test(text.slice(0, 400)) && !/\.panewise\.json$/i.test(name)) return null
  const project = readProject(text, name)
  if (!project.ok) return project
  const { name: drawing, plan, brief, off, leastSlope, target } = project.value
  return { ok: true, value: { name: drawing, plan: plan.plan, read: plan, brief, off, leastSlope, target } }
}

export function docText(doc: Doc): string {
  const { name, read, brief, off, leastSlope, target } = doc
  return projectText({ name, plan: read, brief, off, leastSlope, target })
}

/** The name of the file to save to: the drawing's, without its ending. */
export const projectName = (doc: Doc): string => `${doc.name.replace(/(\.panewise)?\.[a-z0-9]{1,8}$/i, '')}.panewise.json`
