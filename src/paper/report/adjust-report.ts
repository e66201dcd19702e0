/** What adjusting a plan came to, in sentences: what moved, what was held, or why nothing did. */
import { conversion } from '../../base/length.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { AdjustFacts } from '../../roof/answer/adjust-facts.ts'
import { counted, flatnessWords, lengthWords, sentenceOf } from './figures.ts'
import { answerReport, type Report } from './report.ts'

/** The report on the adjusted plan, or on the plan as drawn with the reason why it stayed. */
export function adjustReport(answer: Answer, facts: AdjustFacts): Report {
  const report = answerReport(answer)
  if (facts.outcome === 'lifts') return { ...report, sentences: ['The plan lifts as drawn, so no node was moved.', ...report.sentences] }
  if (facts.outcome !== 'moved') {
    const why = `${facts.outcome === 'refused' ? 'Moving nodes cannot help' : 'No plan near by does it'}: ${facts.reason ?? ''}`
    return { ...report, sentences: [sentenceOf(facts.cure === null ? why : `${why}; ${facts.cure}`), ...report.sentences] }
  }
  return { ...report, sentences: [...movedSentences(answer, facts), ...report.sentences] }
}

function movedSentences({ summary: { plan } }: Answer, facts: AdjustFacts): string[] {
  const millimetres = (mm: number): string => (mm < 0.005 ? 'less than 0.01 mm' : lengthOf(mm))
  const lengthOf = (mm: number): string => (mm < 1 ? `${Number(mm.toPrecision(2))} mm` : lengthWords(mm * conversion('mm', plan.unit), plan.unit))
  const within = facts.planVerdict === 'lifts within plan tolerance' ? 'The plan lifts within the plan tolerance: ' : ''
  const largest = `largest shift ${millimetres(facts.largest_mm)}, RMS ${millimetres(facts.rms_mm)}`
  const over = facts.count === 0 ? 'no node moved by more than 1 mm' : `${counted(facts.count, 'node')} of ${plan.nodes} moved by more than 1 mm`
  const sentences = [sentenceOf(`${within}${largest}; ${over}`)]
  if (facts.cornerBefore_mm !== null && facts.cornerAfter_mm !== null) {
    sentences.push(sentenceOf(`corner deviation of this roof ${flatnessWords(facts.cornerBefore_mm)} on the plan as drawn, ${flatnessWords(facts.cornerAfter_mm)} on the plan as moved`))
  }
  if (facts.heightError !== null) sentences.push(sentenceOf(`heights differ from those asked by ${lengthWords(facts.heightError, plan.unit)} (RMS)`))
  const { held } = facts
  if (held !== null) {
    const parts = [
      `${counted(held.fixed, 'node')} stayed`, `${held.sliding} slid along lines`,
      ...(held.straight > 0 ? [`${counted(held.straight, 'straight run')} through nodes kept`] : []),
      ...(held.bays > 0 ? [`${counted(held.bays, 'node')} kept in the middle of equal bays`] : []),
      ...(held.mirrorLines > 0 ? [`symmetric about ${counted(held.mirrorLines, 'line')}`] : []),
      ...(held.shapes > 0 ? [`${counted(held.shapes, 'panel')} kept ${held.shapes === 1 ? 'its' : 'their'} shape in the plan`] : []),
      ...(held.limits > 0 ? [`${counted(held.limits, 'edge or corner', 'edges or corners')} at the limit`] : []),
    ]
    sentences.push(sentenceOf(parts.join(', ')))
  }
  return sentences
}
