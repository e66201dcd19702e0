/** The report on an answer whose cures were looked for: what was applied, what stands in the way, what it takes. */
import type { Answer } from '../../roof/answer/answer.ts'
import { answerLine, asDrawnSentence, blockingSentence, cureLines } from './cure-sentences.ts'
import { answerReport, type Report } from './report.ts'

export function solvedReport(answer: Answer): Report {
  const report = answerReport(answer)
  const { summary } = answer
  const { cured = [], asDrawn, held: { blocking }, plan } = summary
  const heading = answerLine(summary)
  return {
    ...report,
    sentences: [
      ...cured.map(({ message }) => `Done: ${message}`),
      ...report.sentences,
      ...(asDrawn === undefined || summary.verdict !== 'does not lift' ? [] : [asDrawnSentence(asDrawn, plan.panels)]),
      ...(blocking === undefined ? [] : [blockingSentence(blocking, plan.joints)]),
    ],
    ...(heading === null ? {} : { cures: { heading, lines: cureLines(summary) } }),
  }
}
