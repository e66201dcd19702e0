/**
 * Lines that mostly bound nothing: bars drawn double that stop short of each other are trimmed to their outermost rim, and
 * one panel is left of twenty. Where more than half of the lines end so, people must say that it is meant.
 */
import type { Question, Repair } from '../../base/repair.ts'
import type { Drawing } from '../drawing.ts'
import { counted } from '../lines/words.ts'
import type { ReadPlan } from '../read-plan.ts'

/** Share of the lines that may bound no panel without a question. */
const mostLoose = 0.5

/** Fewer lines than these are a sketch, of which any share may be loose. */
const leastLines = 8

export function mostlyLoose({ segmentLayer, outlines }: Drawing, { plan, repairs }: ReadPlan): { readonly repair: Repair; readonly question: Question } | null {
  const lines = segmentLayer.length
  const loose = repairs.filter(({ code }) => code === 'loose-end')
  const count = loose.reduce((sum, repair) => sum + repair.count, 0)
  if (outlines.start.length > 1 || lines < leastLines || count <= mostLoose * lines) return null
  const message = `Of ${counted(lines, 'line', 'lines')} ${count} bound no panel: what is read is ${counted(plan.panelCount, 'panel', 'panels')}`
  return {
    repair: { code: 'which-lines', state: 'proposed', count, message: `${message}.`, where: loose.flatMap(({ where }) => where) },
    question: { code: 'which-lines', message: `${message}. Do their ends miss each other?`, options: ['--snap LENGTH', '--layer NAME', '--leave which-lines'] },
  }
}
