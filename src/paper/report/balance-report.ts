/** What balancing a plan came to, in sentences. */
import { conversion } from '../../base/length.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { BalanceFacts } from '../../roof/answer/balance-facts.ts'
import { counted, lengthWords, listWords } from './figures.ts'
import { answerReport, type Report } from './report.ts'

const densityWords = { uniform: 'uniform densities', length: 'the same force in every edge', fit: 'densities fitted to the plan', typed: 'the densities given' } as const

/** The report on the balanced plan; where panels would cross, on the plan as drawn with what stood in the way. */
export function balanceReport(answer: Answer, facts: BalanceFacts): Report {
  const report = answerReport(answer)
  const how = densityWords[facts.densities]
  if (facts.outcome === 'crossed') {
    const panels = facts.crossed.length === 0 ? 'panels' : `${counted(facts.crossed.length, 'panel')} (${listWords(facts.crossed, 6)})`
    return {
      ...report, headline: `Balanced with ${how}, ${panels} would turn inside out or cross; no plan was written.`,
      verdict: null, sentences: ['With densities of one sign on a convex rim nothing crosses; a rim that turns inwards needs larger densities beside it.'], facts: [],
    }
  }
  const { plan } = answer.summary
  const mm = conversion('mm', plan.unit)
  const moved = `Balanced with ${how}: largest shift ${lengthWords(facts.largest_mm * mm, plan.unit)}, RMS ${lengthWords(facts.rms_mm * mm, plan.unit)}; ${counted(facts.count, 'node')} of ${plan.nodes} moved by more than 1 mm.`
  return { ...report, sentences: [moved, ...report.sentences] }
}
