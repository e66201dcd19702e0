/** What it takes to make a plan lift, with its figures: what `check --json` prints under `cures`, and a page shows. */
import type { CureCode } from '../../plan/project/cure-weights.ts'
import type { Verdict } from './verdict.ts'

export type { CureCode }

/** yes: every joint folds as asked; yes, if: something has to be done or taken; no, because: nothing was found that helps. */
export type AnswerWord = 'yes' | 'yes, if' | 'no, because'

export interface Cure {
  readonly code: CureCode
  /** The condition that is released; null for other kinds. */
  readonly name: string | null
  /** The option that applies it. */
  readonly option: string
  /** What is to be done, as a sentence. */
  readonly message: string
  /**
   * Largest and RMS: corner out of plane (accept-deviation), shift (move-nodes), packing (pack-rim), miss of the condition
   * (release). null where nothing is measured in mm.
   */
  readonly largest_mm: number | null
  readonly rms_mm: number | null
  /** Panels over the tolerance, nodes shifted or packed by more than 1 mm, diagonals, joints left out, conditions let go. */
  readonly count: number
  /** Names of panels, nodes, joints or conditions that it touches, the largest figure first, at most a hundred. */
  readonly where: readonly string[]
  /** What it leaves unsolved, as a clause. */
  readonly leaves: string
  /** Measured on the plan with the cure applied. */
  readonly verdict: Verdict
  readonly freedomLeft: number | null
  readonly frozenJoints: number
  /** Rise of the roof then, in the plan's unit; null: no roof. */
  readonly rise: number | null
  /** Whether the plan within its own tolerance is all that moves (move-nodes). */
  readonly withinTolerance?: boolean
  /** Panels and the nodes between which each is divided (add-diagonals). */
  readonly diagonals?: readonly { readonly panel: string; readonly from: string; readonly to: string }[]
  /** Nodes and what each is packed by, upwards > 0, the largest first (pack-rim); and a bound that no packing goes below. */
  readonly packing?: readonly { readonly node: string; readonly by_mm: number }[]
  readonly least_mm?: number
  /** Panels of the plan then (add-diagonals, remove-joints). */
  readonly panels?: number
}

/** The nearest roof of the plan as drawn: what its panels are bent by. */
export interface AsDrawn {
  readonly cornerMax_mm: number
  readonly cornerRms_mm: number
  /** Panels whose minimum zone is over the tolerance, and the tolerance. */
  readonly over: number
  readonly flat_mm: number
}

/** Conditions that leave no roof or no fold together, each of them needed for it. */
export interface Blocking {
  readonly conditions: readonly string[]
  /** none: no roof meets them; unfolded: the roofs that do fold nothing. */
  readonly leaves: 'no roof' | 'no fold'
  /** How far they are missed at least (no roof), 0 else. */
  readonly misfit_mm: number
  readonly frozenJoints: number
  readonly flatGroups: number
}
