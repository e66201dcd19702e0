/** Plans that almost lift: Voronoi cells whose nodes were moved at random, as drawings are set out or rounded. */
import { random } from '../../src/base/random.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { plan as planOf } from './plans.ts'

/**
 * The plan with every node moved by up to `share` of the mean panel size (square root of the mean area) in x and y, but by no more
 * than 0.3 of its shortest edge; nodes on the sides of the rectangle slide along them, its corners stay. And the RMS shift.
 */
export function jittered(plan: Plan, share: number, seed: number): { plan: Plan; rms: number } {
  const next = random(seed)
  const [left, right] = [Math.min(...plan.x), Math.max(...plan.x)]
  const [bottom, top] = [Math.min(...plan.y), Math.max(...plan.y)]
  const size = Math.sqrt(((right - left) * (top - bottom)) / plan.panelCount)
  const shortest = new Float64Array(plan.nodeCount).fill(Infinity)
  for (let h = 0; h < plan.origin.length; h += 1) {
    const [a, b] = [plan.origin[h]!, plan.origin[h ^ 1]!]
    shortest[a] = Math.min(shortest[a]!, Math.hypot(plan.x[a]! - plan.x[b]!, plan.y[a]! - plan.y[b]!))
  }
  const near = (a: number, b: number): boolean => Math.abs(a - b) < 1e-9 * (right - left)
  let squares = 0
  const points = Array.from(plan.x, (x, n): [number, number] => {
    const y = plan.y[n]!
    const reach = Math.min(share * size, 0.3 * shortest[n]!)
    const dx = near(x, left) || near(x, right) ? 0 : reach * (2 * next() - 1)
    const dy = near(y, bottom) || near(y, top) ? 0 : reach * (2 * next() - 1)
    squares += dx * dx + dy * dy
    return [x + dx, y + dy]
  })
  const faces = Array.from({ length: plan.panelCount }, (_, p) => Array.from(plan.corner.subarray(plan.panelStart[p]!, plan.panelStart[p + 1]!)))
  return { plan: planOf(points, faces, plan.unit), rms: Math.sqrt(squares / plan.nodeCount) }
}
