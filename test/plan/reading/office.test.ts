/** Drawings as offices send them, from file to plan: every line of test/corpus/office/README.md. */
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import { finish } from '../../../src/base/steps.ts'
import { readDrawing } from '../../../src/formats/all.ts'
import { planFromDrawing } from '../../../src/plan/reading/from-drawing.ts'
import type { ReadOptions, ReadPlan } from '../../../src/plan/read-plan.ts'
import { officeFiles } from '../../make/office.ts'
import { grid } from '../../make/plans.ts'
import { bond, isClean, skewGrid } from '../../make/spoilt.ts'
import { plainly } from '../drawings.ts'

const folder = join(import.meta.dirname, '../../corpus/office')

function readFile(name: string, options: Partial<ReadOptions> = {}): ReadPlan {
  const drawing = finish(readDrawing({ name, bytes: readFileSync(join(folder, name)) }, { layers: null, sagitta: 0.005, metresPerUnit: null }))
  if (!drawing.ok) throw new Error(drawing.problem.message)
  const read = finish(planFromDrawing(drawing.value, { ...plainly, ...options }))
  if (!read.ok) throw new Error(read.problem.message)
  return read.value
}

const repair = (r: ReadPlan, code: string): string => r.repairs.filter((each) => each.code === code).map(({ state, message }) => `${state}: ${message}`).join(' ')

test('the folder is what the script makes', () => {
  const files = officeFiles()
  for (const [name, text] of files) expect(readFileSync(join(folder, name), 'utf8') === text).toBe(true)
  expect(readdirSync(folder).sort()).toEqual([...files.keys(), 'README.md'].sort())
})

describe('double lines', () => {
  test('bars of 60 mm that run through: 117 faces, 24 panes, 58 strips, 35 crossings (exact: 7 x 5 bars)', () => {
    const r = readFile('bars-through.dxf')
    expect(r.plan.panelCount).toBe(117)
    expect(repair(r, 'double-lines')).toBe('proposed: Bars are drawn as double lines: 58 strips 60 mm wide and 35 crossings round 24 panes; on centre lines they are a plan of 24 panels.')
    expect(r.questions.map(({ code, options }) => [code, ...options])).toEqual([['double-lines', '--accept double-lines', '--leave double-lines']])
    expect(r.barWidth).toBeUndefined()
    const left = readFile('bars-through.dxf', { leave: ['double-lines'] })
    expect([left.plan.panelCount, left.questions]).toEqual([117, []])
    const taken = readFile('bars-through.dxf', { accept: ['double-lines'] })
    expect(taken.questions).toEqual([])
    expect([taken.plan.panelCount, taken.plan.jointCount, taken.plan.edgeCount, taken.plan.nodeCount]).toEqual([24, 38, 58, 35])
    // The axes to the last digit, and the width with every joint and rim edge.
    expect([...new Set(taken.plan.x)].sort((a, b) => a - b)).toEqual([0, 1500, 3000, 4500, 6000, 7500, 9000])
    expect([...new Set(taken.plan.y)].sort((a, b) => a - b)).toEqual([0, 1200, 2400, 3600, 4800])
    expect(Array.from(taken.barWidth!)).toEqual(new Array(58).fill(60))
    expect(repair(taken, 'double-lines')).toMatch(/^accepted: .*brought to their centre lines/)
  })

  test('a mitred bond with T-joints', () => {
    const r = readFile('bars-bond-mitred.dxf', { accept: ['double-lines'] })
    const clean = bond(4, 4, 1400)
    expect(isClean(clean, r.plan, 0.1)).toBe(true)
    expect(new Set(r.barWidth!).size).toBe(1)
  })

  test('acute crossings of two widths: both named, each with its joints', () => {
    const r = readFile('bars-acute-two-widths.dxf', { accept: ['double-lines'] })
    expect(isClean(skewGrid(5, 4, 35), r.plan, 5e-4)).toBe(true)
    const [rows, across] = [0, 1].map((way) => {
      const own = Array.from(r.barWidth!.keys()).filter((e) => (Math.abs(r.plan.y[r.plan.origin[2 * e]!]! - r.plan.y[r.plan.origin[2 * e + 1]!]!) < 0.01) === (way === 0))
      return new Set(own.map((e) => Math.round(1000 * r.barWidth![e]!)))
    })
    expect([rows!.size, across!.size]).toEqual([1, 1])
    expect([...rows!][0]).not.toBe([...across!][0])
    expect(repair(r, 'double-lines')).toContain(`${[...rows!, ...across!].sort((a, b) => a - b).join(' and ')} mm wide`)
  })

  test('bars as rectangles that overlap, where 8 bars meet too', () => {
    const r = readFile('bars-rectangles.dxf')
    expect(isClean(skewGrid(4, 4, 90, true), r.plan, 1e-3)).toBe(true)
    expect(repair(r, 'double-lines')).toMatch(/^applied: /)
  })

  test('panes drawn apart are one part on the middle of their gaps, the rim as drawn', () => {
    const r = readFile('panes-apart.dxf')
    expect([r.plan.panelCount, r.plan.partCount, r.questions.length]).toEqual([18, 18, 1])
    const taken = readFile('panes-apart.dxf', { accept: ['all'] })
    expect([taken.plan.partCount, taken.questions]).toEqual([1, []])
    expect(isClean(grid(6, 3, { bay: 1.5 }), taken.plan, 1e-3)).toBe(true)
    expect(Array.from(taken.barWidth!.keys()).filter((e) => Number.isNaN(taken.barWidth![e]!)).every((e) => e >= taken.plan.jointCount)).toBe(true)
  })
})

test('crooked bars: the misfit of all 13 runs (exact: 8 + 5), straight once accepted', () => {
  const r = readFile('crooked.dxf')
  expect(repair(r, 'straighten')).toMatch(/^proposed: \d+ nodes of 13 runs are off straight by up to 0\.\d+ mm; straightening moves \d+ nodes by up to 0\.\d+ mm\.$/)
  expect(r.questions).toEqual([])
  const { plan } = readFile('crooked.dxf', { accept: ['straighten'] })
  const clean = grid(7, 4, { bay: 1200 })
  expect(isClean(clean, plan, 1)).toBe(true)
  for (const column of [0, 1, 2, 3, 4, 5, 6, 7]) {
    const own = Array.from(plan.x.keys()).filter((n) => Math.abs(plan.x[n]! - 1200 * column) < 10).sort((m, n) => plan.y[m]! - plan.y[n]!)
    const [a, b] = [own[0]!, own[own.length - 1]!]
    for (const n of own) expect(Math.abs((plan.x[n]! - plan.x[a]!) * (plan.y[b]! - plan.y[a]!) - (plan.y[n]! - plan.y[a]!) * (plan.x[b]! - plan.x[a]!)) / 4800).toBeLessThan(1e-9)
  }
})

describe('units', () => {
  test('a wrong header raises the question with the unit that fits, and either answer goes', () => {
    const r = readFile('unit-wrong.dxf')
    expect(r.questions.map(({ message }) => message)).toEqual(['With the numbers in m half of the edges would be 1500 m long, which is not plausible; in mm they are 1.5 m. Which is it?'])
    expect(repair(r, 'unit')).toMatch(/^proposed: /)
    const taken = readFile('unit-wrong.dxf', { accept: ['unit'] })
    expect([taken.plan.unit, Math.max(...taken.plan.x), taken.questions, repair(taken, 'unit').slice(0, 9)]).toEqual(['mm', 7500, [], 'accepted:'])
    expect(readFile('unit-wrong.dxf', { leave: ['unit'] }).questions).toEqual([])
    expect(readFile('unit-wrong.dxf', { unit: 'm' }).repairs.map(({ code }) => code)).not.toContain('unit')
  })

  test('two points and a true distance calibrate', () => {
    const to = (x: number, length: string | number, more: Partial<ReadOptions> = {}): ReadPlan => readFile('unscaled.dxf', { scaleFrom: { from: [0, 0], to: [x, 0], length }, ...more })
    const r = to(100, '7.5m')
    expect([r.plan.unit, r.repairs.some(({ code }) => code === 'unit-assumed'), r.questions]).toEqual(['m', false, []])
    expect(isClean(grid(5, 4, { bay: 1.5 }), r.plan, 1e-5)).toBe(true)
    expect(r.notices[0]).toBe('By the two points, 100 as drawn are 7.5 m: every coordinate is multiplied by 0.075.')
    expect(Math.max(...to(100, 7500, { unit: 'mm' }).plan.x)).toBeCloseTo(7500, 6)
    // A distance that makes the drawing's numbers millimetres leaves them as they are.
    const mm = to(100, '10cm')
    expect([mm.plan.unit, Math.max(...mm.plan.x), mm.notices[0]]).toEqual(['mm', 100, 'By the two points, 100 as drawn are 0.1 m: the drawing is in mm.'])
    expect(() => to(0, '7.5m')).toThrow('two points at one place')
    expect(() => to(100, '7.5m', { scale: 50 })).toThrow('twice')
  })
})
