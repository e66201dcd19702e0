/**
 * Symmetry: each node and its mirror image move as images of one another. With R the reflection in a line,
 *     p(image) - R p(node) = what it is as drawn,
 * and a node on the line stays on it. Nodes that the lines take to one another are joined by as few of these as hold them
 * together (a spanning tree), so that no row follows from the others.
 */
import { disjointSets } from '../../../base/disjoint-sets.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'
import { mirrorLineSteps, type MirrorLine } from '../../../plan/symmetry.ts'
import type { RowBlock } from './rows.ts'

export interface Mirrored {
  readonly lines: readonly MirrorLine[]
  /** Pairs node, image; and by pair the line's number. A node that is its own image makes one row, another pair two. */
  readonly pairs: Int32Array
  readonly line: Int32Array
  /** By node: one of the nodes that the lines take it to, the same for all of them; rows are ordered by where that lies. */
  readonly home: Int32Array
}

export function* mirrored(plan: Plan, tolerance_mm: number, mayMove: (node: number) => boolean): Steps<Mirrored> {
  const lines = yield* mirrorLineSteps(plan, tolerance_mm)
  const sets = disjointSets(plan.nodeCount)
  const pairs: number[] = [], line: number[] = []
  lines.forEach(({ node }, l) => {
    node.forEach((image, n) => {
      if (image <= n || sets.root(n) === sets.root(image)) return
      sets.join(n, image)
      if (!mayMove(n) && !mayMove(image)) return
      pairs.push(n, image)
      line.push(l)
    })
  })
  // One node on a line stands for its images, which lie on lines too.
  const { setOf } = sets.numbered()
  const standsFor = new Map<number, { node: number; angle: number; rows: number }>()
  lines.forEach(({ node, angle }, l) => {
    node.forEach((image, n) => {
      if (image !== n || !mayMove(n)) return
      const known = standsFor.get(setOf[n])
      if (known === undefined) standsFor.set(setOf[n], { node: n, angle, rows: 1 })
      else if (known.node === n && known.rows === 1 && Math.abs(Math.sin(angle - known.angle)) > 1e-6) known.rows = 2
      else return
      pairs.push(n, n)
      line.push(l)
    })
  })
  return { lines, pairs: Int32Array.from(pairs), line: Int32Array.from(line), home: Int32Array.from(setOf, (_, n) => sets.root(n)) }
}

export function mirrorBlock(plan: Plan, { lines, pairs, line }: Mirrored): RowBlock {
  const counts: number[] = [], node: number[] = [], at: number[] = []
  const coefficients: number[] = []
  line.forEach((l, i) => {
    const [a, b] = [pairs[2 * i], pairs[2 * i + 1]]
    const { angle } = lines[l]
    if (a === b) {
      counts.push(1)
      node.push(a)
      coefficients.push(-Math.sin(angle), Math.cos(angle))
      at.push(plan.work[2 * a], plan.work[2 * a + 1])
      return
    }
    const [c, s] = [Math.cos(2 * angle), Math.sin(2 * angle)]
    for (const [x, y, rx, ry] of [[1, 0, c, s], [0, 1, s, -c]]) {
      counts.push(2)
      node.push(b, a)
      coefficients.push(x, y, -rx, -ry)
      at.push(plan.work[2 * a], plan.work[2 * a + 1])
    }
  })
  const rowValues = (work: Float64Array): Float64Array => {
    let e = 0
    return Float64Array.from(counts, (count) => {
      let sum = 0
      for (let k = 0; k < count; k += 1, e += 1) sum += coefficients[2 * e] * work[2 * node[e]] + coefficients[2 * e + 1] * work[2 * node[e] + 1]
      return sum
    })
  }
  const drawn = rowValues(plan.work)
  return {
    counts: Int32Array.from(counts), node: Int32Array.from(node), at: Float64Array.from(at), give: 0,
    fill({ work }, { cx, cy, right }, firstEntry, firstRow) {
      for (let e = 0; e < node.length; e += 1) {
        cx[firstEntry + e] = coefficients[2 * e]
        cy[firstEntry + e] = coefficients[2 * e + 1]
      }
      rowValues(work).forEach((value, r) => {
        right[firstRow + r] = drawn[r] - value
      })
    },
  }
}
