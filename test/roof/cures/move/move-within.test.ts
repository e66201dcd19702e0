/** Adjusting within bounds: the moved plan's roof keeps them. */
import { expect, test } from 'vitest'
import { ask, objText } from '../../../make/ask.ts'
import { voronoi } from '../../../make/plans.ts'
import { adjustPlan } from '../../../../src/job/run.ts'
import { noOptions } from '../../../../src/plan/project/options.ts'
import { random } from '../../../../src/base/random.ts'

test('a jittered Voronoi plan under an envelope below its rise: moved, exactly flat, and no node above the envelope', async () => {
  const { plan } = voronoi(30, 3)
  const next = random(4)
  const points = Array.from(plan.x, (x, n): [number, number] => [x + (plan.rimPasses[n] === 0 ? 0.004 * (next() - 0.5) : 0), plan.y[n]! + (plan.rimPasses[n] === 0 ? 0.004 * (next() - 0.5) : 0)])
  const faces = Array.from({ length: plan.panelCount }, (_, p) => [...plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1])])
  const text = objText(points, faces)
  const free = await ask({ text, options: { unit: 'm', rise: 0.5 } })
  expect(free.answer.summary.verdict).not.toBe('lifts')
  const most = 0.35
  const brief = { panewise: 'brief', version: 1, rise: 0.5, datum: 0, conditions: [{ name: 'envelope', kind: 'bounds', at: { panels: 'all' }, most }] }
  const made = await adjustPlan({ command: 'adjust', source: { name: 'plan.obj', bytes: new TextEncoder().encode(text) }, options: { ...noOptions, unit: 'm' }, brief: { name: 'b.json', text: JSON.stringify(brief) }, levels: null, given: {} })
  if (!made.ok) throw new Error(made.problem.message)
  expect([made.value.facts.outcome, made.value.facts.reason]).toEqual(['moved', null])
  const { roof, summary } = made.value.after.answer
  expect(summary.verdict).toBe('lifts')
  expect(Math.max(...roof!.heights)).toBeLessThanOrEqual(most + 1e-6)
})
