/** 10,000 damaged files of each kind: no exception, no endless reading, always a sentence. Run by `npm run fuzz`. */
import { describe, expect, test } from 'vitest'
import { damagedFiles } from './svg-mutations.ts'

describe.each(['svg', 'geojson'] as const)('%s', (kind) => {
  test('10,000 damaged files (seeds 1001 to 11000)', { timeout: 600_000 }, () => {
    const { read, refused, longest_ms } = damagedFiles(kind, 10_000, 1001)
    console.log(`${kind}: ${read} read, ${refused} refused with a sentence, the longest took ${longest_ms.toFixed(0)} ms`)
    expect(read + refused).toBe(10_000)
  })
})
