/**
 * What is drawn at which size. Below 40 px a panel number is not readable, below 18 px hatching turns to grey, below 8 px
 * single joints do: what is left out so is said by tone, rim and flags, which are never left out.
 */
import type { Plan } from '../../plan/plan.ts'
import { panelArea } from './panel-readings.ts'

export interface Detail {
  readonly numbers: boolean
  readonly nodes: boolean
  readonly hatch: boolean
  /** Factor on the spacing of hatches. */
  readonly hatchSpacing: number
  /** all: every joint by weight; some: ridges above the median force, valleys, frozen; none. */
  readonly joints: 'all' | 'some' | 'none'
  readonly flagDots: boolean
}

export function planDetail(panelWidth: number): Detail {
  if (panelWidth >= 40) return { numbers: true, nodes: true, hatch: true, hatchSpacing: 1, joints: 'all', flagDots: false }
  if (panelWidth >= 18) return { numbers: false, nodes: false, hatch: true, hatchSpacing: 1.4, joints: 'all', flagDots: false }
  if (panelWidth >= 8) return { numbers: false, nodes: false, hatch: false, hatchSpacing: 1, joints: 'some', flagDots: false }
  return { numbers: false, nodes: false, hatch: false, hatchSpacing: 1, joints: 'none', flagDots: true }
}

export function roofDetail(panelWidth: number): Detail {
  const detail = planDetail(panelWidth)
  return { ...detail, numbers: false, nodes: false, hatch: panelWidth >= 40 }
}

/** Width in plan units of a square as large as the median panel: times the scale it is the "panel width on screen". */
export function medianPanelWidth(plan: Plan): number {
  const areas = Float64Array.from({ length: plan.panelCount }, (_, p) => panelArea(plan, p)).sort()
  return Math.sqrt(Math.max(0, areas[Math.floor(areas.length / 2)]))
}
