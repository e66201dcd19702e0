/** What every joint does in a roof: ridge, valley or flush, and by what angle. */
import { frozenShare, levelSlope } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import { foldDegrees } from './bearing.ts'
import type { PanelPlanes } from './panel-planes.ts'
import { norm } from './norm.ts'

/** What a joint does in this roof. */
export const foldWords = ['flush', 'ridge', 'valley'] as const

export interface Folds {
  /** Index into `foldWords` (length jointCount). */
  readonly word: Uint8Array
  /** Angle between the normals of the two panels, degrees, never negative (length jointCount). */
  readonly fold: Float64Array
}

/**
 * The fold at every joint. With L the panel on the left of the joint's direction d and R the one on its right, the jump of
 * the gradient along J d = (-d_y, d_x) is positive at a valley and negative at a ridge; a joint is flush when the jump is
 * below `frozenShare` of the root mean square over all joints, or is nothing but rounding (`levelSlope`).
 */
export function* jointFolds(plan: Plan, planes: PanelPlanes): Steps<Folds> {
  const { jointCount, origin, panelOf, x, y } = plan
  const { gradient } = planes
  const jump = new Float64Array(jointCount)
  const fold = new Float64Array(jointCount)
  let squares = 0
  for (let joint = 0; joint < jointCount; joint += 1) {
    const left = panelOf[2 * joint]
    const right = panelOf[2 * joint + 1]
    const from = origin[2 * joint]
    const to = origin[2 * joint + 1]
    const dx = x[to] - x[from]
    const dy = y[to] - y[from]
    const lx = gradient[2 * left]
    const ly = gradient[2 * left + 1]
    const rx = gradient[2 * right]
    const ry = gradient[2 * right + 1]
    const across = ((lx - rx) * -dy + (ly - ry) * dx) / norm(dx, dy)
    jump[joint] = across
    squares += across * across
    fold[joint] = foldDegrees(lx, ly, rx, ry)
  }
  yield { stage: 'Listing joints', done: 0.5 }
  const least = Math.max(levelSlope, frozenShare * Math.sqrt(squares / Math.max(1, jointCount)))
  const word = new Uint8Array(jointCount)
  for (let joint = 0; joint < jointCount; joint += 1) {
    const across = jump[joint]
    word[joint] = Math.abs(across) < least ? 0 : across < 0 ? 1 : 2
    if (word[joint] === 0) fold[joint] = 0
  }
  return { word, fold }
}
