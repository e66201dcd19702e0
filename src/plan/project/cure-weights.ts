/** Kinds of cures by name, and how a brief weighs them against each other. */
import type { Schema } from './schema.ts'

export const cureCodes = ['accept-deviation', 'move-nodes', 'pack-rim', 'add-diagonals', 'remove-joints', 'release'] as const

export type CureCode = (typeof cureCodes)[number]

/** 1 where nothing is said; a kind with a lighter weight is offered sooner. */
export type CureWeights = Readonly<Partial<Record<CureCode, number>>>

export const cureWeightsSchema: Schema = {
  type: 'object',
  description: 'what cures cost you: the place of a kind in the list (1 accept-deviation to 8 release) is multiplied by its weight; default 1',
  properties: Object.fromEntries(cureCodes.map((code) => [code, { type: 'number', exclusiveMinimum: 0 }])),
  required: [],
  additionalProperties: false,
}
