/** The list of panels: one row a panel, in the plan's order. */
import { metres } from '../../base/length.ts'
import type { Steps } from '../../base/steps.ts'
import type { Table } from '../../base/table.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Roof } from '../answer/answer.ts'
import { fallDegrees, slopeDegrees } from './bearing.ts'
import { ascending } from './ascending.ts'
import type { PanelPlanes } from './panel-planes.ts'

/**
 * Columns: panel (name) · corners (180 degree ones included) · plan_area_m2, area_m2 (square metres, in plan and true) ·
 * perimeter_m (true) · slope_deg · fall_deg (bearing of the way down, clockwise from +y; empty on a level panel) ·
 * corner_mm (largest distance of a corner from the plane of the others) · flatness_mm (minimum zone), both of the
 * coordinates as written.
 */
export function* panelTable(plan: Plan, roof: Roof, planes: PanelPlanes): Steps<Table> {
  const { panelCount, panelStart } = plan
  const metre = metres[plan.unit]
  const corners = new Int32Array(panelCount)
  const planArea = new Float64Array(panelCount)
  const area = new Float64Array(panelCount)
  const perimeter = new Float64Array(panelCount)
  const slope = new Float64Array(panelCount)
  const fall = new Float64Array(panelCount)
  for (let panel = 0; panel < panelCount; panel += 1) {
    corners[panel] = panelStart[panel + 1] - panelStart[panel]
    planArea[panel] = planes.planArea[panel] * metre * metre
    area[panel] = planes.area[panel] * metre * metre
    perimeter[panel] = planes.perimeter[panel] * metre
    const gx = planes.gradient[2 * panel]
    const gy = planes.gradient[2 * panel + 1]
    slope[panel] = slopeDegrees(gx, gy)
    fall[panel] = fallDegrees(gx, gy)
  }
  yield { stage: 'Listing panels', done: 1 }
  return {
    rows: panelCount,
    columns: [
      { kind: 'name', title: 'panel', letter: 'P', index: ascending(panelCount) },
      { kind: 'number', title: 'corners', values: corners, digits: 'shortest' },
      { kind: 'number', title: 'plan_area_m2', values: planArea, digits: { decimals: 6 } },
      { kind: 'number', title: 'area_m2', values: area, digits: { decimals: 6 } },
      { kind: 'number', title: 'perimeter_m', values: perimeter, digits: { decimals: 6 } },
      { kind: 'number', title: 'slope_deg', values: slope, digits: { decimals: 6 } },
      { kind: 'number', title: 'fall_deg', values: fall, digits: { decimals: 6 } },
      { kind: 'number', title: 'corner_mm', values: roof.corner_mm, digits: { decimals: 6 } },
      { kind: 'number', title: 'flatness_mm', values: roof.flatness_mm, digits: { decimals: 6 } },
    ],
  }
}
