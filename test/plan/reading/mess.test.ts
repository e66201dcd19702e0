/**
 * The rest of an office's mess, a drawing each: one roof of 4 x 3 panes drawn in the ways that programs leave behind. What is
 * read is the clean plan, and what was in the way is named.
 */
import { describe, expect, test } from 'vitest'
import { read } from '../../../src/job/run.ts'
import { noOptions, type Options } from '../../../src/plan/project/options.ts'
import { at, dxfText, line, type Content, type Pairs, type Written } from '../../formats/dxf-writer.ts'
import { grid } from '../../make/plans.ts'
import { isClean } from '../../make/spoilt.ts'

const bay = 1500
const [m, n] = [4, 3]
const clean = grid(m, n, { bay })

type Spot = readonly [number, number]
const corners = (i: number, j: number): Spot[] => [[i, j], [i + 1, j], [i + 1, j + 1], [i, j + 1]].map(([x, y]) => [x! * bay, y! * bay] as const)
const panes = Array.from({ length: m * n }, (_, k) => corners(k % m, Math.floor(k / m)))
const outline = (points: readonly Spot[], more: Pairs = [], layer = 'ROOF'): Written =>
  ({ kind: 'LWPOLYLINE', layer, pairs: [[90, points.length], [70, 1], ...more, ...points.flatMap(([x, y]) => [[10, x], [20, y]] as const)] })
const lines = (z = 0): Written[] => [
  ...Array.from({ length: m + 1 }, (_, i) => line([i * bay, 0, z], [i * bay, n * bay, z], 'ROOF')),
  ...Array.from({ length: n + 1 }, (_, j) => line([0, j * bay, z], [m * bay, j * bay, z], 'ROOF')),
]

async function reading(content: Content, options: Partial<Options> = {}) {
  const bytes = new TextEncoder().encode(dxfText({ units: 4, ...content }))
  const answer = await read({ command: 'read', source: { name: 'mess.dxf', bytes }, options: { ...noOptions, ...options }, brief: null, levels: null, given: {} })
  if (!answer.ok) throw new Error(`${answer.problem.message} ${JSON.stringify(answer.problem.where)}`)
  const { summary, readPlan } = answer.value
  return {
    plan: readPlan.plan, questions: summary.questions.map(({ code }) => code), leftOut: summary.leftOut.map(({ kind, layer, count }) => `${count} ${kind} on ${layer}`),
    repairs: summary.repairs.map(({ code, state, message }) => `${state} ${code}: ${message}`), notices: summary.notices,
    codes: summary.repairs.filter(({ code }) => code !== 'split').map(({ code }) => code),
  }
}

describe('turned and mirrored', () => {
  test('entities seen from below: extrusion 0, 0, -1 mirrors x', async () => {
    const r = await reading({ entities: panes.map((pane) => outline(pane.map(([x, y]) => [-x, y] as const), [[210, 0], [220, 0], [230, -1]])) })
    expect([isClean(clean, r.plan, 1e-9), r.codes, r.questions]).toEqual([true, [], []])
  })

  test('half of the panes seen from below, half from above', async () => {
    const r = await reading({ entities: panes.map((pane, k) => (k % 2 === 0 ? outline(pane) : outline(pane.map(([x, y]) => [-x, y] as const), [[210, 0], [220, 0], [230, -1]]))) })
    expect([isClean(clean, r.plan, 1e-9), r.codes]).toEqual([true, []])
  })

  test('blocks in blocks, scaled, turned and mirrored', async () => {
    // A pane of 1 x 1; two of them as a pair, the second mirrored; pairs and their mirror images make the roof.
    const insert = (name: string, x: number, y: number, [sx, sy]: Spot, turn: number): Written =>
      ({ kind: 'INSERT', layer: 'ROOF', pairs: [[2, name], ...at(10, x, y), [41, sx], [42, sy], [43, 1], [50, turn]] })
    const r = await reading({
      blocks: {
        PANE: [outline([[0, 0], [1, 0], [1, 1], [0, 1]], [], '0')],
        PAIR: [insert('PANE', 0, 0, [bay, bay], 0), insert('PANE', 2 * bay, 0, [-bay, bay], 0)],
      },
      entities: Array.from({ length: n }, (_, j) => [
        insert('PAIR', 0, j * bay, [1, 1], 0),
        // Turned by half a turn and mirrored: the same as mirrored across y.
        insert('PAIR', 4 * bay, (j + 1) * bay, [1, 1], 180),
      ]).flat(),
    })
    expect([isClean(clean, r.plan, 1e-6), r.codes, r.questions]).toEqual([true, [], []])
  })
})

describe('more than one storey', () => {
  test('the same lines again at another level count once, which is said', async () => {
    const r = await reading({ entities: [...lines(0), ...lines(3600)] })
    expect(isClean(clean, r.plan, 1e-9)).toBe(true)
    expect(r.repairs.join(' ')).toMatch(/repeat: \d+ lines/)
  })
})

describe('curves, slivers, precision', () => {
  test('arcs and splines as edges of panels become chords within the sagitta, the same on both sides', async () => {
    // Two panes whose common edge is an arc of radius 1500, drawn by each of them (bulge tan(angle / 4)).
    const bulge = Math.tan(Math.asin(0.5) / 2)
    const pane = (points: readonly (readonly [number, number, number])[]): Written =>
      ({ kind: 'LWPOLYLINE', layer: 'ROOF', pairs: [[90, points.length], [70, 1], ...points.flatMap(([x, y, b]) => [[10, x], [20, y], [42, b]] as const)] })
    const r = await reading({ entities: [pane([[0, 0, 0], [bay, 0, bulge], [bay, bay, 0], [0, bay, 0]]), pane([[bay, 0, 0], [2 * bay, 0, 0], [2 * bay, bay, 0], [bay, bay, -bulge]])] })
    expect([r.plan.panelCount, r.plan.partCount]).toEqual([2, 1])
    expect(r.plan.jointCount).toBeGreaterThan(3)
    expect(r.codes).toContain('chords')
    // Nodes of the arc lie on it (exact: the circle through its ends).
    const inner = Array.from(r.plan.x.keys()).filter((k) => Math.abs(r.plan.x[k]! - bay) > 1 && r.plan.x[k]! > bay && r.plan.x[k]! < 1.5 * bay)
    for (const k of inner) expect(Math.hypot(r.plan.x[k]! - bay + bay * Math.cos(Math.asin(0.5)), r.plan.y[k]! - bay / 2)).toBeCloseTo(bay, 6)
    expect(inner.length).toBeGreaterThan(1)
  })

  test('slivers between panes drawn 0.4 mm apart are closed, a sliver drawn as a face is dropped', async () => {
    const shrunk = panes.map((pane, k) => pane.map(([x, y]) => [x + (k % m) * 0.1 - 0.2, y] as const))
    const r = await reading({ entities: [...shrunk.map((pane) => outline(pane)), outline([[0, 0], [bay, 0], [bay, 0.3], [0, 0.2]])] })
    expect([isClean(clean, r.plan, 1), r.questions]).toEqual([true, []])
    expect(r.codes).toContain('joined')
    expect(r.codes.some((code) => code === 'tiny-face' || code === 'repeat')).toBe(true)
  })

  test('rounded to a tenth on one side and in full on the other', async () => {
    const turned = (x: number, y: number): Spot => [x * Math.cos(0.3) - y * Math.sin(0.3), x * Math.sin(0.3) + y * Math.cos(0.3)]
    const r = await reading({ entities: panes.map((pane, k) => outline(pane.map(([x, y]) => turned(x, y)).map(([x, y]) => (k % 2 === 0 ? [x, y] as const : [Math.round(10 * x) / 10, Math.round(10 * y) / 10] as const)))) })
    expect([isClean(clean, r.plan, 0.2, (p) => turned(p[0], p[1])), r.questions]).toEqual([true, []])
  })

  test('noise in the sixteenth digit is no repair', async () => {
    const r = await reading({ entities: panes.map((pane, k) => outline(pane.map(([x, y]) => [x * (1 + (k % 3) * 2e-16), y + (k % 2) * 2e-13] as const))) })
    expect([isClean(clean, r.plan, 1e-9), r.codes]).toEqual([true, []])
  })
})

describe('far and foreign', () => {
  test.each([['a line', line([9e8, 9e8], [9e8 + 300, 9e8], 'ROOF')], ['a point', { kind: 'POINT', layer: 'ROOF', pairs: at(10, -7e9, 3e9) }], ['a text', { kind: 'TEXT', layer: 'ROOF', pairs: [...at(10, 5e8, 0), [40, 100], [1, 'far']] }]] as const)(
    '%s far away spoils neither digits nor tolerances', async (_, far) => {
      // Ends that miss by 0.3 mm want the plan tolerance, which a spoilt extent would change.
      const missing = lines().map((each, k): Written => (k === 1 ? line([bay, 0.3], [bay, n * bay - 0.3], 'ROOF') : each))
      const r = await reading({ entities: [...missing, far as Written] })
      expect([isClean(clean, r.plan, 0.5), r.questions]).toEqual([true, []])
    })

  test('proxies, missing and outside references are named with their layer', async () => {
    const r = await reading({
      entities: [
        ...lines(), { kind: 'ACAD_PROXY_ENTITY', layer: 'FACADE', pairs: [[90, 498]] }, { kind: 'INSERT', layer: 'XREF', pairs: [[2, 'SITE-PLAN'], ...at(10, 0, 0)] },
        { kind: 'WIPEOUT', layer: '0' }, { kind: 'IMAGE', layer: 'SCAN' },
      ],
    })
    expect(isClean(clean, r.plan, 1e-9)).toBe(true)
    const named = r.leftOut.join('; ')
    expect(named).toContain('ACAD_PROXY_ENTITY on FACADE')
    expect(named).toMatch(/INSERT, its block is not in the file.* on XREF/)
    expect(named).toContain('IMAGE on SCAN')
  })
})
