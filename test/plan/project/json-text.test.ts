/** Reading JSON with places, against the language's own reader. */
import { expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { readJson } from '../../../src/plan/project/json-text.ts'

const seedText = `{"a": [1, -2.5e+3, "x\\n\\u00e9\\"", true, null, {}],\r\n "b": {"c": {"__proto__": [[], [0.1]]}},\t"": "" }`

/** The language's verdict on a text, but for fields given twice, which it lets pass. */
function parsed(text: string): { value: unknown } | null {
  try {
    return { value: JSON.parse(text) as unknown }
  } catch {
    return null
  }
}

test('accepts and refuses what JSON.parse does, with the same values: 20,000 changed texts, seed 1', () => {
  const next = random(1)
  const letters = '{}[],:"\\0123456789eE+-. \n\ttrufalsn\u0007é/'
  let accepted = 0
  for (let i = 0; i < 20_000; i += 1) {
    let text = seedText
    for (let k = Math.floor(next() * 3); k >= 0; k -= 1) {
      const at = Math.floor(next() * (text.length + 1))
      const letter = letters[Math.floor(next() * letters.length)]!
      text = next() < 0.3 ? text.slice(0, at) + text.slice(at + 1) : text.slice(0, at) + letter + text.slice(at + (next() < 0.5 ? 1 : 0))
    }
    const theirs = parsed(text)
    const ours = readJson(text, 'f')
    if (!ours.ok && ours.problem.code === 'field-twice') continue
    if (ours.ok !== (theirs !== null)) throw new Error(`not agreed on ${JSON.stringify(text)}`)
    if (!ours.ok || theirs === null) continue
    accepted += 1
    expect(ours.value.value).toEqual(theirs.value)
  }
  expect(accepted).toBeGreaterThan(2000)
  expect(accepted).toBeLessThan(18_000)
})

test('knows the line of each field, whatever ends the lines', () => {
  const json = readJson('{\r\n"a":\r\n [1,\r\n  {"b": 2}],\r\n"c": 3}', 'f')
  if (!json.ok) throw new Error(json.problem.message)
  expect(['', 'a', 'a[0]', 'a[1]', 'a[1].b', 'c', 'd'].map((path) => json.value.lineOf(path))).toEqual([1, 3, 3, 4, 4, 5, undefined])
})
