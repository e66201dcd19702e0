/** What came of moving the nodes of a plan. */
import type { Verdict } from './answer.ts'

/** What `summary.json` holds under `adjusted`. */
export interface AdjustFacts {
  /** lifts: it lifted as it was; moved; refused before any step; failed. */
  readonly outcome: 'lifts' | 'moved' | 'refused' | 'failed'
  readonly code: string | null
  /** Why not, as a clause; null where it was done. */
  readonly reason: string | null
  readonly cure: string | null
  /**
   * Verdict on the plan as drawn: within its tolerance where no node moved by more. null: no joint of it folds and nodes moved by
   * more; whether a near roof would do was not asked (check says).
   */
  readonly planVerdict: Verdict | null
  readonly largest_mm: number
  readonly rms_mm: number
  /** Nodes that moved by more than 1 mm. */
  readonly count: number
  readonly cornerBefore_mm: number | null
  readonly cornerAfter_mm: number | null
  /** RMS distance from the heights that were come near to, in the plan's unit. */
  readonly heightError: number | null
  readonly held: {
    readonly fixed: number
    readonly sliding: number
    readonly byConditions: number
    readonly straight: number
    readonly limits: number
    /** Nodes kept in the middle of their neighbours, mirror lines, panels that kept their shape. */
    readonly bays: number
    readonly mirrorLines: number
    readonly shapes: number
  } | null
  readonly iterations: number
}
