/** Readings of joints: fold angle and form force. Panels stay paper; width tells the class, style and tone the way of folding. */
import type { Answer } from '../../roof/answer/answer.ts'
import { jointKinds, type Joints } from './joint-kinds.ts'
import { classOf, range, tally, type JointClass, type Reading } from './reading.ts'

const steps: readonly Pick<JointClass, 'ridge' | 'valley' | 'width'>[] = [
  { ridge: 'weak1', valley: 'weakValley', width: 0.8 },
  { ridge: 'weak2', valley: 'valley', width: 1.6 },
  { ridge: 'ridge', valley: 'valley', width: 2.4 },
  { ridge: 'ridge', valley: 'valley', width: 3.4 },
]

export function foldReading(_answer: Answer, joints: Joints): Reading {
  return jointReading('fold', 'Angle between the panels at each joint; the sharpest are written.', '°', 1, joints.fold_deg, [2, 5, 10, Infinity], joints)
}

export function forceReading(_answer: Answer, joints: Joints): Reading {
  const quarter = joints.forceMax > 0 ? joints.forceMax / 4 : 1
  const limits = [quarter, 2 * quarter, 3 * quarter, Infinity]
  return jointReading('force', 'Form force: the jump of slope across each joint. No load, not a member force.', '', 2, joints.force, limits, joints)
}

function jointReading(
  name: 'fold' | 'force', note: string, unit: string, decimals: number, value: Float64Array, limits: readonly number[], joints: Joints,
): Reading {
  const jointClass = new Int8Array(value.length)
  for (let j = 0; j < value.length; j += 1) {
    const kind = jointKinds[joints.kind[j]]
    jointClass[j] = kind === 'ridge' || kind === 'valley' ? classOf(value[j], limits) : -1
  }
  const counts = tally(jointClass, limits.length)
  return {
    name, note, unit, decimals, panelClass: null, panelClasses: [], jointClass,
    jointClasses: limits.map((upTo, k) => ({ ...steps[k], upTo, count: counts[k] })),
    value, ...range(value), limit: null,
  }
}

/** The `count` joints of greatest value, largest first; equal values by number. */
export function sharpest(value: Float64Array, count: number): number[] {
  const order = Array.from(value.keys()).filter((j) => value[j] > 0)
  order.sort((a, b) => value[b] - value[a] || a - b)
  return order.slice(0, count)
}
