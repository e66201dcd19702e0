/** The project file as JSON Schema, draft 2020-12: what it is checked against. Its brief has the schema of briefs. */
import { units } from '../../base/length.ts'
import { briefSchema } from './brief-schema.ts'
import type { ObjectSchema, Schema, SchemaDocument } from './schema.ts'

const record = (description: string, properties: Readonly<Record<string, Schema>>, required: readonly string[]): ObjectSchema =>
  ({ type: 'object', description, properties, required, additionalProperties: false })

const listOf = (items: Schema, description: string, minItems = 0): Schema => ({ type: 'array', items, description, minItems })

const text = (description: string): Schema => ({ type: 'string', maxLength: 10_000, description })
const count: Schema = { type: 'number', minimum: 0, description: 'how many' }
const heightOrNone: Schema = { oneOf: [{ type: 'number' }, { const: null }], description: 'a height; null: none' }

export const projectVersion = 1

export const projectSchema: SchemaDocument = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  title: 'Panewise project',
  description: 'A plan as it was read and accepted, and what is asked of its roof; no results. Lengths are in "unit" unless their name says otherwise.',
  type: 'object',
  properties: {
    panewise: { const: 'project' },
    version: { const: projectVersion },
    source: record('the drawing that the plan was read from', {
      name: text('its file name'),
      sha256: { type: 'string', pattern: '^[0-9a-f]{64}$', description: 'the SHA-256 of its bytes in hexadecimal digits' },
    }, ['name']),
    unit: { type: 'string', enum: units, description: 'unit of the plan' },
    nodes: listOf({ $ref: '#/$defs/point' }, 'x and y of each node, in the shortest digits that read back exactly; those that panels use are N1, N2, .. in this order', 3),
    faces: listOf(
      listOf({ type: 'number', minimum: 1, description: 'a node, by its number in the list of nodes' }, 'corners of a face, in turn', 3),
      'all bounded faces; those that are no voids are the panels P1, P2, .. in this order', 1,
    ),
    voids: listOf({ type: 'number', minimum: 1, description: 'a face, by its number in the list of faces' }, 'the faces that carry no panel'),
    heights: listOf(heightOrNone, 'the heights that the drawing gave, one entry a node'),
    bar_widths: listOf(listOf(heightOrNone, 'one entry a side, from its corner to the next; null: a single line'), 'widths of the bars along the sides of each face, in "unit"'),
    axes: listOf(record('a building axis', {
      name: text('its name'), from: { $ref: '#/$defs/point' }, to: { $ref: '#/$defs/point' },
    }, ['name', 'from', 'to']), 'building axes that the drawing names, in the plan\'s unit and place; they bound no panels'),
    reading: record('what reading the drawing did', {
      repairs: listOf(record('a repair', {
        code: text('its kind'), state: { type: 'string', enum: ['applied', 'accepted'], description: 'done of itself, or on a proposal that was taken' },
        count, message: text('a sentence'), where: listOf({ $ref: '#/$defs/point' }, 'where, in the coordinates of the drawing'),
      }, ['code', 'state', 'count', 'message', 'where']), 'what was repaired'),
      leftOut: listOf(record('a kind of entity', { kind: text('what it is'), layer: text('the layer it lies on'), count }, ['kind', 'layer', 'count']), 'what was not taken'),
      notices: listOf(text('a sentence'), 'what else there is to say'),
    }, []),
    brief: { $ref: '#/$defs/brief' },
    target: listOf(heightOrNone, 'heights that the roof comes near to, set by hand, one entry a node; they win over a shape and over "heights"'),
    least_slope_deg: { type: 'number', minimum: 0, exclusiveMaximum: 90, description: 'panels with less slope are marked; nothing is asked by it' },
  },
  required: ['panewise', 'version', 'source', 'unit', 'nodes', 'faces', 'brief'],
  additionalProperties: false,
  $defs: {
    ...briefSchema.$defs,
    brief: record(briefSchema.description ?? '', briefSchema.properties, briefSchema.required),
  },
}
