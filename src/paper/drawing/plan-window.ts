/** The piece of the plan that a drawing shows, and at which scale: plan coordinates to sheet pixels and back. */
import type { Plan } from '../../plan/plan.ts'

export interface PlanWindow {
  /** Plan point in the middle of the area, in the plan's unit. */
  readonly centreX: number
  readonly centreY: number
  /** Pixels to the plan unit. */
  readonly scale: number
  /** Sheet pixel on which the centre lies. */
  readonly middleX: number
  readonly middleY: number
}

export interface Area {
  readonly left: number
  readonly top: number
  readonly right: number
  readonly bottom: number
}

/** The window that shows the whole plan in an area of the sheet. */
export function fitted(plan: Plan, area: Area): PlanWindow {
  let x0 = Infinity
  let x1 = -Infinity
  let y0 = Infinity
  let y1 = -Infinity
  for (let i = 0; i < plan.nodeCount; i += 1) {
    if (plan.x[i] < x0) x0 = plan.x[i]
    if (plan.x[i] > x1) x1 = plan.x[i]
    if (plan.y[i] < y0) y0 = plan.y[i]
    if (plan.y[i] > y1) y1 = plan.y[i]
  }
  const span = Math.max(x1 - x0, y1 - y0)
  const across = Math.max(1, area.right - area.left) / Math.max(x1 - x0, span * 1e-3)
  const up = Math.max(1, area.bottom - area.top) / Math.max(y1 - y0, span * 1e-3)
  return {
    centreX: (x0 + x1) / 2, centreY: (y0 + y1) / 2, scale: Math.min(across, up),
    middleX: (area.left + area.right) / 2, middleY: (area.top + area.bottom) / 2,
  }
}

/** px x = middle + scale (x - centre); y runs down on the sheet and up on the plan. */
export function toSheet(window: PlanWindow, x: number, y: number): readonly [number, number] {
  return [window.middleX + window.scale * (x - window.centreX), window.middleY - window.scale * (y - window.centreY)]
}

export function toPlan(window: PlanWindow, px: number, py: number): readonly [number, number] {
  return [window.centreX + (px - window.middleX) / window.scale, window.centreY - (py - window.middleY) / window.scale]
}

/** The window after zooming by a factor about a sheet point that stays where it is. */
export function zoomed(window: PlanWindow, factor: number, px: number, py: number): PlanWindow {
  const [x, y] = toPlan(window, px, py)
  const scale = window.scale * factor
  return { ...window, scale, centreX: x - (px - window.middleX) / scale, centreY: y + (py - window.middleY) / scale }
}

export function panned(window: PlanWindow, dx: number, dy: number): PlanWindow {
  return { ...window, centreX: window.centreX - dx / window.scale, centreY: window.centreY + dy / window.scale }
}
