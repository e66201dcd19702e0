/** Nodes that carry a plane, and rows that put others on it. */
import type { Plan } from '../../plan/plan.ts'
import type { Emit } from './rows.ts'

/**
 * Three well-spread nodes of the list: a the first, b the farthest from a, then a replaced by the farthest from b, and
 * c the farthest from the line ab. So barycentric coordinates of the list's nodes stay below about 2.
 */
export function anchors(plan: Plan, nodes: Int32Array): readonly [a: number, b: number, c: number] {
  const { work } = plan
  const farthest = (measure: (n: number) => number): number => {
    let best = nodes[0]
    let most = -1
    for (const n of nodes) {
      const value = measure(n)
      if (value > most) {
        most = value
        best = n
      }
    }
    return best
  }
  const from = (o: number) => (n: number): number => Math.hypot(work[2 * n] - work[2 * o], work[2 * n + 1] - work[2 * o + 1])
  const b = farthest(from(nodes[0]))
  const a = farthest(from(b))
  const c = farthest((n) => Math.abs(doubleArea(plan, a, b, n)))
  return [a, b, c]
}

/** (b - a) x (n - a) in working coordinates. */
export function doubleArea({ work }: Plan, a: number, b: number, n: number): number {
  return (work[2 * b] - work[2 * a]) * (work[2 * n + 1] - work[2 * a + 1]) - (work[2 * b + 1] - work[2 * a + 1]) * (work[2 * n] - work[2 * a])
}

/** For each node n of the list but the anchors, with its barycentric coordinates: h_n - u h_a - v h_b - w h_c = 0. */
export function onePlane(plan: Plan, nodes: Int32Array, emit: Emit): void {
  const [a, b, c] = anchors(plan, nodes)
  const whole = doubleArea(plan, a, b, c)
  for (const n of nodes) {
    if (n === a || n === b || n === c) continue
    const u = doubleArea(plan, b, c, n) / whole
    const v = doubleArea(plan, c, a, n) / whole
    const w = 1 - u - v
    const largest = Math.max(1, Math.abs(u), Math.abs(v), Math.abs(w))
    emit([n, a, b, c], [1 / largest, -u / largest, -v / largest, -w / largest], 0)
  }
}
