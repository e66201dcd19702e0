/** What a plan can do with its rim free: freedom, count, gap, frozen joints, flat groups; and the factor that says so. */
import { tau, tauCoarse } from '../../base/geometry/tolerance.ts'
import { factor } from '../../base/sparse/factor.ts'
import { inertia } from '../../base/sparse/inertia.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import { bareCount } from './closure.ts'
import { flatGroups, frozenJoints } from './frozen-joints.ts'
import { passesWhereRounded, smallestNearLift } from './gap.ts'
import { liftSpace, nothingHeld, weightedForm, type LiftSpace } from './lift-space.ts'
import { panelBases, type PanelBases } from './panel-bases.ts'
import { tiltDimension } from './tilts.ts'

export interface FreeRim {
  readonly space: LiftSpace
  readonly bases: PanelBases
  readonly tilts: number
  /** Dimension of the equilibrium stresses: lifts less tilts. */
  readonly freedom: number
  readonly count: number
  /** Square root of the smallest eigenvalue above tau; null when every height vector lifts. */
  readonly gap: number | null
  /** Whether the count is the same at tau and a hundred times tau. */
  readonly decided: boolean
  readonly countAt: readonly [number, number]
  readonly frozen: Uint8Array
  readonly groupOf: Int32Array
  readonly groupCount: number
}

/** The facts of a plan's free rim: one factor, one more only where the count is in doubt. `like`: as `liftSpace` takes it. */
export function* freeRim(plan: Plan, like: LiftSpace | null = null): Steps<FreeRim> {
  const bases = panelBases(plan)
  const space = yield* liftSpace(plan, bases, nothingHeld(plan.nodeCount), like)
  const tilts = tiltDimension(plan, null)
  const freedom = space.dimension - tilts
  let nearest = yield* smallestNearLift(space)
  // The Ritz value is above the eigenvalue by a share of a percent: near the coarse tau the second count is taken.
  let coarse = freedom
  if (nearest !== null && nearest < 2 * tauCoarse) {
    const shifted = weightedForm(plan, space.elimination, space.form, null, -tauCoarse, 1)
    const off = yield* factor(space.analysis, shifted)
    const { negative, zero } = inertia(off)
    coarse = negative + zero - tilts
    if (nearest < tau && coarse === freedom) nearest = yield* smallestNearLift(space, off, passesWhereRounded)
  }
  yield { stage: 'Measuring the gap', done: 1 }
  const frozen = frozenJoints(space, tilts, null)
  yield { stage: 'Raising', done: 0 }
  const { groupOf, groupCount } = flatGroups(plan, frozen)
  return {
    space, bases, tilts, freedom, count: bareCount(plan),
    gap: nearest === null ? null : Math.sqrt(Math.max(nearest, tau)),
    decided: coarse === freedom, countAt: [freedom, coarse], frozen, groupOf, groupCount,
  }
}
