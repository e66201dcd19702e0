/** A few hundred damaged files of each format; text-damage.fuzz.ts does 10,000. */
import { describe, expect, test } from 'vitest'
import { corpus } from './text-corpus.ts'
import { damage, upright } from './text-mutations.ts'

describe.each(['dxf', 'obj'] as const)('%s', (format) => {
  test('the files themselves are read', () => {
    for (const { name, bytes } of corpus(format)) expect(upright(name, bytes)).toBe('read')
  })

  test('400 damaged files (seeds 1 to 400): read or refused with a sentence', () => {
    const count = damage(corpus(format), 400, 1)
    // Both happen, or the damage would be no test.
    expect(count.read).toBeGreaterThan(20)
    expect(count.refused).toBeGreaterThan(20)
  })
})
