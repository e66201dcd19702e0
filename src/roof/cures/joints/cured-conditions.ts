/** Conditions carried over to a plan with panels divided or joined: the same places under the new plan's names. */
import { jointName, nodeName, panelName } from '../../../plan/names.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { Condition, Spot } from '../../../plan/project/condition.ts'
import { indexOfName } from '../../../plan/names.ts'
import { jointsAt, panelsAt } from '../../conditions/places.ts'
import type { ChangedPlan } from './diagonals-plan.ts'

/**
 * The conditions on the changed plan. Points of nodes stay points; a panel that was divided is all its pieces, one that was
 * joined the panel it became; joints that are gone are left out, and a condition of such joints alone with them.
 */
export function carriedOver(plan: Plan, changed: ChangedPlan, conditions: readonly Condition[]): Condition[] {
  const nodeTo = nodesTo(plan, changed)
  const panelsTo: number[][] = Array.from({ length: plan.panelCount }, () => [])
  changed.panelsFrom.forEach((from, panel) => from.forEach((old) => panelsTo[old].push(panel)))
  const joints = new Map<string, number>()
  for (let j = 0; j < changed.plan.jointCount; j += 1) joints.set(endsKey(changed.plan.origin[2 * j], changed.plan.origin[2 * j + 1]), j)
  const node = (spot: Spot): Spot => {
    if (typeof spot !== 'string') return spot
    const to = nodeTo[indexOfName(spot, 'N')]
    return to === undefined || to < 0 ? spot : nodeName(to)
  }
  return conditions.flatMap((condition): Condition[] => {
    const { at } = condition
    if ('nodes' in at) return [{ ...condition, at: { ...at, nodes: at.nodes.map(node) } } as Condition]
    if ('run' in at) return [{ ...condition, at: { run: at.run.map(node) } } as Condition]
    if ('panels' in at && at.panels !== 'all') {
      const old = panelsAt(plan, at)
      if (!old.ok) return [condition]
      const panels = [...new Set([...old.value].flatMap((panel) => panelsTo[panel]))].map(panelName)
      return [{ ...condition, at: { panels } } as Condition]
    }
    if ('joints' in at) {
      const old = jointsAt(plan, at)
      if (!old.ok) return [condition]
      const kept = [...old.value].flatMap((joint) => joints.get(endsKey(nodeTo[plan.origin[2 * joint]], nodeTo[plan.origin[2 * joint + 1]])) ?? [])
      return kept.length === 0 ? [] : [{ ...condition, at: { joints: kept.map(jointName) } } as Condition]
    }
    return [condition]
  })
}

/** New node of each old one, -1: gone. */
export function nodesTo(plan: Plan, { nodeFrom }: ChangedPlan): Int32Array {
  const to = new Int32Array(plan.nodeCount).fill(-1)
  nodeFrom.forEach((old, node) => (to[old] = node))
  return to
}

const endsKey = (a: number, b: number): string => (a < b ? `${a} ${b}` : `${b} ${a}`)
