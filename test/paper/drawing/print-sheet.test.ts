/** The printed plan, measured as a ruler would: from the SVG's millimetres (exact: 10 m at 1:100 are 100 mm). */
import { expect, test } from 'vitest'
import { joints } from '../../../src/paper/drawing/joint-kinds.ts'
import { planDrawing } from '../../../src/paper/drawing/plan-drawing.ts'
import { listSheets, mmPerPx, planSheet } from '../../../src/paper/drawing/print-sheet.ts'
import { readingOf } from '../../../src/paper/drawing/readings.ts'
import { toSvg } from '../../../src/paper/drawing/svg.ts'
import { themes } from '../../../src/paper/drawing/theme.ts'
import { grid } from '../../make/plans.ts'
import { translated } from './answers.ts'

/** Longest side in mm on paper of the panel of that id: path units times the size said over the box said. */
function side_mm(svg: string, id: string): number {
  const [, width, boxWidth] = /width="([\d.]+)mm"[^>]*viewBox="0 0 ([\d.]+) /.exec(svg)!
  const [, d] = new RegExp(`<path id="${id}" d="([^"]+)"`).exec(svg)!
  const points = [...d!.matchAll(/([\d.-]+) ([\d.-]+)/g)].map(([, x, y]) => [Number(x), Number(y)] as const)
  const sides = points.map(([x, y], k) => Math.hypot(x - points[(k + 1) % points.length]![0], y - points[(k + 1) % points.length]![1]))
  return (Math.max(...sides) * Number(width)) / Number(boxWidth)
}

test('a side of 10 m is 100 mm long at 1:100 on A4, and 50 mm at 1:200 on A3', () => {
  for (const [bays, scale, paper, mm] of [[1, 100, 'A4', 100], [4, 200, 'A3', 50]] as const) {
    const answer = translated(bays, 1, 1, [], 10)
    const sheet = planSheet(answer.plan)
    expect([sheet.scale, sheet.paper.name]).toEqual([scale, paper])
    const reading = readingOf('slope', answer, joints(answer), { leastSlope: 3, flat_mm: 1 })
    const list = planDrawing(answer, { width: sheet.width, height: sheet.height, window: sheet.window, reading, joints: joints(answer), selection: null, furniture: true })
    expect(side_mm(toSvg(list, themes.day, { mmPerPx, background: false }), 'P1')).toBeCloseTo(mm, 1)
  }
})

test('the scale is a usual one at which the plan fits, and the next larger does not', () => {
  const sheet = planSheet(grid(30, 20, { bay: 1.5 }))
  // 45 by 30 m: 225 x 150 mm at 1:200; at 1:100 450 mm are wider than A3.
  expect([sheet.scale, sheet.paper.name]).toEqual([200, 'A3'])
})

test('every row of the list is on one sheet, in order', () => {
  const { paper } = planSheet(grid(2, 2))
  const rows = listSheets(500, paper).flat().flatMap(([from, to]) => Array.from({ length: to - from }, (_, k) => from + k))
  expect(rows).toEqual(Array.from({ length: 500 }, (_, k) => k))
})
