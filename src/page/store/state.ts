/** Everything that the page knows. The document is what undo goes back over; the rest is how it is looked at. */
import type { Problem } from '../../base/result.ts'
import type { Progress } from '../../base/steps.ts'
import type { Side } from '../../paper/drawing/projection.ts'
import type { Selection } from '../../paper/drawing/plan-drawing.ts'
import type { ReadingName } from '../../paper/drawing/reading.ts'
import type { SlopeUnit } from '../../paper/drawing/figures.ts'
import type { ThemeName } from '../../paper/drawing/theme.ts'
import type { Brief } from '../../plan/project/brief.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Project } from '../../plan/project/project-record.ts'
import type { CureList, LiveBalance, LiveDensities, MirrorLine, OneWayTold, Release, Way } from '../../job/session.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import type { Answer } from '../../roof/answer/answer.ts'

/** The project in hand: immutable, so that older ones are the undo. */
export type Doc = Project

/** A document and how it came about: the steps of the list at the left. */
export interface Step {
  readonly doc: Doc
  readonly what: string
  readonly before: string
}

/** A drawing that is read and not accepted yet. */
export interface Opening {
  readonly file: { readonly name: string; readonly bytes: Uint8Array }
  readonly read: ReadPlan | null
  readonly problem: Problem | null
  readonly options: OpeningOptions
  readonly layers: readonly string[]
  readonly chosenRepair: number
  /** SHA-256 of the file's bytes; null: not known. */
  readonly sha256: string | null
  /** A brief that came with the drawing; its voids are in the options once the unit is known. */
  readonly brief: Brief | null
  readonly ms: number
}

export interface OpeningOptions {
  readonly unit: 'mm' | 'cm' | 'm' | 'in' | 'ft' | null
  readonly scale: number | null
  readonly snap_mm: number | null
  readonly layers: readonly string[] | null
  readonly voids: readonly (readonly [number, number])[]
  readonly colours: readonly string[] | null
  readonly lineTypes: readonly string[] | null
  /** Two corners, a point in a closed line, two heights: only what lies within is read. */
  readonly window?: readonly [Spot, Spot] | null
  readonly inside?: string | Spot | null
  readonly between?: Spot | null
  readonly accept: readonly string[]
  readonly leave: readonly string[]
}

type Spot = readonly [number, number]

export const openingOptions: OpeningOptions = { unit: null, scale: null, snap_mm: null, layers: null, voids: [], colours: null, lineTypes: null, accept: [], leave: [] }

export type Pane = 'roof' | 'plan' | 'chart' | 'list' | 'steps'
export type Desk = 'ways' | 'conditions' | 'profile' | 'cures' | 'balance'
export type Dialog = 'keys' | 'take' | 'words' | null

export interface State {
  readonly doc: Doc | null
  /** All steps taken, oldest first; `at` is the one in force, those after it are undone. */
  readonly steps: readonly Step[]
  readonly at: number
  /** Edit in hand, while the pointer moves: shown and answered, not a step yet. */
  readonly inHand: Step | null
  readonly answer: Answer | null
  /** The answer belongs to the document in force. */
  readonly fresh: boolean
  readonly answerMs: number
  /** Roof before the edit in hand. */
  readonly before: Answer | null
  readonly busy: (Progress & { readonly since: number }) | null
  readonly problem: Problem | null
  readonly opening: Opening | null
  readonly selection: Selection | null
  readonly picked: readonly number[]
  readonly reading: ReadingName
  readonly side: Side
  /** Where the roof is seen from once the hand has turned it, in words; null: from the side. */
  readonly turned: string | null
  /** Grows with every stock view asked for, so that the same one can be asked for again. */
  readonly views: number
  readonly exaggeration: number
  readonly slopeUnit: SlopeUnit
  readonly theme: ThemeName
  readonly pane: Pane
  readonly desk: Desk
  readonly dialog: Dialog
  readonly letterKeys: boolean
  readonly sort: { readonly by: ListColumn; readonly down: boolean }
  readonly filter: ListFilter
  readonly webgl: 'none' | 'software' | 'hardware'
  readonly saved: string
  /** The number under which the browser kept the project that is gone on with; null: it is opened anew. */
  readonly keptAs: string | null
  /** Step that the one in force is compared with, null: none. */
  readonly compared: number | null
  /** Another project beside the one in hand, null: none. */
  readonly beside: Beside | null
  /** Ways left for the answer shown, null while they are not known. */
  readonly ways: readonly Way[] | null
  /** What letting go of one condition gives, where conditions clash or leave no fold; null while it is not known. */
  readonly releases: readonly Release[] | null
  /** What it takes for the answer shown, null while it is not known or asked. */
  readonly cures: CuresShown | null
  /** The last answer to "can all fold one way?", null: none about the roof shown. */
  readonly oneWay: OneWayTold | null
  /** Densities in hand, null: the plan is not being balanced. */
  readonly balance: BalanceShown | null
  /** Lines that the plan is symmetric about, null while they are not known. */
  readonly mirrors: readonly MirrorLine[] | null
  /** The one that edits are mirrored about, null: none. */
  readonly mirror: MirrorLine | null
  /** Things of one kind that were picked together. */
  readonly gathered: Gathered | null
  /** What another tab has to do with this project; empty: nothing. */
  readonly elsewhere: string
}

export interface CuresShown {
  readonly list: CureList
  /** The plan with its nodes moved, where moving them is among the cures. */
  readonly moved: Plan | null
  /** The cure that is drawn on the plan, by its place in the list; -1: none. */
  readonly drawn: number
}

export interface BalanceShown {
  readonly densities: LiveDensities
  /** The last plan that balanced, null: none yet. */
  readonly last: LiveBalance | null
}

export interface Beside {
  readonly doc: Doc
  readonly answer: Answer
}

export interface Gathered {
  readonly kind: Selection['kind']
  readonly indices: readonly number[]
}

export type ListColumn = 'panel' | 'area' | 'slope' | 'fall' | 'corner' | 'flat'
export type ListFilter = 'all' | 'flagged' | 'group'

export const initialState: State = {
  doc: null, steps: [], at: -1, inHand: null, answer: null, fresh: true, answerMs: 0, before: null, busy: null, problem: null, opening: null,
  selection: null, picked: [], reading: 'slope', side: 'south', turned: null, views: 0, exaggeration: 1, slopeUnit: 'degrees', theme: 'day', pane: 'roof',
  desk: 'conditions', dialog: null, letterKeys: true, sort: { by: 'slope', down: false }, filter: 'all', webgl: 'none', saved: '', keptAs: null, ways: null, compared: null,
  beside: null, releases: null, cures: null, oneWay: null, balance: null, mirrors: null, mirror: null, gathered: null, elsewhere: '',
}
