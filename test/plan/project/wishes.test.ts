/** Brief and options together: which one rules, and in which unit. */
import { describe, expect, test } from 'vitest'
import { sentence } from '../../../src/base/result.ts'
import { emptyBrief, type Brief } from '../../../src/plan/project/brief.ts'
import { noOptions, type Options } from '../../../src/plan/project/options.ts'
import { readOptionsOf, wishesOf, type Wishes } from '../../../src/plan/project/wishes.ts'
import type { Unit } from '../../../src/base/length.ts'

function wishes(brief: Partial<Brief>, options: Partial<Options>, unit: Unit = 'm'): Wishes {
  const made = wishesOf({ ...emptyBrief, ...brief }, { ...noOptions, ...options }, unit)
  if (!made.ok) throw new Error(sentence(made.problem))
  return made.value
}

function refusal(options: Partial<Options>): string {
  const made = wishesOf(emptyBrief, { ...noOptions, ...options }, 'm')
  if (made.ok) throw new Error('accepted')
  return sentence(made.problem)
}

const gutter = { name: 'gutter', soft: null, kind: 'level', at: { run: [[0, 0], [18, 0]] }, level: 3 } as const
const rim = { name: 'rim', soft: null, kind: 'level', at: { rim: 'outer' }, level: 3 } as const

describe('lengths', () => {
  test('of the brief go from its unit to the plan\'s, points and sections too; millimetres stay', () => {
    const made = wishes({
      unit: 'm', datum: 3, rise: 2.4, flat_mm: 2,
      conditions: [
        gutter,
        { name: 'p', soft: null, kind: 'profile', at: { run: ['N1', [0, 12]] }, section: { points: [[0, 3], [12, 3.5]] }, level: null },
        { name: 'n', soft: null, kind: 'level', at: { nodes: [[1, 2]], within_mm: 20 }, level: null },
        { name: 'v', soft: 1, kind: 'equal', at: { rim: [1, 2] } },
        { name: 'a', soft: null, kind: 'profile', at: { run: [[0, 0], [0, 12]] }, section: { arc: { rise: 2.4 } }, level: 1 },
        { name: 'f', soft: null, kind: 'plane', at: { panels: 'all' }, pitch_deg: 10, bearing_deg: 90 },
      ],
    }, {}, 'mm')
    expect(made).toMatchObject({ datum: 3000, rise: 2400, flat_mm: 2 })
    expect(made.conditions).toMatchObject([
      { at: { run: [[0, 0], [18_000, 0]] }, level: 3000 },
      { at: { run: ['N1', [0, 12_000]] }, section: { points: [[0, 3000], [12_000, 3500]] }, level: null },
      { at: { nodes: [[1000, 2000]], within_mm: 20 }, level: null },
      { at: { rim: [1000, 2000] }, soft: 1 },
      { section: { arc: { rise: 2400 } }, level: 1000 },
      { pitch_deg: 10, bearing_deg: 90 },
    ])
  })
  test('typed ones may carry a unit; bare ones are in the plan\'s', () => {
    expect(wishes({}, { rise: '240cm', datum: '-1' }, 'mm')).toMatchObject({ rise: 2400, datum: -1 })
    expect(wishes({}, { rise: 3 }, 'ft')).toMatchObject({ rise: 3 })
    expect(refusal({ rise: 'high' })).toBe('--rise: "high" is not a length; write it like 1.2m, 1200mm or 4\' 6".')
  })
})

describe('options win over the brief', () => {
  test('one by one, and where they are silent the brief stands', () => {
    const brief = { datum: 1, rise: 2, down: true, shape: 'dome', flat_mm: 3 } as const
    expect(wishes(brief, {})).toMatchObject({ datum: 1, rise: 2, down: true, shape: 'dome', flat_mm: 3 })
    expect(wishes(brief, { datum: 4, rise: 5, shape: 'barrel', flat_mm: 6 })).toMatchObject({ datum: 4, rise: 5, down: false, shape: 'barrel', flat_mm: 6 })
    expect(wishes({}, {})).toMatchObject({ datum: null, rise: null, down: false, shape: null, flat_mm: 1, pitch: null, conditions: [] })
  })
  test('a rim given takes the place of the brief\'s level on the outer rim only', () => {
    expect(wishes({ conditions: [rim, gutter] }, {}).conditions.map((c) => c.name)).toEqual(['rim', 'gutter'])
    expect(wishes({ conditions: [rim, gutter] }, { rim: 'free' }).conditions.map((c) => c.name)).toEqual(['gutter'])
    expect(wishes({ conditions: [rim] }, { rim: 'level' }).conditions).toEqual([{ name: 'rim level', soft: null, kind: 'level', at: { rim: 'outer' }, level: null }])
    expect(wishes({}, { rim: { level: '350cm' } }).conditions).toMatchObject([{ name: 'rim level', level: 3.5 }])
  })
  test('voids for reading: the options\' as given, else the brief\'s in the file\'s unit', () => {
    const brief = { ...emptyBrief, unit: 'm', voids: [[4.5, 3]] } as const
    expect(readOptionsOf(brief, noOptions, 'mm').voids).toEqual([[4500, 3000]])
    expect(readOptionsOf(brief, noOptions, null).voids).toEqual([[4.5, 3]])
    expect(readOptionsOf(brief, { ...noOptions, unit: 'cm', voids: [[1, 2]] }, 'mm')).toMatchObject({ unit: 'cm', voids: [[1, 2]] })
  })
})

test('--pitch is a plane on all panels', () => {
  expect(wishes({}, { pitch_deg: 12, bearing_deg: 90 })).toMatchObject({
    pitch: { pitch_deg: 12, bearing_deg: 90 },
    conditions: [{ name: 'pitch', soft: null, kind: 'plane', at: { panels: 'all' }, pitch_deg: 12, bearing_deg: 90 }],
  })
  expect(wishes({}, { pitch_deg: 12 }).pitch?.bearing_deg).toBe(180)
  expect(refusal({ bearing_deg: 90 })).toBe('--bearing: a bearing needs a pitch; give --pitch too.')
  expect(refusal({ pitch_deg: 90 })).toContain('--pitch: a pitch is between 0 and 90 degrees, not 90')
})

test('levels by place become conditions called by file and row', () => {
  const levels = { source: 'survey.csv', unit: 'm', rows: [{ name: 'T12', at: [1, 2], level: 3 }, { name: null, at: [4, 5], level: 6 }] } as const
  expect(wishes({}, { levels, levelsWithin: '10cm' }, 'mm').conditions).toEqual([
    { name: 'levels survey.csv row T12', soft: null, kind: 'level', at: { nodes: [[1000, 2000]], within_mm: 100 }, level: 3000 },
    { name: 'levels survey.csv row 2', soft: null, kind: 'level', at: { nodes: [[4000, 5000]], within_mm: 100 }, level: 6000 },
  ])
  expect(wishes({}, { levels }).conditions[0]).toMatchObject({ at: { nodes: [[1, 2]] } })
})

test('rises that are not above 0 are refused with the way out', () => {
  expect(refusal({ rise: '-2m' })).toBe('--rise: the rise must be more than 0; use --down for a roof that hangs from its rim.')
  expect(refusal({ rise: 0 })).toContain('more than 0')
})

test('what is switched off is not asked for', () => {
  expect(wishes({ conditions: [{ ...gutter, off: true }, rim] }, {}).conditions).toEqual([rim])
})
