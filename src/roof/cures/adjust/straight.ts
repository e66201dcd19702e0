/**
 * Straight joint runs: where two edges leave an interior node in opposite directions, the node keeps its distance from the
 * line between their far ends (0 where the plan is exact), so 180 degree corners stay what they are and lines stay lines.
 */
import { collinearSine, runWithin, runWithin_mm } from '../../../base/geometry/tolerance.ts'
import { conversion } from '../../../base/length.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { RowBlock } from './rows.ts'

/** Node in the middle and the two far ends of each straight pass: a b c a b c .. with b in the middle. */
export function straightPasses(plan: Plan): Int32Array {
  const { origin, work, nodeCount, rimPasses, frame, unit } = plan
  const leaving = halvesByNode(plan)
  const within = Math.max(runWithin, (runWithin_mm * conversion('mm', unit)) / frame.span)
  const passes: number[] = []
  for (let node = 0; node < nodeCount; node += 1) {
    if (rimPasses[node] > 0) continue
    for (let i = leaving.start[node]; i < leaving.start[node + 1]; i += 1) {
      for (let j = i + 1; j < leaving.start[node + 1]; j += 1) {
        const a = origin[leaving.half[i] ^ 1], b = origin[leaving.half[j] ^ 1]
        const ax = work[2 * a] - work[2 * node], ay = work[2 * a + 1] - work[2 * node + 1]
        const bx = work[2 * b] - work[2 * node], by = work[2 * b + 1] - work[2 * node + 1]
        const cross = Math.abs(ax * by - ay * bx)
        if (ax * bx + ay * by >= 0) continue
        const short = Math.min(Math.hypot(ax, ay), Math.hypot(bx, by))
        const off = cross / Math.hypot(ax - bx, ay - by)
        // As straight as the digits say, or as drawings are set out; a bend that shows on short edges is none.
        if (off <= collinearSine * short || (off <= within && off <= bend * short)) passes.push(a, node, b)
      }
    }
  }
  return Int32Array.from(passes)
}

/** Offsets beyond this share of the shorter edge are corners, however small. */
const bend = 1e-3

export function straightBlock(plan: Plan, passes: Int32Array): RowBlock {
  const count = passes.length / 3
  const { work: drawn } = plan
  const chord = new Float64Array(count)
  const offset = new Float64Array(count)
  const at = new Float64Array(2 * count)
  for (let i = 0; i < count; i += 1) {
    const [a, b, c] = [passes[3 * i], passes[3 * i + 1], passes[3 * i + 2]]
    chord[i] = Math.hypot(drawn[2 * c] - drawn[2 * a], drawn[2 * c + 1] - drawn[2 * a + 1])
    offset[i] = crossed(drawn, a, b, c) / chord[i]
    at[2 * i] = drawn[2 * b]
    at[2 * i + 1] = drawn[2 * b + 1]
  }
  return {
    counts: new Int32Array(count).fill(3), node: passes, at,
    give: 0,
    fill({ work }, { cx, cy, right }, firstEntry, firstRow) {
      for (let i = 0; i < count; i += 1) {
        const [a, b, c] = [passes[3 * i], passes[3 * i + 1], passes[3 * i + 2]]
        const e = firstEntry + 3 * i
        // cross(b - a, c - a): its derivatives by a, b, c.
        cx[e] = (work[2 * b + 1] - work[2 * c + 1]) / chord[i]
        cy[e] = (work[2 * c] - work[2 * b]) / chord[i]
        cx[e + 1] = (work[2 * c + 1] - work[2 * a + 1]) / chord[i]
        cy[e + 1] = (work[2 * a] - work[2 * c]) / chord[i]
        cx[e + 2] = (work[2 * a + 1] - work[2 * b + 1]) / chord[i]
        cy[e + 2] = (work[2 * b] - work[2 * a]) / chord[i]
        right[firstRow + i] = offset[i] - crossed(work, a, b, c) / chord[i]
      }
    },
  }
}

function crossed(work: Float64Array, a: number, b: number, c: number): number {
  const x = work[2 * a], y = work[2 * a + 1]
  return (work[2 * b] - x) * (work[2 * c + 1] - y) - (work[2 * b + 1] - y) * (work[2 * c] - x)
}

/** Half-edges that leave each node: half[start[n] .. start[n + 1]). */
function halvesByNode({ origin, nodeCount }: Plan): { start: Int32Array; half: Int32Array } {
  const start = new Int32Array(nodeCount + 2)
  for (const node of origin) start[node + 2] += 1
  for (let n = 2; n < nodeCount + 2; n += 1) start[n] += start[n - 1]
  const half = new Int32Array(origin.length)
  for (let h = 0; h < origin.length; h += 1) half[start[origin[h] + 1]++] = h
  return { start: start.subarray(0, nodeCount + 1), half }
}
