/**
 * What a user can meet is a value, never an exception: a Result holds either the answer or a Problem that says what is
 * wrong, where, and what to do about it. Exceptions are kept for broken invariants of our own (see `assert.ts`).
 */

/** Where a problem sits. Every key is optional; lengths are in the unit of the file. */
export interface Place {
  readonly file?: string
  /** 1-based line of a text file. */
  readonly line?: number
  /** An entity or element of the file, e.g. "LWPOLYLINE 2F". */
  readonly entity?: string
  readonly at?: readonly [x: number, y: number]
  /** Names on the plan, e.g. "P12" or "N4". */
  readonly names?: readonly string[]
  /** A field of a brief or project, e.g. "conditions[2].level". */
  readonly field?: string
}

export interface Problem {
  /** Stable word for programs, e.g. "not-a-number". */
  readonly code: string
  /** One clause for people, without the place and without a full stop. */
  readonly message: string
  readonly where: Place | null
  /** What the user can do, as a clause that follows "; ", or null. */
  readonly cure: string | null
}

export type Result<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly problem: Problem }

export const ok = <T>(value: T): Result<T> => ({ ok: true, value })

export function fail(code: string, message: string, where: Place | null = null, cure: string | null = null): { ok: false; problem: Problem } {
  return { ok: false, problem: { code, message, where, cure } }
}

/** The same problem, with what the caller knows about its place added; what is already known stays. */
export function placed(problem: Problem, where: Place): Problem {
  return { ...problem, where: { ...where, ...problem.where } }
}

/** The problem as one sentence: place, message, cure. */
export function sentence({ message, where, cure }: Problem): string {
  const parts: string[] = []
  if (where?.file !== undefined) parts.push(where.file)
  if (where?.line !== undefined) parts.push(`line ${where.line}`)
  if (where?.entity !== undefined) parts.push(where.entity)
  if (where?.field !== undefined) parts.push(where.field)
  if (where?.names !== undefined && where.names.length > 0) parts.push(where.names.slice(0, 6).join(', '))
  if (where?.at !== undefined) parts.push(`at ${plain(where.at[0])}, ${plain(where.at[1])}`)
  const head = parts.length > 0 ? `${parts.join(', ')}: ` : ''
  return `${head}${message}${cure === null ? '' : `; ${cure}`}.`
}

/** A coordinate for a sentence: at most six decimals, no trailing zeros. */
function plain(value: number): string {
  return Number.isFinite(value) ? String(Number(value.toFixed(6))) : String(value)
}
