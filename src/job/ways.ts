/** The ways left under the conditions of an answer, with what each does to the rise. */
import type { Checked } from './check.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import { outerRimNodes, riseOf, type RiseRule } from '../roof/raise/rise.ts'
import { waysLeft, type WayLeft } from '../roof/stress/ways-left.ts'

export interface Way extends WayLeft {
  /** What an amount of 1 at the peak adds to the rise, and what an amount of -1 does; the first for small amounts. */
  readonly riseUp: number
  readonly riseDown: number
}

/** A step that is small against any roof: at most a thousandth of its own height range moves at the peak. */
const step = 1e-3

/** At most `count` ways, smoothest first; none where the conditions clash or leave one roof. See `WayLeft`. */
export function waysOf({ answer, wishes, under, rows }: Checked, count: number): Way[] {
  const { plan, roof } = answer
  if (under.freedomLeft === null) return []
  const rim = outerRimNodes(plan)
  const rule: RiseRule = { down: wishes.down, datum: wishes.datum }
  return waysLeft(under.space, rows.hard, under.tilts, nodeAreas(plan), count).map((way) => {
    if (roof === null) return { ...way, riseUp: 0, riseDown: 0 }
    const { heights } = roof
    const rise = riseOf(heights, rim, rule)
    const amount = step * (range(heights) || plan.frame.span)
    const moved = (by: number): number => (riseOf(heights.map((height, node) => height + by * way.heights[node]), rim, rule) - rise) / amount
    return { ...way, riseUp: moved(amount), riseDown: moved(-amount) }
  })
}

/** Highest less lowest. */
function range(heights: Float64Array): number {
  let low = Infinity, high = -Infinity
  for (const height of heights) {
    low = Math.min(low, height)
    high = Math.max(high, height)
  }
  return high - low
}
