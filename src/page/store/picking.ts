/** What lies under a point of the plan, and which panels are next to one another. */
import type { Plan } from '../../plan/plan.ts'
import type { Selection } from '../../paper/drawing/plan-drawing.ts'
import { toPlan, type PlanWindow } from '../../paper/drawing/plan-window.ts'

/** Reach in px: nodes first, then joints, then the panel. */
export function pick(plan: Plan, window: PlanWindow, px: number, py: number, reach: number, nodesShown: boolean): Selection | null {
  const [x, y] = toPlan(window, px, py)
  if (nodesShown) {
    const node = nearestNode(plan, x, y)
    if (node >= 0 && Math.hypot(plan.x[node] - x, plan.y[node] - y) * window.scale <= reach) return { kind: 'node', index: node }
    const joint = nearestJoint(plan, x, y)
    if (joint.index >= 0 && joint.distance * window.scale <= reach * 0.7) return { kind: 'joint', index: joint.index }
  }
  const panel = panelAt(plan, x, y)
  return panel < 0 ? null : { kind: 'panel', index: panel }
}

export function nearestNode(plan: Plan, x: number, y: number): number {
  let best = -1
  let least = Infinity
  for (let i = 0; i < plan.nodeCount; i += 1) {
    const d = (plan.x[i] - x) ** 2 + (plan.y[i] - y) ** 2
    if (d < least) {
      least = d
      best = i
    }
  }
  return best
}

function nearestJoint(plan: Plan, x: number, y: number): { index: number; distance: number } {
  let index = -1
  let distance = Infinity
  for (let j = 0; j < plan.jointCount; j += 1) {
    const a = plan.origin[2 * j]
    const b = plan.origin[2 * j + 1]
    const dx = plan.x[b] - plan.x[a]
    const dy = plan.y[b] - plan.y[a]
    const t = Math.max(0, Math.min(1, ((x - plan.x[a]) * dx + (y - plan.y[a]) * dy) / (dx * dx + dy * dy)))
    const d = Math.hypot(plan.x[a] + t * dx - x, plan.y[a] + t * dy - y)
    if (d < distance) {
      distance = d
      index = j
    }
  }
  return { index, distance }
}

/** The panel that contains a point, by the even-odd rule; -1: none. */
export function panelAt(plan: Plan, x: number, y: number): number {
  for (let p = 0; p < plan.panelCount; p += 1) {
    let inside = false
    const last = plan.panelStart[p + 1] - 1
    for (let c = plan.panelStart[p], before = last; c <= last; before = c, c += 1) {
      const a = plan.corner[c]
      const b = plan.corner[before]
      if (plan.y[a] > y !== plan.y[b] > y && x < ((plan.x[b] - plan.x[a]) * (y - plan.y[a])) / (plan.y[b] - plan.y[a]) + plan.x[a]) inside = !inside
    }
    if (inside) return p
  }
  return -1
}

/** The neighbour of a panel that lies most in a direction of the plan; the panel itself where none does. */
export function neighbour(plan: Plan, panel: number, dx: number, dy: number): number {
  const centre = middle(plan, panel)
  let best = panel
  let most = 0.3
  for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
    const other = plan.panelOf[plan.cornerHalf[c] ^ 1]
    if (other < 0) continue
    const [x, y] = middle(plan, other)
    const length = Math.hypot(x - centre[0], y - centre[1]) || 1
    const along = ((x - centre[0]) * dx + (y - centre[1]) * dy) / length
    if (along > most) {
      most = along
      best = other
    }
  }
  return best
}

function middle(plan: Plan, panel: number): readonly [number, number] {
  let x = 0
  let y = 0
  const n = plan.panelStart[panel + 1] - plan.panelStart[panel]
  for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
    x += plan.x[plan.corner[c]]
    y += plan.y[plan.corner[c]]
  }
  return [x / n, y / n]
}

/**
 * Nodes of a run from one node to another: the path along edges that strays least from the straight line between them
 * (Dijkstra 1959 on length plus the area swept off the line).
 */
export function runBetween(plan: Plan, from: number, to: number): number[] {
  const neighbours: number[][] = Array.from({ length: plan.nodeCount }, () => [])
  for (let e = 0; e < plan.edgeCount; e += 1) {
    neighbours[plan.origin[2 * e]].push(plan.origin[2 * e + 1])
    neighbours[plan.origin[2 * e + 1]].push(plan.origin[2 * e])
  }
  const dx = plan.x[to] - plan.x[from]
  const dy = plan.y[to] - plan.y[from]
  const length = Math.hypot(dx, dy) || 1
  const off = (i: number): number => Math.abs((plan.x[i] - plan.x[from]) * dy - (plan.y[i] - plan.y[from]) * dx) / length
  const cost = new Float64Array(plan.nodeCount).fill(Infinity)
  const via = new Int32Array(plan.nodeCount).fill(-1)
  const done = new Uint8Array(plan.nodeCount)
  cost[from] = 0
  const queue: number[] = [from]
  while (queue.length > 0) {
    let k = 0
    for (let q = 1; q < queue.length; q += 1) if (cost[queue[q]] < cost[queue[k]]) k = q
    const [node] = queue.splice(k, 1)
    if (done[node] === 1) continue
    done[node] = 1
    if (node === to) break
    for (const next of neighbours[node]) {
      const step = Math.hypot(plan.x[next] - plan.x[node], plan.y[next] - plan.y[node])
      const total = cost[node] + step * (1 + (4 * (off(node) + off(next))) / length) + off(next)
      if (total < cost[next]) {
        cost[next] = total
        via[next] = node
        queue.push(next)
      }
    }
  }
  const path: number[] = []
  for (let node = to; node >= 0; node = via[node]) path.push(node)
  return path.reverse()
}
