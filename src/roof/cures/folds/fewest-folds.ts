/**
 * As few folded joints as possible for a rise: gables and hips out of a plan of many joints. Counting folds is no convex
 * question; the sum of their sizes is, and its least is found at a corner where most are 0 (the l1 norm in the place of the
 * count: Candes, Wakin, Boyd, "Enhancing sparsity by reweighted l1 minimization", J. Fourier Anal. Appl. 14, 2008):
 *
 *   minimise sum w_e |F_e|   over the lifts that keep the conditions,   t'. h = t'. t
 *
 * t the wish, t' = t less its tilt, weighted by areas: the rise held, as for the near roof. Then the weights become
 * 1 / (|F_e| + a little), so that folds which are nearly 0 go, and again. The answer is approximate: few folds, not the fewest.
 */
import { dot } from '../../../base/dot.ts'
import type { Steps } from '../../../base/steps.ts'
import { onePlane } from '../../conditions/anchors.ts'
import { cornerOverPlane } from '../../conditions/form-force.ts'
import { broughtFlat } from '../../raise/nearest.ts'
import { forces, jointLengths, stressOfGradients } from '../../stress/forces.ts'
import { expand, reduce, type LiftSpace } from '../../stress/lift-space.ts'
import { panelPlanes } from '../../stress/panel-bases.ts'
import { lessTilt } from '../../stress/tilt-part.ts'
import { programRows, type LinearSolver } from './linear-program.ts'

export interface FewestFolds {
  /** Working heights of a roof that keeps the conditions with their values zero; the rise is the wish's in the sense above. */
  readonly heights: Float64Array
  /** Joints that fold, ascending. */
  readonly folded: Int32Array
}

/** Rounds of weights: after the first two a plan of bays keeps the lines it has. Our own choice. */
const rounds = 3

/** "A little", as a share of the largest form force. */
const little = 1e-3

/** A joint folds when its force is above this share of the largest. */
const folds = 1e-6

/** null: no roof of the space has the rise. `wish` in working heights, `areas` of the nodes. */
export function* fewestFolds(space: LiftSpace, wish: Float64Array, areas: Float64Array, solver: LinearSolver): Steps<FewestFolds | null> {
  const { plan, elimination } = space
  const { start, unknown, weight, free } = elimination
  const unknowns = free.length
  const lengths = jointLengths(plan)
  const shape = lessTilt(plan, wish, areas).map((height, n) => areas[n] * height)
  let weights: Float64Array = lengths.slice()
  let best: FewestFolds | null = null
  for (let round = 0; round < rounds; round += 1) {
    const list = programRows()
    const emit = (nodes: readonly number[], values: readonly number[], bound: number, sign: number, low: number, high: number): void => {
      const row = new Map<number, number>()
      nodes.forEach((node, k) => {
        for (let t = start[node]; t < start[node + 1]; t += 1) row.set(unknown[t], (row.get(unknown[t]) ?? 0) + values[k] * weight[t])
      })
      if (bound >= 0) row.set(unknowns + bound, sign)
      list.row([...row.keys()], [...row.values()], low, high)
    }
    for (let joint = 0; joint < plan.jointCount; joint += 1) {
      const { nodes, weights: corner, lever } = cornerOverPlane(plan, joint)
      const values = corner.map((value) => value / lever)
      emit(nodes, values, joint, -1, -Infinity, 0)
      emit(nodes, values, joint, 1, 0, Infinity)
    }
    for (let p = 0; p < plan.panelCount; p += 1) {
      onePlane(plan, plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (nodes, values) => emit(nodes, values, -1, 0, 0, 0))
    }
    const rise = dot(shape, wish)
    const held = reduce(elimination, shape)
    list.row(Array.from({ length: unknowns }, (_, k) => k), held, rise, rise)
    const columns = unknowns + plan.jointCount
    const cost = new Float64Array(columns)
    cost.set(weights, unknowns)
    const lower = new Float64Array(columns).fill(-Infinity)
    lower.fill(0, unknowns)
    const answer = yield* solver.solved({ cost, lower, upper: new Float64Array(columns).fill(Infinity), ...list.rows() }, 'Folding as little as can be')
    if (answer.status !== 'optimal') return best
    const heights = yield* broughtFlat(space, expand(elimination, answer.x.subarray(0, unknowns)), 2)
    const force = forces(plan, stressOfGradients(plan, panelPlanes(plan, space.bases, heights).gradient)).map(Math.abs)
    const largest = force.reduce((most, value) => Math.max(most, value), 0)
    const folded = Int32Array.from([...force.keys()].filter((joint) => force[joint] > folds * largest))
    if (best === null || folded.length < best.folded.length) best = { heights, folded }
    weights = force.map((value, joint) => (lengths[joint] * little * largest) / (value + little * largest))
  }
  return best
}
