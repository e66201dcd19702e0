/**
 * The project as the page still holds it: names of conditions that are off beside a brief whose conditions know nothing of
 * it. The file is the same; see `project-record.ts`, `read-project.ts` and `project-text.ts`, which take this file's place
 * when the page's document is a Project.
 */
import { ok, type Result } from '../../base/result.ts'
import type { ReadPlan } from '../read-plan.ts'
import type { Brief } from './brief.ts'
import { projectOf } from './project-record.ts'
import { projectText as text } from './project-text.ts'
import { readProject as read } from './read-project.ts'

export interface Project {
  readonly name: string
  readonly plan: ReadPlan
  readonly brief: Brief
  readonly off: readonly string[]
  readonly leastSlope: number | null
  readonly target: Float64Array | null
}

export function readProject(from: string, file: string): Result<Project> {
  const project = read(from, file)
  if (!project.ok) return project
  const { name, read: plan, brief, leastSlope, target } = project.value
  const off = brief.conditions.filter((condition) => condition.off === true).map((condition) => condition.name)
  const conditions = brief.conditions.map((condition) => ({ ...condition, off: false }))
  return ok({ name, plan, brief: { ...brief, conditions }, off, leastSlope, target })
}

export function projectText({ name, plan, brief, off, leastSlope, target }: Project): string {
  const conditions = brief.conditions.map((condition) => (off.includes(condition.name) ? { ...condition, off: true } : condition))
  return text(projectOf(plan, { name, sha256: null, brief: { ...brief, conditions }, leastSlope, target }))
}
