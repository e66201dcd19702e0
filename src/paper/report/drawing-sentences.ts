/** What the reader did to a drawing, asks about it and left out, as sentences. */
import type { LeftOut, Question, Repair } from '../../base/repair.ts'
import { shortest } from '../../base/decimal.ts'
import { counted, listWords, sentenceOf } from './figures.ts'

export interface DrawingNotes {
  readonly repairs: readonly Repair[]
  readonly questions: readonly Question[]
  readonly leftOut: readonly LeftOut[]
  readonly notices: readonly string[]
}

/** How many places a sentence names. */
const placesNamed = 3
/** How many kinds of things left out a sentence names. */
const kindsNamed = 8

const states: Readonly<Record<Repair['state'], string>> = { applied: 'Repaired', accepted: 'Accepted', proposed: 'Proposed' }

export function drawingSentences({ repairs, questions, leftOut, notices }: DrawingNotes): string[] {
  return [
    ...repairs.map(repairSentence),
    ...questions.map((question) => `Question: ${questionSentence(question)}`),
    ...(leftOut.length > 0 ? [leftOutSentence(leftOut)] : []),
    ...notices.map(sentenceOf),
  ]
}

function repairSentence({ code, state, message, where }: Repair): string {
  const clause = message.trim().replace(/\.$/, '')
  const places = where.length === 0 ? '' : `, at ${listWords(where.map(([x, y]) => `(${coordinate(x)}, ${coordinate(y)})`), placesNamed)}`
  const take = state === 'proposed' ? ` (take it with --accept ${code})` : ''
  const done = code === 'unit-assumed' ? 'Assumed' : states[state]
  return `${done} [${code}]: ${clause}${places}${take}.`
}

/** The question with what answers it. */
export function questionSentence({ message, options }: Question): string {
  return `${sentenceOf(message)}${options.length === 0 ? '' : ` Answer with ${options.join(' or ')}.`}`
}

function leftOutSentence(leftOut: readonly LeftOut[]): string {
  // A kind may carry its reason: "LINE, layer frozen".
  const named = (kind: string): string => kind.replace(/, (.*)$/, ' ($1)')
  const kinds = leftOut.map(({ kind, layer, count }) => `${count} ${named(kind)}${layer === '' ? '' : ` on layer "${layer}"`}`)
  const all = leftOut.reduce((sum, { count }) => sum + count, 0)
  return `Left out: ${counted(all, 'thing')} that ${all === 1 ? 'is' : 'are'} no part of a plan: ${listWords(kinds, kindsNamed)}.`
}

const coordinate = (value: number): string => shortest(Number(value.toFixed(3)))
