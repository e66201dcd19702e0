/**
 * Maxwell's reciprocal figure of a roof: one point a panel (its gradient), one edge a joint, perpendicular to it and as
 * long as its force. (Without the quarter turn it is Cremona's, parallel to the joints.)
 * J. C. Maxwell, "On reciprocal figures and diagrams of forces", Phil. Mag. 27 (1864) 250-261.
 */
import type { Plan } from '../../plan/plan.ts'
import type { DualWalk } from './dual-walk.ts'

export interface ReciprocalFigure {
  /** Point of each panel, gx gy gx gy .. (length 2 * panelCount). */
  readonly point: Float64Array
  /** Panels that each joint connects: left, right, left, right .. (length 2 * jointCount). */
  readonly edge: Int32Array
}

/** The reciprocal figure of a stress, the middle panel of each part at the origin, walked across the joints. */
export function reciprocalFigure(plan: Plan, stress: Float64Array, walk: DualWalk): ReciprocalFigure {
  const point = new Float64Array(2 * plan.panelCount)
  for (const half of walk.half) {
    const from = plan.panelOf[half], to = plan.panelOf[half ^ 1]
    const a = plan.origin[half], b = plan.origin[half ^ 1]
    const dx = plan.work[2 * b] - plan.work[2 * a], dy = plan.work[2 * b + 1] - plan.work[2 * a + 1]
    // The panel left behind is on the left of `half`: a_to = a_from - s J d, the same for either direction of the joint.
    const s = stress[half >> 1]
    point[2 * to] = point[2 * from] + s * dy
    point[2 * to + 1] = point[2 * from + 1] - s * dx
  }
  return { point, edge: plan.panelOf.slice(0, 2 * plan.jointCount) }
}
