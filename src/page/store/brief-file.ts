/** A brief from a file, in the unit of the plan that it is laid over: the page's own edits are all in the plan's unit. */
import { conversion, type Unit } from '../../base/length.ts'
import { readBrief, type Brief } from '../../plan/project/brief.ts'
import { inUnit } from '../../plan/project/condition.ts'
import { documentKind } from '../../plan/project/read-project.ts'
import type { Result } from '../../base/result.ts'

/** null where the text is no brief of ours. */
export function openBrief(name: string, text: string): Result<Brief> | null {
  return documentKind(text) === 'brief' ? readBrief(text, name) : null
}

export function briefInUnit(brief: Brief, unit: Unit): Brief {
  const factor = conversion(brief.unit ?? unit, unit)
  const length = (value: number | null): number | null => (value === null ? null : value * factor)
  return {
    ...brief, unit, datum: length(brief.datum), rise: length(brief.rise), voids: brief.voids?.map(([x, y]) => [x * factor, y * factor] as const) ?? null,
    conditions: brief.conditions.map((condition) => inUnit(condition, factor)),
  }
}
