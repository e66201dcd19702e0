/**
 * How each joint folds in the roof in hand, told from its form force. Ridge: s < 0, valley: s > 0 (z up); frozen: it
 * folds in no roof that meets the conditions; flush: it could fold and does not here.
 */
import type { Answer } from '../../roof/answer/answer.ts'

export const jointKinds = ['ridge', 'valley', 'flush', 'frozen'] as const
export type JointKind = (typeof jointKinds)[number]

export interface Joints {
  /** Index into `jointKinds` (length jointCount). */
  readonly kind: Uint8Array
  /** |s| |d|: the jump of slope across the joint, without unit (length jointCount). */
  readonly force: Float64Array
  /** Angle between the normals of the two panels, degrees (length jointCount). */
  readonly fold_deg: Float64Array
  /** 95th percentile and greatest of the forces; 0 when nothing folds. */
  readonly force95: number
  readonly forceMax: number
  readonly counts: readonly [ridge: number, valley: number, flush: number, frozen: number]
}

/** Forces below this share of the 95th percentile are drawn as flush: far above rounding (1e-11), far below a visible fold. */
const flushShare = 1e-6

export function joints(answer: Answer): Joints {
  const { plan, roof, frozenHeld } = answer
  const n = plan.jointCount
  const kind = new Uint8Array(n)
  const force = new Float64Array(n)
  const fold_deg = new Float64Array(n)
  if (roof !== null) {
    const { gradient, stress } = roof
    for (let j = 0; j < n; j += 1) {
      const from = plan.origin[2 * j]
      const to = plan.origin[2 * j + 1]
      force[j] = Math.abs(stress[j]) * Math.hypot(plan.x[to] - plan.x[from], plan.y[to] - plan.y[from])
      fold_deg[j] = foldAngle(gradient, plan.panelOf[2 * j], plan.panelOf[2 * j + 1])
    }
  }
  const sorted = force.slice().sort()
  const force95 = n === 0 ? 0 : sorted[Math.min(n - 1, Math.floor(0.95 * n))]
  const forceMax = n === 0 ? 0 : sorted[n - 1]
  const flush = flushShare * (force95 > 0 ? force95 : forceMax)
  const counts: [number, number, number, number] = [0, 0, 0, 0]
  for (let j = 0; j < n; j += 1) {
    const stress = roof === null ? 0 : roof.stress[j]
    kind[j] = frozenHeld[j] === 1 ? 3 : force[j] <= flush ? 2 : stress < 0 ? 0 : 1
    counts[kind[j]] += 1
  }
  return { kind, force, fold_deg, force95, forceMax, counts }
}

/** Angle between n = (-a, 1) of two panels in degrees, by atan2 of cross and dot: exact near 0. */
function foldAngle(gradient: Float64Array, p: number, q: number): number {
  const ax = gradient[2 * p]
  const ay = gradient[2 * p + 1]
  const bx = gradient[2 * q]
  const by = gradient[2 * q + 1]
  const cross = Math.hypot(by - ay, ax - bx, ax * by - ay * bx)
  return (Math.atan2(cross, ax * bx + ay * by + 1) * 180) / Math.PI
}

/** Width in px of a ridge or valley of this force: 0.75 + 2.9 sqrt(force / 95th percentile), capped, in steps of 0.25. */
export function weight(force: number, force95: number): number {
  const share = force95 > 0 ? Math.min(1.2, force / force95) : 0
  return Math.round(4 * (0.75 + 2.9 * Math.sqrt(share))) / 4
}
