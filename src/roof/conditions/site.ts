/** What the kinds of conditions need to know: the plan, its datum, and which node is near a point. */
import { NearPoints } from '../../base/geometry/near-points.ts'
import type { Plan } from '../../plan/plan.ts'

export interface Site {
  readonly plan: Plan
  /** In the plan's unit. */
  readonly datum: number
  /** The node nearest to a point, if it lies within that distance, else -1; all in working coordinates. */
  near(x: number, y: number, within: number): number
}

/** The plan as a site; nodes are put into an index when the first point is asked for, an index for each distance asked. */
export function siteOf(plan: Plan, datum: number): Site {
  const indices = new Map<number, NearPoints>()
  const near = (x: number, y: number, within: number): number => {
    let index = indices.get(within)
    if (index === undefined) {
      index = new NearPoints(within, plan.nodeCount)
      for (let n = 0; n < plan.nodeCount; n += 1) index.add(plan.work[2 * n], plan.work[2 * n + 1])
      indices.set(within, index)
    }
    return index.nearest(x, y)
  }
  return { plan, datum, near }
}

/** (level - datum) / span of a level in the plan's unit; null is the datum itself. */
export function heightOf(site: Site, level: number | null): number {
  return level === null ? 0 : (level - site.datum) / site.plan.frame.span
}
