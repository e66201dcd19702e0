/** The brief: what a roof must keep and should look like, read from JSON. */
import { isUnit, type Unit } from '../../base/length.ts'
import { fail, ok, type Problem, type Result } from '../../base/result.ts'
import { briefSchema, voidPattern } from './brief-schema.ts'
import { kindsNotBuilt, type Condition, type Point } from './condition.ts'
import { placedIn, readJson } from './json-text.ts'
import { linesIn, type LinesWish, type WrittenLines } from './lines-wish.ts'
import type { KeepsWish } from './keeps-wish.ts'
import { misfit } from './schema.ts'
import type { CureWeights } from './cure-weights.ts'

export type Shape = 'dome' | 'barrel' | 'pitched' | 'hipped'

export const shapes: readonly Shape[] = ['dome', 'barrel', 'pitched', 'hipped']

/** Lengths and points are in `unit`; null stands for what the brief does not say. */
export interface Brief {
  /** null: the plan's unit. */
  readonly unit: Unit | null
  readonly datum: number | null
  readonly rise: number | null
  readonly down: boolean
  readonly shape: Shape | null
  readonly flat_mm: number | null
  /** null: not said; the plan then has no bounded face that is a void. */
  readonly voids: readonly Point[] | null
  /** Which lines of the drawing are read; null or absent: a guess is made. */
  readonly lines?: LinesWish | null
  /** Weights that change the order of cures; absent: none. */
  readonly cures?: CureWeights
  /** What the plan keeps while its nodes are moved; absent: what the options say. */
  readonly keeps?: KeepsWish
  readonly conditions: readonly Condition[]
}

export const emptyBrief: Brief = {
  unit: null, datum: null, rise: null, down: false, shape: null, flat_mm: null, voids: null, conditions: [],
}

export const briefVersion = 1

/**
 * Reads a brief; `file` is its name for sentences. Fails with the line and the field: "not-json", "not-a-brief",
 * "newer-version", "not-built-yet" and the codes of `schema.ts`.
 */
export function readBrief(text: string, file: string): Result<Brief> {
  const json = readJson(text, file)
  if (!json.ok) return json
  const brief = briefOf(json.value.value)
  return brief.ok ? brief : { ok: false, problem: placedIn(brief.problem, json.value, file) }
}

/** The brief in a value that JSON gave, also one that is part of another document. */
export function briefOf(value: unknown): Result<Brief> {
  const foreign = foreignDocument(value) ?? unbuiltKind(value) ?? misfit(briefSchema, value)
  if (foreign !== null) return { ok: false, problem: foreign }
  // The schema has checked every field that this type names.
  const written = value as WrittenBrief
  const unordered = unorderedSection(written.conditions ?? [])
  if (unordered !== null) return { ok: false, problem: unordered }
  const lines = linesIn(written.lines)
  if (!lines.ok) return lines
  const conditions = namedConditions(written.conditions ?? [])
  if (!conditions.ok) return conditions
  return ok({
    unit: written.unit !== undefined && isUnit(written.unit) ? written.unit : null,
    datum: written.datum ?? null,
    rise: written.rise ?? null,
    down: written.down ?? false,
    shape: shapes.find((shape) => shape === written.shape) ?? null,
    flat_mm: written.flat_mm ?? null,
    voids: written.voids ?? null,
    ...(written.lines === undefined ? {} : { lines: lines.value }),
    ...(written.cures === undefined ? {} : { cures: written.cures }),
    ...(written.keeps === undefined ? {} : { keeps: written.keeps }),
    conditions: conditions.value,
  })
}

interface WrittenBrief {
  readonly unit?: string
  readonly datum?: number
  readonly rise?: number
  readonly down?: boolean
  readonly shape?: string
  readonly flat_mm?: number
  readonly voids?: readonly Point[]
  readonly lines?: WrittenLines
  readonly cures?: CureWeights
  readonly keeps?: KeepsWish
  readonly conditions?: readonly WrittenCondition[]
}

interface WrittenCondition {
  readonly kind: string
  readonly name?: string
  readonly at: { readonly rim?: string }
  readonly section?: { readonly points?: readonly (readonly [number, number])[] }
  readonly level?: number
  readonly soft?: number
  readonly off?: boolean
}

function foreignDocument(value: unknown): Problem | null {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return fail('not-a-brief', 'this is not a brief').problem
  const { panewise, version } = value as { panewise?: unknown; version?: unknown }
  if (panewise !== 'brief') {
    const message = typeof panewise === 'string' ? `this is a ${panewise.slice(0, 40)}, not a brief` : 'this is not a brief'
    return fail('not-a-brief', message, { field: 'panewise' }, 'a brief begins with "panewise": "brief"').problem
  }
  if (typeof version === 'number' && version > briefVersion) {
    return fail('newer-version', `this brief has version ${version} and this program reads version ${briefVersion}`, { field: 'version' },
      'use a newer version of the program').problem
  }
  return null
}

/** Kinds that are named but not built are refused before their fields are judged, which nothing here knows. */
function unbuiltKind(value: unknown): Problem | null {
  const { conditions } = value as { conditions?: unknown }
  if (!Array.isArray(conditions)) return null
  for (const [i, condition] of conditions.entries()) {
    const kind = typeof condition === 'object' && condition !== null ? (condition as { kind?: unknown }).kind : undefined
    if (typeof kind === 'string' && kindsNotBuilt.includes(kind)) {
      return fail('not-built-yet', `the condition kind "${kind}" is not built yet`, { field: `conditions[${i}].kind` }, 'leave this condition out').problem
    }
  }
  return null
}

/** A polyline section goes forward along its run: a step in it would give one node two levels. */
function unorderedSection(conditions: readonly WrittenCondition[]): Problem | null {
  for (const [i, { section }] of conditions.entries()) {
    const points = section?.points ?? []
    for (let k = 1; k < points.length; k += 1) {
      if (points[k][0] > points[k - 1][0]) continue
      return fail('not-rising', `the distances along must rise from point to point, and ${points[k][0]} follows ${points[k - 1][0]}`,
        { field: `conditions[${i}].section.points[${k}]` }).problem
    }
  }
  return null
}

/** Conditions with every field: absent ones null, rims as points, and a name of its own for each. */
function namedConditions(written: readonly WrittenCondition[]): Result<readonly Condition[]> {
  const names = new Set<string>()
  for (const [i, { name }] of written.entries()) {
    if (name === undefined) continue
    if (names.has(name)) return fail('name-twice', `two conditions are called "${name}"`, { field: `conditions[${i}].name` }, 'give them names of their own')
    names.add(name)
  }
  const counts = new Map<string, number>()
  const nextName = (kind: string): string => {
    for (;;) {
      const count = (counts.get(kind) ?? 0) + 1
      counts.set(kind, count)
      const name = `${kind} ${count}`
      if (!names.has(name)) return name
    }
  }
  const hasLevel = ['level', 'fall', 'profile']
  return ok(written.map(({ off, ...condition }) => ({
    ...condition,
    name: condition.name ?? nextName(condition.kind),
    at: condition.at.rim === undefined ? condition.at : { rim: rimOf(condition.at.rim) },
    ...(hasLevel.includes(condition.kind) ? { level: condition.level ?? null } : {}),
    soft: condition.soft ?? null,
    ...(off === true ? { off } : {}),
  }) as unknown as Condition))
}

function rimOf(text: string): 'outer' | Point {
  const match = new RegExp(voidPattern).exec(text)
  return match === null ? 'outer' : [Number(match[1]), Number(match[2])]
}
