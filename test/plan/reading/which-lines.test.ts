/** Which lines of an office's drawing are its panels, its axes and its levels: drawings of test/corpus/office, from file to plan. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import type { Result } from '../../../src/base/result.ts'
import { finish } from '../../../src/base/steps.ts'
import { readDrawing } from '../../../src/formats/all.ts'
import type { ReadOptions, ReadPlan } from '../../../src/plan/read-plan.ts'
import { planOfLines } from '../../../src/plan/reading/which-lines.ts'
import { at, dxfText, line, type Written } from '../../formats/dxf-writer.ts'
import { panels } from '../../make/office-sheets.ts'
import { grid } from '../../make/plans.ts'
import { columns, furniture, hatch, moved } from '../../make/sheet.ts'
import { isClean } from '../../make/spoilt.ts'
import { plainly, read, type Segment } from '../drawings.ts'

const folder = join(import.meta.dirname, '../../corpus/office')

function result(bytes: Uint8Array, options: Partial<ReadOptions> = {}): Result<ReadPlan> {
  const drawing = finish(readDrawing({ name: 'plan.dxf', bytes }, { layers: options.layers ?? null, sagitta: 0.005, metresPerUnit: null }))
  if (!drawing.ok) throw new Error(drawing.problem.message)
  return finish(planOfLines(drawing.value, { ...plainly, ...options }))
}

function readBytes(bytes: Uint8Array, options: Partial<ReadOptions> = {}): ReadPlan {
  const read = result(bytes, options)
  if (!read.ok) throw new Error(`${read.problem.code}: ${read.problem.message}`)
  return read.value
}

const readFile = (name: string, options: Partial<ReadOptions> = {}): ReadPlan => readBytes(readFileSync(join(folder, name)), options)
const readEntities = (entities: readonly Written[], options: Partial<ReadOptions> = {}): ReadPlan => readBytes(new TextEncoder().encode(dxfText({ entities })), options)

const said = (r: ReadPlan, code: string): string => r.repairs.filter((each) => each.code === code).map(({ state, message }) => `${state}: ${message}`).join(' ')

const roof = grid(8, 4, { bay: 1500 })

describe('a guess is applied and said, and what is left out is listed', () => {
  test('axes, dimensions, walls, columns, furniture, hatch, sheet and section round a roof of 32 panels', () => {
    const r = readFile('sheet-whole.dxf')
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
    expect(said(r, 'which-lines')).toBe('applied: Layer GLAZING is read: 32 faces that look like panels; the next best, SHEET, has 7.')
    expect(r.questions).toEqual([])
    const left = new Map(r.leftOut.map(({ kind, layer, count }) => [`${kind} on ${layer}`, count]))
    // Exact: counted in the sheet's own making; names of axes are read, not left out.
    expect([left.get('LINE, layer not read on HATCH'), left.get('LINE, layer not read on DIM'), left.get('LWPOLYLINE, layer not read on COLUMNS'), left.get('TEXT on DIM'), left.get('TEXT on AXES')]).toEqual([93, 19, 15, 8, undefined])
    // Circles of axes and chairs became no chords of the plan.
    expect(said(r, 'chords')).toBe('')
  })

  test('the same round double lines', () => {
    const r = readFile('sheet-double-lines.dxf')
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
    expect(said(r, 'double-lines')).toMatch(/^applied: /)
  })

  test('joints that share out over two layers, beside dimensions that touch the rim', () => {
    const r = readFile('joints-on-two-layers.dxf')
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
    expect(said(r, 'which-lines')).toContain('Layers PURLINS and RAFTERS are read: 32 faces')
  })

  test('a rim on a layer of its own closes the joints', () => {
    const r = readFile('rim-on-its-layer.dxf')
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
    expect(said(r, 'which-lines')).toContain('Layers GLAZING and RIM are read')
  })

  test('a section and a title block on the layer of the plan are other figures', () => {
    const r = readFile('section-beside.dxf')
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
    expect(said(r, 'which-lines')).toMatch(/^applied: The figure from 0,0 to 12000,6000 is read: 32 faces .*has 7\.$/)
  })

  test('one layer in two colours', () => {
    expect(isClean(roof, readFile('one-layer.dxf').plan, 0.01)).toBe(true)
    expect(said(readFile('one-layer.dxf'), 'which-lines')).toContain('Layer 0 in colour 5 is read')
  })

  test('left, everything is read; panels of two kinds on two layers are one plan without a word', () => {
    // Both storeys at once: the lines of one cut the panels of the other.
    expect(readFile('storeys-above.dxf', { leave: ['which-lines'] }).plan.panelCount).toBeGreaterThan(62)
    const lines = panels('outlines', grid(6, 3, { bay: 1.5 }))
    const mixed = lines.map((each, i) => ({ ...each, layer: i % 3 === 0 ? 'OPAQUE' : 'GLASS' }))
    const r = readEntities(mixed)
    expect([r.plan.panelCount, said(r, 'which-lines'), r.leftOut]).toEqual([18, '', []])
  })

  test('a second roof of the same kind is a part; a model is read whole', () => {
    const two = [...panels('single lines', grid(6, 3, { bay: 1.5 })), ...moved(panels('single lines', grid(3, 2, { bay: 1.4 })), 20, 1)]
    const r = readEntities(two)
    expect([r.plan.panelCount, r.plan.partCount, r.questions]).toEqual([24, 2, []])
  })
})

describe('what cannot be guessed is asked', () => {
  test('storeys beside each other: either window answers', () => {
    const r = readFile('storeys-beside.dxf')
    expect(r.questions.map(({ code }) => code)).toEqual(['which-lines'])
    const [first, second, leave] = r.questions[0]!.options
    expect([first, second, leave]).toEqual(['--window -100,-100,12100,6100', '--window 15900,-100,28100,6100', '--leave which-lines'])
    expect(isClean(roof, readFile('storeys-beside.dxf', { window: [[15900, -100], [28100, 6100]] }).plan, 0.01, ([x, y]) => [x + 16000, y])).toBe(true)
    expect(isClean(roof, readFile('storeys-beside.dxf', { accept: ['which-lines'] }).plan, 0.01)).toBe(true)
    const left = readFile('storeys-beside.dxf', { leave: ['which-lines'] })
    expect([left.plan.partCount, left.questions]).toEqual([2, []])
  })

  test('storeys of other layouts above each other on one layer: one question, its answers read', () => {
    const r = readFile('storeys-one-layer.dxf')
    expect(r.questions.map(({ code, message, options }) => [code, message, ...options])).toEqual([[
      'which-lines', 'Which lines are the panels? By their looks the storey at 3600: 32 faces that look like panels; the next best, at 7200, has 30.', '--between 3600,3600', '--between 7200,7200', '--leave which-lines',
    ]])
    expect(readFile('storeys-one-layer.dxf', { between: [7200, 7200] }).plan.panelCount).toBe(30)
    for (const options of [{ between: [3000, 4000] as const }, { accept: ['which-lines'] }]) {
      const read = readFile('storeys-one-layer.dxf', options)
      expect([isClean(roof, read.plan, 0.01), read.questions]).toEqual([true, []])
    }
    expect(readFile('storeys-one-layer.dxf', { leave: ['which-lines'] }).plan.panelCount).toBeGreaterThan(32)
    expect(result(readFileSync(join(folder, 'storeys-one-layer.dxf')), { between: [0, 1] }).ok).toBe(false)
  })

  test('storeys above each other, each on its layer: one question, its answers read', () => {
    const r = readFile('storeys-above.dxf')
    expect(r.questions.map(({ code, options }) => [code, ...options])).toEqual([['which-lines', '--layer "LEVEL 1"', '--layer "LEVEL 2"', '--leave which-lines']])
    expect(readFile('storeys-above.dxf', { layers: ['level 2'] }).plan.panelCount).toBe(30)
  })
})

describe('lines chosen by the user', () => {
  test('by colour, line type, closed line by layer and by point', () => {
    for (const options of [{ colours: ['5'] }, { lineTypes: ['continuous'], inside: 'limit' }, { colours: ['5'], inside: [100, 100] as const }]) {
      expect([options, isClean(roof, readFile('one-layer.dxf', options).plan, 0.01)]).toEqual([options, true])
    }
    const r = readFile('one-layer.dxf', { colours: ['5'] })
    expect(r.leftOut).toEqual([{ kind: 'LWPOLYLINE, not chosen', layer: '0', count: 6 }, { kind: 'LWPOLYLINE, not chosen', layer: 'LIMIT', count: 1 }])
  })

  test('what is not there is refused with what is', () => {
    const refused = (options: Partial<ReadOptions>): string => {
      const read = result(readFileSync(join(folder, 'one-layer.dxf')), options)
      return read.ok ? 'read' : `${read.problem.code}: ${read.problem.cure ?? ''}`
    }
    expect(refused({ colours: ['1'] })).toBe('no-such-colour: the file has 3, 5, 7')
    expect(refused({ lineTypes: ['HIDDEN'] })).toBe('no-such-line-type: the file has CONTINUOUS, DASHED')
    expect(refused({ window: [[1, 1], [2, 2]] })).toContain('empty-window')
    expect(refused({ inside: 'GLAZING' })).toContain('no-closed-line')
    expect(refused({ inside: [-9e5, 0] })).toContain('no-closed-line')
  })

  test('the closed line stays where it is the rim', () => {
    const r = readFile('rim-on-its-layer.dxf', { inside: 'RIM' })
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
  })
})

describe('building axes', () => {
  test('lines that end in circles with a name are kept by name and cut nothing', () => {
    const r = readFile('axes-one-layer.dxf')
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
    expect(r.axes!.map(({ name }) => name).join(' ')).toBe('1 2 3 4 5 6 7 8 9 A B C D E')
    expect(r.axes![3]).toEqual({ name: '4', from: [4500, 7500], to: [4500, -1500] })
    expect(r.axes![10]).toEqual({ name: 'B', from: [-1500, 1500], to: [13500, 1500] })
    expect(r.notices[0]).toBe('14 building axes: 1 to 9, A to E; their lines bound no panels.')
  })

  test('a circle with a word at a short line is none, nor a line at a circle without', () => {
    const plain = panels('single lines', grid(4, 3, { bay: 1.5 }))
    const circle: Written = { kind: 'CIRCLE', layer: 'NOTES', pairs: [...at(10, 9, 3), [40, 0.4]] }
    const word: Written = { kind: 'TEXT', layer: 'NOTES', pairs: [...at(10, 8.9, 2.9), [40, 0.3], [1, '7']] }
    expect(readEntities([...plain, circle, word, line([8.6, 3], [7, 3], 'NOTES')]).axes).toBeUndefined()
    expect(readEntities([...plain, circle, line([8.6, 3], [0, 3], 'NOTES')]).axes).toBeUndefined()
    expect(readEntities([...plain, circle, word, line([8.6, 3], [-1, 3], 'NOTES')]).axes).toHaveLength(1)
  })
})

describe('levels in the drawing', () => {
  const corners = [[0, 0], [12000, 0], [12000, 6000], [0, 6000]]
  const held = (r: ReadPlan): unknown => (r.levels ?? []).map(({ at: place, level }) => [...place, level]).sort((p, q) => p[1]! - q[1]! || p[0]! - q[0]!)

  test('words beside a cross are offered, and hold once accepted', () => {
    const r = readFile('levels-in-words.dxf')
    expect([isClean(roof, r.plan, 0.01), r.levels, r.questions]).toEqual([true, undefined, []])
    expect(said(r, 'levels')).toBe('proposed: 4 levels are written in words: they are at 4 nodes, from 112350 to 112500 mm; --accept levels holds them. 1 lies at no node within 50 mm: "\u00b10.00" at 6000, -2000 (--levels-within).')
    expect(held(readFile('levels-in-words.dxf', { accept: ['levels'] }))).toEqual([[...corners[0]!, 112350], [...corners[1]!, 112350], [...corners[3]!, 112500], [...corners[2]!, 112500]])
  })

  test.each(['levels-of-points.dxf', 'levels-of-blocks.dxf'])('%s: heights hold at their nodes', (name) => {
    const r = readFile(name)
    const [low, high] = name.includes('points') ? [3200, 3400] : [112350, 112500]
    expect(isClean(roof, r.plan, 0.01)).toBe(true)
    expect(held(r)).toEqual([[...corners[0]!, low], [...corners[1]!, low], [...corners[3]!, high], [...corners[2]!, high]])
    expect(said(r, 'levels')).toMatch(/^applied: 4 levels of points and blocks are at 4 nodes/)
    expect(readFile(name, { leave: ['levels'] }).levels).toBeUndefined()
  })

  test('how near a level must be is the user\'s to say', () => {
    const entities = [...panels('single lines', grid(2, 2, { bay: 1.5 })), ...[[0.04, 0], [3, 0.07]].map(([x, y]): Written => ({ kind: 'POINT', pairs: at(10, x!, y!, 4) }))]
    expect(readEntities(entities).levels).toHaveLength(1)
    expect(readEntities(entities, { levelsWithin_mm: 80 }).levels).toHaveLength(2)
  })
})

test('few panels beside as much furniture are a question', () => {
  const r = readEntities([...panels('single lines', grid(3, 2, { bay: 1.5 })), ...furniture(12, 6), ...columns(8, 4, 1.5), ...hatch(12, 9)])
  // 6 panels against 4 faces of a table with its chairs: too near to call.
  expect(r.questions.map(({ code }) => code)).toEqual(['which-lines'])
})

test('bars drawn double that stop 5 mm short of each other inside their rim are asked about, and are no plan of one panel', () => {
  const panes = Array.from({ length: 20 }, (_, k) => [1.5 * (k % 5), 1.5 * Math.floor(k / 5)] as const)
  const short = panes.flatMap(([x, y]): Segment[] => {
    const [a, b, c, d] = [x + 0.03, y + 0.03, x + 1.47, y + 1.47], off = 0.005
    return [[[a + off, b], [c - off, b]], [[c, b + off], [c, d - off]], [[c - off, d], [a + off, d]], [[a, d - off], [a, b + off]]]
  })
  const rim: Segment[] = [[[0, 0], [7.5, 0]], [[7.5, 0], [7.5, 6]], [[7.5, 6], [0, 6]], [[0, 6], [0, 0]]]
  const { questions, plan } = read({ lines: [...rim, ...short] })
  expect(plan.panelCount).toBe(1)
  expect(questions).toMatchObject([{ code: 'which-lines', message: 'Of 84 lines 80 bound no panel: what is read is 1 panel. Do their ends miss each other?' }])
  // Said by the user, it is meant.
  expect(read({ lines: [...rim, ...short] }, { leave: ['which-lines'] }).questions).toEqual([])
})
