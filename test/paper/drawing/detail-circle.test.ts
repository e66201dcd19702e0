/** The detail of a repair; values are exact: worked out by hand. */
import { expect, test } from 'vitest'
import { detailAt, detailItems } from '../../../src/paper/drawing/detail-circle.ts'
import { fitted } from '../../../src/paper/drawing/plan-window.ts'
import { grid } from '../../make/plans.ts'

const sheet = { width: 800, height: 600 }

test('a gap of 0.3 mm in bays of 1 m is magnified until it is seen, and the lines are cut at the circle', () => {
  const plan = grid(6, 4)
  const window = fitted(plan, { left: 40, top: 40, right: 760, bottom: 540 })
  const at = [2, 2] as const
  // A line that ends 0.3 mm short of the node at (2, 2): 120 px a metre, so 0.036 px on the sheet.
  const lines = Float64Array.of(1, 2, 1.9997, 2)
  const detail = detailAt(plan, window, at, lines, sheet)!
  expect(detail.times).toBe(500)
  // 500 * 0.036 = 18 px: a quarter of the radius.
  expect(0.0003 * detail.scale).toBeCloseTo(18, 6)
  for (const item of detailItems(plan, window, at, [at], lines, detail)) {
    if (item.kind !== 'strokes' || item.line === 'water') continue
    for (let i = 0; i < item.points.length; i += 2) expect(Math.hypot(item.points[i]! - detail.x, item.points[i + 1]! - detail.y)).toBeLessThanOrEqual(detail.radius + 1e-6)
  }
})
