/** The long run of the property tests: `npm run fuzz`. Seeds that found something are kept in `arrangement.test.ts`. */
import { expect, test } from 'vitest'
import { messyLines, messyOutlines } from './messy.ts'

test.each([1, 2, 3, 4, 5])('messy lines, seed %i', { timeout: 600_000 }, (seed) => {
  expect(messyLines(seed, 4000, 0, 0)).toBeGreaterThan(2000)
  expect(messyLines(seed, 2000, 5_700_000, 4_000_000)).toBeGreaterThan(1000)
})

test.each([1, 2, 3])('messy outlines, seed %i', { timeout: 600_000 }, (seed) => {
  expect(messyOutlines(seed, 4000).get('read')).toBeGreaterThan(400)
})
