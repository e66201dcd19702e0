/**
 * JSON (RFC 8259) read with places: the value, and the line on which each field stands, so that what is wrong with a field
 * can be shown in the file. A field given twice is an error here; the standard leaves it open and one of the two is lost.
 */
import { fail, ok, placed, type Problem, type Result } from '../../base/result.ts'

export interface JsonText {
  readonly value: unknown
  /** 1-based line of the field with a path like "conditions[2].level"; the whole text has the path "". */
  lineOf(path: string): number | undefined
  /** Line of the field, or where the path is no field of the text, of the innermost field on it that is. */
  lineNear(path: string): number | undefined
}

/** The problem with the file, and the line of its field or of what contains it. */
export function placedIn(problem: Problem, json: JsonText, file: string): Problem {
  const line = json.lineNear(problem.where?.field ?? '')
  return placed(problem, line === undefined ? { file } : { file, line })
}

/** Deeper nesting than any document of ours, and shallow enough for the stack. */
const deepest = 100

const token = /[ \t\r\n]*(?:([{}[\],:])|("(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*")|(-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?)|(true|false|null))/y

/** The path of a field inside the path of its object. */
export const fieldPath = (path: string, field: string): string => (path === '' ? field : `${path}.${field}`)

/** Fails with "not-json" or "field-twice" and the line; `file` is the name for sentences. */
export function readJson(text: string, file: string): Result<JsonText> {
  const source = text.startsWith('\uFEFF') ? text.slice(1) : text
  const plain = parsed(source, file, null)
  // Only what is wrong needs places, and large documents have a million of them.
  if (!plain.ok) {
    const wrong = parsed(source, file, new Map())
    return wrong.ok ? plain : wrong
  }
  let places: Map<string, number> | null = null
  const lineOf = (path: string): number | undefined => {
    if (places === null) parsed(source, file, (places = new Map()))
    return places.get(path)
  }
  return ok({ value: plain.value, lineOf, lineNear: (path) => lineNear(path, lineOf) })
}

function lineNear(path: string, lineOf: JsonText['lineOf']): number | undefined {
  for (let at = path; at !== ''; ) {
    const line = lineOf(at)
    if (line !== undefined) return line
    const container = at.replace(/(?:\.[^.[]*|\[\d+\])$/, '')
    at = container === at ? '' : container
  }
  return undefined
}

/** `lines` takes the line of every field, by its path; null: paths are not kept. */
function parsed(source: string, file: string, lines: Map<string, number> | null): Result<unknown> {
  let at = 0
  let line = 1
  let counted = 0

  const lineAt = (position: number): number => {
    for (; counted < position; counted += 1) if (source.charCodeAt(counted) === 10) line += 1
    return line
  }
  const wrong = (expected: string): { ok: false; problem: Problem } => {
    const rest = source.slice(at).trimStart()
    const position = source.length - rest.length
    const found = rest === '' ? 'the text ends' : `${/^\S{1,24}/.exec(rest)?.[0] ?? ''} stands`
    return fail('not-json', `${found} where ${expected} should be`, { file, line: lineAt(position) }, 'correct the JSON there')
  }
  const read = (): RegExpExecArray | null => {
    token.lastIndex = at
    const match = token.exec(source)
    if (match !== null) at = token.lastIndex
    return match
  }
  const peek = (): string | undefined => {
    token.lastIndex = at
    return token.exec(source)?.[1]
  }

  const value = (path: string, depth: number): Result<unknown> => {
    if (depth > deepest) return fail('not-json', `values lie more than ${deepest} deep in each other`, { file, line: lineAt(at) })
    const match = read()
    if (match === null) return wrong('a value')
    lines?.set(path, lineAt(at - match[0].trimStart().length))
    const [, mark, string, number, word] = match
    if (string !== undefined) return ok(JSON.parse(string) as unknown)
    if (number !== undefined) return ok(Number(number))
    if (word !== undefined) return ok(word === 'null' ? null : word === 'true')
    if (mark === '[') return array(path, depth)
    if (mark === '{') return object(path, depth)
    at -= match[0].trimStart().length
    return wrong('a value')
  }
  const array = (path: string, depth: number): Result<unknown[]> => {
    const list: unknown[] = []
    if (peek() === ']') {
      read()
      return ok(list)
    }
    for (;;) {
      const item = value(lines === null ? '' : `${path}[${list.length}]`, depth + 1)
      if (!item.ok) return item
      list.push(item.value)
      const mark = peek()
      if (mark !== ',' && mark !== ']') return wrong('"," or "]"')
      read()
      if (mark === ']') return ok(list)
    }
  }
  const object = (path: string, depth: number): Result<Record<string, unknown>> => {
    const fields = new Map<string, unknown>()
    if (peek() === '}') {
      read()
      return ok({})
    }
    for (;;) {
      const before = at
      const name = read()?.[2]
      if (name === undefined) {
        at = before
        return wrong('a field name in quotes')
      }
      const field = JSON.parse(name) as string
      const inside = lines === null ? '' : fieldPath(path, field)
      if (fields.has(field)) return fail('field-twice', 'this field is given twice', { file, line: lineAt(at), field: inside }, 'keep one of them')
      if (peek() !== ':') return wrong('":"')
      read()
      const item = value(inside, depth + 1)
      if (!item.ok) return item
      fields.set(field, item.value)
      const mark = peek()
      if (mark !== ',' && mark !== '}') return wrong('"," or "}"')
      read()
      // fromEntries defines plain fields, so that a field named __proto__ stays one.
      if (mark === '}') return ok(Object.fromEntries(fields))
    }
  }

  if (source.trim() === '') return fail('empty', 'the file is empty', { file })
  const whole = value('', 0)
  if (!whole.ok) return whole
  if (source.slice(at).trim() !== '') return wrong('the end')
  return whole
}
