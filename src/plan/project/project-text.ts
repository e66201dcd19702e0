/** The project file as text: the same project gives the same bytes. */
import { writtenBrief } from './brief-text.ts'
import { documentText } from './document-text.ts'
import { atPoints, type Project } from './project-record.ts'
import { projectVersion } from './project-schema.ts'
import { nodePoints } from '../drawn-faces.ts'

export const projectText = (project: Project): string => documentText(writtenProject(project))

/** The same on one line, a tenth of the work: what is kept after every step. It reads back as the same project. */
export const projectLine = (project: Project): string => JSON.stringify(writtenProject(project))

function writtenProject({ name, sha256, faces, read, brief, target, leastSlope }: Project): object {
  const { unit, x, y, start, corner, isVoid } = faces
  const list = (values: Float64Array | null): (number | null)[] | undefined =>
    values === null ? undefined : Array.from(values, (value) => (Number.isNaN(value) ? null : value))
  const numbers = (indices: Iterable<number>): number[] => Array.from(indices, (index) => index + 1)
  const voids = numbers(isVoid.keys()).filter((number) => isVoid[number - 1] === 1)
  const { repairs, leftOut, notices } = read
  const said = repairs.length + leftOut.length + notices.length > 0
  return {
    panewise: 'project',
    version: projectVersion,
    source: { name, sha256: sha256 ?? undefined },
    unit,
    nodes: Array.from(x, (value, i) => [value, y[i]]),
    faces: Array.from(isVoid, (_, f) => numbers(corner.subarray(start[f], start[f + 1]))),
    voids: voids.length === 0 ? undefined : voids,
    heights: list(faces.heights),
    bar_widths: faces.barWidth === undefined ? undefined : Array.from(isVoid, (_, f) => list(faces.barWidth?.subarray(start[f], start[f + 1]) ?? null)),
    axes: read.axes?.map(({ name, from, to }) => ({ name, from, to })),
    reading: said ? { repairs, leftOut, notices } : undefined,
    brief: writtenBrief(brief),
    target: list(atPoints(target, nodePoints(faces), x.length)),
    least_slope_deg: leastSlope ?? undefined,
  }
}
