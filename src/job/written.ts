/** The coordinates that leave the tool, rounded as they are written, and how flat the panels are there. */
import { allRounded, micrometreDecimals } from '../base/decimal.ts'
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
  const z = allRounded(heights, decimals ?? micrometreDecimals[plan.unit])
  const x = decimals === null ? plan.x : allRounded(plan.x, decimals)
  const y = decimals === null ? plan.y : allRounded(plan.y, decimals)
  const mm = conversion(plan.unit, 'mm')
  const flat = yield* flatness(plan, x, y, z)
  return {
    x, y, z, flat: { corner: times(flat.corner, mm), zone: times(flat.zone, mm) },
    exactMax: largestZone(plan, plan.x, plan.y, heights) * mm,
  }
}

function times(values: Float64Array, factor: number): Float64Array {
  for (let i = 0; i < values.length; i += 1) values[i] *= factor
  return values
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
