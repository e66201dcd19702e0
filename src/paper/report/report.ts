/**
 * What an answer says to people, in the order in which it is said. Made once as plain sentences and facts, so that the
 * terminal, a page and a file say the same words.
 */
import type { Answer, Binding, PlanFacts, Verdict } from '../../roof/answer/answer.ts'
import { caution } from '../../roof/answer/caution.ts'
import { drawingSentences, type DrawingNotes } from './drawing-sentences.ts'
import { answerFacts, planFacts, type Fact } from './facts.ts'
import { counted, lengthWords, listWords, sentenceOf } from './figures.ts'
import { headline } from './headline.ts'
import { oneWaySentences } from './one-way-sentences.ts'
import { roofSentences } from './roof-sentences.ts'

export interface Report {
  /** The first sentence. */
  readonly headline: string
  /** null for a plan that was only read. */
  readonly verdict: Verdict | null
  readonly sentences: readonly string[]
  readonly facts: readonly Fact[]
  /** What it takes, a line each, under their heading; absent: a plain yes, or nothing was looked for. */
  readonly cures?: { readonly heading: string; readonly lines: readonly string[] }
  /** null for a plan that was only read: nobody could take it for a design. */
  readonly caution: string | null
}

export function answerReport(answer: Answer): Report {
  const { summary } = answer
  return {
    headline: headline(answer),
    verdict: summary.verdict,
    sentences: [...reasonSentences(answer), ...roofSentences(answer), ...oneWaySentences(summary), ...drawingSentences(summary)],
    facts: answerFacts(summary),
    caution,
  }
}

/** A plan that was only read. */
export interface ReadSummary extends DrawingNotes {
  readonly input: { readonly name: string }
  readonly plan: PlanFacts
}

export function readReport(summary: ReadSummary): Report {
  const { plan, input } = summary
  const voids = plan.voids === 0 ? '' : `, ${counted(plan.voids, 'void')}`
  return {
    headline: `${input.name} holds a plan of ${counted(plan.panels, 'panel')} with ${counted(plan.joints, 'joint')}${voids}.`,
    verdict: null,
    sentences: drawingSentences(summary),
    facts: planFacts(plan),
    caution: null,
  }
}

function reasonSentences({ summary, conditions }: Answer): string[] {
  const { verdict, reason, held, stress, plan } = summary
  const sentences: string[] = []
  // The reason of a roof that cannot be raised is in the first sentence already.
  if (reason !== null && verdict !== 'lifts' && verdict !== 'does not lift') sentences.push(sentenceOf(`the reason: ${reason}`))
  for (const { conditions: names, misfit_mm } of held.clashes) {
    const misfit = lengthWords(misfit_mm, 'mm')
    sentences.push(`${sentenceOf(`${listWords(names.map((name) => `"${name}"`))} ${names.length === 1 ? 'contradicts itself' : 'clash'} by ${misfit}`)}`)
  }
  if (conditions.length > 0) sentences.push(`${conditionsSentence(conditions)}`)
  for (const binding of held.binding ?? []) sentences.push(bindingSentence(binding))
  if (!stress.decided) {
    const [fine, coarse] = stress.countAt ?? [stress.freedom, stress.freedom]
    sentences.push(`The count of independent adjustments is not decided: ${fine} or ${coarse}, as nearly flat counts as flat or not.`)
  }
  if (plan.parts > 1) sentences.push(`The plan falls into ${plan.parts} parts that no joint connects; each moves on its own.`)
  return sentences
}

/** Rises below this, in mm, are none. */
const noRise_mm = 0.5

function bindingSentence({ condition, at, rise_mm, move_mm }: Binding): string {
  const without = `without it nodes would move by up to ${lengthWords(move_mm, 'mm')}`
  if (rise_mm >= noRise_mm) return `"${condition}" binds at ${at} and costs ${lengthWords(rise_mm, 'mm')} of rise; ${without}.`
  return `"${condition}" binds at ${at} and costs no rise; ${without}.`
}

/** How many conditions a sentence names. */
const conditionsNamed = 6

function conditionsSentence(conditions: Answer['conditions']): string {
  const hard = conditions.filter(({ soft }) => !soft).map(({ name }) => `"${name}"`)
  const soft = conditions.filter((each) => each.soft).map(({ name }) => `"${name}"`)
  const held = hard.length === 0 ? '' : `Held: ${listWords(hard, conditionsNamed)}.`
  const wished = soft.length === 0 ? '' : `Wished: ${listWords(soft, conditionsNamed)}.`
  return [held, wished].filter((text) => text !== '').join(' ')
}
