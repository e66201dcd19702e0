/**
 * The plane of every panel, from its corners in space. The normal is the vector area of the polygon,
 *
 *     A = 1/2 sum p_i x p_(i+1),
 *
 * which is the exact normal of a flat panel, a fair one of a panel that is nearly flat, and does not mind 180 degree
 * corners. A_z is the plan area, |A| the true area, the plane's gradient is a = -(A_x, A_y) / A_z.
 * (M. E. Newell's method; I. E. Sutherland, R. F. Sproull, R. A. Schumacker, Computing Surveys 6 (1974).)
 */
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import { norm } from './norm.ts'

export interface PanelPlanes {
  /** Areas in the plan's unit squared (length panelCount each). */
  readonly planArea: Float64Array
  readonly area: Float64Array
  /** Length of the outline in space, in the plan's unit (length panelCount). */
  readonly perimeter: Float64Array
  /** Gradient of each panel's plane, gx gy gx gy .. (length 2 * panelCount). */
  readonly gradient: Float64Array
}

/** Panels between two looks at the clock. */
const slice = 8192

/** The planes of all panels at the given node heights (plan's unit, length nodeCount). */
export function* panelPlanes(plan: Plan, heights: Float64Array): Steps<PanelPlanes> {
  const { panelCount, panelStart, corner, x, y } = plan
  const planArea = new Float64Array(panelCount)
  const area = new Float64Array(panelCount)
  const perimeter = new Float64Array(panelCount)
  const gradient = new Float64Array(2 * panelCount)
  for (let panel = 0; panel < panelCount; panel += 1) {
    const start = panelStart[panel]
    const end = panelStart[panel + 1]
    // From the first corner, so that a survey's large coordinates cancel before they are multiplied.
    const origin = corner[start]
    const x0 = x[origin]
    const y0 = y[origin]
    const z0 = heights[origin]
    const last = corner[end - 1]
    let fromX = x[last] - x0
    let fromY = y[last] - y0
    let fromZ = heights[last] - z0
    let ax = 0
    let ay = 0
    let az = 0
    let round = 0
    for (let at = start; at < end; at += 1) {
      const node = corner[at]
      const toX = x[node] - x0
      const toY = y[node] - y0
      const toZ = heights[node] - z0
      ax += fromY * toZ - fromZ * toY
      ay += fromZ * toX - fromX * toZ
      az += fromX * toY - fromY * toX
      round += norm(toX - fromX, toY - fromY, toZ - fromZ)
      fromX = toX
      fromY = toY
      fromZ = toZ
    }
    planArea[panel] = az / 2
    area[panel] = norm(ax, ay, az) / 2
    perimeter[panel] = round
    gradient[2 * panel] = -ax / az
    gradient[2 * panel + 1] = -ay / az
    if (panel % slice === 0) yield { stage: 'Listing panels', done: panel / panelCount }
  }
  return { planArea, area, perimeter, gradient }
}
