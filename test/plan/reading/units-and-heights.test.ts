import { describe, expect, test } from 'vitest'
import { finish } from '../../../src/base/steps.ts'
import { planFromDrawing } from '../../../src/plan/reading/from-drawing.ts'
import { drawing, plainly, problemOf, quads, read, throughLines, type Point3 } from '../drawings.ts'

const sized = (bay: number, sketch: object = {}, options: object = {}): ReturnType<typeof read> => read({ lines: throughLines(4, 3, bay), ...sketch }, options)

describe('units', () => {
  test('the file\'s unit is the plan\'s, the user\'s beats it, coordinates stay as written', () => {
    expect(sized(1500, { unit: 'mm' }).plan.unit).toBe('mm')
    const cm = sized(150, { unit: 'mm' }, { unit: 'cm' })
    expect([cm.plan.unit, cm.repairs.some(({ code }) => code === 'unit-assumed'), Math.max(...cm.plan.x)]).toEqual(['cm', false, 600])
  })

  test('without any, metres are assumed, which is said', () => {
    const r = sized(1.5, { unit: null })
    expect([r.plan.unit, r.repairs[0]!.code, r.repairs[0]!.state]).toEqual(['m', 'unit-assumed', 'applied'])
    expect(sized(1.5, { unit: null }, { unit: 'm' }).repairs.some(({ code }) => code === 'unit-assumed')).toBe(false)
  })

  test('paper sizes are multiplied by the scale and become metres', () => {
    // 15 mm on paper at 1:100 are 1.5 m.
    const r = sized(15, { unit: 'mm', onPaper: true }, { scale: 100 })
    expect([r.plan.unit, Math.max(...r.plan.x), Math.max(...r.plan.y)]).toEqual(['m', 6, 4.5])
    expect(r.notices).toEqual([])
    const plain = sized(15, { unit: null, onPaper: true })
    expect([plain.plan.unit, Math.max(...plain.plan.x)]).toEqual(['m', 0.06])
    expect(plain.notices[0]).toContain('1:1')
  })

  test('impossible scales and scales of models are refused', () => {
    const paper = { lines: throughLines(2, 2), onPaper: true }
    expect([0, -1, NaN, Infinity].map((scale) => problemOf(paper, { scale }))).toEqual(['bad-scale', 'bad-scale', 'bad-scale', 'bad-scale'])
    expect(problemOf({ lines: throughLines(2, 2) }, { scale: 50 })).toBe('scale-of-model')
  })

  test('ends join by the unit that the lengths suggest where the file states none', () => {
    const lines = throughLines(3, 2, 1500).map(([p, q], i) => [[p[0] + 0.3 * (i % 2), p[1]], q] as (typeof p)[]) as unknown as ReturnType<typeof throughLines>
    const r = read({ lines, unit: null })
    expect(r.plan.panelCount).toBe(6)
    expect(r.plan.unit).toBe('m')
    expect(r.questions).toHaveLength(1)
  })
})

describe('the unit question', () => {
  const asked = (bay: number, sketch: object = {}, options: object = {}): readonly string[][] => sized(bay, sketch, options).questions.map((q) => [q.code, ...q.options])

  test('is raised only when the middle half of the edges lies wholly outside 0.1 to 20 m', () => {
    for (const bay of [0.1, 0.11, 1.5, 19, 20]) expect(asked(bay)).toEqual([])
    expect(asked(1500)).toEqual([['unit', '--unit mm', '--unit m']])
    expect(asked(150)).toEqual([['unit', '--unit cm', '--unit m']])
    expect(asked(1.5, { unit: 'mm' })).toEqual([['unit', '--unit m', '--unit mm']])
    // 5 ft are 1.524 m, 5 in, cm and mm too short, 5 m longer than usual: log(5/1.5) > log(1.524/1.5).
    expect(asked(5, { unit: 'mm' })).toEqual([['unit', '--unit ft', '--unit mm']])
  })

  test('is not raised when the user has answered or no unit would do', () => {
    expect(asked(1500, {}, { unit: 'm' })).toEqual([])
    expect(asked(1e6)).toEqual([])
    expect(asked(1e-6)).toEqual([])
  })

  test('asks for the scale of a drawing on paper', () => {
    expect(asked(15, { unit: 'mm', onPaper: true })).toEqual([['unit', '--scale 1:100', '--scale 1:1']])
    expect(asked(15, { unit: 'mm', onPaper: true }, { scale: 1 })).toEqual([])
    expect(asked(1500, { unit: 'mm', onPaper: true })).toEqual([])
  })
})

describe('heights', () => {
  const raised = (z: (x: number, y: number, face: number) => number): Point3[][] => quads(3, 2).map((quad, f) => quad.map(([x, y]) => [x, y, z(x, y, f)]))

  test('come from the points, to the last digit where they agree', () => {
    const { plan, heights } = read({ outlines: raised((x, y) => 0.1 * x * x + 0.3 * y) })
    for (let n = 0; n < plan.nodeCount; n += 1) expect(heights![n]).toBe(0.1 * plan.x[n]! * plan.x[n]! + 0.3 * plan.y[n]!)
  })

  test('are means of those within 10 mm, and none where they differ by more, which is said', () => {
    const r = read({ outlines: raised((x, y, f) => (x === 1 && y === 1 ? 2 + 0.004 * (f % 3) : x === 2 && y === 1 ? 2 + 0.02 * f : 1)) })
    const at = (x: number, y: number): number => r.heights![Array.from(r.plan.x).findIndex((px, n) => px === x && r.plan.y[n] === y)]!
    expect(at(1, 1)).toBeCloseTo(2.002, 12)
    expect(at(2, 1)).toBeNaN()
    expect(at(0, 0)).toBe(1)
    expect(r.notices).toEqual([expect.stringMatching(/^1 node has heights in the file that differ by up to 80 mm/)])
  })

  test('are null without any, and NaN at crossings', () => {
    expect(read({ outlines: quads(2, 1) }).heights).toBeNull()
    const r = read({ outlines: [[[0, 0, 5], [2, 0, 5], [2, 2, 5], [0, 2, 5]]], lines: [[[1, -1], [1, 3]]] })
    expect(Array.from(r.heights!).map((z) => (Number.isNaN(z) ? 'none' : z)).sort()).toEqual([5, 5, 5, 5, 'none', 'none'])
  })

  test('and marks are scaled with a drawing on paper', () => {
    const r = read({ outlines: [[[0, 0, 20], [20, 0, 20], [20, 20, 20], [0, 20, 20]]], marks: [[5, 6, 7]], unit: 'mm', onPaper: true }, { scale: 100 })
    expect(Array.from(r.heights!)).toEqual([2, 2, 2, 2])
    expect(Array.from(r.marks.points)).toEqual([0.5, expect.closeTo(0.6, 12), expect.closeTo(0.7, 12)])
    expect([Array.from(r.marks.layer), r.marks.layers]).toEqual([[0], ['']])
  })
})

test('what the reader of the format noted comes first and unchanged', () => {
  const noted = { code: 'chords', state: 'applied', count: 3, message: 'three arcs', where: [] } as const
  const left = { kind: 'TEXT', layer: 'A', count: 2 }
  const result = finish(planFromDrawing({ ...drawing({ lines: throughLines(2, 1), unit: null }), repairs: [noted], leftOut: [left] }, plainly))
  if (!result.ok) throw new Error(result.problem.message)
  expect(result.value.repairs.map(({ code }) => code)).toEqual(['chords', 'unit-assumed', 'split'])
  expect(result.value.leftOut).toEqual([left])
})
