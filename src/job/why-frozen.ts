/**
 * Why a joint cannot fold: by the balance of one node, by a corner that its panels share, by the conditions; else by the
 * flat group that its panels belong to, which rests on a count and has no shorter reason.
 */
import { parallelSine } from '../base/geometry/tolerance.ts'
import { jointName, nodeName, panelName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import type { ConditionRows } from '../roof/conditions/condition-rows.ts'
import { propagation } from '../roof/conditions/propagation.ts'
import { words } from '../roof/conditions/reason.ts'
import type { Rows } from '../roof/conditions/rows.ts'
import type { UnderConditions } from '../roof/raise/under-conditions.ts'
import type { FreeRim } from '../roof/stress/free-rim.ts'
import { zeroForceJoints, type ZeroForce } from '../roof/stress/zero-force-joints.ts'

export interface FrozenReason {
  /** plan: with the rim free too; conditions: these freeze it. */
  readonly by: 'plan' | 'conditions'
  /** What says so: a node's balance, a shared corner, known planes, one condition over both panels, or a count. */
  readonly rule: ZeroForce['rule'] | 'shared-corner' | 'held' | 'group'
  /** The node it is said of; -1: none. */
  readonly node: number
  /** Other joints, panels and the conditions (by name) that the sentence speaks of, to be shown with it. */
  readonly joints: readonly number[]
  readonly panels: readonly number[]
  readonly conditions: readonly string[]
  /** A clause for people that begins with the joint's name, without a full stop: "J12 cannot fold: it is the stem ..". */
  readonly words: string
}

/** The reason; null where the joint can fold. Where the conditions clash only what the plan itself freezes is frozen. */
export function whyFrozen(plan: Plan, free: FreeRim, under: UnderConditions, rows: ConditionRows, joint: number): FrozenReason | null {
  if (free.frozen[joint] === 1) return byPlan(plan, free, joint)
  if (under.start === null || under.frozen[joint] === 0) return null
  return byConditions(plan, rows.hard, rows, joint) ?? byGroup(plan, under.groupOf, joint, namesTouching(plan, rows, under.groupOf, joint))
}

/** Why the plan itself freezes a joint that is known to be frozen with a free rim. */
export function byPlan(plan: Plan, free: FreeRim, joint: number): FrozenReason {
  return bySharedCorner(plan, joint) ?? byBalance(plan, joint) ?? byGroup(plan, free.groupOf, joint, [])
}

const noPlace = { node: -1, joints: [], panels: [], conditions: [] }

function bySharedCorner(plan: Plan, joint: number): FrozenReason | null {
  const { work, origin } = plan
  const [left, right] = [plan.panelOf[2 * joint], plan.panelOf[2 * joint + 1]]
  const [a, b] = [origin[2 * joint], origin[2 * joint + 1]]
  const [dx, dy] = [work[2 * b] - work[2 * a], work[2 * b + 1] - work[2 * a + 1]]
  const others = new Set(plan.corner.subarray(plan.panelStart[right], plan.panelStart[right + 1]))
  for (const node of plan.corner.subarray(plan.panelStart[left], plan.panelStart[left + 1])) {
    const [ex, ey] = [work[2 * node] - work[2 * a], work[2 * node + 1] - work[2 * a + 1]]
    if (!others.has(node) || Math.abs(dx * ey - dy * ex) <= parallelSine * Math.hypot(dx, dy) * Math.hypot(ex, ey)) continue
    const panels = [left, right]
    return {
      ...noPlace, by: 'plan', rule: 'shared-corner', node, panels,
      words: `${jointName(joint)} cannot fold: ${words(panels.map(panelName))} also meet at ${nodeName(node)}, beside it`,
    }
  }
  return null
}

function byBalance(plan: Plan, joint: number): FrozenReason | null {
  const found = zeroForceJoints(plan)[joint]
  if (found === null) return null
  const { rule, node, before, others } = found
  const [at, rest] = [nodeName(node), words(others.map(jointName))]
  const settled = before.length === 0 ? '' : `${words(before.map(jointName))} cannot fold either`
  const why = {
    stem: before.length === 0 ? `it is the stem of a T-junction at ${at}, over ${rest} in line` : `at ${at} it is the stem over ${rest} in line, since ${settled}`,
    corner: `at ${at} only ${rest} could hold against it and they are not in line${settled === '' ? '' : `, since ${settled}`}`,
    alone: settled === '' ? `no other joint holds against it at ${at}` : `nothing holds against it at ${at}, since ${settled}`,
  }[rule]
  return { ...noPlace, by: 'plan', rule, node, joints: [...before, ...others], words: `${jointName(joint)} cannot fold: ${why}` }
}

/** Why these rows freeze a joint, where a person can follow it: null where only a count says so. */
export function byConditions(plan: Plan, hard: Rows, { held }: ConditionRows, joint: number): FrozenReason | null {
  const panels = [plan.panelOf[2 * joint], plan.panelOf[2 * joint + 1]]
  const found = propagation(plan, hard)
  const known = panels.every((panel) => found.panelStep[panel] >= 0)
  const corners = panels.flatMap((panel) => Array.from(plan.corner.subarray(plan.panelStart[panel], plan.panelStart[panel + 1])))
  const over = known ? found.conditionsOf(panels) : [...new Set(hard.condition)].filter((index) => {
    const one = held[index]
    return ['flush', 'coplanar', 'plane'].includes(one.kind) && corners.every((node) => one.nodes.includes(node))
  })
  if (over.length === 0) return null
  const conditions = over.map((index) => held[index].name)
  return {
    ...noPlace, by: 'conditions', rule: 'held', panels, conditions,
    words: `${jointName(joint)} cannot fold: ${quoted(conditions)} ${conditions.length === 1 ? 'holds' : 'hold'} ${words(panels.map(panelName))} in one plane`,
  }
}

function byGroup(plan: Plan, groupOf: Int32Array, joint: number, conditions: readonly string[]): FrozenReason {
  const group = groupOf[plan.panelOf[2 * joint]]
  const panels = Array.from(groupOf.keys()).filter((panel) => groupOf[panel] === group)
  const whole = panels.length === plan.panelCount ? `all ${panels.length} panels` : words(panels.map(panelName))
  const under = conditions.length === 0 ? 'in every roof on this plan' : `under ${quoted(conditions)}`
  return {
    ...noPlace, by: conditions.length === 0 ? 'plan' : 'conditions', rule: 'group', panels, conditions,
    words: `${jointName(joint)} cannot fold: ${whole} stay in one plane ${under}`,
  }
}

/** Hard conditions that hold a node of the group: all of them where none does. */
function namesTouching(plan: Plan, { hard, held }: ConditionRows, groupOf: Int32Array, joint: number): string[] {
  const group = groupOf[plan.panelOf[2 * joint]]
  const inside = new Set<number>()
  for (let panel = 0; panel < plan.panelCount; panel += 1) {
    if (groupOf[panel] === group) for (let k = plan.panelStart[panel]; k < plan.panelStart[panel + 1]; k += 1) inside.add(plan.corner[k])
  }
  const all = [...new Set(hard.condition)].sort((a, b) => a - b)
  const touching = all.filter((index) => held[index].nodes.some((node) => inside.has(node)))
  return (touching.length === 0 ? all : touching).map((index) => held[index].name)
}

const quoted = (names: readonly string[]): string => words(names.map((name) => `"${name}"`))
