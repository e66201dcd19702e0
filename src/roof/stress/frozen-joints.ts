/**
 * Frozen joints: joints whose stress is 0 in every roof there is. Two random lifts show them: a joint that folds in some
 * lift folds in almost every one, so a joint flat in both is frozen but for an event of probability zero.
 */
import { disjointSets } from '../../base/disjoint-sets.ts'
import { clashHeight, frozenShare } from '../../base/geometry/tolerance.ts'
import { gaussians } from '../../base/random.ts'
import type { Factor } from '../../base/sparse/factor.ts'
import type { Plan } from '../../plan/plan.ts'
import { forces, rms, stressOfGradients } from './forces.ts'
import { projected, type LiftSpace } from './lift-space.ts'
import { panelPlanes } from './panel-bases.ts'
import { isTilt } from './tilt-part.ts'

/**
 * 1 for each joint that no roof of the space folds (length jointCount). `tilts` is how many dimensions of the space fold
 * nothing; `roof` is one roof that meets the conditions (null when they are all zero and the flat roof is one).
 */
export function frozenJoints(space: LiftSpace, tilts: number, roof: Float64Array | null): Uint8Array {
  const { plan } = space
  const before = foldedBySpace.get(space.factor)
  const frozen = before !== undefined && before.tilts === tilts ? before.frozen.slice() : new Uint8Array(plan.jointCount).fill(1)
  const mark = (heights: Float64Array): void => {
    // A level roof at +3 m is flat but for the rounding of 3 m, and the forces of that rounding are all of one size.
    let size = 1
    for (let i = 0; i < heights.length; i += 1) size = Math.max(size, Math.abs(heights[i]))
    if (isTilt(plan, heights, clashHeight * size)) return
    const force = forces(plan, stressOfGradients(plan, panelPlanes(plan, space.bases, heights).gradient))
    // A roof that is flat but for rounding has forces at rounding level: they must not pass for folds.
    const noise = foldNoise(plan, heights)
    const least = Math.max(frozenShare * rms(force), noise)
    for (let j = 0; j < plan.jointCount; j += 1) if (Math.abs(force[j]) > least) frozen[j] = 0
  }
  if (before?.tilts !== tilts && space.probe !== null && space.dimension > tilts) {
    mark(space.probe.lift)
    // What has folded needs no second look.
    if (frozen.includes(1)) mark(projected(space, gaussians(plan.nodeCount, 21)))
  }
  if (before?.tilts !== tilts) foldedBySpace.set(space.factor, { tilts, frozen: frozen.slice() })
  if (roof !== null && frozen.includes(1)) mark(roof)
  return frozen
}

/** What the lifts of a factor fold: the same for every roof that they are added to. */
const foldedBySpace = new WeakMap<Factor, { readonly tilts: number; readonly frozen: Uint8Array }>()

/** Forces that rounding alone can make: 1e-11 of the steepest slope that heights of this size make over the whole plan. */
function foldNoise(plan: Plan, heights: Float64Array): number {
  let low = Infinity, high = -Infinity
  for (let i = 0; i < plan.nodeCount; i += 1) {
    if (heights[i] < low) low = heights[i]
    if (heights[i] > high) high = heights[i]
  }
  return 1e-11 * (high - low)
}

/**
 * Flat groups: panels joined by frozen joints, which lie in one plane in every roof. Group of each panel, numbered from 0
 * by first panel, and how many there are; single panels included.
 */
export function flatGroups(plan: Plan, frozen: Uint8Array): { groupOf: Int32Array; groupCount: number } {
  const sets = disjointSets(plan.panelCount)
  for (let j = 0; j < plan.jointCount; j += 1) if (frozen[j] === 1) sets.join(plan.panelOf[2 * j], plan.panelOf[2 * j + 1])
  const { setOf: groupOf, setCount: groupCount } = sets.numbered()
  return { groupOf, groupCount }
}
