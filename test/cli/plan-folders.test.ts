import { expect, test } from 'vitest'
import { planFolders } from '../../src/cli/plan-folders.ts'
import { worst } from '../../src/cli/exit-code.ts'

test('a folder a plan, by its name; names that meet, also but for capitals, are numbered', () => {
  expect(planFolders(['a/hall.dxf', 'b/hall.obj', 'c/Hall.svg', 'hall-2.dxf', '-', 'x.y.dxf', '.hidden', '..', 'summary.csv.dxf'])).toEqual([
    'hall', 'hall-2', 'Hall-3', 'hall-2-2', 'stdin', 'x.y', 'hidden', 'plan', 'summary.csv-2',
  ])
})

test('the worst exit code in the order 2, 1, 3, 0', () => {
  expect(worst([0, 3, 0])).toBe(3)
  expect(worst([3, 1, 0])).toBe(1)
  expect(worst([1, 2, 3])).toBe(2)
  expect(worst([0])).toBe(0)
})
