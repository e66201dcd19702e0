/** 10,000 damaged files of each format: no exception, no endless reading, always a sentence. Run by `npm run fuzz`. */
import { describe, expect, test } from 'vitest'
import { corpus } from './text-corpus.ts'
import { damage } from './text-mutations.ts'

describe.each(['dxf', 'obj'] as const)('%s', (format) => {
  test('10,000 damaged files (seeds 1001 to 11000)', { timeout: 600_000 }, () => {
    const count = damage(corpus(format), 10_000, 1001)
    console.log(`${format}: ${count.read} read, ${count.refused} refused with a sentence`)
    expect(count.read + count.refused).toBe(10_000)
  })
})
