/** Cures in a session, as the page asks for them: plain records with progress, one applied, the search stopped. */
import { expect, test } from 'vitest'
import { Session } from '../../src/job/session.ts'
import type { ReadPlan } from '../../src/plan/read-plan.ts'
import { emptyBrief, type Brief } from '../../src/plan/project/brief.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import { grid } from '../make/plans.ts'

const read = (m: number, n: number): ReadPlan => ({
  plan: grid(m, n, { bay: 1.5 }), heights: null, marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] },
  repairs: [], questions: [], leftOut: [], notices: [],
})
const brief: Brief = { ...emptyBrief, conditions: [{ name: 'eaves', soft: null, kind: 'level', at: { rim: 'outer' }, level: 0 }] }

test('cures are found, plain and with progress; one is applied and a session on it says what was promised', async () => {
  const session = new Session(read(12, 8), 'hall')
  expect((await session.cures()).ok).toBe(false)
  await session.answer(brief, noOptions, null)
  const stages = new Set<string>()
  const made = await session.cures({ onProgress: ({ stage }) => stages.add(stage) })
  if (!made.ok) throw new Error(made.problem.message)
  expect(made.value.cures.map(({ code }) => code)).toEqual(['pack-rim', 'add-diagonals', 'release'])
  expect(structuredClone(made.value)).toEqual(made.value)
  expect([...stages]).toEqual(expect.arrayContaining(['Packing the rim', 'Looking for diagonals', 'Letting conditions go']))
  for (const cure of made.value.cures) {
    const applied = session.applied(cure)
    if (!applied.ok) throw new Error(applied.problem.message)
    const next = new Session(applied.value.read, 'hall')
    const answer = await next.answer(applied.value.brief, applied.value.options, applied.value.target)
    if (!answer.ok) throw new Error(answer.problem.message)
    expect(answer.value.answer.summary.stress.freedomLeft).toBe(cure.freedomLeft)
    expect(applied.value.changesPlan).toBe(cure.code === 'add-diagonals')
  }
  // The session itself is as it was.
  expect(session.applied({ code: 'move-nodes', name: null }).ok).toBe(false)
})

test('stopped between two steps', async () => {
  const session = new Session(read(30, 20), 'hall')
  await session.answer(brief, noOptions, null)
  const stop = new AbortController()
  const made = await session.cures({ signal: stop.signal, onProgress: () => stop.abort(), sliceMs: 0 })
  expect(made.ok ? null : made.problem.code).toBe('cancelled')
})
