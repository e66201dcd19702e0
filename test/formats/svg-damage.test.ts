/** A few hundred damaged SVG and GeoJSON files; svg-damage.fuzz.ts does 10,000 of each. */
import { describe, expect, test } from 'vitest'
import { damagedFiles, files } from './svg-mutations.ts'
import { upright } from './text-mutations.ts'

describe.each(['svg', 'geojson'] as const)('%s', (kind) => {
  test('the files themselves are read', () => {
    expect(files(kind).length).toBeGreaterThan(2)
    for (const { name, bytes } of files(kind)) expect(upright(name, bytes), name).toBe('read')
  })

  test('400 damaged files (seeds 1 to 400): read or refused with a sentence', () => {
    const { read, refused } = damagedFiles(kind, 400, 1)
    // Both happen, or the damage would be no test.
    expect(read).toBeGreaterThan(60)
    expect(refused).toBeGreaterThan(60)
  })
})
