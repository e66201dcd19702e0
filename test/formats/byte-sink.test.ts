/** Numbers put down digit by digit, against the language's own digits. */
import { describe, expect, test } from 'vitest'
import { fixed, rounded, shortest, significant } from '../../src/base/decimal.ts'
import { random } from '../../src/base/random.ts'
import { ByteSink } from '../../src/formats/byte-sink.ts'

const put = (write: (sink: ByteSink) => void): string => {
  const sink = new ByteSink()
  write(sink)
  return new TextDecoder().decode(sink.done())
}

/** Numbers of every size and of every count of digits, on both sides of the powers of ten. */
function numbers(): number[] {
  const next = random(5)
  const out = [0, -0, 1, -1, 0.1, 0.3, 1 / 3, 2 ** 31, 2 ** 53, 2 ** 53 - 1, 1e15, 1e15 - 1, 999999999999999.9, 1e-6, 9.99999e-7, 5e-324, 1e21, 123456789, 1e9, 1e9 - 1]
  for (let power = -8; power <= 17; power += 1) out.push(10 ** power, 10 ** power * (1 - 2 ** -53), 10 ** power * (1 + 2 ** -52))
  for (let k = 0; k < 20_000; k += 1) {
    const value = (next() - 0.5) * 10 ** Math.floor(24 * next() - 8)
    out.push(value, Number(value.toPrecision(1 + Math.floor(17 * next()))))
  }
  return out
}

describe('a sink', () => {
  test('puts down the shortest digits that read back', () => {
    for (const value of numbers()) expect(put((sink) => sink.shortest(value))).toBe(shortest(value))
  })

  test('puts down fixed and significant decimals, and integers', () => {
    const next = random(6)
    for (const value of numbers().filter((_, k) => k % 4 === 0)) {
      const decimals = Math.floor(16 * next())
      // Beyond 2^53 units in the last place both fall back to the same words.
      expect(put((sink) => sink.decimal(value, decimals, true))).toBe(fixed(rounded(value, decimals), decimals))
      expect(put((sink) => sink.decimal(value, decimals, false))).toBe(shortest(rounded(value, decimals)))
      expect(Math.abs(Number(put((sink) => sink.significant(value, 6))) - value)).toBeLessThanOrEqual(0.5000001 * Math.abs(value) * 1e-5)
      if (Math.abs(value) < 2 ** 53) expect(put((sink) => sink.integer(Math.trunc(value) + 0))).toBe(String(Math.trunc(value) + 0))
    }
    expect(put((sink) => sink.significant(0.000123456789, 4))).toBe(significant(0.000123456789, 4))
  })

  test('two at a time share no room', () => {
    const [a, b] = [new ByteSink(), new ByteSink()]
    a.text('first')
    b.text('second')
    const one = a.done()
    const c = new ByteSink()
    c.text('third')
    expect([one, b.done(), c.done()].map((bytes) => new TextDecoder().decode(bytes))).toEqual(['first', 'second', 'third'])
  })
})
