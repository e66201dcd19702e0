/** Conditions whose rows depend on the roof at hand: they are asked again at each roof until nothing changes. */
import type { Emit } from './rows.ts'

export interface BentRows {
  /**
   * The rows at these heights (working measure), all read "row . h <= value": to `keep` those that take the place of what was
   * kept at an earlier roof, to `gather` those that hold for good. `hint`: a roof that is meant, for what the heights leave open.
   */
  at(heights: Float64Array, hint: Float64Array, keep: Emit, gather: Emit): void
  /** Where the heights miss the condition most, and by how much (a slope or a height in spans); null: nowhere. */
  misses(heights: Float64Array): BentMiss | null
}

export interface BentMiss {
  /** -1: it is a node. */
  readonly panel: number
  readonly node: number
  readonly by: number
}

export interface BentCondition {
  /** Index in the list of conditions. */
  readonly condition: number
  /** Infinite: hard. */
  readonly softWeight: number
  readonly rows: BentRows
}
