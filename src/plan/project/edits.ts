/**
 * Edits as functions from a document to the next one: nothing is changed in place, so the older document is the undo. Those
 * of the brief work on every record that holds one (the project, the page's own); those of the plan need the project.
 *
 * A condition that an edit makes is called by what it holds ("height of N5"), so the same edit again takes its place.
 */
import { fail, ok, type Result } from '../../base/result.ts'
import { jointName, nodeName, panelName } from '../names.ts'
import type { Brief, Shape } from './brief.ts'
import type { Condition, FormForceCondition, PlaneCondition, ProfileCondition, Section, Spot } from './condition.ts'

/** Any record with a brief. */
export interface Briefed {
  readonly brief: Brief
}

const withBrief = <D extends Briefed>(document: D, change: Partial<Brief>): D => ({ ...document, brief: { ...document.brief, ...change } })

const withConditions = <D extends Briefed>(document: D, conditions: readonly Condition[]): D => withBrief(document, { conditions })

const changed = <D extends Briefed>(document: D, name: string, change: Partial<Pick<Condition, 'soft' | 'off' | 'name'>>): D =>
  withConditions(document, document.brief.conditions.map((condition) => (condition.name === name ? { ...condition, ...change } : condition)))

/** Lengths are in the brief's unit; null takes the wish back. */
export const withRise = <D extends Briefed>(document: D, rise: number | null): D => withBrief(document, { rise })
export const withDatum = <D extends Briefed>(document: D, datum: number | null): D => withBrief(document, { datum })
export const withDown = <D extends Briefed>(document: D, down: boolean): D => withBrief(document, { down })
export const withFlatness = <D extends Briefed>(document: D, flat_mm: number | null): D => withBrief(document, { flat_mm })

/** The shape to come near to (null: the drawing's heights, else a dome), in the place of heights set by hand. */
export function withShape<D extends Briefed & { readonly target: Float64Array | null }>(document: D, shape: Shape | null): D {
  return { ...withBrief(document, { shape }), target: null }
}

/**
 * Moves the roof along a way left: the roof's `heights` plus so much of `way` (1 at its peak) become the heights to come
 * near to. A rise asked for is taken back, since it would scale the roof. `amount` and heights are in the plan's unit.
 */
export function movedAlong<D extends Briefed & { readonly target: Float64Array | null }>(document: D, heights: Float64Array, way: Float64Array, amount: number): D {
  return { ...withRise(document, null), target: heights.map((height, node) => height + amount * way[node]) }
}

/** The condition in the place of the one of its name, or after the others. */
export function withCondition<D extends Briefed>(document: D, condition: Condition): D {
  const { conditions } = document.brief
  const at = conditions.findIndex(({ name }) => name === condition.name)
  return withConditions(document, at < 0 ? [...conditions, condition] : conditions.map((other, k) => (k === at ? condition : other)))
}

export function withoutConditions<D extends Briefed>(document: D, names: readonly string[]): D {
  return withConditions(document, document.brief.conditions.filter(({ name }) => !names.includes(name)))
}

/** Switched off a condition stays in the document and nothing is asked by it. */
export const switched = <D extends Briefed>(document: D, name: string, off: boolean): D => changed(document, name, { off })

/** Hard, or a wish of a weight. */
export const softened = <D extends Briefed>(document: D, name: string, soft: number | null): D => changed(document, name, { soft })

/** Fails with "name-twice" when another condition has the name, and with "no-name" for blanks. */
export function renamed<D extends Briefed>(document: D, from: string, to: string): Result<D> {
  const name = to.trim()
  if (name === '') return fail('no-name', 'a condition needs a name')
  if (name !== from && document.brief.conditions.some((condition) => condition.name === name)) {
    return fail('name-twice', `another condition is called "${name}"`, null, 'give it a name of its own')
  }
  return ok(changed(document, from, { name }))
}

/** A node held at a level. */
export function heldNode(node: number, level: number | null, soft: number | null = null): Condition {
  return { name: `height of ${nodeName(node)}`, soft, kind: 'level', at: { nodes: [nodeName(node)] }, level }
}

/** A run of nodes held to a section; arcs and pitches stand on `level`, null: the datum. */
export function heldRun(run: readonly Spot[], section: Section, level: number | null, soft: number | null = null): ProfileCondition {
  return { name: `profile ${runName(run)}`, soft, kind: 'profile', at: { run }, section, level: 'points' in section ? null : level }
}

const runName = (run: readonly Spot[]): string => {
  const ends = [run[0], run[run.length - 1]].map((spot) => (typeof spot === 'string' ? spot : `${spot[0]},${spot[1]}`))
  return `${ends[0]} to ${ends[1]}`
}

/** A joint's form force: a number, or its sign alone. */
export function heldForce(joint: number, force: FormForceCondition['force'], soft: number | null = null): FormForceCondition {
  return { name: `force of ${jointName(joint)}`, soft, kind: 'form-force', at: { joints: [jointName(joint)] }, force }
}

/** A panel's plane by its pitch and the bearing it falls to. */
export function heldPlane(panel: number, pitch_deg: number, bearing_deg: number, soft: number | null = null): PlaneCondition {
  return { name: `slope of ${panelName(panel)}`, soft, kind: 'plane', at: { panels: [panelName(panel)] }, pitch_deg, bearing_deg }
}
