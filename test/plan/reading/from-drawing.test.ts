import { expect, test } from 'vitest'
import { voidCount } from '../../../src/plan/plan.ts'
import { problemOf, quads, read, throughLines } from '../drawings.ts'

const codes = (r: ReturnType<typeof read>): string[] => r.repairs.map((repair) => `${repair.code} ${repair.count}`)

test('a grid of through lines has m n panels in rows from the top left', () => {
  const { plan, repairs } = read({ lines: throughLines(4, 3) })
  expect([plan.panelCount, plan.nodeCount, plan.jointCount]).toEqual([12, 20, 17])
  expect(repairs.map((r) => `${r.code} ${r.count}`)).toEqual(['split 16'])
  const corners = (p: number): [number, number][] => Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (n) => [plan.x[n]!, plan.y[n]!])
  expect(corners(0)).toEqual([[0, 3], [0, 2], [1, 2], [1, 3]])
  expect(corners(5)[0]).toEqual([1, 2])
  expect(corners(11)[0]).toEqual([3, 1])
})

test('the same grid as outlines has the panels in file order', () => {
  const r = read({ outlines: quads(4, 3) })
  expect(r.plan.panelCount).toBe(12)
  expect(codes(r)).toEqual([])
  expect([r.plan.x[0], r.plan.y[0]]).toEqual([0, 0])
})

test('outlines round an empty middle leave a void', () => {
  const ring = quads(3, 3).filter((_, i) => i !== 4)
  const r = read({ outlines: ring })
  expect([r.plan.panelCount, voidCount(r.plan)]).toEqual([8, 1])
})

test('bad outlines', () => {
  expect(problemOf({ outlines: [[[0, 0], [1, 1], [1, 0], [0, 1]]] })).toBe('self-crossing')
  expect(problemOf({ outlines: [[[0, 0], [1, 0], [2, 0]]] })).toBe('no-area')
  expect(problemOf({ outlines: [[[0, 0], [2, 0], [2, 2], [0, 2]], [[1, 1], [3, 1], [3, 3], [1, 3]]] })).toBe('panels-overlap')
  expect(problemOf({ lines: [[[0, 0], [1, 0]], [[1, 0], [1, 1]]] })).toBe('no-panels')
  expect(problemOf({})).toBe('no-panels')
})
