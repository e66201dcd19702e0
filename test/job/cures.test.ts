/** Cures: offered where they were measured to help, in order, and each keeps what it promised when it is applied. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import { solve } from '../../src/job/run.ts'
import { noOptions, type Options } from '../../src/plan/project/options.ts'
import type { Cure } from '../../src/roof/answer/cure.ts'
import { objText } from '../make/ask.ts'
import { hipPoints } from '../make/hip-grid.ts'
import { briefName, samples } from '../make/samples.ts'

async function solved(name: string, text: string, brief: object | string | null, options: Partial<Options> = {}, cures: readonly string[] = []) {
  const words = brief === null || typeof brief === 'string' ? brief : JSON.stringify({ panewise: 'brief', version: 1, ...brief })
  const made = await solve({
    command: 'check', source: { name, bytes: new TextEncoder().encode(text) }, options: { ...noOptions, ...options },
    brief: words === null ? null : { name: 'brief.json', text: words }, levels: null, given: {},
  }, cures)
  if (!made.ok) throw new Error(`${made.problem.code}: ${made.problem.message}`)
  return made.value
}

const folder = join(import.meta.dirname, '../../samples')
const sample = (name: string, cures: readonly string[] = [], options: Partial<Options> = {}) => {
  const found = samples().find((each) => each.name === name)!
  const brief = found.brief === null ? null : readFileSync(join(folder, briefName(name)), 'utf8')
  return solved(name, readFileSync(join(folder, name), 'utf8'), brief, { ...found.options, ...options }, cures)
}

const codes = (cures: readonly Cure[] | undefined): string[] => (cures ?? []).map(({ code, name }) => (name === null ? code : `${code}:${name}`))
const square = hipPoints(12, 8, 0, (i, j) => [1.5 * i, 1.5 * j])
const levelRim = { name: 'eaves', kind: 'level', at: { rim: 'outer' }, level: 0 }

/** What is measured on the cured plan is what the offer said. */
async function expectKept(ask: (cures: readonly string[]) => ReturnType<typeof solved>): Promise<void> {
  const { checked } = await ask([])
  for (const cure of checked.answer.summary.cures ?? []) {
    const word = cure.name === null ? cure.code : `${cure.code}:${cure.name}`
    const after = (await ask([word])).checked.answer.summary
    if (cure.code !== 'accept-deviation') expect({ word, verdict: after.verdict }).toEqual({ word, verdict: cure.verdict })
    expect({ word, left: after.stress.freedomLeft, frozen: after.held.frozenJoints }).toEqual({ word, left: cure.freedomLeft, frozen: cure.frozenJoints })
    expect(after.roof?.rise ?? null).toEqual(cure.rise)
    expect(after.cured).toEqual([cure])
    if (cure.panels !== undefined) expect(after.plan.panels).toBe(cure.panels)
  }
}

describe('12 x 8 square bays, rim level', () => {
  const ask = (cures: readonly string[] = []) => sample('tern-yard-level-rim.obj', cures)
  test('yes, if: the rim packed, four diagonals, or the rim released; no moving of nodes, which cannot help', async () => {
    const { summary } = (await ask()).checked.answer
    expect(summary.answer).toBe('yes, if')
    expect(codes(summary.cures)).toEqual(['pack-rim', 'add-diagonals', 'release:eaves'])
    expect(summary.cures!.map(({ option }) => option)).toEqual(['--cure pack-rim', '--cure add-diagonals', '--cure release:eaves'])
    expect(summary.held.blocking).toEqual({ conditions: ['eaves'], leaves: 'no fold', misfit_mm: 0, frozenJoints: 172, flatGroups: 1 })
  })
  test('the rim is packed by a quarter of the rise either way (exact: z = f + g, 4 L >= rise), the roof as high as asked', async () => {
    const [pack] = (await ask()).checked.answer.summary.cures!
    expect(pack!.largest_mm! / 300).toBeCloseTo(1, 2)
    expect(pack!.least_mm).toBeGreaterThan(0.99 * 300)
    expect(pack!.rise! / 1.2).toBeCloseTo(1, 3)
    expect(pack!.packing).toHaveLength(40)
    expect(Math.abs(pack!.packing![0]!.by_mm)).toBe(pack!.largest_mm)
  })
  test('the four corner diagonals leave freedom 1 (exact)', async () => {
    const diagonals = (await ask()).checked.answer.summary.cures![1]!
    expect([diagonals.count, diagonals.freedomLeft, diagonals.where]).toEqual([4, 1, ['P1', 'P12', 'P85', 'P96']])
  })
  test('each keeps its promise', () => expectKept(ask))
  test('applied one after another: divided, then what still never folds left out', async () => {
    const { checked, planChanged } = await ask(['add-diagonals', 'remove-joints'])
    const { summary } = checked.answer
    expect(planChanged).toBe(true)
    expect([summary.verdict, summary.answer, summary.cures]).toEqual(['lifts', 'yes', []])
    // Exact: a plateau inside one ring: the rim's bays fold along it and at the hips.
    expect(summary.cured!.map(({ code }) => code)).toEqual(['add-diagonals', 'remove-joints'])
    expect(summary.stress.freedomLeft).toBe(1)
  })
})

test('on a grid whose lines converge both ways the corner diagonals are not offered', async () => {
  const skewed = hipPoints(12, 8, 0, (i, j) => [1.5 * i * (1 + 0.02 * j), 1.5 * j * (1 + 0.01 * i)])
  const { summary } = (await solved('plan.obj', objText(skewed.points, skewed.faces), { conditions: [levelRim] })).checked.answer
  const diagonals = summary.cures!.find(({ code }) => code === 'add-diagonals')
  expect(diagonals?.where).not.toEqual(['P1', 'P12', 'P85', 'P96'])
  if (diagonals !== undefined) expect(diagonals.freedomLeft).toBeGreaterThan(0)
})

describe('levels that clash', () => {
  const bay = hipPoints(1, 1, 0, (i, j) => [2 * i, 2 * j])
  const posts = [0, 0, 0, 0.1].map((level, k) => ({ name: `post ${k + 1}`, kind: 'level', at: { nodes: [`N${k + 1}`] }, level }))
  const ask = (cures: readonly string[] = []) => solved('plan.obj', objText(bay.points, bay.faces), { conditions: posts }, {}, cures)
  test('each post can be released, missed then by 100 mm (exact), and the clash is named', async () => {
    const { summary } = (await ask()).checked.answer
    expect(summary.held.blocking!.conditions).toHaveLength(4)
    expect(summary.held.blocking!.leaves).toBe('no roof')
    // One panel folds nothing whatever is done, so the plane through three posts is all there is to have.
    expect(codes(summary.cures)).toEqual(['pack-rim', 'add-diagonals', ...['post 1', 'post 2', 'post 3', 'post 4'].map((name) => `release:${name}`)])
    for (const cure of summary.cures!.filter(({ code }) => code === 'release')) expect(cure.largest_mm).toBeCloseTo(100, 6)
    // Four heights 0, 0, 0, 100 on a square are 25 mm each off one plane at best (exact: alternate signs).
    expect(summary.cures![0]!.largest_mm! / 25).toBeCloseTo(1, 2)
    expect(summary.cures![1]!.diagonals).toHaveLength(1)
  })
  test('each cure keeps its promise', () => expectKept(ask))
})

describe('parts of a roof that never fold', () => {
  test('T-junctions: 20 joints left out, every other folds, and the roofs stay as many', async () => {
    const before = (await sample('tern-yard-bond.obj')).checked.answer.summary
    expect(codes(before.cures)).toEqual(['remove-joints'])
    const [cure] = before.cures!
    expect([cure!.count, cure!.panels, cure!.verdict, cure!.freedomLeft]).toEqual([20, 72, 'lifts', before.stress.freedomLeft])
    await expectKept((cures) => sample('tern-yard-bond.obj', cures))
  })
  test('hips: 112 panels become 16', async () => {
    const { summary } = (await sample('tern-yard-hips.obj')).checked.answer
    expect(codes(summary.cures)).toEqual(['remove-joints', 'release:eaves'])
    expect([summary.cures![0]!.count, summary.cures![0]!.panels, summary.cures![0]!.freedomLeft]).toEqual([96, 16, 4])
  })
})

describe('within tolerances', () => {
  test('nodes moved by up to 15 mm: accepted within the tolerance, or moved', async () => {
    const { summary } = (await sample('tern-yard-cells-near.obj')).checked.answer
    expect(codes(summary.cures).slice(0, 2)).toEqual(['accept-deviation', 'move-nodes'])
    expect(summary.cures![0]!.largest_mm).toBe(summary.roof!.cornerMax_mm)
    expect(summary.cures![0]!.count).toBe(0)
    expect(summary.cures![1]!.largest_mm).toBeLessThan(15)
  })
  test('a tolerance that the panels miss: the deviation is not offered', async () => {
    const { summary } = (await sample('tern-yard-cells-near.obj', [], { flat_mm: 0.1 })).checked.answer
    expect(codes(summary.cures)).not.toContain('accept-deviation')
    expect(summary.asDrawn!.over).toBeGreaterThan(0)
  })
  test('rounded to the millimetre: within the plan tolerance, before the rim and the diagonals', async () => {
    const { summary } = (await sample('tern-yard-cells-mm.obj')).checked.answer
    const moved = summary.cures!.find(({ code }) => code === 'move-nodes')!
    expect(moved.withinTolerance).toBe(true)
    expect(codes(summary.cures)).toEqual(['accept-deviation', 'move-nodes', ...codes(summary.cures).slice(2)])
  })
  test('each keeps its promise', () => expectKept((cures) => sample('tern-yard-cells-mm.obj', cures)))
})

test('weights in the brief change the order', async () => {
  const text = objText(square.points, square.faces)
  const { summary } = (await solved('plan.obj', text, { conditions: [levelRim], cures: { release: 0.1, 'pack-rim': 2 } })).checked.answer
  expect(codes(summary.cures)).toEqual(['release:eaves', 'add-diagonals', 'pack-rim'])
})

test('a plain yes has no cures; a cure that does not help is refused and says which do', async () => {
  const { summary } = (await sample('tern-yard-bays.obj')).checked.answer
  expect([summary.answer, summary.cures]).toEqual(['yes', []])
  await expect(sample('tern-yard-level-rim.obj', ['move-nodes'])).rejects.toThrow('no-such-cure')
  await expect(sample('tern-yard-level-rim.obj', ['release:gutter'])).rejects.toThrow('no-such-cure')
  await expect(sample('tern-yard-level-rim.obj', ['paint'])).rejects.toThrow('no-such-cure')
})
