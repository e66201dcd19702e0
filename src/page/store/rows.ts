/** Rows of the panel list from an answer: what is shown, sorted and flagged. */
import { metres } from '../../base/length.ts'
import { fallBearing, slopeOf } from '../../paper/drawing/fall.ts'
import { figure } from '../../paper/drawing/figures.ts'
import { panelArea } from '../../paper/drawing/panel-readings.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { ListColumn, ListFilter } from './state.ts'

/** One number a panel and column; areas in m2 on the slope, degrees, mm (length panelCount each). */
export interface Rows {
  readonly area: Float64Array
  readonly slope: Float64Array
  readonly fall: Float64Array
  readonly corner: Float64Array
  readonly flat: Float64Array
  /** 1: under the least slope, 2: over the tolerance, 3: both. */
  readonly flag: Uint8Array
  readonly totalArea: number
}

export function rowsOf(answer: Answer, leastSlope: number | null, flat_mm: number): Rows {
  const { plan, roof } = answer
  const n = plan.panelCount
  const toM2 = metres[plan.unit] ** 2
  const rows = { area: new Float64Array(n), slope: new Float64Array(n), fall: new Float64Array(n), corner: new Float64Array(n), flat: new Float64Array(n), flag: new Uint8Array(n) }
  let totalArea = 0
  for (let p = 0; p < n; p += 1) {
    const area = panelArea(plan, p) * toM2
    if (roof === null) {
      rows.area[p] = area
      totalArea += area
      continue
    }
    // The area on the slope is the plan's over the cosine of the slope.
    rows.area[p] = area * Math.hypot(1, roof.gradient[2 * p], roof.gradient[2 * p + 1])
    rows.slope[p] = slopeOf(roof.gradient, p)
    rows.fall[p] = fallBearing(roof.gradient, p)
    rows.corner[p] = roof.corner_mm[p]
    rows.flat[p] = roof.flatness_mm[p]
    rows.flag[p] = (leastSlope !== null && rows.slope[p] < leastSlope ? 1 : 0) + (rows.flat[p] > flat_mm ? 2 : 0)
    totalArea += rows.area[p]
  }
  return { ...rows, totalArea }
}

/** Panels in the order of the list. */
export function ordered(rows: Rows, answer: Answer, sort: { by: ListColumn; down: boolean }, filter: ListFilter, selected: number): Int32Array {
  const group = selected >= 0 ? answer.flatGroup[selected] : -1
  const kept: number[] = []
  for (let p = 0; p < rows.area.length; p += 1) {
    if (filter === 'flagged' && rows.flag[p] === 0) continue
    if (filter === 'group' && group >= 0 && answer.flatGroup[p] !== group) continue
    kept.push(p)
  }
  const sign = sort.down ? -1 : 1
  if (sort.by !== 'panel') {
    const value = rows[sort.by]
    kept.sort((a, b) => sign * ((Number.isNaN(value[a]) ? -1 : value[a]) - (Number.isNaN(value[b]) ? -1 : value[b])) || a - b)
  } else if (sort.down) kept.reverse()
  return Int32Array.from(kept)
}

/** Millimetres in a list: never "0.00", which nothing made is. */
export const hundredths = (mm: number): string => (mm < 0.01 ? '<0.01' : figure(mm, 2))
