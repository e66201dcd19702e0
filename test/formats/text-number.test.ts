import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { decimalIn, integerIn } from '../../src/formats/text-number.ts'
import { quoted } from '../../src/formats/text-quote.ts'

const whole = (text: string): number => decimalIn(text, 0, text.length)

describe('decimals in place', () => {
  // Outside value: the language's own conversion, which ECMA-262 asks to be rounded correctly.
  test('100,000 random decimals are the same doubles as the language reads (seed 5)', () => {
    const next = random(5)
    const digit = (): string => String(Math.floor(10 * next()))
    for (let i = 0; i < 100_000; i += 1) {
      const digits = 1 + Math.floor(19 * next())
      const point = Math.floor((digits + 1) * next())
      let text = ['', '-', '+'][Math.floor(3 * next())]!
      for (let k = 0; k < digits; k += 1) text += (k === point ? '.' : '') + digit()
      if (next() < 0.5) text += `${next() < 0.5 ? 'e' : 'E'}${['', '-', '+'][Math.floor(3 * next())]!}${Math.floor(40 * next())}`
      if (!Object.is(whole(text), Number(text))) throw new Error(`${text}: ${whole(text)} is not ${Number(text)}`)
    }
  })

  test.each([
    '0',
    '-0',
    '.5',
    '5.',
    '1e22',
    '1e23',
    '9007199254740993',
    '123456789012345678',
    '2.2250738585072011e-308',
    '1e308',
    '0e99999',
    '0.1e-400',
  ])('%s', (text) => {
    expect(Object.is(whole(text), Number(text))).toBe(true)
  })

  test.each(['', '-', '.', 'e5', '1e', '1e+', '1.2.3', '1,5', 'nan', 'NaN', 'inf', 'Infinity', '-1.#IND', '0x10', '1 2', '1e999', '٣'])(
    '%s is none',
    (text) => {
      expect(whole(text)).toBeNaN()
    },
  )

  test('reads only its own range of the text', () => {
    expect(decimalIn('12345', 1, 3)).toBe(23)
    expect(integerIn('-12345', 0, 3)).toBe(-12)
  })

  test.each([
    ['12', 12],
    ['-7', -7],
    ['+3', 3],
    ['2147483647', 2147483647],
  ])('%s is a whole number', (text, value) => {
    expect(integerIn(text, 0, text.length)).toBe(value)
  })

  test.each(['', '-', '1.0', '2147483648', 'a', '1 '])('%s is no whole number', (text) => {
    expect(integerIn(text, 0, text.length)).toBeNaN()
  })
})

test('quoted text has no control characters and an end', () => {
  expect(quoted('\u0007a\u2028b')).toBe('"\ufffda\ufffdb"')
  expect(quoted('x'.repeat(1000))).toBe(`"${'x'.repeat(24)}..."`)
})
