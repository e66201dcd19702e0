/** Lengths as people type them. The factors are exact by definition: 1 in = 25.4 mm, 1 ft = 304.8 mm (international inch, 1959). */
import { expect, test } from 'vitest'
import { parseLength } from '../../src/base/length.ts'

const mm = (text: string): number | null => {
  const parsed = parseLength(text, 'mm', 'mm')
  return parsed.ok ? parsed.value : null
}

test.each([
  ['1200', 1200], ['1.2m', 1200], ['1,2 m', 1200], ['0,9 m', 900], ['.9m', 900], ['120 cm', 1200], ['1200mm', 1200], ['+3', 3], ['-0,25m', -250], ['\u2212250', -250],
  ["4' 6\"", 1371.6], ["4'6\"", 1371.6], ['4 ft 6 in', 1371.6], ['4\u2032 6\u2033', 1371.6], ['4\u2019 6\u201d', 1371.6], ["4'", 1219.2], ['54"', 1371.6], ['54 in', 1371.6],
  ["-1' 6\"", -457.2], ["4' 6 1/2\"", 1384.3], [' 2 ft ', 609.6],
] as const)('%s is %d mm', (text, value) => {
  expect(mm(text)).toBeCloseTo(value, 9)
})

test.each(['', 'm', '1.2.3', '12 km', '1 200 m m', "4' 1/0\"", 'abc', '1.200,5', '--3'])('"%s" is no length', (text) => {
  expect(mm(text)).toBeNull()
})

test('a bare number is in the unit of the place, a unit typed wins over it', () => {
  expect(parseLength('1.2', 'm', 'mm')).toEqual({ ok: true, value: 1200 })
  expect(parseLength('1200', 'mm', 'm')).toEqual({ ok: true, value: 1.2 })
  expect(parseLength('1\' 6"', 'm', 'mm')).toEqual({ ok: true, value: expect.closeTo(457.2, 9) })
})
