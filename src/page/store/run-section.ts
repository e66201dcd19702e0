/** A run of nodes as a section: distances along it, heights as they are, and the heights that a profile would ask for. */
import type { Section } from '../../plan/project/condition.ts'
import type { Answer } from '../../roof/answer/answer.ts'

export interface RunSection {
  /** Along the run from its first node, in the plan's unit, and the heights of the roof there. */
  readonly along: readonly number[]
  readonly level: readonly number[]
  readonly length: number
}

export function runSection(answer: Answer, nodes: readonly number[]): RunSection {
  const { plan, roof } = answer
  const along: number[] = []
  let length = 0
  for (const [k, node] of nodes.entries()) {
    if (k > 0) length += Math.hypot(plan.x[node] - plan.x[nodes[k - 1]], plan.y[node] - plan.y[nodes[k - 1]])
    along.push(length)
  }
  return { along, length, level: nodes.map((node) => roof?.heights[node] ?? 0) }
}

/**
 * Level of a section at a distance along a run of that length, its ends at `base`:
 * an arc of rise h over a chord c has radius (c^2 / 4 + h^2) / (2 h).
 */
export function levelAt(section: Section, base: number, length: number, along: number): number {
  if ('points' in section) {
    const points = section.points
    let k = 1
    while (k < points.length - 1 && along > points[k][0]) k += 1
    const [a, b] = [points[k - 1], points[k]]
    return a[1] + ((along - a[0]) / (b[0] - a[0])) * (b[1] - a[1])
  }
  const half = length / 2
  const off = along - half
  if ('pitch_deg' in section) return base + (half - Math.abs(off)) * Math.tan((section.pitch_deg * Math.PI) / 180)
  const h = section.arc.rise
  if (Math.abs(h) < 1e-9 * length) return base
  const radius = (half * half + h * h) / (2 * Math.abs(h))
  return base + Math.sign(h) * (Math.sqrt(Math.max(0, radius * radius - off * off)) - (radius - Math.abs(h)))
}
