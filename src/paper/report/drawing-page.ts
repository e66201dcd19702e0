/**
 * What is said to the person who drew a plan: what was read, assumed, repaired and left out, and what is asked of them, on one
 * page. Made once as plain sentences; `drawing-markdown.ts` and `drawing-html.ts` set them.
 */
import { shortest } from '../../base/decimal.ts'
import { conversion } from '../../base/length.ts'
import type { Question, Repair } from '../../base/repair.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import { counted, lengthWords, listWords, sentenceOf } from './figures.ts'
import type { ReadSummary } from './report.ts'

export interface PageEntry {
  /** Number in the list of repairs, and in the balloon on the drawing; null where there is nothing to point at. */
  readonly number: number | null
  readonly text: string
  /** "at (1.2, 3.4)", or "". */
  readonly place: string
  /** How Panewise is told the answer, as typed, or "". */
  readonly typed: string
  /** Answers of the person who drew, to be ticked. */
  readonly boxes: readonly string[]
}

export interface PageSection {
  readonly heading: string
  /** A sentence under the heading, or "". */
  readonly lead: string
  readonly entries: readonly PageEntry[]
}

export interface DrawingPage {
  readonly title: string
  /** What was read, in one sentence. */
  readonly read: string
  readonly sections: readonly PageSection[]
  /** Version of the program and the file's checksum, for the foot. */
  readonly foot: string
}

/** How many places an entry names. */
const placesNamed = 3

const assumed: readonly Repair['code'][] = ['unit-assumed', 'chords', 'flattened', 'which-lines']

export function drawingPage(summary: ReadSummary & { readonly version: string; readonly input: { readonly name: string; readonly sha256: string } }, read: ReadPlan): DrawingPage {
  const { input, plan, repairs, questions, leftOut, notices } = summary
  const numbered = repairs.map((repair, i) => ({ repair, number: i + 1 }))
  const entry = ({ repair, number }: (typeof numbered)[number]): PageEntry => ({
    number, text: sentenceOf(repair.message), place: placeWords(repair.where), boxes: repair.state === 'proposed' ? [...offerBoxes] : [],
    typed: repair.state === 'proposed' ? `--accept ${repair.code}` : '',
  })
  const asked = new Set(questions.map(({ code }) => code))
  const of = (wanted: (repair: Repair) => boolean): PageEntry[] => numbered.filter(({ repair }) => wanted(repair)).map(entry)
  const isOffer = ({ state }: Repair): boolean => state === 'proposed'
  const sections: PageSection[] = [
    {
      heading: 'Please answer', lead: '',
      entries: questions.map((question) => questionEntry(question, numbered.find(({ repair }) => repair.code === question.code && isOffer(repair))?.number ?? null, repairs)),
    },
    { heading: 'Proposed, not done', lead: 'Is it meant as drawn, or shall it be done?', entries: of((repair) => isOffer(repair) && !asked.has(repair.code)) },
    { heading: 'Done as agreed', lead: '', entries: of(({ state, code }) => state === 'accepted' && !assumed.includes(code)) },
    { heading: 'Repaired', lead: '', entries: of(({ state, code }) => state === 'applied' && !assumed.includes(code)) },
    {
      heading: 'Assumed', lead: '',
      entries: [...of(({ state, code }) => state !== 'proposed' && assumed.includes(code)), ...notices.map((notice): PageEntry => ({ number: null, text: sentenceOf(notice), place: '', typed: '', boxes: [] }))],
    },
    {
      heading: 'Left out', lead: leftOut.length === 0 ? '' : 'No part of the plan:',
      entries: leftOut.map(({ kind, layer, count }): PageEntry => ({
        // A kind may carry its reason: "LINE, layer frozen".
        number: null, text: `${count} ${kind.replace(/, (.*)$/, ' ($1)')}${layer === '' ? '' : ` on layer "${layer}"`}`, place: '', typed: '', boxes: [],
      })),
    },
  ]
  return {
    title: `The plan in ${input.name}, as it was read`,
    read: readSentence(plan, read),
    sections: sections.filter(({ entries }) => entries.length > 0),
    foot: `Read by Panewise ${summary.version}.${input.sha256 === '' ? '' : ` SHA-256 of the file: ${input.sha256.slice(0, 16)}..`} Places are coordinates of the drawing; numbers in circles are on the drawing above. Small type says how Panewise is told the answer.`,
  }
}

function questionEntry(question: Question, number: number | null, repairs: readonly Repair[]): PageEntry {
  const where = number === null ? [] : repairs[number - 1].where
  return { number, text: sentenceOf(question.message), place: placeWords(where), boxes: question.options.map(boxWords), typed: question.options.join(' or ') }
}

const offerBoxes = ['do it', 'as drawn'] as const

/** An option as an answer: "--unit mm" is "mm". */
function boxWords(option: string): string {
  if (option.startsWith('--accept ')) return offerBoxes[0]
  return option.startsWith('--leave ') ? offerBoxes[1] : option.replace(/^--[a-z-]+ ?/, '') || option
}

function placeWords(where: Repair['where']): string {
  const word = (value: number): string => shortest(Number(value.toFixed(3)))
  return where.length === 0 ? '' : `at ${listWords(where.map(([x, y]) => `(${word(x)}, ${word(y)})`), placesNamed)}`
}

function readSentence(facts: ReadSummary['plan'], { plan }: ReadPlan): string {
  let [left, right, low, high, longest, shortestEdge] = [Infinity, -Infinity, Infinity, -Infinity, 0, Infinity]
  for (let n = 0; n < plan.nodeCount; n += 1) {
    left = Math.min(left, plan.x[n])
    right = Math.max(right, plan.x[n])
    low = Math.min(low, plan.y[n])
    high = Math.max(high, plan.y[n])
  }
  for (let h = 0; h < plan.origin.length; h += 2) {
    const length = Math.hypot(plan.x[plan.origin[h + 1]] - plan.x[plan.origin[h]], plan.y[plan.origin[h + 1]] - plan.y[plan.origin[h]])
    longest = Math.max(longest, length)
    shortestEdge = Math.min(shortestEdge, length)
  }
  const word = (length: number): string => lengthWords(length, plan.unit)
  const edges = word(shortestEdge) === word(longest) ? word(longest) : `${word(shortestEdge)} to ${word(longest)}`
  const voids = facts.voids === 0 ? '' : `, ${counted(facts.voids, 'void')}`
  const parts = facts.parts === 1 ? '' : `, in ${facts.parts} parts that no joint connects`
  const unit = conversion(plan.unit, 'mm') === 1 ? 'mm' : plan.unit
  return `${counted(facts.panels, 'panel')} with ${counted(facts.joints, 'joint')} between them and ${counted(facts.rimEdges, 'edge')} along the rim${voids}${parts}. `
    + `The plan measures ${word(right - left)} by ${word(high - low)}; its edges are ${edges} long. Coordinates are in ${unit}.`
}
