/**
 * The order in which planes are carried from panel to panel: breadth first from the middle of each part, since the error of
 * a plane grows with the length of the walk to it.
 */
import type { Plan } from '../../plan/plan.ts'

export interface DualWalk {
  /** First panel of each part (length partCount). */
  readonly root: Int32Array
  /** Half-edges in the order in which they are crossed; the panel on the left is known, the one on the right is reached. */
  readonly half: Int32Array
}

/** Found once a plan. */
export function dualWalk(plan: Plan): DualWalk {
  const known = walkOf.get(plan) ?? newWalk(plan)
  walkOf.set(plan, known)
  return known
}

const walkOf = new WeakMap<Plan, DualWalk>()

function newWalk(plan: Plan): DualWalk {
  const root = middlePanels(plan)
  const seen = new Uint8Array(plan.panelCount)
  const queue = new Int32Array(plan.panelCount)
  const half = new Int32Array(plan.panelCount - plan.partCount)
  let queued = 0, crossed = 0
  for (const panel of root) {
    seen[panel] = 1
    queue[queued++] = panel
  }
  for (let at = 0; at < queued; at += 1) {
    const panel = queue[at]
    for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
      const out = plan.cornerHalf[c]
      const other = plan.panelOf[out ^ 1]
      if (other < 0 || seen[other] === 1) continue
      seen[other] = 1
      half[crossed++] = out
      queue[queued++] = other
    }
  }
  return { root, half }
}

/** For each part the panel whose first corner is nearest to the middle of the part's first corners. */
function middlePanels(plan: Plan): Int32Array {
  const { partCount, panelCount, partOf, corner, panelStart, work } = plan
  const sum = new Float64Array(3 * partCount)
  for (let p = 0; p < panelCount; p += 1) {
    const node = corner[panelStart[p]]
    sum[3 * partOf[p]] += work[2 * node]
    sum[3 * partOf[p] + 1] += work[2 * node + 1]
    sum[3 * partOf[p] + 2] += 1
  }
  const root = new Int32Array(partCount)
  const nearest = new Float64Array(partCount).fill(Infinity)
  for (let p = 0; p < panelCount; p += 1) {
    const part = partOf[p], node = corner[panelStart[p]]
    const dx = work[2 * node] - sum[3 * part] / sum[3 * part + 2]
    const dy = work[2 * node + 1] - sum[3 * part + 1] / sum[3 * part + 2]
    const distance = dx * dx + dy * dy
    if (distance < nearest[part]) {
      nearest[part] = distance
      root[part] = p
    }
  }
  return root
}
