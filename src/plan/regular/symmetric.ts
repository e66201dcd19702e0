/** Mirror lines of a plan that is nearly symmetric, as they must lie for all of them to hold at once. */
import { conversion } from '../../base/length.ts'
import type { Steps } from '../../base/steps.ts'
import type { Plan } from '../plan.ts'
import { mirrorLineSteps } from '../symmetry.ts'

export interface Mirror {
  /** A point of the line, in coordinates as nodes have them here, and cosine and sine of twice its angle. */
  readonly cx: number
  readonly cy: number
  readonly cosine: number
  readonly sine: number
  /** Node that each node is mirrored onto. */
  readonly image: Int32Array
}

export interface NearlySymmetric {
  readonly mirrors: readonly Mirror[]
  /** Nodes that are off their images by more than rounding; the largest distance, in the plan's unit. */
  readonly nodes: readonly number[]
  readonly misfit: number
}

/**
 * The lines of a figure with k of them stand at k-th parts of a half turn. Their common angle is that of the least misfit,
 * or one of `angles` (of runs that are square) or half way between two of them, where that moves no node by more than the
 * tolerance; where the lines found are not evenly turned, the best alone is taken. `at`: coordinates x0 y0 x1 y1 ..;
 * null when the plan is not symmetric within `within`, or exactly so.
 */
export function* nearlySymmetric(plan: Plan, at: Float64Array, within: number, tolerance: number, silent: number, angles: readonly number[]): Steps<NearlySymmetric | null> {
  const lines = yield* mirrorLineSteps(plan, within * conversion(plan.unit, 'mm'))
  if (lines.length === 0) return null
  const best = lines.reduce((least, line) => (line.misfit < least.misfit ? line : least))
  let cx = 0, cy = 0, reach = 0
  for (let n = 0; n < plan.nodeCount; n += 1) {
    cx += at[2 * n] / plan.nodeCount
    cy += at[2 * n + 1] / plan.nodeCount
  }
  for (let n = 0; n < plan.nodeCount; n += 1) reach = Math.max(reach, Math.hypot(at[2 * n] - cx, at[2 * n + 1] - cy))
  const eighth = Math.PI / 4
  const off = (to: number, from: number, part: number): number => to - from - Math.round((to - from) / part) * part
  // A mirror line is along a run, square to it, or halves the angle of two.
  const common = angles.map((a) => best.angle - off(best.angle, a, eighth)).find((a) => Math.abs(a - best.angle) * reach <= tolerance) ?? best.angle
  const part = Math.PI / lines.length
  const evenly = lines.every((line) => Math.abs(off(line.angle, common, part)) * reach <= 2 * within)
  const taken = evenly ? lines : [best]
  const mirrors = taken.map((line): Mirror => {
    const twice = 2 * (evenly ? line.angle - off(line.angle, common, part) : common)
    return { cx, cy, cosine: Math.cos(twice), sine: Math.sin(twice), image: line.node }
  })
  const nodes = new Set<number>()
  let misfit = 0
  for (const { cosine, sine, image } of mirrors) {
    yield { stage: 'Looking for symmetry', done: 1 }
    for (let n = 0; n < image.length; n += 1) {
      const dx = at[2 * n] - cx, dy = at[2 * n + 1] - cy, m = image[n]
      const miss = Math.hypot(cx + cosine * dx + sine * dy - at[2 * m], cy + sine * dx - cosine * dy - at[2 * m + 1])
      misfit = Math.max(misfit, miss)
      if (miss > silent) nodes.add(n)
    }
  }
  return nodes.size === 0 ? null : { mirrors, nodes: [...nodes].sort((m, n) => m - n), misfit }
}
