/** What people read: the wording of every verdict, and that no figure is lost or made up on the way. */
import { describe, expect, test } from 'vitest'
import { flatnessWords, lengthWords, listWords } from '../../../src/paper/report/figures.ts'
import { answerReport, readReport } from '../../../src/paper/report/report.ts'
import { reportText } from '../../../src/paper/report/report-text.ts'
import type { Answer } from '../../../src/roof/answer/answer.ts'
import { answerOf, roofOf } from '../../make/answers.ts'
import { grid } from '../../make/plans.ts'

const bays = grid(12, 8, { bay: 1.5 })
/** z = f(x) + g(y) is a lift of any rectangular grid. */
const vault = roofOf(bays, [...bays.x].map((x, n) => 2.4 - ((x - 9) / 9) ** 2 - ((bays.y[n]! - 6) / 6) ** 2))
const condition = (name: string, kind = 'level', soft = false): Answer['conditions'][number] => ({ name, kind, soft, nodes: new Int32Array(0) })

const first = (answer: Answer): string => answerReport(answer).headline
const text = (answer: Answer): string => reportText(answerReport(answer))

describe('the first sentence', () => {
  test('free rim: the freedom, and by how much the rim varies', () => {
    expect(first(answerOf(bays, vault, { stress: { freedom: 18, freedomLeft: 21 }, roof: { rimVariation: 0.9 } }))).toBe(
      'All 96 panels can be flat; 18 independent adjustments left; with the rim free it varies by 0.90 m.',
    )
  })

  test('conditions held: what they leave', () => {
    const held = { stress: { freedom: 18, freedomLeft: 7 }, conditions: [condition('long sides')] }
    expect(first(answerOf(bays, vault, { ...held, roof: { rimVariation: 1.25 } }))).toBe('All 96 panels can be flat; 7 independent adjustments left under the conditions; the rim varies by 1.25 m.')
    expect(first(answerOf(bays, vault, { ...held, stress: { freedom: 18, freedomLeft: 1 } }))).toBe('All 96 panels can be flat; 1 independent adjustment left under the conditions; the rim is level.')
    expect(first(answerOf(bays, vault, { ...held, stress: { freedom: 18, freedomLeft: 0 } }))).toContain('there is exactly one such roof under the conditions')
  })

  test('soft conditions alone hold nothing', () => {
    expect(first(answerOf(bays, vault, { stress: { freedom: 18, freedomLeft: 21 }, conditions: [condition('a wish', 'level', true)] }))).toContain('18 independent adjustments left; with the rim free')
  })

  test('one panel', () => {
    const one = grid(1, 1)
    const answer = answerOf(one, roofOf(one, [...one.x].map((x) => 0.3 * x)), { stress: { freedom: 0, freedomLeft: 3 }, roof: { rimVariation: 0.3 } })
    expect(first(answer)).toBe('The one panel can be flat; nothing is left to adjust but its tilt; with the rim free it varies by 0.30 m.')
  })

  test('a pitch that is met', () => {
    const slope = Math.tan((15 * Math.PI) / 180)
    const answer = answerOf(bays, roofOf(bays, [...bays.y].map((y) => slope * y)), { conditions: [condition('pitch', 'plane')], stress: { freedomLeft: 1 } })
    expect(first(answer)).toBe('All 96 panels can be flat, in one plane at 15.0 degrees falling south.')
  })

  test('in part: how many joints fold and which panels stay together', () => {
    const answer = answerOf(bays, vault, {
      verdict: 'lifts in part',
      held: { frozenJoints: 100, flatGroups: 3 },
      flatGroup: Int32Array.from({ length: 96 }, (_, p) => (p < 60 ? 0 : p < 90 ? 1 : 2)),
      stress: { freedom: 2 },
      roof: { rimVariation: 0 },
      reason: 'the stems of its T-junctions never fold',
    })
    expect(bays.jointCount).toBe(172)
    expect(first(answer)).toBe(
      'All 96 panels can be flat, but only 72 of 172 joints can fold: they make 3 planes, the largest of 60 panels; 2 independent adjustments left; with the rim free it stays level.',
    )
    expect(text(answer)).toContain('Verdict: lifts in part.\nThe reason: the stems of its T-junctions never fold.')
  })

  test('within tolerance: the nearest roof and its worst panel', () => {
    const answer = answerOf(bays, { ...vault, isNear: true }, {
      verdict: 'lifts within tolerance',
      stress: { freedomLeft: 0 },
      roof: { cornerMax_mm: 1.61, flatnessMax_mm: 0.834, heightError: 0.012 },
    })
    expect(first(answer)).toBe('The 96 panels cannot be exactly flat, but the nearest roof keeps every panel within the tolerance (worst 0.83 mm).')
    expect(text(answer)).toContain('a corner 1.61 mm out of the plane of the others')
    expect(text(answer)).toContain('Its heights differ from the wish by 12 mm')
  })

  test('not at all: with the reason', () => {
    const reason = 'P1, P12, P85 and P96 have two edges on the level rim, so they are level; that makes all 96 panels level'
    const answer = answerOf(bays, null, { verdict: 'does not lift', reason, reasonKind: 'propagation', stress: { freedom: 18, freedomLeft: 0 }, conditions: [condition('rim level')] })
    expect(first(answer)).toBe(`The roof cannot be raised with flat panels: ${reason}.`)
    expect(text(answer)).toContain('Verdict: does not lift.')
    expect(text(answer).split(reason).length).toBe(2)
  })
})

describe('figures', () => {
  test('never 0.00: better than 0.01 mm as written', () => {
    expect(flatnessWords(0)).toBe('better than 0.01 mm')
    expect(flatnessWords(0.00499)).toBe('better than 0.01 mm')
    expect(flatnessWords(0.0051)).toBe('0.01 mm')
    expect(flatnessWords(11.204)).toBe('11.20 mm')
    const said = text(answerOf(bays, vault, {}))
    expect(said).toContain('Every panel is flat to better than 0.01 mm as written.')
    expect(said).not.toMatch(/\b0\.00\b/)
  })

  test('lengths in the plan\'s unit become metres or feet, short ones millimetres', () => {
    expect(lengthWords(2.4, 'm')).toBe('2.400 m')
    expect(lengthWords(2400, 'mm')).toBe('2.400 m')
    expect(lengthWords(-240, 'cm')).toBe('-2.400 m')
    expect(lengthWords(12, 'ft')).toBe('12.000 ft')
    expect(lengthWords(144, 'in', 2)).toBe('12.00 ft')
    expect(lengthWords(0.0123, 'm')).toBe('12.3 mm')
    expect(lengthWords(0.0004, 'm')).toBe('less than 1 mm')
  })

  test('long lists end in a number', () => {
    expect(listWords(['a', 'b'])).toBe('a and b')
    expect(listWords(['a', 'b', 'c', 'd', 'e'], 3)).toBe('a, b, c and 2 more')
    expect(listWords(['a', 'b', 'c', 'd'], 3)).toBe('a, b, c and d')
  })

  test('a rise that was asked, had by default, or not to be had', () => {
    const rise = (rise: number, riseAsked: number | null, options: Record<string, unknown> = {}): string => text(answerOf(bays, vault, { roof: { rise, riseAsked }, options }))
    expect(rise(2.4, 2.4, { rise: '2.4' })).toContain('It rises 2.400 m above its springing, as asked.')
    expect(rise(2.4, 2.4)).toContain('It rises 2.400 m above its springing.')
    expect(rise(1.203, 2.4, { rise: '2.4' })).toContain('It rises 1.203 m above its springing; the 2.400 m asked cannot be had under the conditions.')
    expect(rise(1.203, 1.2, {})).toContain('the 1.200 m of the default cannot be had')
    expect(rise(1.2, null)).toContain('It rises 1.200 m above its springing.')
    expect(rise(1.2, null, { down: true })).toContain('It hangs 1.200 m below the highest node of its rim.')
  })
})

describe('the rest', () => {
  const answer = answerOf(bays, vault, {
    repairs: [
      { code: 'joined', state: 'applied', count: 5, message: '5 line ends were joined, at most 0.4 mm apart', where: [[1, 2], [3.25, 4], [5, 6], [7, 8], [9, 0.0004]] },
      { code: 'unit-assumed', state: 'applied', count: 1, message: 'The file states no unit: metres are assumed.', where: [] },
      { code: 'straighten', state: 'proposed', count: 1, message: 'Axis 3 is off straight by 4 mm.', where: [] },
    ],
    questions: [{ code: 'unit', message: 'panels of 38.1 m are not plausible', options: ['--unit mm', '--scale 1:N'] }],
    leftOut: [{ kind: 'TEXT', layer: 'A-ANNO', count: 14 }, { kind: 'HATCH, paper space', layer: '', count: 1 }],
    notices: ['the heights in the file are no target'],
    held: { clashes: [{ conditions: ['south gutter', 'north wall'], misfit_mm: 12 }] },
    stress: { freedom: 18, decided: false, countAt: [18, 20] },
    roof: { worstPanels: [{ name: 'P7', corner_mm: 2.5, flatness_mm: 1.25 }, { name: 'P9', corner_mm: 2, flatness_mm: 1 }] },
  })
  const said = text(answer)

  test('repairs with their places, questions with their answers, what was left out, clashes, doubts', () => {
    expect(said).toContain('Repaired [joined]: 5 line ends were joined, at most 0.4 mm apart, at (1, 2), (3.25, 4), (5, 6) and 2 more.')
    expect(said).toContain('Assumed [unit-assumed]: The file states no unit: metres are assumed.')
    expect(said).toContain('Proposed [straighten]: Axis 3 is off straight by 4 mm (take it with --accept straighten).')
    expect(said).toContain('Question: Panels of 38.1 m are not plausible. Answer with --unit mm or --scale 1:N.')
    expect(said).toContain('Left out: 15 things that are no part of a plan: 14 TEXT on layer "A-ANNO" and 1 HATCH (paper space).')
    expect(said).toContain('The heights in the file are no target.')
    expect(said).toContain('"south gutter" and "north wall" clash by 12 mm.')
    expect(said).toContain('not decided: 18 or 20')
    expect(said).toContain('Over the tolerance, worst first: P7 2.50 mm and P9 2.00 mm at the corner.')
  })

  test('it ends with the caution', () => {
    expect(said.trimEnd().endsWith(answer.summary.caution)).toBe(true)
    expect(answer.summary.caution).toContain('geometry only')
    expect(answer.summary.caution).toContain('qualified engineer')
  })

  test('names stay text: nothing in them steers the terminal', () => {
    const evil = answerOf(bays, vault, { notices: ['layer "\u001b[2J\u202eb\nAll 96 panels"'] })
    expect(text(evil)).toContain('Layer "\ufffd[2J\ufffdb All 96 panels".')
  })

  test('a plan that was only read', () => {
    const { plan, ...rest } = answer.summary
    const report = readReport({ ...rest, plan: { ...plan, voids: 2 } })
    expect(report.headline).toBe('plan.obj holds a plan of 96 panels with 172 joints, 2 voids.')
    expect(reportText(report)).not.toContain('Verdict')
  })
})
