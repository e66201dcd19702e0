/**
 * A project whose plan became another one after it was accepted: nodes moved, panels divided or joined. The faces are the
 * plan's own record, so what is saved and opened again is what was answered for.
 */
import { ok, type Result } from '../../base/result.ts'
import { drawnFaces, nodePoints, type DrawnFaces } from '../drawn-faces.ts'
import type { Plan } from '../plan.ts'
import type { ReadPlan } from '../read-plan.ts'
import { readFaces, type Project } from './project-record.ts'

/**
 * The project over this plan; brief and target stay, and must speak of its nodes, panels and joints. `notice`: what was done
 * to the drawing, kept with what reading it did. Fails as `planFromFaces` does.
 */
export function withChangedPlan(project: Project, { plan, heights, barWidth }: Pick<ReadPlan, 'plan' | 'heights' | 'barWidth'>, notice: string): Result<Project> {
  // Voids that touch one another stay apart as long as only nodes moved.
  const faces = samePanels(project.read.plan, plan) ? withNodesAt(project.faces, plan) : drawnFaces(plan, heights, barWidth)
  const read = readFaces(faces, { ...project.read, notices: [...project.read.notices, notice] })
  return read.ok ? ok({ ...project, faces, read: read.value }) : read
}

/** Whether two plans differ at most in where their nodes are. */
export function samePanels(a: Plan, b: Plan): boolean {
  return a.nodeCount === b.nodeCount && a.corner.length === b.corner.length && a.panelStart.every((start, p) => start === b.panelStart[p]) && a.corner.every((node, c) => node === b.corner[c])
}

function withNodesAt(faces: DrawnFaces, plan: Plan): DrawnFaces {
  const x = faces.x.slice()
  const y = faces.y.slice()
  nodePoints(faces).forEach((point, node) => {
    x[point] = plan.x[node]
    y[point] = plan.y[node]
  })
  return { ...faces, x, y }
}
