/** The brief as JSON Schema, draft 2020-12: what `panewise help brief` prints, and what briefs are checked against. */
import { units } from '../../base/length.ts'
import { cureWeightsSchema } from './cure-weights.ts'
import { keepsSchema } from './keeps-wish.ts'
import type { ObjectSchema, Schema, SchemaDocument } from './schema.ts'

const number = (description: string): Schema => ({ type: 'number', description })

const decimal = String.raw`[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?`

/** A void's rim in text: "void:X,Y". */
export const voidPattern = `^void:(${decimal}),(${decimal})$`

const place = (field: string, schema: Schema, others: Readonly<Record<string, Schema>> = {}): ObjectSchema => ({
  type: 'object',
  properties: { [field]: schema, ...others },
  required: [field],
  additionalProperties: false,
})

const names = (description: string): Schema => ({ type: 'array', items: { type: 'string', minLength: 1 }, minItems: 1, description })

const spots = (letter: string, what: string): Schema => ({
  type: 'array',
  description: `${what} by name or by a point`,
  items: { oneOf: [{ type: 'string', pattern: `^[${letter}${letter.toLowerCase()}][1-9][0-9]{0,8}$`, description: `a name like ${letter}12` }, { $ref: '#/$defs/point' }] },
  minItems: 1,
})

/** A condition: its kind and place, the fields of its kind, and what all have. */
function kind(name: string, description: string, places: readonly string[], fields: Readonly<Record<string, Schema>>, required: readonly string[] = []): ObjectSchema {
  const refs: Schema[] = places.map((at) => ({ $ref: `#/$defs/${at}` }))
  const [only] = refs
  return {
    type: 'object',
    description,
    properties: {
      kind: { const: name },
      name: { type: 'string', minLength: 1, maxLength: 200, description: 'how reports call it; default: kind and number' },
      at: refs.length === 1 ? only : { oneOf: refs },
      ...fields,
      soft: { type: 'number', exclusiveMinimum: 0, description: 'weight of a wish; without it the condition must be met' },
      off: { type: 'boolean', description: 'true: the condition is kept here and not asked for; default: false' },
    },
    required: ['kind', 'at', ...required],
    additionalProperties: false,
  }
}

export const briefSchema: SchemaDocument = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  title: 'Panewise brief',
  description: 'What a roof must keep and should look like. Lengths are in "unit" unless their name ends in _mm; angles are in degrees.',
  type: 'object',
  properties: {
    panewise: { const: 'brief' },
    version: { const: 1 },
    unit: { type: 'string', enum: units, description: 'unit of the lengths and points in this brief; default: the plan\'s' },
    datum: number('level from which the rise counts, and of conditions that state none; default: 0, and the lowest node of the outer rim for the rise'),
    rise: { type: 'number', exclusiveMinimum: 0, description: 'highest node above the datum' },
    down: { type: 'boolean', description: 'the rise hangs down from the outer rim' },
    shape: { type: 'string', enum: ['dome', 'barrel', 'pitched', 'hipped'], description: 'starting shape' },
    flat_mm: { type: 'number', exclusiveMinimum: 0, description: 'out-of-flatness that a panel may have, in mm; default 1' },
    voids: { type: 'array', items: { $ref: '#/$defs/point' }, description: 'a point in each bounded face that is a void' },
    lines: {
      type: 'object',
      description: 'which lines of the drawing are read; what fits all that is said is',
      properties: {
        layers: names('names of layers; capitals do not matter'),
        colours: names('colours: names like red, numbers from 1 to 255, or #ff8000'),
        line_types: names('names of line types'),
        window: { type: 'array', items: { $ref: '#/$defs/point' }, minItems: 2, maxItems: 2, description: 'two opposite corners: what lies wholly within' },
        between: { type: 'array', items: { type: 'number' }, minItems: 2, maxItems: 2, description: 'two heights of the drawing: what lies between them, one storey of several' },
        inside: { oneOf: [{ type: 'string', minLength: 1, description: 'the layer of a closed line' }, { $ref: '#/$defs/point' }], description: 'what lies inside the closed line on a layer, or round a point' },
      },
      required: [],
      additionalProperties: false,
    },
    cures: cureWeightsSchema,
    keeps: keepsSchema,
    conditions: { type: 'array', items: { $ref: '#/$defs/condition' } },
  },
  required: ['panewise', 'version'],
  additionalProperties: false,
  $defs: {
    point: { type: 'array', items: { type: 'number' }, minItems: 2, maxItems: 2, description: 'x and y in the plan\'s coordinates' },
    nodes: place('nodes', spots('N', 'nodes'), {
      within_mm: { type: 'number', exclusiveMinimum: 0, description: 'how far from its node a point may lie; default 50' },
    }),
    run: place('run', {
      type: 'array',
      description: 'a polyline through points or named nodes: its nodes are those within 1 mm, or a millionth of the span if that is more, in its order',
      items: { oneOf: [{ type: 'string', pattern: '^[Nn][1-9][0-9]{0,8}$', description: 'a name like N12' }, { $ref: '#/$defs/point' }] },
      minItems: 2,
    }),
    rim: place('rim', {
      type: 'string',
      pattern: `^outer$|${voidPattern}`,
      description: '"outer" (all outer rims) or "void:X,Y" (the rim of the void that contains the point)',
    }),
    panels: place('panels', { oneOf: [{ const: 'all' }, spots('P', 'panels')] }),
    joints: place('joints', spots('J', 'joints')),
    section: {
      description: 'the shape of a profile over its run',
      oneOf: [
        place('arc', {
          type: 'object',
          description: 'a circular arc over the chord between the ends of the run; a negative rise sags',
          properties: { rise: number('height of the arc over its chord, in the middle') },
          required: ['rise'],
          additionalProperties: false,
        }),
        place('pitch_deg', { type: 'number', exclusiveMinimum: -90, exclusiveMaximum: 90, description: 'two equal slopes that meet over the middle' }),
        place('points', {
          type: 'array',
          description: 'a polyline of [along, level]: along from the first point of the run, rising; levels absolute',
          items: { type: 'array', items: { type: 'number' }, minItems: 2, maxItems: 2 },
          minItems: 2,
        }),
      ],
    },
    condition: {
      oneOf: [
        kind('level', 'all nodes at one level', ['nodes', 'run', 'rim', 'panels'], { level: number('default: the datum') }),
        kind('fall', 'heights fall evenly along a run, from its first point to its last', ['run'], {
          per_mille: number('fall per thousand of plan length; negative: it climbs'),
          level: number('level at the first point of the run; without it the level is left open'),
        }, ['per_mille']),
        kind('straight', 'a run stays straight in space: heights change evenly along it', ['run'], {}),
        kind('equal', 'all nodes at the same level, whichever', ['nodes', 'run', 'rim'], {}),
        kind('coplanar', 'all panels in one plane, whichever', ['panels'], {}),
        kind('plane', 'each panel at this pitch and bearing', ['panels'], {
          pitch_deg: { type: 'number', minimum: 0, exclusiveMaximum: 90, description: 'slope' },
          bearing_deg: number('downhill direction, clockwise from +y'),
        }, ['pitch_deg', 'bearing_deg']),
        kind('flush', 'the two panels of each joint in one plane', ['joints'], {}),
        kind('form-force', 'the form force of each joint: the jump of slope across it, which carries no load; more than 0 is a valley, less a ridge', ['joints'], {
          force: {
            oneOf: [
              number('slope on the left less slope on the right, rise over run: 0.1 folds a level panel by 5.7 degrees'),
              { type: 'string', enum: ['ridge', 'valley', 'flush'], description: 'the sign alone: a ridge or a valley of at least 0.6 degrees, or no fold' },
            ],
          },
        }, ['force']),
        kind('bounds', 'all nodes between two levels, or on one side of one', ['nodes', 'run', 'rim', 'panels'], {
          least: number('no node lower than this level'),
          most: number('no node higher than this level'),
        }),
        kind('one-way', 'joints, or all joints between two of the panels, fold one way', ['joints', 'panels'], {
          fold: { type: 'string', enum: ['ridge', 'valley', 'no-ridge', 'no-valley'], description: 'ridge and valley: by at least 0.6 degrees; no-ridge and no-valley: a joint may stay flat' },
        }, ['fold']),
        kind('slope', 'no panel flatter or steeper than this', ['panels'], {
          least_deg: { type: 'number', minimum: 0, exclusiveMaximum: 90, description: 'least slope, on the side to which the panel falls' },
          most_deg: { type: 'number', exclusiveMinimum: 0, exclusiveMaximum: 90, description: 'largest slope' },
        }),
        kind('no-ponding', 'water runs off: no node inside, and no nodes at one level, lower than all their neighbours', ['panels'], {}),
        kind('profile', 'the nodes of a run, or nodes in order, held to a section', ['run', 'nodes'], {
          section: { $ref: '#/$defs/section' },
          level: number('level of both ends of an arc or pitch; default: the datum'),
        }, ['section']),
      ],
    },
  },
}
