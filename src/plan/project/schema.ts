/**
 * The part of JSON Schema (draft 2020-12) that our documents are described in, and the check of a value against it with
 * messages for people. The published schema is the validator: there is one description, not two that drift.
 */
import { never } from '../../base/assert.ts'
import { fail, type Problem } from '../../base/result.ts'
import { fieldPath } from './json-text.ts'
import { nearestWord } from './nearest-word.ts'

export interface ObjectSchema {
  readonly type: 'object'
  readonly title?: string
  readonly description?: string
  readonly properties: Readonly<Record<string, Schema>>
  readonly required: readonly string[]
  readonly additionalProperties: false
}

export interface ArraySchema {
  readonly type: 'array'
  readonly description?: string
  readonly items: Schema
  readonly minItems?: number
  readonly maxItems?: number
}

export interface NumberSchema {
  readonly type: 'number'
  readonly description?: string
  readonly minimum?: number
  readonly maximum?: number
  readonly exclusiveMinimum?: number
  readonly exclusiveMaximum?: number
}

export interface StringSchema {
  readonly type: 'string'
  readonly description?: string
  readonly minLength?: number
  readonly maxLength?: number
  /** A regular expression, and in `description` what it asks for. */
  readonly pattern?: string
  readonly enum?: readonly string[]
}

export interface ConstSchema {
  readonly const: string | number | boolean | null
  readonly description?: string
}

/** Branches exclude each other: objects by a `const` field or by a required field that only one has, else by type. */
export interface OneOfSchema {
  readonly oneOf: readonly Schema[]
  readonly description?: string
}

export interface RefSchema {
  readonly $ref: `#/$defs/${string}`
  readonly description?: string
}

export type Schema =
  | ObjectSchema
  | ArraySchema
  | NumberSchema
  | StringSchema
  | ConstSchema
  | OneOfSchema
  | RefSchema
  | { readonly type: 'boolean'; readonly description?: string }

export interface SchemaDocument extends ObjectSchema {
  readonly $schema: 'https://json-schema.org/draft/2020-12/schema'
  readonly $defs: Readonly<Record<string, Schema>>
}

/** What is wrong with the value, first in the order of the schema, with its field; null when it fits. */
export function misfit(document: SchemaDocument, value: unknown): Problem | null {
  return check(document, value, '', document.$defs)
}

type Defs = SchemaDocument['$defs']

function check(schema: Schema, value: unknown, path: string, defs: Defs): Problem | null {
  if ('$ref' in schema) {
    const target = defs[schema.$ref.slice('#/$defs/'.length)]
    return target === undefined ? null : check(target, value, path, defs)
  }
  if ('const' in schema) return value === schema.const ? null : wrong('wrong-value', path, `must be ${JSON.stringify(schema.const)}`)
  if ('oneOf' in schema) return checkOneOf(schema.oneOf, value, path, defs)
  switch (schema.type) {
    case 'object': return isObject(value) ? checkObject(schema, value, path, defs) : wrong('wrong-type', path, `must be an object, not ${typeWord(value)}`)
    case 'array': return Array.isArray(value) ? checkArray(schema, value, path, defs) : wrong('wrong-type', path, `must be a list, not ${typeWord(value)}`)
    case 'number': return typeof value === 'number' ? checkNumber(schema, value, path) : wrong('wrong-type', path, `must be a number, not ${typeWord(value)}`)
    case 'string': return typeof value === 'string' ? checkString(schema, value, path) : wrong('wrong-type', path, `must be a text, not ${typeWord(value)}`)
    case 'boolean': return typeof value === 'boolean' ? null : wrong('wrong-type', path, `must be true or false, not ${typeWord(value)}`)
    default: return never(schema)
  }
}

function checkObject(schema: ObjectSchema, value: Readonly<Record<string, unknown>>, path: string, defs: Defs): Problem | null {
  const known = Object.keys(schema.properties)
  for (const field of Object.keys(value)) {
    if (!Object.hasOwn(schema.properties, field)) return unknownField(field, path, known)
  }
  for (const field of schema.required) {
    if (!Object.hasOwn(value, field)) return wrong('missing-field', path, `the field "${field}" is missing`)
  }
  for (const field of known) {
    if (!Object.hasOwn(value, field)) continue
    const problem = check(schema.properties[field], value[field], fieldPath(path, field), defs)
    if (problem !== null) return problem
  }
  return null
}

function checkArray(schema: ArraySchema, value: readonly unknown[], path: string, defs: Defs): Problem | null {
  const { minItems = 0, maxItems = Infinity } = schema
  if (value.length < minItems || value.length > maxItems) {
    const wanted = minItems === maxItems ? `${minItems}` : value.length < minItems ? `${minItems} or more` : `at most ${maxItems}`
    return wrong('wrong-length', path, `must have ${wanted} ${wanted === '1 or more' || minItems !== 1 ? 'entries' : 'entry'}, not ${value.length}`)
  }
  for (const [i, item] of value.entries()) {
    // The place of an entry is written out only when there is something wrong with it: lists may be long.
    if (check(schema.items, item, '', defs) !== null) return check(schema.items, item, `${path}[${i}]`, defs)
  }
  return null
}

function checkNumber(schema: NumberSchema, value: number, path: string): Problem | null {
  if (!Number.isFinite(value)) return wrong('not-finite', path, 'is too large a number')
  if (schema.minimum !== undefined && value < schema.minimum) return wrong('out-of-range', path, `must be ${schema.minimum} or more, not ${value}`)
  if (schema.maximum !== undefined && value > schema.maximum) return wrong('out-of-range', path, `must be ${schema.maximum} or less, not ${value}`)
  if (schema.exclusiveMinimum !== undefined && value <= schema.exclusiveMinimum) {
    return wrong('out-of-range', path, `must be more than ${schema.exclusiveMinimum}, not ${value}`)
  }
  if (schema.exclusiveMaximum !== undefined && value >= schema.exclusiveMaximum) {
    return wrong('out-of-range', path, `must be less than ${schema.exclusiveMaximum}, not ${value}`)
  }
  return null
}

function checkString(schema: StringSchema, value: string, path: string): Problem | null {
  if (schema.enum !== undefined && !schema.enum.includes(value)) {
    return wrong('wrong-value', path, `"${value}" is none of ${schema.enum.join(', ')}`, meant(value, schema.enum))
  }
  if (schema.pattern !== undefined && !new RegExp(schema.pattern, 'u').test(value)) {
    return wrong('wrong-value', path, `"${value}" is not ${schema.description ?? 'what should stand here'}`)
  }
  const letters = [...value].length
  if (letters < (schema.minLength ?? 0)) return wrong('wrong-value', path, 'must not be empty')
  if (letters > (schema.maxLength ?? Infinity)) return wrong('wrong-value', path, `must have at most ${schema.maxLength} letters`)
  return null
}

/** The branch that the value means, judged by what sets branches apart, is checked; so its messages are to the point. */
function checkOneOf(branches: readonly Schema[], value: unknown, path: string, defs: Defs): Problem | null {
  const resolved = branches.map((branch) => ('$ref' in branch ? defs[branch.$ref.slice('#/$defs/'.length)] : branch))
  if (!isObject(value)) {
    const type = Array.isArray(value) ? 'array' : typeof value
    const fitting = resolved.filter((branch) => ('const' in branch ? typeof branch.const === type : 'type' in branch && branch.type === type))
    // Several branches of one type are told apart by trying them; the last one's message stands for all.
    let problem: Problem | null = wrong('wrong-type', path, `${typeWord(value)} cannot stand here`)
    for (const branch of fitting) {
      problem = check(branch, value, path, defs)
      if (problem === null) return null
    }
    return problem
  }
  const objects = resolved.filter((branch): branch is ObjectSchema => 'type' in branch && branch.type === 'object')
  const marks = [...new Set(objects.flatMap((branch) => Object.keys(branch.properties).filter((field) => 'const' in branch.properties[field])))]
  const [mark] = marks
  if (mark !== undefined) {
    if (!Object.hasOwn(value, mark)) return wrong('missing-field', path, `the field "${mark}" is missing`)
    const same = objects.find((branch) => check(branch.properties[mark], value[mark], '', defs) === null)
    if (same !== undefined) return checkObject(same, value, path, defs)
    const words = objects.flatMap((branch) => ('const' in branch.properties[mark] ? [String(branch.properties[mark].const)] : []))
    return wrong('wrong-value', fieldPath(path, mark), `${JSON.stringify(value[mark])} is none of ${words.join(', ')}`, meant(String(value[mark]), words))
  }
  const present = objects.find((branch) => branch.required.some((field) => Object.hasOwn(value, field)))
  if (present !== undefined) return checkObject(present, value, path, defs)
  const fields = objects.flatMap((branch) => branch.required)
  const [first] = Object.keys(value)
  if (first !== undefined) return unknownField(first, path, fields)
  return wrong('missing-field', path, `needs ${fields.map((field) => `"${field}"`).join(' or ')}`)
}

function unknownField(field: string, path: string, known: readonly string[]): Problem {
  const cure = meant(field, known) ?? (known.length > 12 ? null : `the fields here are ${known.join(', ')}`)
  return wrong('unknown-field', fieldPath(path, field), 'this field is not known', cure)
}

function meant(typed: string, words: readonly string[]): string | null {
  const word = nearestWord(typed, words)
  return word === null ? null : `perhaps "${word}" is meant`
}

const isObject = (value: unknown): value is Readonly<Record<string, unknown>> => typeof value === 'object' && value !== null && !Array.isArray(value)

function typeWord(value: unknown): string {
  if (value === null) return 'null'
  if (Array.isArray(value)) return 'a list'
  return { object: 'an object', string: 'a text', number: 'a number', boolean: 'true or false' }[typeof value as string] ?? typeof value
}

function wrong(code: string, path: string, message: string, cure: string | null = null): Problem {
  return fail(code, message, path === '' ? null : { field: path }, cure).problem
}
