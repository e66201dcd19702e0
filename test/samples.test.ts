/** The samples folder is what the script makes, and every sample gives the answer that its line in the README states. */
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import { ask } from './make/ask.ts'
import { briefName, sampleFiles, samples } from './make/samples.ts'

const folder = join(import.meta.dirname, '../samples')

describe('the folder', () => {
  const files = sampleFiles()
  test.each([...files])('%s is what the script makes, and below 30 kB', (name, text) => {
    expect(readFileSync(join(folder, name), 'utf8') === text).toBe(true)
    expect(text.length).toBeLessThan(30_000)
  })
  test('nothing lies there that no line speaks of', () => {
    const known = new Set(['cures.md', ...files.keys(), ...samples().map(({ name }) => name)])
    expect(readdirSync(folder).filter((name) => !known.has(name))).toEqual([])
  })
})

describe.each(samples())('$name', ({ name, brief, options, expected }) => {
  test(`${expected.verdict}, freedom ${expected.freedom}, left ${expected.freedomLeft}`, async () => {
    const text = readFileSync(join(folder, name), 'utf8')
    const wishes = brief === null ? null : readFileSync(join(folder, briefName(name)), 'utf8')
    const { plan, stress, held, verdict, reasonKind, questions } = (await ask({ name, text, brief: wishes, options })).answer.summary
    const found = {
      verdict,
      panels: plan.panels,
      voids: plan.voids,
      freedom: stress.freedom,
      count: stress.count,
      freedomLeft: stress.freedomLeft,
      frozen: held.frozenJoints,
      reasonKind,
    }
    expect(found).toEqual(expected)
    expect(questions).toEqual([])
  })
})
