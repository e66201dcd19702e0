/**
 * The program of the one-way folds, written in two ways. Unknowns: a lift and the margin t, which is the last column.
 * The first rows are the chosen joints', in their order: F_e + t <= 0; so their multipliers are the certificate.
 *
 * - Over a basis of the lifts: few columns, each full; every answer is a lift.
 * - Over the heights that the conditions leave: four heights a joint and a row a flatness condition, all sparse; the answer
 *   is a lift to the solver's tolerance. For plans with as much freedom as nodes, triangulations above all.
 */
import { dot } from '../../../base/dot.ts'
import { gaussians } from '../../../base/random.ts'
import type { Steps } from '../../../base/steps.ts'
import { onePlane } from '../../conditions/anchors.ts'
import { cornerOverPlane } from '../../conditions/form-force.ts'
import { forces, stressOfGradients } from '../../stress/forces.ts'
import { expand, projected, type LiftSpace } from '../../stress/lift-space.ts'
import { panelPlanes } from '../../stress/panel-bases.ts'
import { programRows, type LinearProgram } from './linear-program.ts'

export interface OneWayProgram {
  readonly program: LinearProgram
  /** Heights of an answer (length nodeCount). */
  heights(x: Float64Array): Float64Array
}

/** Over `folding` lifts whose form forces are orthonormal. */
export function* basisProgram(space: LiftSpace, folding: number, chosen: Int32Array): Steps<OneWayProgram> {
  const { lifts, folds } = yield* foldBasis(space, folding)
  const columns = Array.from({ length: folding + 1 }, (_, k) => k)
  const list = programRows()
  const row = (joint: number, margin: number): number[] => [...folds.map((fold) => fold[joint]), margin]
  // Forces of an orthonormal basis are as small as one over the root of the joints: scaled to about 1.
  const scale = Math.sqrt(space.plan.jointCount)
  const scaled = (joint: number, margin: number): number[] => row(joint, margin).map((value, k) => (k < folding ? value * scale : value))
  for (const joint of chosen) list.row(columns, scaled(joint, 1), -Infinity, 0)
  for (let joint = 0; joint < space.plan.jointCount; joint += 1) list.row(columns, scaled(joint, 0), -1, 1)
  return {
    program: { ...marginAlone(folding), ...list.rows() },
    heights: (x) => {
      const out = new Float64Array(space.plan.nodeCount)
      lifts.forEach((lift, k) => {
        for (let i = 0; i < out.length; i += 1) out[i] += scale * x[k] * lift[i]
      })
      return out
    },
  }
}

/** Over the heights that the conditions leave open. */
export function heightsProgram(space: LiftSpace, chosen: Int32Array): OneWayProgram {
  const { plan, elimination } = space
  const { start, unknown, weight, free } = elimination
  const list = programRows()
  const emit = (nodes: readonly number[], weights: readonly number[], margin: number, low: number, high: number): void => {
    const row = new Map<number, number>()
    nodes.forEach((node, k) => {
      for (let t = start[node]; t < start[node + 1]; t += 1) row.set(unknown[t], (row.get(unknown[t]) ?? 0) + weights[k] * weight[t])
    })
    if (margin !== 0) row.set(free.length, margin)
    list.row([...row.keys()], [...row.values()], low, high)
  }
  const fold = (joint: number, margin: number, low: number, high: number): void => {
    const { nodes, weights, lever } = cornerOverPlane(plan, joint)
    emit(nodes, weights.map((value) => value / lever), margin, low, high)
  }
  for (const joint of chosen) fold(joint, 1, -Infinity, 0)
  for (let joint = 0; joint < plan.jointCount; joint += 1) fold(joint, 0, -1, 1)
  for (let p = 0; p < plan.panelCount; p += 1) {
    onePlane(plan, plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (nodes, weights) => emit(nodes, weights, 0, 0, 0))
  }
  return { program: { ...marginAlone(free.length), ...list.rows() }, heights: (x) => expand(elimination, x.subarray(0, free.length)) }
}

/** Columns without bounds, then the margin between 0 and 1, which is to be as large as it can be. */
function marginAlone(columns: number): Pick<LinearProgram, 'cost' | 'lower' | 'upper'> {
  const cost = new Float64Array(columns + 1), lower = new Float64Array(columns + 1).fill(-Infinity), upper = new Float64Array(columns + 1).fill(Infinity)
  cost[columns] = -1
  lower[columns] = 0
  upper[columns] = 1
  return { cost, lower, upper }
}

/** `folding` lifts and their form forces, these orthonormal: random lifts, orthogonalised twice. */
function* foldBasis(space: LiftSpace, folding: number): Steps<{ lifts: Float64Array[]; folds: Float64Array[] }> {
  const { plan, bases } = space
  const n = plan.nodeCount
  const seeds = gaussians(n * folding, 31)
  const lifts: Float64Array[] = [], folds: Float64Array[] = []
  for (let k = 0; k < folding; k += 1) {
    yield { stage: 'Folding one way', done: (0.5 * k) / folding }
    const lift = projected(space, seeds.subarray(k * n, (k + 1) * n))
    const fold = forces(plan, stressOfGradients(plan, panelPlanes(plan, bases, lift).gradient))
    for (let pass = 0; pass < 2; pass += 1) {
      folds.forEach((other, j) => {
        const share = dot(fold, other)
        for (let i = 0; i < fold.length; i += 1) fold[i] -= share * other[i]
        for (let i = 0; i < n; i += 1) lift[i] -= share * lifts[j][i]
      })
      const size = Math.sqrt(dot(fold, fold))
      for (let i = 0; i < fold.length; i += 1) fold[i] /= size
      for (let i = 0; i < n; i += 1) lift[i] /= size
    }
    lifts.push(lift)
    folds.push(fold)
  }
  return { lifts, folds }
}
