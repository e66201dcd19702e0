/**
 * From stress to roof: the equilibrium stresses integrated across the dual edges into the piecewise-linear height function.
 * Carrying plane z = a . p + c across a joint i -> j from the panel on its left to the one on its right:
 *     a_R = a_L - s J d        c_R = c_L - s (p_i x p_j)
 * Each node is then read from every panel round it; the largest disagreement is the closing error, which is reported.
 */
import type { Plan } from '../../plan/plan.ts'
import type { DualWalk } from '../stress/dual-walk.ts'

/** Working coordinates and heights; `closingError` in span units. */
export interface Integrated {
  /** Height of each node, the mean over its panels (length nodeCount). */
  readonly heights: Float64Array
  readonly closingError: number
}

/**
 * The roof with this stress. `rootPlane` gives gx, gy, c of the middle panel of each part (length 3 * partCount): the tilts,
 * which no stress knows.
 */
export function integrate(plan: Plan, stress: Float64Array, walk: DualWalk, rootPlane: Float64Array): Integrated {
  const { panelCount, nodeCount, panelOf, origin, work, panelStart, corner } = plan
  const { gradient, constant, low, high, count } = roomOf(plan)
  walk.root.forEach((panel, part) => {
    gradient[2 * panel] = rootPlane[3 * part]
    gradient[2 * panel + 1] = rootPlane[3 * part + 1]
    constant[panel] = rootPlane[3 * part + 2]
  })
  for (let step = 0; step < walk.half.length; step += 1) {
    const half = walk.half[step]
    const from = panelOf[half], to = panelOf[half ^ 1]
    const a = origin[half], b = origin[half ^ 1]
    const ax = work[2 * a], ay = work[2 * a + 1], bx = work[2 * b], by = work[2 * b + 1]
    const s = stress[half >> 1]
    gradient[2 * to] = gradient[2 * from] + s * (by - ay)
    gradient[2 * to + 1] = gradient[2 * from + 1] - s * (bx - ax)
    constant[to] = constant[from] - s * (ax * by - ay * bx)
  }
  const heights = new Float64Array(nodeCount)
  low.fill(Infinity)
  high.fill(-Infinity)
  for (let p = 0; p < panelCount; p += 1) {
    for (let c = panelStart[p]; c < panelStart[p + 1]; c += 1) {
      const node = corner[c]
      const z = gradient[2 * p] * work[2 * node] + gradient[2 * p + 1] * work[2 * node + 1] + constant[p]
      heights[node] += z
      if (z < low[node]) low[node] = z
      if (z > high[node]) high[node] = z
    }
  }
  let closingError = 0
  for (let i = 0; i < nodeCount; i += 1) {
    heights[i] /= count[i]
    closingError = Math.max(closingError, high[i] - low[i])
  }
  return { heights, closingError }
}

interface Room {
  /** Plane z = gx x + gy y + constant of each panel. */
  readonly gradient: Float64Array
  readonly constant: Float64Array
  readonly low: Float64Array
  readonly high: Float64Array
  /** Panels at each node. */
  readonly count: Int32Array
}

/** Kept with the plan: memory that is new costs more than the walk itself (a page of 4 kB some microseconds). */
const rooms = new WeakMap<Plan, Room>()

function roomOf(plan: Plan): Room {
  const known = rooms.get(plan)
  if (known !== undefined) return known
  const count = new Int32Array(plan.nodeCount)
  for (let c = 0; c < plan.corner.length; c += 1) count[plan.corner[c]] += 1
  const room = {
    gradient: new Float64Array(2 * plan.panelCount), constant: new Float64Array(plan.panelCount),
    low: new Float64Array(plan.nodeCount), high: new Float64Array(plan.nodeCount), count,
  }
  rooms.set(plan, room)
  return room
}
