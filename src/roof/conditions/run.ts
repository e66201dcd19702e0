/** The nodes of a plan along a polyline, in its order. */
import { runWithin, runWithin_mm } from '../../base/geometry/tolerance.ts'
import { conversion } from '../../base/length.ts'
import type { Plan } from '../../plan/plan.ts'

export interface Run {
  /** Nodes in order along the run, each once. */
  readonly nodes: Int32Array
  /** Distance of each from the run's first point, along the run, in plan, in spans. */
  readonly along: Float64Array
  /** The whole length of the run, in spans. */
  readonly length: number
}

/**
 * The nodes within `runWithin_mm` (or `runWithin` of the span, if that is more) of the polyline with the vertices `path`
 * (x y x y .. in working coordinates). A node near two pieces belongs to the nearer one, to the earlier one in a tie: so a
 * closed polyline has its first point once. O(pieces * nodes).
 */
export function nodesAlong(plan: Plan, path: Float64Array): Run {
  const within = Math.max(runWithin, runWithin_mm * conversion('mm', plan.unit) / plan.frame.span)
  const nearest = new Float64Array(plan.nodeCount).fill(within)
  const position = new Float64Array(plan.nodeCount).fill(-1)
  let length = 0
  for (let i = 0; i + 3 < path.length; i += 2) {
    const px = path[i]
    const py = path[i + 1]
    const dx = path[i + 2] - px
    const dy = path[i + 3] - py
    const piece = Math.hypot(dx, dy)
    if (piece === 0) continue
    const ux = dx / piece
    const uy = dy / piece
    for (let n = 0; n < plan.nodeCount; n += 1) {
      const qx = plan.work[2 * n] - px
      const qy = plan.work[2 * n + 1] - py
      // Off the line is off the piece: most nodes end here.
      if (Math.abs(ux * qy - uy * qx) > within) continue
      const t = Math.min(piece, Math.max(0, ux * qx + uy * qy))
      const distance = Math.hypot(qx - ux * t, qy - uy * t)
      if (distance > within || (position[n] >= 0 && distance >= nearest[n])) continue
      nearest[n] = distance
      position[n] = length + t
    }
    length += piece
  }
  const found: number[] = []
  for (let n = 0; n < plan.nodeCount; n += 1) if (position[n] >= 0) found.push(n)
  found.sort((a, b) => position[a] - position[b] || a - b)
  return { nodes: Int32Array.from(found), along: Float64Array.from(found, (n) => position[n]), length }
}
