/** What a brief says the plan keeps while its nodes are moved, and how it goes together with the options. */
import { keptPatterns, type KeepOptions, type KeptPattern } from './keep-options.ts'
import type { Schema } from './schema.ts'

/** As written in a brief: lengths in its unit, nodes and panels by name. */
export interface KeepsWish {
  readonly stay?: readonly string[]
  readonly rim_nodes?: KeepOptions['rimNodes']
  readonly bend?: boolean
  readonly largest_shift?: number
  readonly least_edge?: number
  readonly least_corner_deg?: number
  readonly patterns?: readonly KeptPattern[]
  readonly shapes?: readonly string[]
}

const named = (letter: string, description: string): Schema => ({
  type: 'array', description, minItems: 1,
  items: { type: 'string', pattern: `^[${letter}${letter.toLowerCase()}][1-9][0-9]{0,8}$`, description: `a name like ${letter}12` },
})

const length = (description: string): Schema => ({ type: 'number', exclusiveMinimum: 0, description })

export const keepsSchema: Schema = {
  type: 'object',
  description: 'what the plan keeps while nodes are moved (adjust, and the cure "move-nodes"); the options of the same names go before',
  properties: {
    stay: named('N', 'nodes that stay'),
    rim_nodes: { type: 'string', enum: ['slide', 'fixed', 'free'], description: 'rim nodes slide along their side, stay, or move freely; default: slide' },
    bend: { type: 'boolean', description: 'straight joint runs may bend; default: false' },
    largest_shift: length('no node moves further'),
    least_edge: length('no edge gets shorter'),
    least_corner_deg: { type: 'number', exclusiveMinimum: 0, maximum: 60, description: 'no corner gets sharper' },
    patterns: { type: 'array', items: { type: 'string', enum: keptPatterns }, minItems: 1, description: 'kept where the plan has them: equal bays, symmetry, nodes on building axes' },
    shapes: named('P', 'panels that keep their shape in the plan'),
  },
  required: [],
  additionalProperties: false,
}

/** The options with what the brief says where they say nothing; lists are joined. `factor`: the brief's unit in the plan's. */
export function keepsWith(options: KeepOptions, wish: KeepsWish | undefined, factor: number): KeepOptions {
  if (wish === undefined) return options
  const scaled = (value: number | undefined): number | null => (value === undefined ? null : value * factor)
  return {
    stay: [...new Set([...options.stay, ...(wish.stay ?? [])])],
    rimNodes: options.rimNodes === 'slide' ? wish.rim_nodes ?? 'slide' : options.rimNodes,
    bend: options.bend || wish.bend === true,
    largestShift: options.largestShift ?? scaled(wish.largest_shift),
    leastEdge: options.leastEdge ?? scaled(wish.least_edge),
    leastCorner_deg: options.leastCorner_deg ?? wish.least_corner_deg ?? null,
    keep: [...new Set([...options.keep, ...(wish.patterns ?? [])])],
    keepShape: [...new Set([...options.keepShape, ...(wish.shapes ?? [])])],
  }
}
