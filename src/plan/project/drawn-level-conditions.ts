/** Levels that a drawing states for its nodes, as conditions of a brief. */
import { conversion, type Unit } from '../../base/length.ts'
import { nodeName } from '../names.ts'
import type { NodeLevel } from '../read-plan.ts'
import type { Brief } from './brief.ts'
import type { LevelCondition } from './condition.ts'

/** The brief with a level condition for each; `unit`: the plan's, in which the levels are. */
export function withDrawnLevels(brief: Brief, levels: readonly NodeLevel[], unit: Unit): Brief {
  if (levels.length === 0) return brief
  const factor = conversion(unit, brief.unit ?? unit)
  const taken = new Set(brief.conditions.map(({ name }) => name))
  const conditions = levels.map(({ node, name, level }): LevelCondition => {
    const own = `drawn level${name === null ? '' : ` ${name}`} at ${nodeName(node)}`
    return { name: taken.has(own) ? `${own}, as drawn` : own, soft: null, kind: 'level', at: { nodes: [nodeName(node)] }, level: level * factor }
  })
  return { ...brief, conditions: [...brief.conditions, ...conditions] }
}
