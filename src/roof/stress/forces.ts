/**
 * From planes to stresses and forces. Across a joint i -> j with panel L on its left and R on its right the gradients
 * differ by a_L - a_R = s J d, with d = p_j - p_i and J a quarter turn counter-clockwise; s > 0 is a valley, s < 0 a ridge.
 * Working coordinates throughout: a stress in 1 / plan unit is s / span, forces have no unit.
 */
import type { Plan } from '../../plan/plan.ts'

/** Plan length |d| of each joint in working coordinates (length jointCount). */
export function jointLengths(plan: Plan): Float64Array {
  const { origin, work } = plan
  const lengths = new Float64Array(plan.jointCount)
  for (let j = 0; j < lengths.length; j += 1) {
    const a = origin[2 * j], b = origin[2 * j + 1]
    const dx = work[2 * b] - work[2 * a], dy = work[2 * b + 1] - work[2 * a + 1]
    lengths[j] = Math.sqrt(dx * dx + dy * dy)
  }
  return lengths
}

/** Stress of each joint, s = (a_L - a_R) . J d / |d|^2, from panel gradients gx gy .. (length jointCount). */
export function stressOfGradients(plan: Plan, gradient: Float64Array): Float64Array {
  const { origin, panelOf, work } = plan
  const stress = new Float64Array(plan.jointCount)
  for (let j = 0; j < plan.jointCount; j += 1) {
    const a = origin[2 * j], b = origin[2 * j + 1]
    const dx = work[2 * b] - work[2 * a], dy = work[2 * b + 1] - work[2 * a + 1]
    const left = panelOf[2 * j], right = panelOf[2 * j + 1]
    const jumpX = gradient[2 * left] - gradient[2 * right]
    const jumpY = gradient[2 * left + 1] - gradient[2 * right + 1]
    stress[j] = (jumpY * dx - jumpX * dy) / (dx * dx + dy * dy)
  }
  return stress
}

/** Form force s |d| of each joint: the slope jump, signed. It shapes the roof and carries no load. */
export function forces(plan: Plan, stress: Float64Array): Float64Array {
  return jointLengths(plan).map((length, j) => length * stress[j])
}

/** Root mean square of the values, 0 when there are none. */
export function rms(values: Float64Array): number {
  let sum = 0
  for (const value of values) sum += value * value
  return values.length === 0 ? 0 : Math.sqrt(sum / values.length)
}
