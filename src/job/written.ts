/** The coordinates that leave the tool, rounded as they are written, and how flat the panels are there. */
import { micrometreDecimals, rounded } from '../base/decimal.ts'
import { conversion } from '../base/length.ts'
import type { Steps } from '../base/steps.ts'
import type { Plan } from '../plan/plan.ts'
import type { RoofFacts } from '../roof/answer/answer.ts'
import { flatness, largestZone, type Flatness } from '../roof/raise/flatness.ts'
import { panelName } from '../plan/names.ts'

export interface Written {
  readonly x: Float64Array
  readonly y: Float64Array
  readonly z: Float64Array
  /** In mm, of the written coordinates. */
  readonly flat: Flatness
  /** In mm, of the heights as solved: the largest minimum zone. */
  readonly exactMax: number
}

/** `heights` in the plan's unit; `decimals` null: x and y as read, z to 1 um; else all three to so many. */
export function* writtenCoordinates(plan: Plan, heights: Float64Array, decimals: number | null): Steps<Written> {
  const z = heights.map((value) => rounded(value, decimals ?? micrometreDecimals[plan.unit]))
  const x = decimals === null ? plan.x : plan.x.map((value) => rounded(value, decimals))
  const y = decimals === null ? plan.y : plan.y.map((value) => rounded(value, decimals))
  const mm = conversion(plan.unit, 'mm')
  const flat = yield* flatness(plan, x, y, z)
  return {
    x, y, z, flat: { corner: flat.corner.map((value) => value * mm), zone: flat.zone.map((value) => value * mm) },
    exactMax: largestZone(plan, plan.x, plan.y, heights) * mm,
  }
}

/** The flatness figures of a summary; at most ten panels that are over the tolerance, worst first. */
export function flatnessFacts(written: Written, flat_mm: number): Pick<RoofFacts, 'cornerMax_mm' | 'flatnessMax_mm' | 'flatnessRms_mm' | 'exactFlatnessMax_mm' | 'worstPanels'> {
  const { corner, zone } = written.flat
  let cornerMax = 0, zoneMax = 0, squares = 0
  const over: number[] = []
  for (let p = 0; p < zone.length; p += 1) {
    cornerMax = Math.max(cornerMax, corner[p])
    zoneMax = Math.max(zoneMax, zone[p])
    squares += zone[p] * zone[p]
    if (zone[p] > flat_mm) over.push(p)
  }
  over.sort((a, b) => zone[b] - zone[a] || a - b)
  return {
    cornerMax_mm: cornerMax, flatnessMax_mm: zoneMax, flatnessRms_mm: Math.sqrt(squares / zone.length), exactFlatnessMax_mm: written.exactMax,
    worstPanels: over.slice(0, 10).map((p) => ({ name: panelName(p), corner_mm: corner[p], flatness_mm: zone[p] })),
  }
}
