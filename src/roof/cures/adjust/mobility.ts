/**
 * How a node may move: the inverse of its metric. A free node has the identity in plan, one that slides along a line with
 * direction d has d d^T, a fixed one 0; a height costs `shapeWeight` times the node's area, a held height does not move.
 */
import { runWithin, runWithin_mm } from '../../../base/geometry/tolerance.ts'
import { conversion } from '../../../base/length.ts'
import { axesOfPlan, runOfAxis } from '../../../plan/axes.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { Elimination } from '../../conditions/eliminate.ts'

/** Symmetric 2 x 2 block in plan and a number in height, per node (length nodeCount each). */
export interface Mobility {
  readonly xx: Float64Array
  readonly xy: Float64Array
  readonly yy: Float64Array
  readonly zz: Float64Array
}

/** What rim nodes do: slide along rim lines that run straight through them (corners stay), stay, or move as they like. */
export type RimKeep = 'slide' | 'fixed' | 'free'

export interface MobilityKeeps {
  readonly rim: RimKeep
  /** Nodes that stay where they are. */
  readonly fixed: readonly number[]
  /** Whether nodes on building axes slide along them; where two cross, the node stays. */
  readonly axes: boolean
}

export interface MobilityFacts extends Mobility {
  /** Nodes that stay where they are, and nodes that slide. */
  readonly fixedCount: number
  readonly slidingCount: number
}

export function mobility(
  plan: Plan, { rim, fixed, axes }: MobilityKeeps, elimination: Elimination, areas: Float64Array, shapeWeight: number,
): MobilityFacts {
  const { nodeCount } = plan
  const xx = new Float64Array(nodeCount).fill(1)
  const xy = new Float64Array(nodeCount)
  const yy = new Float64Array(nodeCount).fill(1)
  const zz = new Float64Array(nodeCount)
  const settle = (node: number, dx: number, dy: number): void => {
    xx[node] = dx * dx
    xy[node] = dx * dy
    yy[node] = dy * dy
  }
  if (rim !== 'free') {
    const lines = rim === 'slide' ? rimLines(plan) : null
    for (let node = 0; node < nodeCount; node += 1) {
      if (plan.rimPasses[node] > 0) settle(node, lines === null ? 0 : lines[2 * node], lines === null ? 0 : lines[2 * node + 1])
    }
  }
  if (axes) slideOnAxes(plan, { xx, xy, yy }, settle)
  for (const node of fixed) settle(node, 0, 0)
  let fixedCount = 0, slidingCount = 0
  for (let node = 0; node < nodeCount; node += 1) {
    const isHeld = elimination.start[node] === elimination.start[node + 1]
    zz[node] = isHeld ? 0 : 1 / (shapeWeight * areas[node])
    if (xx[node] + yy[node] === 0) fixedCount += 1
    else if (xx[node] * yy[node] - xy[node] ** 2 < 0.5) slidingCount += 1
  }
  return { xx, xy, yy, zz, fixedCount, slidingCount }
}

/** Nodes on a building axis that also slide along another line stay where they are. */
function slideOnAxes(plan: Plan, { xx, xy, yy }: Omit<Mobility, 'zz'>, settle: (node: number, dx: number, dy: number) => void): void {
  for (const axis of axesOfPlan(plan)) {
    const length = Math.hypot(axis.to[0] - axis.from[0], axis.to[1] - axis.from[1])
    const dx = (axis.to[0] - axis.from[0]) / length, dy = (axis.to[1] - axis.from[1]) / length
    for (const node of runOfAxis(plan, axis)) {
      const isFree = xx[node] * yy[node] - xy[node] ** 2 > 0.5
      // What its present line leaves of the axis' direction, squared: all of it when they are one line.
      const left = xx[node] * dx * dx + 2 * xy[node] * dx * dy + yy[node] * dy * dy
      if (isFree) settle(node, dx, dy)
      else if (left < sameLine) settle(node, 0, 0)
    }
  }
}

/** Squared cosine of the angle (3 degrees) within which a rim line and an axis are one. */
const sameLine = 0.997

/** Direction of the straight rim line through each node, x y x y ..; 0 0 at corners, at pinch nodes and inside (length 2 * nodeCount). */
function rimLines(plan: Plan): Float64Array {
  const { rimStart, rimHalf, origin, work, rimPasses, frame, unit } = plan
  const lines = new Float64Array(2 * plan.nodeCount)
  const within = Math.max(runWithin, (runWithin_mm * conversion('mm', unit)) / frame.span)
  for (let loop = 0; loop + 1 < rimStart.length; loop += 1) {
    const from = rimStart[loop], count = rimStart[loop + 1] - from
    for (let k = 0; k < count; k += 1) {
      const before = origin[rimHalf[from + ((k + count - 1) % count)]]
      const node = origin[rimHalf[from + k]]
      const after = origin[rimHalf[from + ((k + 1) % count)]]
      if (rimPasses[node] !== 1) continue
      const dx = work[2 * after] - work[2 * before], dy = work[2 * after + 1] - work[2 * before + 1]
      const ex = work[2 * node] - work[2 * before], ey = work[2 * node + 1] - work[2 * before + 1]
      const length = Math.hypot(dx, dy)
      const along = (ex * dx + ey * dy) / length
      const off = Math.abs(ex * dy - ey * dx) / length
      // Off the chord by less than drawings are, and by less than a visible bend of short edges.
      if (!(length > 0) || along <= 0 || along >= length || off > within || off > bend * Math.min(along, length - along)) continue
      lines[2 * node] = dx / length
      lines[2 * node + 1] = dy / length
    }
  }
  return lines
}

/** A turn of more than this (3 degrees) is a corner, however short its edges. */
const bend = 0.05
