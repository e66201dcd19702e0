import { expect, test } from 'vitest'
import { jsonText } from '../../src/formats/write-json.ts'

test('what is written reads back as it was, short lists on one line', () => {
  const record = {
    version: '1',
    verdict: 'lifts in part',
    where: [[1.5, -2], [0.1, 7e-9]],
    names: ['P1', 'P"2"\n<b>'],
    empty: [],
    nothing: {},
    reason: null,
    decided: true,
    nested: { deep: { deeper: [{ code: 'split', where: [] }] } },
    ['__proto__x']: 1,
  }
  const text = jsonText(record)
  expect(JSON.parse(text)).toEqual(record)
  expect(text).toContain('"names": ["P1", "P\\"2\\"\\n<b>"]')
})

test('no NaN, no infinity, no minus zero; what is undefined is left out', () => {
  expect(jsonText({ a: NaN, b: -Infinity, c: -0, d: undefined, e: [NaN, -0] })).toBe('{\n  "a": null,\n  "b": null,\n  "c": 0,\n  "e": [null, 0]\n}')
  expect(jsonText(Float64Array.of(1, -0, 0.5))).toBe('[1, 0, 0.5]')
})
