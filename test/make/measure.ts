/** Measures of a raised roof in the plainest way, from coordinates alone: for tests that hold the program's own figures. */
import type { Plan } from '../../src/plan/plan.ts'

type Vector = readonly [number, number, number]

/** Sum of cross products round a panel: its normal (z up) times twice its true area (Newell). */
export function areaVector(plan: Plan, z: Float64Array, panel: number): Vector {
  const nodes = [...plan.corner.slice(plan.panelStart[panel], plan.panelStart[panel + 1])]
  const first = nodes[0]!
  const from = (node: number): Vector => [plan.x[node]! - plan.x[first]!, plan.y[node]! - plan.y[first]!, z[node]! - z[first]!]
  let [nx, ny, nz] = [0, 0, 0]
  for (let k = 1; k + 1 < nodes.length; k += 1) {
    const [a, b] = [from(nodes[k]!), from(nodes[k + 1]!)]
    nx += a[1] * b[2] - a[2] * b[1]
    ny += a[2] * b[0] - a[0] * b[2]
    nz += a[0] * b[1] - a[1] * b[0]
  }
  return [nx, ny, nz]
}

/** Gradient of the panel's plane. */
export function planeOf(plan: Plan, z: Float64Array, panel: number): readonly [number, number] {
  const [nx, ny, nz] = areaVector(plan, z, panel)
  return [-nx / nz, -ny / nz]
}

export function trueArea(plan: Plan, z: Float64Array, panel: number): { inPlan: number; inSpace: number } {
  const normal = areaVector(plan, z, panel)
  return { inPlan: normal[2] / 2, inSpace: Math.hypot(...normal) / 2 }
}

/** Fold angle at a joint in degrees: > 0 at a ridge, < 0 at a valley. The angle by arctangent keeps its digits near 0. */
export function foldAt(plan: Plan, z: Float64Array, joint: number): number {
  const left = areaVector(plan, z, plan.panelOf[2 * joint]!),
    right = areaVector(plan, z, plan.panelOf[2 * joint + 1]!)
  const across: Vector = [
    left[1] * right[2] - left[2] * right[1],
    left[2] * right[0] - left[0] * right[2],
    left[0] * right[1] - left[1] * right[0],
  ]
  const angle = Math.atan2(Math.hypot(...across), left[0] * right[0] + left[1] * right[1] + left[2] * right[2]) * (180 / Math.PI)
  // At a ridge the plane on the left falls away to the left: its gradient points to the right of the joint.
  const [from, to] = [plan.origin[2 * joint]!, plan.origin[2 * joint + 1]!]
  const [dx, dy] = [plan.x[to]! - plan.x[from]!, plan.y[to]! - plan.y[from]!]
  const [gx, gy] = planeOf(plan, z, plan.panelOf[2 * joint]!)
  const [hx, hy] = planeOf(plan, z, plan.panelOf[2 * joint + 1]!)
  return (gx - hx) * -dy + (gy - hy) * dx < 0 ? angle : -angle
}
