/** `panewise adjust` as a process: files, exit codes, refusals. */
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { jittered } from '../make/jittered.ts'
import { cells } from '../make/plans.ts'
import { gridObj, program, type Program } from './program.ts'

let panewise: Program
beforeAll(async () => {
  panewise = await program()
})
afterAll(() => panewise.close())

const drawn = jittered(cells(60, 4), 0.003, 2).plan
const cellsObj = `# unit: m\n${[...drawn.x.keys()].map((n) => `v ${drawn.x[n]} ${drawn.y[n]} 0`).join('\n')}\n${Array.from({ length: drawn.panelCount }, (_, p) => `f ${[...drawn.corner.slice(drawn.panelStart[p], drawn.panelStart[p + 1])].map((n) => n + 1).join(' ')}`).join('\n')}\n`

const textOf = (name: string): string => readFileSync(join(panewise.room, name), 'utf8')

test('a plan that almost lifts: the plan moved, its roof, the moves as list and drawing', () => {
  panewise.file('cells.obj', cellsObj)
  const before = panewise.run(['check', 'cells.obj', '--json'])
  expect(JSON.parse(before.out).stress.freedom).toBe(0)
  const ran = panewise.run(['adjust', 'cells.obj', '--out', 'moved', '--json'])
  expect(ran.err).toBe('')
  expect(ran.code).toBe(0)
  expect(readdirSync(join(panewise.room, 'moved')).sort()).toEqual(
    ['joints.csv', 'nodes.csv', 'panels.csv', 'plan.obj', 'roof.obj', 'shifts.csv', 'shifts.svg', 'summary.json'],
  )
  const summary = JSON.parse(ran.out)
  expect(summary).toEqual(JSON.parse(textOf('moved/summary.json')))
  expect(summary.verdict).toBe('lifts')
  expect(summary.adjusted.outcome).toBe('moved')

  // The list is the difference of the two plans, read back by hand.
  const nodes = textOf('moved/plan.obj').split('\n').filter((line) => line.startsWith('v ')).map((line) => line.split(' ').slice(1, 3).map(Number))
  const rows = textOf('moved/shifts.csv').trim().split('\r\n').slice(1).map((row) => row.split(','))
  expect(rows).toHaveLength(drawn.nodeCount)
  let largest = 0
  rows.forEach(([name, dx, dy, shift], n) => {
    expect(name).toBe(`N${n + 1}`)
    expect(Number(dx)).toBeCloseTo((nodes[n]![0]! - drawn.x[n]!) * 1000, 5)
    expect(Number(dy)).toBeCloseTo((nodes[n]![1]! - drawn.y[n]!) * 1000, 5)
    expect(Number(shift)).toBeCloseTo(Math.hypot(Number(dx), Number(dy)), 5)
    largest = Math.max(largest, Number(shift))
  })
  expect(summary.adjusted.largest_mm).toBeCloseTo(largest, 5)

  const drawing = textOf('moved/shifts.svg')
  expect(drawing).toMatch(/Moves drawn [125]0* times as long as they are/)

  // The plan that was written lifts by itself, exactly.
  const again = JSON.parse(panewise.run(['check', 'moved/plan.obj', '--json']).out)
  expect(again.verdict).toBe('lifts')
  expect(again.stress.freedom).toBeGreaterThanOrEqual(1)
  expect(again.stress.residual).toBeLessThan(1e-12)
})

test('what is to be kept is told to the job: a panel that keeps its shape, and one that is not there', () => {
  panewise.file('cells.obj', cellsObj)
  const ran = panewise.run(['adjust', 'cells.obj', '--out', 'kept', '--keep', 'bays', '--keep', 'axes', '--keep-shape', 'P20', '--json'])
  expect(ran.code).toBe(0)
  expect(JSON.parse(ran.out).adjusted.held.shapes).toBe(1)
  const places = (text: string): number[][] => text.split('\n').filter((line) => line.startsWith('v ')).map((line) => line.split(' ').slice(1, 3).map(Number))
  const [before, after] = [places(cellsObj), places(textOf('kept/plan.obj'))]
  const nodes = [...drawn.corner.slice(drawn.panelStart[19], drawn.panelStart[20])]
  const length = (of: number[][], k: number): number => {
    const [a, b] = [of[nodes[k]!]!, of[nodes[(k + 1) % nodes.length]!]!]
    return Math.hypot(a[0]! - b[0]!, a[1]! - b[1]!)
  }
  nodes.forEach((_, k) => expect(length(after, k)).toBeCloseTo(length(before, k), 9))
  const missing = panewise.run(['adjust', 'cells.obj', '--out', 'missing', '--keep-shape', 'P900'])
  expect(missing.code).toBe(2)
  expect(missing.err).toMatch(/no panel P900/)
  expect(panewise.run(['adjust', 'cells.obj', '--out', 'missing', '--keep', 'colour']).code).toBe(2)
})

test('within the plan tolerance check says so, with the shift', () => {
  panewise.file('cells.obj', cellsObj)
  const wide = panewise.run(['check', 'cells.obj', '--plan-tolerance', '50', '--json'])
  const summary = JSON.parse(wide.out)
  expect(wide.code).toBe(3)
  expect(summary.verdict).toBe('lifts within plan tolerance')
  expect(summary.planShift.largest_mm).toBeGreaterThan(0)
  const narrow = JSON.parse(panewise.run(['check', 'cells.obj', '--plan-tolerance', String(summary.planShift.largest_mm * 0.9), '--json']).out)
  expect(narrow.verdict).not.toBe('lifts within plan tolerance')
})

test('adjusting a plan that lifts moves nothing', () => {
  panewise.file('grid.obj', gridObj(5, 4, 1.5))
  const ran = panewise.run(['adjust', 'grid.obj', '--out', 'same', '--json'])
  expect(ran.code).toBe(0)
  const summary = JSON.parse(ran.out)
  expect(summary.adjusted).toMatchObject({ outcome: 'lifts', largest_mm: 0, count: 0 })
  const points = (text: string): string[] => text.split('\n').filter((line) => line.startsWith('v ')).map((line) => line.split(' ').slice(0, 3).join(' ')).sort()
  expect(points(textOf('same/plan.obj'))).toEqual(points(textOf('grid.obj')))
})

test('quads within a level rim: refused at once, exit 1, the summary alone', () => {
  panewise.file('grid.obj', gridObj(5, 4, 1.5))
  const ran = panewise.run(['adjust', 'grid.obj', '--rim', 'level', '--out', 'none'])
  expect(ran.code).toBe(1)
  expect(ran.out).toMatch(/Moving nodes cannot help: .* wherever the nodes are moved to/)
  expect(readdirSync(join(panewise.room, 'none'))).toEqual(['summary.json'])
})

test('bad use: no folder, two plans, a node that is not there', () => {
  panewise.file('cells.obj', cellsObj)
  expect(panewise.run(['adjust', 'cells.obj']).code).toBe(2)
  expect(panewise.run(['adjust', 'cells.obj', 'cells.obj', '--out', 'x']).code).toBe(2)
  const ran = panewise.run(['adjust', 'cells.obj', '--stay', 'N9999', '--out', 'x'])
  expect(ran.code).toBe(2)
  expect(ran.err).toMatch(/no node N9999/)
  expect(existsSync(join(panewise.room, 'x'))).toBe(false)
})
