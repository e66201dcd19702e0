/** As few folds as can be: a pitched roof keeps its ridge alone, a hipped one ridge and hips. */
import { expect, test } from 'vitest'
import { finish } from '../../../../src/base/steps.ts'
import { fewestFolds } from '../../../../src/roof/cures/folds/fewest-folds.ts'
import { linearSolver } from '../../../../src/roof/cures/folds/linear-program.ts'
import { nodeAreas } from '../../../../src/roof/raise/nearest.ts'
import { shapeHeights } from '../../../../src/roof/raise/shapes.ts'
import { grid } from '../../../make/plans.ts'
import { level, raise } from '../../../make/raise.ts'

const solver = await linearSolver()

test('bays under a pitched wish, both eaves level: the ridge folds and nothing else (exact: z = f(x) + g(y))', () => {
  const of = grid(6, 4)
  const { under } = raise(of, { conditions: [level('south', { run: [[0, 0], [6, 0]] }), level('north', { run: [[0, 4], [6, 4]] })] })
  const { heights } = shapeHeights(of, 'pitched')
  const found = finish(fewestFolds(under.space, heights.map((h) => 0.1 * h), nodeAreas(of), solver))!
  const ridge = [...Array(of.jointCount).keys()].filter((j) => of.y[of.origin[2 * j]!] === 2 && of.y[of.origin[2 * j + 1]!] === 2)
  expect([...found.folded]).toEqual(ridge)
  // The wish is such a roof, so it comes back whole.
  found.heights.forEach((height, n) => expect(height).toBeCloseTo(0.1 * heights[n]!, 7))
})

test('under a barrel wish the same plan folds along fewer lines than the nearest roof does', () => {
  const of = grid(6, 6)
  const { under, roof } = raise(of, { shape: 'barrel', conditions: [level('south', { run: [[0, 0], [6, 0]] }), level('north', { run: [[0, 6], [6, 6]] })] })
  expect(roof).not.toBeNull()
  const wish = shapeHeights(of, 'barrel').heights.map((h) => 0.1 * h)
  const found = finish(fewestFolds(under.space, wish, nodeAreas(of), solver))!
  // The nearest roof folds along all five lines; one line of six joints carries the rise.
  expect(found.folded.length).toBeLessThanOrEqual(2 * 6)
  expect(found.folded.length).toBeGreaterThan(0)
})
