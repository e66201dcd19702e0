/** How exactly a drawing is drawn: each figure against a drawing spoilt by just that much. */
import { expect, test } from 'vitest'
import type { ReadPlan } from '../../../src/plan/read-plan.ts'
import { quads, read, throughLines, type Point, type Segment } from '../drawings.ts'

const about = (r: ReadPlan): string => r.notices.filter((notice) => notice.startsWith('How exactly')).join(' ')

test('a clean drawing: all is exact, and nothing is said unasked', () => {
  const r = read({ lines: throughLines(4, 3, 1.25) })
  expect(r.exactness).toEqual({ meets_mm: 0, straight_mm: 0, digit_mm: 10 })
  expect(about(r)).toBe('')
  expect(about(read({ lines: throughLines(4, 3, 1.25) }, { planTolerance_mm: 2 })))
    .toBe('How exactly the drawing is drawn: all line ends meet, runs are straight as written, coordinates are multiples of 10 mm: within the plan tolerance of 2 mm.')
})

test('ends that miss by 0.6 mm', () => {
  const lines = throughLines(4, 3).map(([p, q], k): Segment => (k === 2 ? [[p[0], p[1] - 0.0006], q] : [p, q]))
  expect(read({ lines }).exactness!.meets_mm).toBeCloseTo(0.6, 9)
})

test('a node 4 mm off its runs is more than the tolerance: said with the tolerance that would cover it', () => {
  const outlines = quads(5, 4).map((quad) => quad.map(([x, y]): Point => (x === 2 && y === 2 ? [x + 0.004, y] : [x, y])))
  const r = read({ outlines })
  expect(r.exactness!.straight_mm).toBeCloseTo(4, 9)
  expect(about(r)).toBe('How exactly the drawing is drawn: all line ends meet, nodes of straight runs lie within 4 mm of them, coordinates are multiples of 100 mm: more than the plan tolerance of 1 mm; --plan-tolerance 4 would cover it.')
})

test.each([[1, 1], [0.1, 0.1], [0.001, 0.001]])('coordinates rounded to %d mm', (step, expected) => {
  const round = (value: number): number => Math.round((value * 1000) / step) * step / 1000
  const lines = throughLines(6, 5, Math.SQRT2).map(([p, q]): Segment => [[round(p[0]), round(p[1])], [round(q[0]), round(q[1])]])
  expect(read({ lines }).exactness!.digit_mm).toBe(expected)
  expect(read({ lines: lines.map(([p, q]): Segment => [[p[0] + 4e6, p[1]], [q[0] + 4e6, q[1]]]) }).exactness!.digit_mm).toBe(expected)
})

test('coordinates that are no round numbers', () => {
  expect(read({ lines: throughLines(6, 5, Math.PI) }).exactness!.digit_mm).toBeNull()
})
