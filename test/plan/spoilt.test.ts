/**
 * Plans spoilt by seed, each way of drawing with each fault: what comes back is the clean plan, or a question whose proposal
 * gives it. `node test/bench/run.mjs spoilt` runs many more and keeps the figures.
 */
import { describe, expect, test } from 'vitest'
import { faults, spoiltOutcome, ways } from '../make/spoilt.ts'

describe.each(ways)('$name', (way) => {
  test.each(faults.map((fault, at) => ({ ...fault, at })))('$name', ({ at, ...fault }) => {
    const outcomes = Array.from({ length: 3 }, (_, k) => spoiltOutcome(way, [fault], k + at, 100 + 7 * k + at))
    expect(outcomes).toEqual(new Array(3).fill(fault.name.startsWith('unit') ? 'clean once asked' : way.outcome))
  })
})

describe('plans without any fault are read without a question', () => {
  test.each(ways.filter(({ outcome }) => outcome === 'clean').slice(0, 2))('$name', (way) => {
    for (let k = 0; k < 24; k += 1) expect([k, spoiltOutcome(way, [], k, 5000 + k)]).toEqual([k, 'clean'])
  })
})
