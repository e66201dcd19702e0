/** A drawing made into a plan, with everything the reader did and noticed on the way. */
import type { LeftOut, Question, Repair } from '../base/repair.ts'
import type { Axis } from './axes.ts'
import type { Plan } from './plan.ts'

/** How exactly a drawing seems to be drawn, from its ends, its runs and its digits. */
export interface Exactness {
  /** The largest distance at which ends were joined, in mm; 0 where all meet. */
  readonly meets_mm: number
  /** How far the worst node of a run that is nearly straight is off it, in mm. */
  readonly straight_mm: number
  /** The coarsest power of ten, in mm, of which nearly all coordinates are multiples; null: of none down to a micrometre. */
  readonly digit_mm: number | null
}

export interface ReadPlan {
  readonly plan: Plan
  /** Heights that the input gave, per node in the plan's unit; NaN where it gave none; null when it gave none at all. */
  readonly heights: Float64Array | null
  /** Marks (single points) of the drawing as x y z triples in the plan's unit, with the index of their layer. */
  readonly marks: { readonly points: Float64Array; readonly layer: Int32Array; readonly layers: readonly string[] }
  /** Width of the bar or gap that each edge was drawn with, per edge in the plan's unit, NaN for a single line; absent when no bars were reduced. */
  readonly barWidth?: Float64Array
  /** Building axes that the drawing names, in the plan's unit and place; absent where it names none. */
  readonly axes?: readonly Axis[]
  /** Levels of the drawing that hold, by node; absent where it states none. */
  readonly levels?: readonly NodeLevel[]
  /** How exactly the drawing seems to be drawn. */
  readonly exactness?: Exactness
  readonly repairs: readonly Repair[]
  readonly questions: readonly Question[]
  readonly leftOut: readonly LeftOut[]
  /** Sentences that belong to no repair. */
  readonly notices: readonly string[]
}

/** A level that a drawing states for a node. */
export interface NodeLevel {
  readonly node: number
  /** What the drawing calls it; null: nothing. */
  readonly name: string | null
  readonly at: readonly [x: number, y: number]
  /** In the plan's unit. */
  readonly level: number
}

/** How a drawing is to be read; lengths in mm as named, points in the drawing's own coordinates and unit. */
export interface ReadOptions {
  /** Overrides the unit that the file states. */
  readonly unit: 'mm' | 'cm' | 'm' | 'in' | 'ft' | null
  /** N of a scale 1:N for drawings on paper. */
  readonly scale: number | null
  /** Line ends nearer than this are one node; null: the default of `from-drawing.ts`. */
  readonly snap_mm: number | null
  /** A point inside each bounded face that is a void, not a panel. */
  readonly voids: readonly (readonly [x: number, y: number])[]
  /** Proposals that the user takes: repair codes, or "all". */
  readonly accept: readonly string[]
  /** Proposals that the user leaves: their questions are answered with no. */
  readonly leave?: readonly string[]
  /** What the drawing is exact to: line ends nearer than this are one node unless `snap_mm` says otherwise, and no proposal moves a node farther; null: 1 mm. */
  readonly planTolerance_mm?: number | null
  /** Set where the user has chosen layers, so that no guess is made. */
  readonly layers?: readonly string[]
  /** Only lines of these colours ("1" to "255", "#rrggbb") and line types are read; null: of all. */
  readonly colours?: readonly string[] | null
  readonly lineTypes?: readonly string[] | null
  /** Only what lies wholly within this window, two corners in the plan's coordinates, is read. */
  readonly window?: readonly [readonly [number, number], readonly [number, number]] | null
  /** Only what lies wholly between these two heights of the drawing, in the plan's unit, is read: one storey of several. */
  readonly between?: readonly [number, number] | null
  /** Only what lies inside this closed line is read: the largest on a layer, or the smallest round a point of the plan's coordinates. */
  readonly inside?: string | readonly [number, number] | null
  /** How far a level may lie from its node, in mm; null: the default. */
  readonly levelsWithin_mm?: number | null
  /** Two points of the drawing, in its own coordinates, and their true distance: a number in the plan's unit, or as typed. */
  readonly scaleFrom?: { readonly from: readonly [number, number]; readonly to: readonly [number, number]; readonly length: number | string } | null
}
