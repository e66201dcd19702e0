/**
 * Whether nodes of a mesh that are near to others, or to edges, stay what they are: the rules by which points are joined
 * (`joined.ts`) and edges cut (`cuts.ts`), asked of single nodes of a plan.
 */
import { splitSine } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import type { LineFrame } from './frame.ts'
import type { Plan } from '../plan.ts'

/** Nodes between two yields. */
const nodesPerStep = 2000

/**
 * Whether each node marked stays a node of its own and lies on no edge. Looked for in the panels round it and on beyond
 * sides that are within the snap distance; no panels may overlap.
 */
export function* nodesStayApart(plan: Plan, x: Float64Array, y: Float64Array, frame: LineFrame, marked: Uint8Array): Steps<boolean> {
  if (!marked.includes(1)) return true
  const panelAt = new Int32Array(plan.nodeCount)
  for (let p = 0; p < plan.panelCount; p += 1) for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) panelAt[plan.corner[c]] = p
  let asked = 0
  for (let node = 0; node < plan.nodeCount; node += 1) {
    if (marked[node] === 0) continue
    if ((asked += 1) % nodesPerStep === 0) yield { stage: 'Building the plan', done: 0.9 }
    if (!staysApart(plan, x, y, frame, node, panelAt[node])) return false
  }
  return true
}

function staysApart({ panelStart, cornerHalf, origin, panelOf }: Plan, x: Float64Array, y: Float64Array, { snap, silent }: LineFrame, node: number, panel: number): boolean {
  const seen = new Set([panel])
  const tied = new Set<number>()
  const near = new Set<number>()
  const edges: { readonly gap: number; readonly end: number; readonly far: number }[] = []
  const distance = (other: number): number => Math.hypot(x[other] - x[node], y[other] - y[node])
  // A set may grow while it is gone through.
  for (const p of seen) {
    for (let c = panelStart[p]; c < panelStart[p + 1]; c += 1) {
      const half = cornerHalf[c]
      const a = origin[half], b = origin[half ^ 1]
      let isNear = a === node || b === node
      if (isNear) tied.add(a === node ? b : a)
      else {
        const ux = x[b] - x[a], uy = y[b] - y[a]
        const vx = x[node] - x[a], vy = y[node] - y[a]
        const square = ux * ux + uy * uy
        const along = ux * vx + uy * vy
        const gap = Math.abs(ux * vy - uy * vx) / Math.sqrt(square)
        if (along > 0 && along < square && gap <= snap) {
          const end = 2 * along <= square ? a : b
          edges.push({ gap, end, far: distance(end) })
          isNear = true
        }
        for (const end of [a, b]) {
          if (distance(end) > snap) continue
          near.add(end)
          isNear = true
        }
      }
      const beyond = panelOf[half ^ 1]
      if (isNear && beyond >= 0) seen.add(beyond)
    }
  }
  for (const other of tied) if (distance(other) <= silent) return false
  for (const other of near) if (!tied.has(other)) return false
  return edges.every(({ gap, end, far }) => gap > splitSine * far && tied.has(end))
}
