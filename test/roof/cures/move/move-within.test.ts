/** Adjusting within bounds: the moved plan's roof keeps them. */
import { expect, test } from 'vitest'
import { ask, objText } from '../../../make/ask.ts'
import { voronoi } from '../../../make/plans.ts'
import { adjustPlan } from '../../../../src/job/run.ts'
import type { AdjustAnswer } from '../../../../src/job/adjust.ts'
import { noKeeps } from '../../../../src/plan/project/keep-options.ts'
import { noOptions, type Options } from '../../../../src/plan/project/options.ts'
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

/** Cells of a Voronoi diagram, inner nodes moved at random by up to 2 mm, adjusted under these conditions with a dome of 0.5 m. */
async function adjustedCells(conditions: readonly object[], keeps: object = {}, options: Partial<Options> = {}): Promise<AdjustAnswer> {
  const { plan } = voronoi(30, 3)
  const next = random(4)
  const points = Array.from(plan.x, (x, n): [number, number] => [x, plan.y[n]!].map((value) => value + (plan.rimPasses[n] === 0 ? 0.004 * (next() - 0.5) : 0)) as [number, number])
  const faces = Array.from({ length: plan.panelCount }, (_, p) => [...plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1])])
  const brief = { panewise: 'brief', version: 1, rise: 0.5, datum: 0, conditions, ...keeps }
  const made = await adjustPlan({
    command: 'adjust', source: { name: 'plan.obj', bytes: new TextEncoder().encode(objText(points, faces)) }, options: { ...noOptions, unit: 'm', ...options },
    brief: { name: 'b.json', text: JSON.stringify(brief) }, levels: null, given: {},
  })
  if (!made.ok) throw new Error(made.problem.message)
  return made.value
}

test('bracket play at four inner nodes: each stays within its 20 mm, and the panels are flat', async () => {
  const free = await adjustedCells([])
  expect(free.facts.outcome).toBe('moved')
  const inner = [...free.drawn.x.keys()].filter((n) => free.drawn.rimPasses[n] === 0).slice(0, 4)
  // Brackets 30 mm below where the nodes would be, with 10 mm of play either way.
  const brackets = inner.map((n) => ({ name: `bracket ${n}`, kind: 'bounds', at: { nodes: [`N${n + 1}`] }, least: free.after.answer.roof!.heights[n]! - 0.04, most: free.after.answer.roof!.heights[n]! - 0.02 }))
  const { facts, after } = await adjustedCells(brackets)
  expect([facts.outcome, facts.reason]).toEqual(['moved', null])
  expect(after.answer.summary.verdict).toBe('lifts')
  inner.forEach((n, k) => {
    expect(after.answer.roof!.heights[n]).toBeGreaterThan(brackets[k]!.least - 1e-6)
    expect(after.answer.roof!.heights[n]).toBeLessThan(brackets[k]!.most + 1e-6)
  })
})

test('a largest slope: no panel of the adjusted plan is steeper, measured on its written roof', async () => {
  const steepest = ({ after }: AdjustAnswer): number => {
    const { gradient } = after.answer.roof!
    return Math.max(...Array.from({ length: gradient.length / 2 }, (_, p) => (Math.atan(Math.hypot(gradient[2 * p]!, gradient[2 * p + 1]!)) * 180) / Math.PI))
  }
  const free = steepest(await adjustedCells([]))
  const most = 0.8 * free
  const held = await adjustedCells([{ name: 'slopes', kind: 'slope', at: { panels: 'all' }, most_deg: most }])
  expect([held.facts.outcome, held.facts.reason]).toEqual(['moved', null])
  expect(steepest(held)).toBeLessThan(most + 1e-4)
})

test('what is to be kept, said in the brief: the same as by options, to the last digit; a name that is not there is refused', async () => {
  const said = await adjustedCells([], { keeps: { stay: ['N30'], shapes: ['P7'], patterns: ['symmetry'], rim_nodes: 'fixed', largest_shift: 0.05 } })
  const typed = await adjustedCells([], {}, { keeps: { ...noKeeps, stay: ['N30'], keepShape: ['P7'], keep: ['symmetry'], rimNodes: 'fixed', largestShift: '50 mm' } })
  expect(said.facts.held?.shapes).toBe(1)
  expect(said.facts).toEqual(typed.facts)
  expect(said.after.answer.plan.x).toEqual(typed.after.answer.plan.x)
  expect([said.dx_mm[29], said.dy_mm[29]]).toEqual([0, 0])
  await expect(adjustedCells([], { keeps: { shapes: ['P900'] } })).rejects.toThrow('no panel P900')
})
