/** A roof among furniture, hatches and letters: its layer named or guessed, the same plan; what is left out is counted. */
import { expect, test } from 'vitest'
import { read } from '../../../src/job/run.ts'
import { noOptions } from '../../../src/plan/project/options.ts'
import { clutteredDxf } from '../../make/cluttered.ts'

test('3,000 segments of which 220 are the roof', async () => {
  const bytes = new TextEncoder().encode(clutteredDxf(10, 10, 3000))
  const of = async (layers: readonly string[] | null) => {
    const answer = await read({ command: 'read', source: { name: 'cluttered.dxf', bytes }, options: { ...noOptions, layers }, brief: null, levels: null, given: {} })
    if (!answer.ok) throw new Error(answer.problem.message)
    return answer.value.summary
  }
  const named = await of(['ROOF'])
  expect([named.plan.panels, named.plan.joints, named.plan.rimEdges]).toEqual([100, 180, 40])
  expect(named.leftOut.map(({ layer }) => layer).sort()).toEqual(['FURNITURE', 'HATCH', 'TEXT'])
  expect(named.leftOut.reduce((sum, { count }) => sum + count, 0)).toBeGreaterThanOrEqual(3000 - 220)
  const guessed = await of(null)
  expect(guessed.plan).toEqual(named.plan)
  expect(guessed.questions).toEqual([])
  expect(guessed.repairs.map(({ code, state }) => [code, state])).toEqual([['which-lines', 'applied']])
})
