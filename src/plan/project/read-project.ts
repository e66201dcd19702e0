/** Reads a project file. */
import { conversion, isUnit } from '../../base/length.ts'
import { fail, ok, placed, type Problem, type Result } from '../../base/result.ts'
import type { LeftOut, Repair } from '../../base/repair.ts'
import type { Axis } from '../axes.ts'
import { nodePoints, type DrawnFaces } from '../drawn-faces.ts'
import { briefOf } from './brief.ts'
import { placedIn, readJson } from './json-text.ts'
import { atNodes, readFaces, type Project } from './project-record.ts'
import { projectSchema, projectVersion } from './project-schema.ts'
import { misfit } from './schema.ts'
import { withVoids } from './turned-face.ts'

/** Which document of ours a text is, judged by its head; null: none. */
export function documentKind(text: string): 'project' | 'brief' | null {
  const kind = /^\uFEFF?\s*\{[^{}]{0,2000}?"panewise"\s*:\s*"(project|brief)"/.exec(text)?.[1]
  return kind === 'project' || kind === 'brief' ? kind : null
}

const leftAsItIs = 'open an older copy; this file was left as it is'

/**
 * The project in a text; `file` is its name for sentences. Fails with the file, the line and the field: "not-a-project",
 * "newer-version", "damaged", and the codes of briefs and of `planFromFaces`.
 */
export function readProject(text: string, file: string): Result<Project> {
  const json = readJson(text, file)
  if (!json.ok) {
    const { problem } = json
    if (problem.code === 'empty') return json
    const what = text.trimEnd().endsWith('}') ? problem.message : 'it ends in the middle'
    return { ok: false, problem: { ...problem, code: 'damaged', message: `the project is damaged: ${what}`, cure: leftAsItIs } }
  }
  const foreign = foreignDocument(json.value.value)
  if (foreign !== null) return { ok: false, problem: placed(foreign, { file }) }
  const project = projectIn(json.value.value as WrittenProject)
  return project.ok ? project : { ok: false, problem: placedIn(project.problem, json.value, file) }
}

/** As the schema has it, once it is checked. */
interface WrittenProject {
  readonly source: { readonly name: string; readonly sha256?: string }
  readonly unit: string
  readonly nodes: readonly (readonly [number, number])[]
  readonly faces: readonly (readonly number[])[]
  readonly voids?: readonly number[]
  readonly heights?: readonly (number | null)[]
  readonly reading?: { readonly repairs?: readonly Repair[]; readonly leftOut?: readonly LeftOut[]; readonly notices?: readonly string[] }
  readonly bar_widths?: readonly (readonly (number | null)[])[]
  readonly axes?: readonly Axis[]
  readonly brief: unknown
  readonly target?: readonly (number | null)[]
  readonly least_slope_deg?: number
}

function foreignDocument(value: unknown): Problem | null {
  const isObject = typeof value === 'object' && value !== null && !Array.isArray(value)
  const { panewise, version } = isObject ? value as { panewise?: unknown; version?: unknown } : {}
  if (panewise !== 'project') {
    const message = typeof panewise === 'string' ? `this is a ${panewise.slice(0, 40)}, not a project` : 'this is not a project'
    return fail('not-a-project', message, { field: 'panewise' }, 'a project begins with "panewise": "project"').problem
  }
  if (typeof version === 'number' && version > projectVersion) {
    return fail('newer-version', `this project has version ${version} and this program reads version ${projectVersion}`, { field: 'version' },
      'use a newer version of the program; this file was left as it is').problem
  }
  return null
}

function projectIn(written: WrittenProject): Result<Project> {
  // The brief first: its own messages are to the point, also for what a newer program asks.
  const brief = briefOf(written.brief ?? {})
  if (!brief.ok && written.brief !== undefined) return { ok: false, problem: inside(brief.problem, 'brief') }
  const wrong = misfit(projectSchema, written)
  if (wrong !== null) return { ok: false, problem: wrong }
  if (!brief.ok) return brief
  const faces = facesIn(written)
  if (!faces.ok) return faces
  const count = written.nodes.length
  for (const field of ['heights', 'target'] as const) {
    const list = written[field]
    if (list !== undefined && list.length !== count) return damaged(`there are ${count} nodes and ${list.length} ${field === 'heights' ? 'heights' : 'target heights'}`, field)
  }
  const { repairs = [], leftOut = [], notices = [] } = written.reading ?? {}
  const read = readFaces(faces.value, { repairs, leftOut, notices, ...(written.axes === undefined ? {} : { axes: written.axes }) })
  if (!read.ok) return read
  const project: Project = {
    name: written.source.name, sha256: written.source.sha256 ?? null, faces: faces.value, read: read.value, brief: { ...brief.value, voids: null },
    target: atNodes(numbersOf(written.target), nodePoints(faces.value)), leastSlope: written.least_slope_deg ?? null,
  }
  const factor = conversion(brief.value.unit ?? faces.value.unit, faces.value.unit)
  return withVoids(project, (brief.value.voids ?? []).map(([x, y]) => [x * factor, y * factor]))
}

function facesIn({ unit, nodes, faces, voids = [], heights, bar_widths: bars }: WrittenProject): Result<DrawnFaces> {
  const start = new Int32Array(faces.length + 1)
  faces.forEach((face, f) => (start[f + 1] = start[f] + face.length))
  const corner = new Int32Array(start[faces.length])
  for (const [f, face] of faces.entries()) {
    for (const [k, number] of face.entries()) {
      if (!Number.isInteger(number) || number > nodes.length) return damaged(`there is no node ${number}, the project has ${nodes.length}`, `faces[${f}][${k}]`)
      corner[start[f] + k] = number - 1
    }
  }
  const isVoid = new Uint8Array(faces.length)
  for (const [k, number] of voids.entries()) {
    if (!Number.isInteger(number) || number > faces.length) return damaged(`there is no face ${number}, the project has ${faces.length}`, `voids[${k}]`)
    isVoid[number - 1] = 1
  }
  const uneven = bars === undefined ? -1 : bars.length !== faces.length ? 0 : bars.findIndex((own, f) => own.length !== faces[f].length)
  if (uneven >= 0) return damaged('the widths of bars are not one for each side of each face', 'bar_widths')
  return ok({
    ...(bars === undefined ? {} : { barWidth: Float64Array.from(bars.flat(), (value) => value ?? NaN) }),
    unit: isUnit(unit) ? unit : 'm', x: Float64Array.from(nodes, ([x]) => x), y: Float64Array.from(nodes, ([, y]) => y),
    heights: numbersOf(heights), start, corner, isVoid,
  })
}

function numbersOf(list: readonly (number | null)[] | undefined): Float64Array | null {
  return list === undefined ? null : Float64Array.from(list, (value) => value ?? NaN)
}

const damaged = (message: string, field: string): { ok: false; problem: Problem } => fail('damaged', message, { field }, leftAsItIs)

/** The problem of a document within the field of another. */
function inside(problem: Problem, field: string): Problem {
  const inner = problem.where?.field
  return { ...problem, where: { ...problem.where, field: inner === undefined ? field : `${field}.${inner}` } }
}
