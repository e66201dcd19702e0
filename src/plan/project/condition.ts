/**
 * Conditions: what the roof must keep (hard) or should come near to (soft), as readonly records, a kind each. Lengths and
 * points are in one unit, which whoever holds the record says: the brief's, or the plan's once the wishes are resolved.
 */

export type Point = readonly [x: number, y: number]

/** A place on the plan: a name ("N4", "P12", "J7") or a point. */
export type Spot = string | Point

/** Nodes by name, or the node nearest to each point if it lies within `within_mm` (default `pointWithin_mm`). */
export interface AtNodes {
  readonly nodes: readonly Spot[]
  readonly within_mm?: number
}

/** The nodes along a polyline of two or more points, in its order. */
export interface AtRun {
  readonly run: readonly Spot[]
}

/** All outer rims, or the rim of the void that contains the point. */
export interface AtRim {
  readonly rim: 'outer' | Point
}

/** Panels by name or by a point inside; "all" takes every panel. */
export interface AtPanels {
  readonly panels: readonly Spot[] | 'all'
}

/** Joints by name or by a point on them. */
export interface AtJoints {
  readonly joints: readonly Spot[]
}

export type At = AtNodes | AtRun | AtRim | AtPanels | AtJoints

interface Common {
  readonly name: string
  /** Weight (> 0) of a soft condition; null: hard. */
  readonly soft: number | null
  /** True: switched off, so it is kept in the document and nothing is asked by it. */
  readonly off?: boolean
}

/** All nodes at one level; null: at the datum. */
export interface LevelCondition extends Common {
  readonly kind: 'level'
  readonly at: AtNodes | AtRun | AtRim | AtPanels
  readonly level: number | null
}

/** Heights fall by per_mille / 1000 of the plan distance along the run; `level` at its first point, null: left open. */
export interface FallCondition extends Common {
  readonly kind: 'fall'
  readonly at: AtRun
  readonly per_mille: number
  readonly level: number | null
}

/** Heights are an affine function of the distance along the run. */
export interface StraightCondition extends Common {
  readonly kind: 'straight'
  readonly at: AtRun
}

/** All nodes at the same level, whichever. */
export interface EqualCondition extends Common {
  readonly kind: 'equal'
  readonly at: AtNodes | AtRun | AtRim
}

/** All panels in one plane, whichever. */
export interface CoplanarCondition extends Common {
  readonly kind: 'coplanar'
  readonly at: AtPanels
}

/** Each panel has this gradient: `bearing_deg` is the downhill direction, clockwise from +y. */
export interface PlaneCondition extends Common {
  readonly kind: 'plane'
  readonly at: AtPanels
  readonly pitch_deg: number
  readonly bearing_deg: number
}

/** The two panels of each joint lie in one plane. */
export interface FlushCondition extends Common {
  readonly kind: 'flush'
  readonly at: AtJoints
}

/**
 * A section over the length of a run:
 * - arc: a circular arc over the chord between the run's ends, `rise` above it in the middle (negative: sagging);
 * - pitch_deg: two equal slopes that meet over the middle;
 * - points: a polyline of [along, level], `along` from the run's first point, ascending, levels absolute.
 */
export type Section =
  | { readonly arc: { readonly rise: number } }
  | { readonly pitch_deg: number }
  | { readonly points: readonly (readonly [along: number, level: number])[] }

/** Heights held to a section; arc and pitch stand on `level` (null: the datum) at both ends. */
export interface ProfileCondition extends Common {
  readonly kind: 'profile'
  readonly at: AtRun | AtNodes
  readonly section: Section
  readonly level: number | null
}

/** What a form force may be asked to be by its sign alone. */
export type Fold = 'ridge' | 'valley' | 'flush'

/**
 * Each joint has this form force, the signed jump of slope across it (no unit): > 0 a valley, < 0 a ridge. A word asks
 * for the sign alone: ridge and valley at least the fold `leastFold` of roof/conditions, flush none.
 */
export interface FormForceCondition extends Common {
  readonly kind: 'form-force'
  readonly at: AtJoints
  readonly force: number | Fold
}

/** All nodes between two levels; at least one of them is given. Both the same: that level. */
export interface BoundsCondition extends Common {
  readonly kind: 'bounds'
  readonly at: AtNodes | AtRun | AtRim | AtPanels
  readonly least?: number | null
  readonly most?: number | null
}

/**
 * Each of the joints, or every joint between two of the panels, folds one way: ridge and valley at least the fold
 * `leastFold` of roof/conditions; no-valley and no-ridge leave it free to stay flat.
 */
export interface OneWayCondition extends Common {
  readonly kind: 'one-way'
  readonly at: AtJoints | AtPanels
  readonly fold: 'ridge' | 'valley' | 'no-ridge' | 'no-valley'
}

/** No panel flatter than the one or steeper than the other; at least one of them is given. */
export interface SlopeCondition extends Common {
  readonly kind: 'slope'
  readonly at: AtPanels
  readonly least_deg?: number | null
  readonly most_deg?: number | null
}

/** Water runs off every node of the panels: none is lower than or level with all its neighbours. */
export interface NoPondingCondition extends Common {
  readonly kind: 'no-ponding'
  readonly at: AtPanels
}

export type Condition =
  | LevelCondition
  | FallCondition
  | StraightCondition
  | EqualCondition
  | CoplanarCondition
  | PlaneCondition
  | FlushCondition
  | ProfileCondition
  | FormForceCondition
  | BoundsCondition
  | OneWayCondition
  | SlopeCondition
  | NoPondingCondition

export type ConditionKind = Condition['kind']

/** Kinds that have their name and no code yet; a brief that uses one is refused by that name. */
export const kindsNotBuilt: readonly string[] = []

/**
 * The condition with all its lengths and points multiplied by `factor`: from the brief's unit to the plan's. Names,
 * angles, per mille, form forces and millimetres stay.
 */
export function inUnit(condition: Condition, factor: number): Condition {
  if (factor === 1) return condition
  const length = (value: number | null): number | null => (value === null ? null : value * factor)
  switch (condition.kind) {
    case 'level':
    case 'fall':
      return { ...condition, at: placeInUnit(condition.at, factor), level: length(condition.level) } as Condition
    case 'bounds':
      return { ...condition, at: placeInUnit(condition.at, factor), least: length(condition.least ?? null), most: length(condition.most ?? null) } as Condition
    case 'profile':
      return {
        ...condition,
        at: placeInUnit(condition.at, factor),
        level: length(condition.level),
        section: sectionInUnit(condition.section, factor),
      } as Condition
    default:
      return { ...condition, at: placeInUnit(condition.at, factor) } as Condition
  }
}

function sectionInUnit(section: Section, factor: number): Section {
  if ('arc' in section) return { arc: { rise: section.arc.rise * factor } }
  if ('points' in section) return { points: section.points.map(([along, level]) => [along * factor, level * factor]) }
  return section
}

/** The place with its points multiplied; the kind of place stays, so the casts above hold. */
function placeInUnit(at: At, factor: number): At {
  const point = ([x, y]: Point): Point => [x * factor, y * factor]
  const spot = (place: Spot): Spot => (typeof place === 'string' ? place : point(place))
  if ('nodes' in at) return { ...at, nodes: at.nodes.map(spot) }
  if ('run' in at) return { run: at.run.map(spot) }
  if ('rim' in at) return { rim: at.rim === 'outer' ? 'outer' : point(at.rim) }
  if ('panels' in at) return { panels: at.panels === 'all' ? 'all' : at.panels.map(spot) }
  return { joints: at.joints.map(spot) }
}
