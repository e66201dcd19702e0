/** Bubbles of building axes; places follow from the window (exact: worked out by hand). */
import { expect, test } from 'vitest'
import { axisBubbles } from '../../../src/paper/drawing/axis-drawing.ts'
import { fitted, zoomed } from '../../../src/paper/drawing/plan-window.ts'
import { axesOfPlan } from '../../../src/plan/axes.ts'
import { grid } from '../../make/plans.ts'

const sheet = { width: 500, height: 400 }

test('numbers stand over the plan in the line of their axis, letters left of it', () => {
  const plan = grid(8, 5)
  const window = fitted(plan, { left: 60, top: 60, right: 460, bottom: 360 })
  const bubbles = axisBubbles(axesOfPlan(plan), window, sheet)
  expect(bubbles.map(({ axis }) => axis.name).join(' ')).toBe('1 2 3 4 5 6 7 8 9 A B C D E F')
  // 8 bays over 400 px: axis 3 at 60 + 2 * 50; the plan is 250 px high about the middle, 210.
  expect([bubbles[2].x, bubbles[2].y]).toEqual([160, 210 - 125 - 30])
  expect([bubbles[9].x, bubbles[9].y]).toEqual([60 - 30, 210 + 125])
})

test('zoomed in, bubbles stay on the sheet and those of axes out of sight go', () => {
  const plan = grid(8, 5)
  const window = zoomed(fitted(plan, { left: 60, top: 60, right: 460, bottom: 360 }), 4, 260, 210)
  const bubbles = axisBubbles(axesOfPlan(plan), window, sheet)
  // 200 px a bay about the middle axis 5 at x = 260; C and D lie 100 px either side of y = 210.
  expect(bubbles.map(({ axis }) => axis.name)).toEqual(['4', '5', '6', 'C', 'D'])
  for (const { x, y } of bubbles) expect(Math.min(x, y, sheet.width - x, sheet.height - y)).toBeGreaterThanOrEqual(12)
})

test('where bubbles would touch only every second or fifth is named', () => {
  const plan = grid(40, 4)
  const bubbles = axisBubbles(axesOfPlan(plan), fitted(plan, { left: 60, top: 60, right: 460, bottom: 360 }), sheet)
  // 10 px a bay: every fifth.
  expect(bubbles.filter(({ axis }) => /\d/.test(axis.name)).map(({ axis }) => axis.name).join(' ')).toBe('1 6 11 16 21 26 31 36 41')
})
