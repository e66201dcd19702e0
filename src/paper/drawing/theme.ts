/**
 * Colours and strokes behind the style tokens. Ratios against paper, computed by WCAG 2's formula: ink 15.0 and 13.2 (day,
 * night), notes 6.8 and 7.6, rules 3.2 and 3.7, hand 8.3 and 8.3, fault 6.7 and 8.1, valley 6.4 and 8.4; ink on the
 * strongest tone 5.5 by day and 4.8 by night. Night is the same sheet, chalk on slate. Print is always day.
 */
import type { LineName, Tone } from './display-list.ts'

export type ThemeName = 'day' | 'night'
export type Theme = Readonly<Record<Tone | 'desk', string>>

const day: Theme = {
  desk: '#D8DDD5', paper: '#F5F7F1', ink: '#17222B', ink2: '#4A5862', rule: '#7F8C92', hair: '#CDD4CD',
  hand: '#6B2A8C', handWash: '#EADFF0', fault: '#98390C', faultWash: '#F6E3C6', valley: '#0B665A',
  cool1: '#EAF0F1', cool2: '#D8E3E7', cool3: '#C3D3DB', cool4: '#ABC2CE', cool5: '#93AFBE', cool6: '#7A9CAF',
  warm1: '#F1D7A4', warm2: '#E2B06F', warm3: '#CC8746',
  group1: '#E3E1EC', group2: '#DCE8E2', group3: '#F0E6D2', group4: '#DDE6EE',
  light: '#E3E6DF', shade: '#17222B', fold1: '#66757E', fold2: '#40505A', fold3: '#17222B', valley1: '#2F7F72', valley2: '#0B665A',
}

const night: Theme = {
  desk: '#0F1417', paper: '#1B2226', ink: '#E7EAE2', ink2: '#A9B4B5', rule: '#6E7C82', hair: '#343F45',
  hand: '#D3ABEE', handWash: '#3A2B47', fault: '#F2A772', faultWash: '#43301F', valley: '#74CBB8',
  cool1: '#242D32', cool2: '#2B373E', cool3: '#33434C', cool4: '#3B4F5A', cool5: '#435C69', cool6: '#4B6978',
  warm1: '#5C4522', warm2: '#75501F', warm3: '#8A5520',
  group1: '#2E2B3B', group2: '#223531', group3: '#3B3323', group4: '#263440',
  light: '#232B2F', shade: '#E7EAE2', fold1: '#8B989C', fold2: '#BAC3C1', fold3: '#E7EAE2', valley1: '#57A997', valley2: '#74CBB8',
}

export const themes: Readonly<Record<ThemeName, Theme>> = { day, night }

export interface LineStyle {
  readonly tone: Tone
  readonly width: number
  /** Lengths of dashes and gaps in px; empty: solid. */
  readonly dash: readonly number[]
  readonly cap: 'butt' | 'round'
}

const solid = (tone: Tone, width: number, cap: 'butt' | 'round' = 'round'): LineStyle => ({ tone, width, dash: [], cap })

export const lineStyles: Readonly<Record<LineName, LineStyle>> = {
  ridge: solid('ink', 1.4),
  valley: { tone: 'valley', width: 1.4, dash: [8, 3.5], cap: 'butt' },
  casing: solid('paper', 3.2, 'butt'),
  flush: { tone: 'ink', width: 1.5, dash: [0.1, 3.6], cap: 'round' },
  frozen: solid('ink', 0.8, 'butt'),
  rim: solid('ink', 2.4),
  voidCross: solid('rule', 0.9),
  selected: solid('hand', 2.4),
  held: solid('hand', 1.4),
  heldSoft: { tone: 'hand', width: 1.4, dash: [3.2, 2.4], cap: 'butt' },
  before: { tone: 'rule', width: 1, dash: [2, 2.5], cap: 'butt' },
  hatch: solid('rule', 0.7, 'butt'),
  water: solid('fault', 1.1, 'butt'),
  hair: solid('hair', 1, 'butt'),
  rule: solid('rule', 0.9, 'butt'),
  thin: solid('ink', 1.05),
  chain: { tone: 'hand', width: 0.9, dash: [9, 3, 2, 3], cap: 'butt' },
  tolerance: solid('fault', 1.5, 'butt'),
  drop: solid('rule', 0.8),
  weak1: solid('fold1', 0.8),
  weak2: solid('fold2', 1.6),
  weakValley: { tone: 'valley1', width: 0.8, dash: [8, 3.5], cap: 'butt' },
  moved: solid('hand', 0.8),
  axis: { tone: 'ink2', width: 0.8, dash: [9, 3, 2, 3], cap: 'butt' },
}

/** Stacks of the two faces; the files are the project's own copies, nothing is asked of a network. */
export const faces = {
  pen: "'National Park Variable', 'National Park', system-ui, sans-serif",
  text: "'Sofia Sans Semi Condensed Variable', 'Sofia Sans Semi Condensed', system-ui, sans-serif",
} as const
