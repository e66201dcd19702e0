/** The answer as sentences in pieces: words, and figures that select what they count. */
import { conversion } from '../../base/length.ts'
import { figure, flatness, signed, slopeFigure, counted } from '../../paper/drawing/figures.ts'
import { panelName } from '../../plan/names.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { headline } from '../../paper/report/headline.ts'
import type { Reading } from '../../paper/drawing/reading.ts'

/** What a click on a figure does. */
export type Target =
  | { readonly kind: 'panel'; readonly index: number }
  | { readonly kind: 'flagged' }
  | { readonly kind: 'reading'; readonly name: 'group' | 'flatness' | 'slope' }
  | { readonly kind: 'ways' }
  | { readonly kind: 'problem' }

export type Piece = string | { readonly text: string; readonly to: Target }

export type Sign = 'lifts' | 'part' | 'within' | 'not' | 'open'

export function signOf(answer: Answer): Sign {
  switch (answer.summary.verdict) {
    case 'lifts': return 'lifts'
    case 'lifts in part': return 'part'
    case 'lifts within plan tolerance':
    case 'lifts within tolerance': return 'within'
    case 'does not lift': return 'not'
  }
}

const selectable: readonly (readonly [RegExp, (match: RegExpExecArray) => Target])[] = [
  [/\bP\d+\b/, (match) => ({ kind: 'panel', index: Number(match[0].slice(1)) - 1 })],
  [/\d+ independent adjustments?/, () => ({ kind: 'ways' })],
  [/\d+ planes?\b/, () => ({ kind: 'reading', name: 'group' })],
  [/\d+ of \d+ joints?/, () => ({ kind: 'reading', name: 'group' })],
]

/** The first sentence: the report's own, so that page, list and command line say the same. */
export function firstSentence(answer: Answer): Piece[] {
  return pieces(headline(answer))
}

function pieces(sentence: string): Piece[] {
  let best: { at: number; text: string; to: Target } | null = null
  for (const [pattern, target] of selectable) {
    const match = pattern.exec(sentence)
    if (match !== null && (best === null || match.index < best.at)) best = { at: match.index, text: match[0], to: target(match) }
  }
  if (best === null) return sentence === '' ? [] : [sentence]
  return [...(best.at > 0 ? [sentence.slice(0, best.at)] : []), { text: best.text, to: best.to }, ...pieces(sentence.slice(best.at + best.text.length))]
}

/** Flatness as written, the least slope and what is under it. */
export function secondSentence(answer: Answer, slopes: Reading, leastSlope: number | null, flat_mm: number): Piece[] {
  const { roof, summary } = answer
  if (roof === null || summary.roof === null) return []
  let least = 0
  let warped = 0
  let over = 0
  for (let p = 0; p < slopes.value.length; p += 1) {
    if (slopes.value[p] < slopes.value[least]) least = p
    if (roof.flatness_mm[p] > roof.flatness_mm[warped]) warped = p
    if (roof.flatness_mm[p] > flat_mm) over += 1
  }
  const out: Piece[] = []
  if (roof.isNear) {
    out.push('The nearest roof leaves ', { text: counted(over, 'panel'), to: { kind: 'reading', name: 'flatness' } },
      ` more than ${figure(flat_mm, 1)} mm off flat, worst ${flatness(summary.roof.flatnessMax_mm)} at `, { text: panelName(warped), to: { kind: 'panel', index: warped } }, '. ')
  } else {
    out.push('Panels flat to ', { text: flatness(summary.roof.flatnessMax_mm), to: { kind: 'reading', name: 'flatness' } }, ' as written. ')
  }
  out.push('Least slope ', { text: slopeFigure(slopes.value[least]), to: { kind: 'reading', name: 'slope' } }, ' at ', { text: panelName(least), to: { kind: 'panel', index: least } })
  const under = leastSlope === null ? 0 : slopes.panelClasses[0].count
  if (leastSlope !== null && under > 0) out.push('; ', { text: counted(under, 'panel'), to: { kind: 'flagged' } }, ` ${under === 1 ? 'is' : 'are'} under ${figure(leastSlope, Number.isInteger(leastSlope) ? 0 : 1)}°`)
  else if (leastSlope !== null) out.push(`; no panel is under ${figure(leastSlope, Number.isInteger(leastSlope) ? 0 : 1)}°`)
  out.push('.')
  return out
}

/** Lowest and highest node of the outer rim over the springing, in mm. */
export function rimWords(answer: Answer): string {
  const { plan, roof } = answer
  if (roof === null) return 'not raised'
  let low = Infinity
  let high = -Infinity
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 1) continue
    for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) {
      const z = roof.heights[plan.origin[plan.rimHalf[k]]]
      if (z < low) low = z
      if (z > high) high = z
    }
  }
  const mm = conversion(plan.unit, 'mm')
  const rim = answer.conditions.some(({ nodes }) => nodes.length > 2) ? 'held' : 'free'
  return (high - low) * mm < 0.5 ? `level at ${signed(low * mm)}` : `${rim}, ${signed(low * mm)} to ${signed(high * mm)}`
}
