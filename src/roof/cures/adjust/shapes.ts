/**
 * Panels that keep their shape in the plan: as many distances between their corners as hold a polygon of k corners stiff, its
 * k sides and the k - 3 diagonals from one corner,
 *     |p(b) - p(a)| = what it is as drawn.
 * Distances that two such panels share are held once.
 */
import type { Plan } from '../../../plan/plan.ts'
import type { RowBlock } from './rows.ts'

/** Pairs of nodes a b a b .. whose distance is held. */
export function heldDistances(plan: Plan, panels: readonly number[], mayMove: (node: number) => boolean): Int32Array {
  const pairs: number[] = []
  const known = new Set<string>()
  const hold = (a: number, b: number): void => {
    const key = a < b ? `${a} ${b}` : `${b} ${a}`
    if (known.has(key) || !(mayMove(a) || mayMove(b))) return
    known.add(key)
    pairs.push(a, b)
  }
  for (const panel of panels) {
    const nodes = plan.corner.subarray(plan.panelStart[panel], plan.panelStart[panel + 1])
    const count = nodes.length
    const root = stiffestCorner(plan.work, nodes)
    for (let k = 0; k < count; k += 1) hold(nodes[k], nodes[(k + 1) % count])
    for (let k = 2; k < count - 1; k += 1) hold(nodes[root], nodes[(root + k) % count])
  }
  return Int32Array.from(pairs)
}

/** The corner whose diagonals make the least thin triangles: a straight corner beside it would leave one without height. */
function stiffestCorner(work: Float64Array, nodes: Int32Array): number {
  let best = 0, bestArea = -1
  for (let root = 0; root < nodes.length; root += 1) {
    const [x, y] = [work[2 * nodes[root]], work[2 * nodes[root] + 1]]
    let least = Infinity
    for (let k = 1; k + 1 < nodes.length; k += 1) {
      const [b, c] = [nodes[(root + k) % nodes.length], nodes[(root + k + 1) % nodes.length]]
      least = Math.min(least, Math.abs((work[2 * b] - x) * (work[2 * c + 1] - y) - (work[2 * b + 1] - y) * (work[2 * c] - x)))
    }
    if (least > bestArea) [best, bestArea] = [root, least]
  }
  return best
}

export function distanceBlock(plan: Plan, pairs: Int32Array): RowBlock {
  const count = pairs.length / 2
  const between = (work: Float64Array, i: number): number => Math.hypot(work[2 * pairs[2 * i + 1]] - work[2 * pairs[2 * i]], work[2 * pairs[2 * i + 1] + 1] - work[2 * pairs[2 * i] + 1])
  const drawn = Float64Array.from({ length: count }, (_, i) => between(plan.work, i))
  return {
    counts: new Int32Array(count).fill(2), node: pairs, give: 0,
    at: Float64Array.from({ length: 2 * count }, (_, j) => (plan.work[2 * pairs[2 * (j >> 1)] + (j & 1)] + plan.work[2 * pairs[2 * (j >> 1) + 1] + (j & 1)]) / 2),
    fill({ work }, { cx, cy, right }, firstEntry, firstRow) {
      for (let i = 0; i < count; i += 1) {
        const [a, b] = [pairs[2 * i], pairs[2 * i + 1]]
        const length = between(work, i)
        const e = firstEntry + 2 * i
        cx[e + 1] = (work[2 * b] - work[2 * a]) / length
        cy[e + 1] = (work[2 * b + 1] - work[2 * a + 1]) / length
        cx[e] = -cx[e + 1]
        cy[e] = -cy[e + 1]
        right[firstRow + i] = drawn[i] - length
      }
    },
  }
}
