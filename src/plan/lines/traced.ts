/** A drawing whose lines have become edges between nodes: what both ways of making panels start from. */
import type { Drawing } from '../drawing.ts'
import type { Arrangement } from './arrangement.ts'
import type { LineFrame } from './frame.ts'
import type { JoinedPoints } from './joined.ts'

export interface Traced {
  readonly drawing: Drawing
  readonly frame: LineFrame
  readonly mmPerUnit: number
  readonly points: JoinedPoints
  readonly lines: Arrangement
  /** First line of the arrangement that is a side of an interior ring, and the first that is an open segment. */
  readonly firstHole: number
  readonly firstSegment: number
  /** Plan coordinates of a node. */
  readonly at: (node: number) => [number, number]
}
