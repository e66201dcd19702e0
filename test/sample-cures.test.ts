/** samples/cures.md is what the program finds today, and a cure is listed for every sample that does not lift. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { cureTable, solvedSample } from './make/sample-cures.ts'
import { samples } from './make/samples.ts'

test('the table is what the program finds', async () => {
  expect(readFileSync(join(import.meta.dirname, '../samples/cures.md'), 'utf8')).toBe(await cureTable())
}, 30_000)

test.each(samples().filter(({ expected }) => expected.verdict === 'does not lift'))('$name: something helps', async (sample) => {
  const { answer, cures = [] } = await solvedSample(sample)
  expect(answer).toBe('yes, if')
  expect(cures.length).toBeGreaterThan(0)
})
