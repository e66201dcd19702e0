/**
 * Joints that cannot fold by the balance of single nodes, one after another, as zero-force members of a truss are found
 * (the method of joints in any textbook of statics). At a node inside, the forces of the joints that may still fold balance:
 *
 *   one joint                          it has no force
 *   two that are not in line           neither has
 *   three, two of them in line         the third, the stem, has none
 *
 * Each step follows in one sentence and no rank is decided. Joints may be frozen for wider reasons; those are not found here.
 */
import { collinearSine } from '../../base/geometry/tolerance.ts'
import type { Plan } from '../../plan/plan.ts'

export type ZeroForceRule = 'alone' | 'corner' | 'stem'

/** Why a joint has no force: at `node`, where the joints `before` had been found to have none. */
export interface ZeroForce {
  readonly rule: ZeroForceRule
  readonly node: number
  /** Joints at the node that were found before, ascending. */
  readonly before: readonly number[]
  /** Other joints at the node that the rule speaks of: the two in line, or the other of two. */
  readonly others: readonly number[]
}

/** The reason of each joint that has one (length jointCount), null for the others. */
export function zeroForceJoints(plan: Plan): (ZeroForce | null)[] {
  const { origin, work, jointCount } = plan
  const found: (ZeroForce | null)[] = new Array<ZeroForce | null>(jointCount).fill(null)
  const jointsAt: number[][] = Array.from({ length: plan.nodeCount }, () => [])
  for (let half = 0; half < 2 * jointCount; half += 1) if (plan.rimPasses[origin[half]] === 0) jointsAt[origin[half]].push(half)

  const inLine = (a: number, b: number): boolean => {
    const [ax, ay, bx, by] = [...along(a), ...along(b)]
    return Math.abs(ax * by - ay * bx) <= collinearSine * Math.hypot(ax, ay) * Math.hypot(bx, by)
  }
  const along = (half: number): [number, number] => {
    const [from, to] = [origin[half], origin[half ^ 1]]
    return [work[2 * to] - work[2 * from], work[2 * to + 1] - work[2 * from + 1]]
  }
  /** Half-edges at the node that its balance leaves without force, and by which rule. */
  const freed = (live: readonly number[]): { rule: ZeroForceRule; halves: readonly number[] } | null => {
    if (live.length === 1) return { rule: 'alone', halves: live }
    if (live.length === 2) return inLine(live[0], live[1]) ? null : { rule: 'corner', halves: live }
    if (live.length !== 3) return null
    const stem = live.filter((half) => {
      const [a, b] = live.filter((other) => other !== half)
      return inLine(a, b) && !inLine(a, half)
    })
    return stem.length === 1 ? { rule: 'stem', halves: stem } : null
  }

  const queue = Array.from(jointsAt.keys()).filter((node) => jointsAt[node].length > 0)
  for (let at = 0; at < queue.length; at += 1) {
    const node = queue[at]
    const live = jointsAt[node].filter((half) => found[half >> 1] === null)
    const made = freed(live)
    if (made === null) continue
    const sorted = (halves: readonly number[]): number[] => halves.map((half) => half >> 1).sort((a, b) => a - b)
    const before = sorted(jointsAt[node].filter((half) => found[half >> 1] !== null))
    for (const half of made.halves) {
      found[half >> 1] = { rule: made.rule, node, before, others: sorted(live.filter((other) => other !== half)) }
      const far = origin[half ^ 1]
      if (plan.rimPasses[far] === 0) queue.push(far)
    }
  }
  return found
}
