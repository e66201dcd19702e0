/** What the reader did to a drawing, or offers to do, or asks. All coordinates are in the file's own unit and place. */

export type RepairCode =
  | 'split' | 'joined' | 'repeat' | 'loose-end' | 'chords' | 'flattened' | 'tiny-face' | 'left-out' | 'unit-assumed'
  | 'double-lines' | 'unit' | 'which-lines' | 'straighten' | 'square' | 'equalise' | 'symmetric' | 'levels'

/** Codes of what the reader offers and does not do unasked. */
export const proposalCodes = ['double-lines', 'unit', 'which-lines', 'straighten', 'square', 'equalise', 'symmetric', 'levels'] as const satisfies readonly RepairCode[]

export interface Repair {
  readonly code: RepairCode
  /** applied: done, since it is safe; proposed: offered and not done; accepted: offered, taken by the user, done. */
  readonly state: 'applied' | 'proposed' | 'accepted'
  readonly count: number
  /** A sentence for people, without the count's places. */
  readonly message: string
  readonly where: readonly (readonly [x: number, y: number])[]
}

export interface Question {
  readonly code: RepairCode
  readonly message: string
  /** The options that answer it, as typed on the command line. */
  readonly options: readonly string[]
}

/** What a file holds and the reader did not take: a kind of entity on a layer, and how often. */
export interface LeftOut {
  readonly kind: string
  readonly layer: string
  readonly count: number
}
