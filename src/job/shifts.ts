/** How far the nodes of a plan moved. */
import { conversion } from '../base/length.ts'
import type { Plan } from '../plan/plan.ts'

/** Moves in mm (length nodeCount each), the largest, their root mean square, and how many are above `counted_mm`. */
export function shiftsOf(plan: Plan, x: Float64Array, y: Float64Array, counted_mm: number): { dx_mm: Float64Array; dy_mm: Float64Array; largest: number; rms: number; count: number } {
  const mm = conversion(plan.unit, 'mm')
  const dx_mm = x.map((value, n) => (value - plan.x[n]) * mm)
  const dy_mm = y.map((value, n) => (value - plan.y[n]) * mm)
  let largest = 0, squares = 0, count = 0
  for (let n = 0; n < plan.nodeCount; n += 1) {
    const shift = Math.hypot(dx_mm[n], dy_mm[n])
    largest = Math.max(largest, shift)
    squares += shift * shift
    if (shift > counted_mm) count += 1
  }
  return { dx_mm, dy_mm, largest, rms: Math.sqrt(squares / plan.nodeCount), count }
}
