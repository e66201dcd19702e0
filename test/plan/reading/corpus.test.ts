/** Drawings written by other programs, from file to plan. What must come out stands in the folders' README files. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import { finish } from '../../../src/base/steps.ts'
import { readDrawing } from '../../../src/formats/all.ts'
import { planFromDrawing } from '../../../src/plan/reading/from-drawing.ts'
import { interiorNodeCount, voidCount } from '../../../src/plan/plan.ts'
import type { ReadOptions, ReadPlan } from '../../../src/plan/read-plan.ts'
import { plainly } from '../drawings.ts'

function readFile(path: string, options: Partial<ReadOptions> = {}): ReadPlan {
  const bytes = readFileSync(join(import.meta.dirname, '../../corpus', path))
  const drawing = finish(readDrawing({ name: path, bytes }, { layers: null, sagitta: 0.005, metresPerUnit: null }))
  if (!drawing.ok) throw new Error(drawing.problem.message)
  const read = finish(planFromDrawing(drawing.value, { ...plainly, ...options }))
  if (!read.ok) throw new Error(read.problem.message)
  return read.value
}

const codes = (r: ReadPlan): string[] => r.repairs.map(({ code }) => code)
/** Joints - 2 interior nodes - 3 voids. */
const bareCount = ({ plan }: ReadPlan): number => plan.jointCount - 2 * interiorNodeCount(plan) - 3 * voidCount(plan)

describe('24 cells as drawn by several programs', () => {
  test.each([
    ['dxf/cells-lines.dxf', {}, 'mm', []],
    ['dxf/cells-polylines.dxf', {}, 'cm', []],
    ['dxf/cells-faults.dxf', {}, 'm', ['unit-assumed', 'joined', 'repeat', 'loose-end', 'unit']],
    ['dxf/cells-faults.dxf', { unit: 'mm' }, 'mm', ['joined', 'repeat', 'loose-end', 'straighten', 'square']],
    ['svg/cells-plot.svg', { scale: 100 }, 'm', []],
    ['svg/cells.svg', { scale: 100 }, 'm', []],
  ] as const)('%s %o', (path, options, unit, expected) => {
    const r = readFile(path, options)
    // One plan: the same counts whoever wrote it; 24 - 53 + ... by Euler: nodes - edges + panels = 1.
    expect([r.plan.panelCount, r.plan.nodeCount, r.plan.jointCount, voidCount(r.plan), r.plan.partCount]).toEqual([24, 50, 53, 0, 1])
    expect(r.plan.nodeCount - r.plan.edgeCount + r.plan.panelCount).toBe(1)
    expect(r.plan.unit).toBe(unit)
    expect(codes(r)).toEqual(expected)
  })

  test('the faults are counted and measured', () => {
    const r = readFile('dxf/cells-faults.dxf', { unit: 'mm' })
    const repair = (code: string): { count: number; message: string } => r.repairs.find((each) => each.code === code)!
    expect(repair('joined').message).toMatch(/up to 0\.\d+ mm/)
    // 85 lines were drawn: the 73 of the clean drawing, one loose, the others twice.
    expect(repair('repeat').count).toBe(85 - 73 - 1)
    expect(repair('loose-end').count).toBe(1)
    expect(readFile('dxf/cells-faults.dxf').questions.map(({ options }) => options[0])).toEqual(['--unit mm'])
  })
})

test('lines that cross without a node: 4 x 3 panels', () => {
  const r = readFile('dxf/crossing-lines.dxf')
  expect([r.plan.panelCount, bareCount(r), codes(r)]).toEqual([12, 5, ['split']])
})

test('blocks inserted at survey coordinates: 24 panels round one void', () => {
  const r = readFile('dxf/ring-blocks.dxf')
  expect([r.plan.panelCount, voidCount(r.plan), r.plan.partCount, codes(r)]).toEqual([24, 1, 1, []])
  expect(r.plan.x.every((x) => Math.abs(x - 500_000) < 10)).toBe(true)
})

test('a polyface mesh with heights: 30 panels and a height at every node', () => {
  const r = readFile('dxf/surface-polyface.dxf')
  expect(r.plan.panelCount).toBe(30)
  expect(r.heights!.every((z) => Number.isFinite(z))).toBe(true)
  expect(Math.max(...r.heights!) - Math.min(...r.heights!)).toBeGreaterThan(0.01)
})

test('curves become chords of a stated sagitta: 3 panels', () => {
  const r = readFile('dxf/curves.dxf')
  expect([r.plan.panelCount, codes(r)]).toEqual([3, ['chords', 'split']])
})
