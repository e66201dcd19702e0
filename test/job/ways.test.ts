/** The ways left through a session: what each does to the rise, and that moving along one is what is got. */
import { expect, test } from 'vitest'
import { sentence, type Result } from '../../src/base/result.ts'
import { Session } from '../../src/job/session.ts'
import { emptyBrief } from '../../src/plan/project/brief.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { movedAlong, withCondition } from '../../src/plan/project/edits.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { grid, plan } from '../make/plans.ts'
import { level } from '../make/raise.ts'

const value = <T>(made: Result<T>): T => {
  if (!made.ok) throw new Error(sentence(made.problem))
  return made.value
}
const sessionOf = (on: Plan): Session =>
  new Session({ plan: on, heights: null, marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] }, repairs: [], questions: [], leftOut: [], notices: [] }, 'it')
const rim: Condition = level('rim', { rim: 'outer' })

test('a pyramid over a level rim has one way, and its peak is the rise', async () => {
  const on = plan([[-1, -1], [1, -1], [1, 1], [-1, 1], [0, 0]], [[0, 1, 4], [1, 2, 4], [2, 3, 4], [3, 0, 4]])
  const session = sessionOf(on)
  expect(session.ways(9)).toMatchObject({ ok: false, problem: { code: 'no-answer' } })
  const document = withCondition({ brief: emptyBrief, target: null }, rim)
  const first = value(await session.answer(document.brief, noOptions, document.target))
  const [way, ...others] = value(session.ways(9))
  expect(others).toHaveLength(0)
  expect(Array.from(way!.heights)).toEqual(Array.from(on.x, (x) => (x === 0 ? 1 : 0)))
  expect(on.x[way!.peak]).toBe(0)
  expect([way!.riseUp, way!.riseDown]).toEqual([expect.closeTo(1, 9), expect.closeTo(-1, 9)])
  // 0.2 by default, a tenth of the shorter side; 0.3 more along the way.
  const moved = movedAlong(document, first.answer.roof!.heights, way!.heights, 0.3)
  expect(value(await session.answer(moved.brief, noOptions, moved.target)).answer.summary.roof!.rise).toBeCloseTo(0.5, 6)
})

test('every way of loose quads under a held corner and a form force: got as it was asked, conditions kept', async () => {
  const session = sessionOf(grid(6, 5, { loose: 0.12, seed: 3, bay: 1.5 }))
  const force: Condition = { name: 'f', soft: null, kind: 'form-force', at: { joints: ['J20'] }, force: -0.15 }
  const document = withCondition(withCondition({ brief: emptyBrief, target: null }, force), level('corner', { nodes: ['N1'] }, 2))
  const { answer } = value(await session.answer(document.brief, noOptions, null))
  const ways = value(session.ways(20))
  expect(ways).toHaveLength(answer.summary.stress.freedomLeft! - 2)
  for (const way of ways) {
    const moved = movedAlong(document, answer.roof!.heights, way.heights, 0.05)
    const after = value(await session.answer(moved.brief, noOptions, moved.target)).answer
    after.roof!.heights.forEach((height, node) => expect(height).toBeCloseTo(moved.target![node]!, 9))
    expect(after.roof!.heights[0]).toBe(2)
    // The rise is made of straight pieces: a small move keeps the peak and the springing where they are.
    const little = movedAlong(document, answer.roof!.heights, way.heights, 0.001)
    const { rise } = value(await session.answer(little.brief, noOptions, little.target)).answer.summary.roof!
    // Both rises are of heights written to a micrometre.
    expect(Math.abs(rise - answer.summary.roof!.rise - 0.001 * way.riseUp)).toBeLessThan(2e-6)
  }
})

test('none where the conditions leave one roof', async () => {
  const session = sessionOf(grid(4, 3))
  await session.answer({ ...emptyBrief, conditions: [rim] }, noOptions, null)
  expect(session.ways(5)).toEqual({ ok: true, value: [] })
  expect(session.whyFrozen(0)).toMatchObject({ ok: true, value: { rule: 'held' } })
})
