/**
 * Plans spoilt by seed, each way of drawing with each fault: what comes back is the clean plan, or a question whose proposal
 * gives it. `node test/bench/run.mjs spoilt` runs many more and keeps the figures.
 */
import { describe, expect, test } from 'vitest'
import { faults, spoiltOutcome, ways } from '../../make/spoilt.ts'

describe.each(ways)('$name', (way) => {
  test.each(faults.map((fault, at) => ({ ...fault, at })))('$name', ({ at, ...fault }) => {
    const plans = fault.isBeside === true ? 1 : 3
    const outcomes = Array.from({ length: plans }, (_, k) => spoiltOutcome(way, [fault], k + at, 100 + 7 * k + at))
    if (fault.mayAsk === true) expect(['clean', 'clean once asked']).toContain(outcomes[0])
    else expect(outcomes).toEqual(new Array(plans).fill(fault.name.startsWith('unit') ? 'clean once asked' : way.outcome))
  })
})

describe('plans without any fault are read without a question', () => {
  test.each(ways.filter(({ outcome }) => outcome === 'clean').slice(0, 2))('$name', (way) => {
    for (let k = 0; k < 24; k += 1) expect([k, spoiltOutcome(way, [], k, 5000 + k)]).toEqual([k, 'clean'])
  })
})
