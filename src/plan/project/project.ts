/**
 * The project file: the plan as accepted (voids are where no panel is), its unit, and what is asked of the roof; never the
 * results. The page and the command line read and write the same text, and the same project gives the same bytes.
 */
import { isUnit } from '../../base/length.ts'
import { fail, ok, placed, type Result } from '../../base/result.ts'
import { indexOfName } from '../names.ts'
import type { ReadPlan } from '../read-plan.ts'
import { planFromFaces } from '../subdivision.ts'
import { briefOf, type Brief } from './brief.ts'
import type { Condition } from './condition.ts'
import { readJson } from './json-text.ts'

export interface Project {
  /** Name of the drawing, for sentences. */
  readonly name: string
  readonly plan: ReadPlan
  readonly brief: Brief
  /** Names of conditions that are switched off. */
  readonly off: readonly string[]
  /** Degrees; null: none asked. */
  readonly leastSlope: number | null
  /** Heights to come near to (length nodeCount), set by hand; null: none. */
  readonly target: Float64Array | null
}

export const projectVersion = 1

interface Written {
  readonly panewise: unknown
  readonly version: unknown
  readonly name: unknown
  readonly unit: unknown
  readonly nodes: unknown
  readonly panels: unknown
  readonly heights?: unknown
  readonly target?: unknown
  readonly leastSlope_deg?: unknown
  readonly off?: unknown
  readonly brief: unknown
}

const known = ['panewise', 'version', 'name', 'unit', 'nodes', 'panels', 'heights', 'target', 'leastSlope_deg', 'off', 'brief']

/**
 * Reads a project; `file` is its name for sentences. Fails with the file and the field: "not-json", "not-a-project",
 * "newer-version", "damaged", and the codes of the brief and of `planFromFaces`.
 */
export function readProject(text: string, file: string): Result<Project> {
  const json = readJson(text, file)
  if (!json.ok) return json
  const { value } = json.value
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return fail('not-a-project', 'this is not a project', { file })
  const written = value as Written
  if (written.panewise !== 'project') return fail('not-a-project', 'this is not a project', { file, field: 'panewise' }, 'a project begins with "panewise": "project"')
  if (typeof written.version === 'number' && written.version > projectVersion) {
    return fail('newer-version', `this project has version ${written.version} and this program reads version ${projectVersion}`, { file, field: 'version' },
      'use a newer version of the program; the file was left as it is')
  }
  const damaged = (field: string, message: string): Result<never> => {
    const line = json.value.lineOf(field)
    return fail('damaged', message, { file, field, ...(line === undefined ? {} : { line }) }, 'open an older copy')
  }
  if (written.version !== projectVersion) return damaged('version', 'the version is missing')
  for (const key of Object.keys(written)) if (!known.includes(key)) return damaged(key, `a project has no field "${key.slice(0, 40)}"`)
  if (typeof written.name !== 'string') return damaged('name', 'the name is missing')
  if (typeof written.unit !== 'string' || !isUnit(written.unit)) return damaged('unit', 'the unit is missing')
  const points = pairs(written.nodes)
  if (points === null) return damaged('nodes', 'nodes are pairs of numbers')
  const faces = loops(written.panels, points.length / 2)
  if (faces === null) return damaged('panels', 'panels are lists of three or more of the nodes')

  const made = planFromFaces({
    unit: written.unit, x: points.filter((_, i) => i % 2 === 0), y: points.filter((_, i) => i % 2 === 1), start: faces.start, corner: faces.corner,
  })
  if (!made.ok) return { ok: false, problem: placed(made.problem, { file }) }
  const { plan, pointOfNode } = made.value
  const atNodes = (list: unknown): Float64Array | null => {
    const all = numbers(list, points.length / 2)
    return all === null ? null : Float64Array.from(pointOfNode, (point) => all[point])
  }
  const heights = written.heights === undefined ? null : atNodes(written.heights)
  if (written.heights !== undefined && heights === null) return damaged('heights', 'heights are one number or null a node')
  const target = written.target === undefined ? null : atNodes(written.target)
  if (written.target !== undefined && (target === null || target.some(Number.isNaN))) return damaged('target', 'a target has one number a node')
  const least = written.leastSlope_deg ?? null
  if (least !== null && !(typeof least === 'number' && least >= 0 && least < 90)) return damaged('leastSlope_deg', 'the least slope is an angle under 90')
  const off = written.off ?? []
  if (!Array.isArray(off) || !off.every((name) => typeof name === 'string')) return damaged('off', 'what is switched off is a list of names')
  const brief = briefOf(written.brief)
  if (!brief.ok) return { ok: false, problem: placed(brief.problem, { file }) }
  const read: ReadPlan = {
    plan, heights, marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] }, repairs: [], questions: [], leftOut: [], notices: [],
  }
  return ok({ name: written.name, plan: read, brief: brief.value, off, leastSlope: least as number | null, target })
}

function pairs(value: unknown): Float64Array | null {
  if (!Array.isArray(value)) return null
  const out = new Float64Array(2 * value.length)
  for (const [i, pair] of value.entries()) {
    if (!Array.isArray(pair) || pair.length !== 2 || !Number.isFinite(pair[0]) || !Number.isFinite(pair[1])) return null
    out.set(pair as number[], 2 * i)
  }
  return out
}

/** null in the list stands for no height. */
function numbers(value: unknown, count: number): Float64Array | null {
  if (!Array.isArray(value) || value.length !== count) return null
  if (!value.every((entry) => entry === null || (typeof entry === 'number' && Number.isFinite(entry)))) return null
  return Float64Array.from(value as (number | null)[], (entry) => entry ?? Number.NaN)
}

/** Panels as lists of node names. */
function loops(value: unknown, nodes: number): { start: Int32Array; corner: Int32Array } | null {
  if (!Array.isArray(value)) return null
  const start = [0]
  const corner: number[] = []
  for (const loop of value) {
    if (!Array.isArray(loop) || loop.length < 3) return null
    for (const name of loop) {
      const node = typeof name === 'string' ? indexOfName(name, 'N') : -1
      if (node < 0 || node >= nodes) return null
      corner.push(node)
    }
    start.push(corner.length)
  }
  return { start: Int32Array.from(start), corner: Int32Array.from(corner) }
}

/** The project as text: keys in one order, numbers in the shortest digits that read back exactly. */
export function projectText({ name, plan: { plan, heights }, brief, off, leastSlope, target }: Project): string {
  const list = (values: ArrayLike<number>): string => `[${Array.from(values, (value) => (Number.isFinite(value) ? JSON.stringify(value) : 'null')).join(', ')}]`
  const nodes = Array.from({ length: plan.nodeCount }, (_, i) => `    [${plan.x[i]}, ${plan.y[i]}]`)
  const panels = Array.from({ length: plan.panelCount }, (_, p) =>
    `    [${Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (node) => `"N${node + 1}"`).join(', ')}]`)
  const lines = [
    '  "panewise": "project"', `  "version": ${projectVersion}`, `  "name": ${JSON.stringify(name)}`, `  "unit": "${plan.unit}"`,
    `  "nodes": [\n${nodes.join(',\n')}\n  ]`, `  "panels": [\n${panels.join(',\n')}\n  ]`,
    ...(heights === null ? [] : [`  "heights": ${list(heights)}`]),
    ...(target === null ? [] : [`  "target": ${list(target)}`]),
    ...(leastSlope === null ? [] : [`  "leastSlope_deg": ${leastSlope}`]),
    ...(off.length === 0 ? [] : [`  "off": ${JSON.stringify(off)}`]),
    `  "brief": ${indented(JSON.stringify(writtenBrief(brief), null, 2))}`,
  ]
  return `{\n${lines.join(',\n')}\n}\n`
}

const indented = (text: string): string => text.replaceAll('\n', '\n  ')

/** A brief as its file says it: what was not said is left out, rims are words. */
export function writtenBrief(brief: Brief): Record<string, unknown> {
  const { unit, datum, rise, down, shape, flat_mm, voids, conditions } = brief
  return {
    panewise: 'brief', version: 1,
    ...(unit === null ? {} : { unit }), ...(datum === null ? {} : { datum }), ...(rise === null ? {} : { rise }), ...(down ? { down } : {}),
    ...(shape === null ? {} : { shape }), ...(flat_mm === null ? {} : { flat_mm }), ...(voids === null ? {} : { voids }),
    ...(conditions.length === 0 ? {} : { conditions: conditions.map(writtenCondition) }),
  }
}

function writtenCondition(condition: Condition): Record<string, unknown> {
  const out: Record<string, unknown> = {}
  for (const [key, value] of Object.entries(condition)) if (value !== null) out[key] = value
  if ('rim' in condition.at) out.at = { rim: condition.at.rim === 'outer' ? 'outer' : `void:${condition.at.rim[0]},${condition.at.rim[1]}` }
  return out
}
