/**
 * What is left under the conditions: the set R of roofs that meet all hard ones, whether it is empty, how free it is, what
 * is frozen in it. Rows that contradict each other are found on the way; conditions that contradict the flatness of the
 * panels show as a roof that cannot be brought flat.
 *
 * The counting rule here, measured on 238 sets of conditions (cells, quads, hexagons of 100 to 100,000 panels: levels, equal
 * and straight runs, falls, coplanar groups, flush joints, planes; test/bench/counting-rule.csv) by the eigenvalues of T^T Q T
 * relative to T^T T: exact lifts sit at 6e-16 or less whatever is held, and no weight of T is above 7. Near lifts come lower
 * than with a free rim: of N panels the lowest sits at about 2e-3 / N^2 (free rim of cells: 3 to 6 / N^2). tau = 1e-13 was
 * right for every set up to 20,000 panels (lowest near lift 6e-12) and for 7 of 8 at 100,000: jittered quads whose long sides
 * are each at one open level have a near lift at 8e-14 that is counted (freedom left 2; at 1e-14 it is 1, as it should be).
 */
import { clashHeight, tau } from '../../base/geometry/tolerance.ts'
import { dot } from '../../base/dot.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../../plan/plan.ts'
import { eliminate, type Elimination, type RowClash } from '../conditions/eliminate.ts'
import { homogeneous } from '../conditions/homogeneous.ts'
import { rowCount, type Rows } from '../conditions/rows.ts'
import type { FreeRim } from '../stress/free-rim.ts'
import { flatGroups, frozenJoints } from '../stress/frozen-joints.ts'
import { liftSpace, same, type LiftSpace } from '../stress/lift-space.ts'
import { squaredResidual } from '../stress/panel-bases.ts'
import { lessTilt } from '../stress/tilt-part.ts'
import { tiltDimension } from '../stress/tilts.ts'
import { roofUnderConditions } from './nearest.ts'

export interface UnderConditions {
  readonly space: LiftSpace
  /** Contradictions among the rows themselves. */
  readonly rowClashes: readonly RowClash[]
  /** A roof that meets the conditions, the one near to the wish; null when R is empty. */
  readonly start: Float64Array | null
  /** Dimension of R, tilts included; null when R is empty. */
  readonly freedomLeft: number | null
  readonly tilts: number
  readonly scaleFree: boolean
  readonly shiftFree: boolean
  readonly frozen: Uint8Array
  readonly groupOf: Int32Array
  readonly groupCount: number
}

/**
 * The roofs left by the hard rows; `names` are the conditions', `wish` heights in working measure (length nodeCount). `known`:
 * a space of the same plan, whose factor serves again where the rows differ from its own in their values alone, as they do
 * while a height or a force is dragged; null: there is none.
 */
export function* underConditions(
  plan: Plan, free: FreeRim, hard: Rows, names: readonly string[], wish: Float64Array, areas: Float64Array, known: LiftSpace | null = null,
): Steps<UnderConditions> {
  const { start, space, rowClashes } = yield* feasibleRoof(plan, free, hard, names, wish, areas, known)
  if (rowCount(hard) === 0) {
    const { tilts, frozen, groupOf, groupCount } = free
    return { space, rowClashes, start, freedomLeft: space.dimension, tilts, scaleFree: true, shiftFree: true, frozen, groupOf, groupCount }
  }
  yield { stage: 'Raising', done: 0.1 }
  const tilts = tiltDimension(plan, hard)
  const scaleFree = homogeneous(hard)
  const frozen = start === null ? new Uint8Array(plan.jointCount).fill(1) : frozenJoints(space, tilts, scaleFree ? null : start)
  return {
    space, rowClashes, start, freedomLeft: start === null ? null : space.dimension, tilts, scaleFree,
    shiftFree: sumsToZero(hard), frozen, ...flatGroups(plan, frozen),
  }
}

/** The lift space of the rows and a roof in it that meets them, null when there is none. */
export function* feasibleRoof(
  plan: Plan, free: FreeRim, hard: Rows, names: readonly string[], wish: Float64Array, areas: Float64Array, known: LiftSpace | null = null,
): Steps<{ space: LiftSpace; start: Float64Array | null; rowClashes: readonly RowClash[] }> {
  // With nothing held the flat roof is one.
  if (rowCount(hard) === 0) return { space: free.space, start: new Float64Array(plan.nodeCount), rowClashes: [] }
  yield { stage: 'Assembling', done: 0 }
  const { elimination, clashes } = eliminate(hard, plan.nodeCount, names)
  yield { stage: 'Assembling', done: 0 }
  const space = known !== null && sameSolution(known, free, elimination) ? { ...known, elimination } : yield* liftSpace(plan, free.bases, elimination, known)
  if (clashes.length > 0) return { space, start: null, rowClashes: clashes }
  const roof = yield* roofUnderConditions(space, wish)
  // Rows with all values zero leave the flat roof, also where a near lift just above tau keeps the first one from being flat.
  const flat = homogeneous(hard) ? new Float64Array(plan.nodeCount) : null
  return { space, start: isLift(space, roof, areas) ? roof : flat, rowClashes: [] }
}

/** Whether the space is of the same plan, with rows solved in the same way: T is what the factor is made of. */
function sameSolution(known: LiftSpace, free: FreeRim, { free: unknowns, start, unknown, weight }: Elimination): boolean {
  const { elimination } = known
  return known.bases === free.bases && same(elimination.free, unknowns) && same(elimination.start, start) &&
    same(elimination.unknown, unknown) && same(elimination.weight, weight)
}

/**
 * Whether heights are a lift: out-of-flatness squared below tau times the height squared (the measure of the count), or
 * below what heights that agree may differ by.
 */
function isLift(space: LiftSpace, heights: Float64Array, areas: Float64Array): boolean {
  const { plan, bases } = space
  const left = lessTilt(plan, heights, areas)
  const size = dot(left, left)
  return squaredResidual(plan, bases, heights) <= tau * size + plan.nodeCount * clashHeight ** 2
}

/** Whether all rows hold for a constant: then a roof may be moved up and down as a whole. */
export function sumsToZero(rows: Rows): boolean {
  for (let r = 0; r < rowCount(rows); r += 1) {
    let sum = 0
    for (let k = rows.start[r]; k < rows.start[r + 1]; k += 1) sum += rows.weight[k]
    if (Math.abs(sum) > clashHeight) return false
  }
  return true
}
