/**
 * What an entity of a DXF is, before blocks are put in place: coordinates are those of the block (or model) it stands
 * in. A DXF needs this step since blocks are defined once and placed many times, and since layers, blocks and entities
 * may come in any order.
 */
import type { Curve } from './chords.ts'
import type { Placing } from './dxf-placing.ts'

export type Shape = Path | Mesh | Mark | Insert | Text | Other

export interface Common {
  /** Name of the layer as written; "0" inside a block means the layer of the insert. */
  readonly layer: string
  /** 1-based line at which the entity starts. */
  readonly line: number
  /** "LINE 2F". */
  readonly entity: string
  /** "LINE", for counts. */
  readonly kind: string
  readonly invisible: boolean
  /** In paper space: on a sheet, not in the model. */
  readonly onPaper: boolean
  /** "1" to "255" or "#rrggbb"; null: by its layer; "0": by the block it is in. */
  readonly colour: string | null
  /** In capitals; null: by its layer; "BYBLOCK": by the block it is in. */
  readonly lineType: string | null
}

/** Straight and curved pieces, end to end. */
export interface Path extends Common {
  readonly shape: 'path'
  /** Corners x y z .. */
  readonly points: readonly number[]
  /** curves[i] runs from corner i to the next (the last one of a closed path to the first); null where all are straight. */
  readonly curves: readonly (Curve | null)[] | null
  readonly closed: boolean
  /** Whether z is drawn as a height, or comes with the flat figure's own plane. */
  readonly heights: boolean
  /** Set for whole circles of no other shape: centre in the entity's surroundings, and radius. */
  readonly round?: { readonly centre: readonly [x: number, y: number, z: number]; readonly radius: number }
}

/** Faces on shared points. */
export interface Mesh extends Common {
  readonly shape: 'mesh'
  readonly points: readonly number[]
  /** Face f has the corners corner[start[f] .. start[f + 1]), indices of points. */
  readonly start: readonly number[]
  readonly corner: readonly number[]
  /** hidden[i] = 1: the edge from corner i to the next of its face is marked invisible; null where none is. */
  readonly hidden: readonly number[] | null
}

export interface Mark extends Common {
  readonly shape: 'mark'
  readonly point: readonly [x: number, y: number, z: number]
}

/** Words: TEXT, MTEXT, and attributes of a block that is put in place. */
export interface Text extends Common {
  readonly shape: 'text'
  readonly text: string
  readonly at: readonly [x: number, y: number, z: number]
  readonly middle: readonly [x: number, y: number, z: number]
  readonly height: number
  /** Attributes: their name, and where their block stands. */
  readonly tag: string | null
  readonly block: readonly [x: number, y: number, z: number] | null
}

/** A block put in place, once or in columns and rows. */
export interface Insert extends Common {
  readonly shape: 'insert'
  readonly block: string
  /** Block coordinates (base point not yet taken off) to those of the surroundings, for column 0 and row 0. */
  readonly placing: Placing
  readonly columns: number
  readonly rows: number
  /** From one column, one row to the next, in the surroundings. */
  readonly columnStep: readonly [x: number, y: number, z: number]
  readonly rowStep: readonly [x: number, y: number, z: number]
}

/** Something that is not taken; `kind` says what. */
export interface Other extends Common {
  readonly shape: 'other'
}

export interface Block {
  readonly name: string
  readonly base: readonly [x: number, y: number, z: number]
  /** Whether its content is in another file. */
  readonly external: boolean
  readonly shapes: Shape[]
}
