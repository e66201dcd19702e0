/**
 * What a file holds, before anything is made of it: the plain record that every reader of a format returns and that
 * `from-drawing.ts` turns into a plan. Coordinates are as written in the file, in the file's unit, y up, never shifted.
 */
import type { Unit } from '../base/length.ts'
import type { LeftOut, Repair } from '../base/repair.ts'

export interface Drawing {
  /** Format for people: "OBJ", "DXF". */
  readonly format: string
  /** Unit that the file states, null when it states none. */
  readonly unit: Unit | null
  /**
   * Paper size: true where the lengths are sizes on paper (SVG), so that a scale 1:N multiplies them. Never true for
   * model formats.
   */
  readonly onPaper: boolean
  /** Points x y z x y z ..; z is 0 where the format or entity has none. */
  readonly points: Float64Array
  /** 1 where the point's z was stated by the file as a height (not a default 0). Length points / 3. */
  readonly hasHeight: Uint8Array
  /** Names of the layers; entities refer to them by index. Formats without layers have one, named "". */
  readonly layers: readonly string[]
  /** Closed outlines and mesh faces. */
  readonly outlines: Loops
  /** Closed outlines that bound a void (interior rings). */
  readonly holes: Loops
  /** Open line work: segment i runs from point segments[2 i] to segments[2 i + 1]. */
  readonly segments: Int32Array
  readonly segmentLayer: Int32Array
  /** 1-based line of the file where the segment's entity starts; 0 when unknown. */
  readonly segmentLine: Int32Array
  /** Single points (DXF POINT): indices into `points`, with their layers. Levels may be taken from them. */
  readonly marks: Int32Array
  readonly markLayer: Int32Array
  /** How things are drawn, where the format says so: segments and loops refer to looks by index. */
  readonly looks?: readonly Look[]
  readonly segmentLook?: Int32Array
  /** Texts and attributes of blocks, in the drawing's coordinates. */
  readonly texts?: readonly DrawnText[]
  /** Whole circles: each is an outline too, chorded. */
  readonly circles?: readonly DrawnCircle[]
  /** Blocks of the model that stand off level 0. */
  readonly blocks?: readonly PlacedBlock[]
  readonly leftOut: readonly LeftOut[]
  /** What reading itself had to do: code "chords", "flattened". */
  readonly repairs: readonly Repair[]
}

/** How a thing is drawn. */
export interface Look {
  /** Kind of its entity, for counts: "LINE". */
  readonly kind: string
  /** "1" to "255", or "#rrggbb". */
  readonly colour: string
  /** Name of its line type; "CONTINUOUS" where none is said. */
  readonly lineType: string
}

export interface DrawnText {
  readonly text: string
  /** Where it is anchored .. */
  readonly at: readonly [x: number, y: number]
  /** .. and its middle, by the usual width of letters. */
  readonly middle: readonly [x: number, y: number]
  readonly height: number
  /** Name of its layer. */
  readonly layer: string
  /** Kind of its entity, for counts: "TEXT". */
  readonly kind: string
  /** Attributes of a block: the attribute's name, and where the block stands. */
  readonly tag: string | null
  readonly block: readonly [x: number, y: number, z: number] | null
}

export interface PlacedBlock {
  readonly name: string
  readonly at: readonly [x: number, y: number, z: number]
  readonly layer: string
}

export interface DrawnCircle {
  /** First point of its outline. */
  readonly point: number
  readonly at: readonly [x: number, y: number]
  readonly radius: number
}

/** Closed polygons as point indices: loop i is point[start[i] .. start[i + 1]), the first point not repeated. */
export interface Loops {
  readonly start: Int32Array
  readonly point: Int32Array
  readonly layer: Int32Array
  /** 1-based line of the file where the loop's entity starts; 0 when unknown. */
  readonly line: Int32Array
  /** Index into the drawing's looks; absent where the format says nothing of them. */
  readonly look?: Int32Array
}
