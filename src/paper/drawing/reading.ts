/**
 * Readings: what the panels or joints of a drawing are classed by. Every class has a tone and a hatch, or a line width, so
 * that none is told by colour alone, and limits and a count for the legend.
 */
import type { LineName, Tone } from './display-list.ts'

export const readingNames = ['slope', 'flatness', 'fold', 'force', 'group', 'freedom'] as const
export type ReadingName = (typeof readingNames)[number]

/** Words for the switch over a drawing, with the caution that form forces need. */
export const readingTitles: Readonly<Record<ReadingName, string>> = {
  slope: 'slope', flatness: 'flatness', fold: 'fold', force: 'form force', group: 'flat group', freedom: 'freedom',
}

/** Hatches; spacing in px at the plan's scale. */
export type Hatch =
  | { readonly kind: 'batter'; readonly spacing: number }
  | { readonly kind: 'water' }
  | { readonly kind: 'lines'; readonly spacing: number; readonly angle: number }
  | { readonly kind: 'cross'; readonly spacing: number }
  | { readonly kind: 'double'; readonly spacing: number }
  | { readonly kind: 'dots'; readonly spacing: number }

export interface PanelClass {
  readonly tone: Tone
  readonly hatch: Hatch | null
  /** Upper limit, exclusive, in the reading's unit; the lower one is the class before's. */
  readonly upTo: number
  readonly count: number
  /** Whether members of the class are flagged: they are never averaged away. */
  readonly flagged: boolean
  /** Written in the legend instead of limits, for classes that are no interval. */
  readonly name?: string
}

export interface JointClass {
  readonly ridge: LineName
  readonly valley: LineName
  readonly width: number
  readonly upTo: number
  readonly count: number
}

export interface Reading {
  readonly name: ReadingName
  /** One line: what is shown, in which unit, from which roof. */
  readonly note: string
  /** "°" or " mm", as the legend writes it. */
  readonly unit: string
  readonly decimals: number
  /** Class of each panel, -1 for paper (length panelCount); null for a reading of joints. */
  readonly panelClass: Int8Array | null
  readonly panelClasses: readonly PanelClass[]
  /** Class of each joint, -1 for not drawn by this reading (length jointCount); null for a reading of panels. */
  readonly jointClass: Int8Array | null
  readonly jointClasses: readonly JointClass[]
  /** Value behind each panel or joint, for words beside it. */
  readonly value: Float64Array
  readonly smallest: number
  readonly largest: number
  /** Limit that splits the scale: least slope or tolerance, with the number of classes below it; null: none. */
  readonly limit: { readonly at: number; readonly after: number } | null
}

/** Index of the first class whose upper limit is above the value. */
export function classOf(value: number, limits: readonly number[]): number {
  let k = 0
  while (k < limits.length - 1 && value >= limits[k]) k += 1
  return k
}

/** How many members each of `n` classes has. */
export function tally(classes: Int8Array, n: number): number[] {
  const counts = new Array<number>(n).fill(0)
  for (const k of classes) if (k >= 0) counts[k] += 1
  return counts
}

export function range(values: Float64Array): { smallest: number; largest: number } {
  let smallest = Infinity
  let largest = -Infinity
  for (const value of values) {
    if (value < smallest) smallest = value
    if (value > largest) largest = value
  }
  return smallest > largest ? { smallest: 0, largest: 0 } : { smallest, largest }
}
