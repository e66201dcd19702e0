/**
 * What a user can ask for besides the brief: one record that the command line and the page both fill. null (or false)
 * stands for what was not asked; options win over the brief.
 */
import type { Unit } from '../../base/length.ts'
import type { Point } from './condition.ts'
import type { Shape } from './brief.ts'
import { noKeeps, type KeepOptions, type TypedLength } from './keep-options.ts'


/** The bytes of a file and the name it goes by in sentences. */
export interface NamedFile {
  readonly name: string
  readonly bytes: Uint8Array
}

/** Levels by place, from a list of a surveyor or of points on a layer. */
export interface LevelRow {
  /** null: called by its number. */
  readonly name: string | null
  readonly at: Point
  readonly level: number
  /** Other places that it may mean: words beside a cross. */
  readonly elsewhere?: readonly Point[]
}

export interface Levels {
  /** Name of the file for sentences. */
  readonly source: string
  /** Unit of the rows; null: the plan's. */
  readonly unit: Unit | null
  readonly rows: readonly LevelRow[]
  /** The same rows read otherwise, each with what that is ("y, x, level"); taken where more of their places lie at nodes. */
  readonly otherwise?: readonly { readonly order: string; readonly rows: readonly LevelRow[] }[]
}

/** In the drawing's own coordinates and unit; the length as typed. */
export interface ScaleFrom {
  readonly from: Point
  readonly to: Point
  readonly length: TypedLength
}

export interface Options {
  // How the drawing is read.
  /** The drawing's unit, whatever the file says. */
  readonly unit: Unit | null
  /** N of a scale 1:N. */
  readonly scale: number | null
  readonly layers: readonly string[] | null
  /** Colours ("1" to "255", "#rrggbb") and line types of which lines are read; null or absent: all. */
  readonly colours?: readonly string[] | null
  readonly lineTypes?: readonly string[] | null
  /** Two corners, in the plan's coordinates, within which lines are read; null or absent: everywhere. */
  readonly window?: readonly [Point, Point] | null
  /** Two heights of the drawing, in the plan's unit, between which lines are read; null or absent: at all. */
  readonly between?: readonly [number, number] | null
  /** The layer of a closed line, or a point in one: only what lies inside is read. */
  readonly inside?: string | Point | null
  readonly snap_mm: number | null
  readonly sagitta_mm: number | null
  /** In the plan's coordinates; null: the brief's. */
  readonly voids: readonly Point[] | null
  /** Codes of proposals that the user takes, or "all". */
  readonly accept: readonly string[]
  /** Codes of proposals that the user leaves, or "all": their questions are answered with no. */
  readonly leave: readonly string[]
  /** Two points of the drawing and how far apart they truly are. */
  readonly scaleFrom: ScaleFrom | null

  // What must hold.
  /** free: the outer rim floats; level: it is level at the datum, or at this level. null: as the brief has it. */
  readonly rim: 'free' | 'level' | { readonly level: TypedLength } | null
  readonly datum: TypedLength | null
  readonly levels: Levels | null
  /** How far a level may lie from its node. */
  readonly levelsWithin: TypedLength | null
  /** Joints, or all of them, of which it is asked whether they can all fold one way. */
  readonly oneWay: readonly string[] | 'all' | null
  /** All panels at this pitch, falling towards this bearing (default 180, south). */
  readonly pitch_deg: number | null
  readonly bearing_deg: number | null

  // What it should look like.
  readonly rise: TypedLength | null
  readonly down: boolean
  readonly shape: Shape | null
  /** The roof folded along few joints (absent: the nearest one). */
  readonly fewestFolds?: boolean
  /** input: the heights in the drawing; none: not even those; or another file. */
  readonly target: 'input' | 'none' | NamedFile | null

  // When nodes may be moved.
  readonly keeps: KeepOptions
  /** A plan that lifts when no node moves by more than this lifts within its tolerance; null: the default. */
  readonly planTolerance_mm: number | null

  // How it is judged and written.
  readonly flat_mm: number | null
  readonly decimals: number | null
  readonly near: boolean
  readonly csv: 'comma' | 'semicolon'
  readonly full: boolean
}

export const noOptions: Options = {
  unit: null, scale: null, layers: null, snap_mm: null, sagitta_mm: null, voids: null, accept: [], leave: [], scaleFrom: null,
  rim: null, datum: null, levels: null, levelsWithin: null, oneWay: null, pitch_deg: null, bearing_deg: null,
  rise: null, down: false, shape: null, target: null,
  keeps: noKeeps, planTolerance_mm: null,
  flat_mm: null, decimals: null, near: false, csv: 'comma', full: false,
}
