/** The JSON tape against the language's own parser: the same values from valid text, and no text valid for one only. */
import { expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { sentence } from '../../src/base/result.ts'
import { finish } from '../../src/base/steps.ts'
import { jsonTape, type JsonTape } from '../../src/formats/geojson-tape.ts'

function tapeOf(text: string): JsonTape {
  const result = finish(jsonTape(text))
  if (!result.ok) throw new Error(sentence(result.problem))
  return result.value
}

/** The value on the tape as the language holds it; the last of several members of one name counts, as in JSON.parse. */
function unrolled(tape: JsonTape, at = 0): unknown {
  const kind = tape.kind(at)
  if (kind === 'string') return tape.string(at)
  if (kind === 'number') return tape.number(at)
  if (kind === 'null') return null
  if (kind === 'true' || kind === 'false') return kind === 'true'
  if (kind === 'array') {
    const out: unknown[] = []
    for (let child = at + 1; child < tape.next.at(at); child = tape.next.at(child)) out.push(unrolled(tape, child))
    return out
  }
  const out: Record<string, unknown> = {}
  for (let key = at + 1; key < tape.next.at(at); key = tape.next.at(key + 1)) out[tape.string(key)!] = unrolled(tape, key + 1)
  return out
}

/** A random value, seeded. */
function value(next: () => number, depth: number): unknown {
  const kind = Math.floor(next() * (depth > 4 ? 5 : 7))
  if (kind === 0) return null
  if (kind === 1) return next() < 0.5
  if (kind === 2) return Math.round((next() - 0.5) * 1e6)
  if (kind === 3) return (next() - 0.5) * 10 ** Math.round(40 * (next() - 0.5))
  if (kind === 4)
    return Array.from({ length: Math.floor(next() * 6) }, () =>
      String.fromCharCode(Math.floor(next() * (next() < 0.5 ? 128 : 65536))),
    ).join('')
  const count = Math.floor(next() * 5)
  if (kind === 5) return Array.from({ length: count }, () => value(next, depth + 1))
  return Object.fromEntries(Array.from({ length: count }, (_, i) => [`k"\\${i}\n`, value(next, depth + 1)]))
}

test('500 random documents, seed 1, compact and indented', () => {
  const next = random(1)
  for (let i = 0; i < 500; i += 1) {
    const made = value(next, 0)
    for (const indent of [0, 2, '\t']) {
      const text = JSON.stringify(made, null, indent)
      expect(unrolled(tapeOf(` ${text}\n`)), text).toEqual(JSON.parse(text))
    }
  }
})

test('3,000 documents with characters changed, seed 2: valid for both or for neither', () => {
  const next = random(2)
  const letters = '{}[]",:0123456789.eE+-truefalsn \\u\n\tNaI/\u0001'
  let valid = 0
  for (let i = 0; i < 3000; i += 1) {
    let text = JSON.stringify(value(next, 2), null, next() < 0.3 ? 1 : 0)
    const changes = 1 + Math.floor(next() * 2)
    for (let k = 0; k < changes; k += 1) {
      const at = Math.floor(next() * (text.length + 1))
      text =
        text.slice(0, at) + (next() < 0.7 ? letters[Math.floor(next() * letters.length)]! : '') + text.slice(at + Math.floor(next() * 2))
    }
    let theirs: unknown
    let accepted = true
    try {
      theirs = JSON.parse(text)
    } catch {
      accepted = false
    }
    const ours = finish(jsonTape(text))
    expect(ours.ok, text).toBe(accepted)
    if (!ours.ok) expect(ours.problem.where?.line, text).toBeGreaterThan(0)
    if (!ours.ok || !accepted) continue
    valid += 1
    // A number beyond the range is infinite for the language and NaN here.
    expect(JSON.stringify(unrolled(ours.value)), text).toBe(JSON.stringify(theirs))
  }
  expect(valid).toBeGreaterThan(500)
  expect(valid).toBeLessThan(2500)
})

test('lines and sentences of what is no JSON', () => {
  const cases: [string, string][] = [
    ['', 'line 1: the file ends too early; it may be cut off: export it again.'],
    ['{\n"a": NaN}', 'line 2: NaN is no number and no value of JSON; export the file again.'],
    ['[-Infinity]', 'line 1: -Infinity is no number and no value of JSON; export the file again.'],
    ['[1,\n2,\n]', 'line 3: a value is expected in place of "]"; export the file again.'],
    ['[1 2]', 'line 1: a comma or ] is expected in place of "2]"; export the file again.'],
    ['{"a" 1}', 'line 1: a colon is expected in place of "1}"; export the file again.'],
    ['{a: 1}', 'line 1: a name in double quotes is expected in place of "a: 1}"; export the file again.'],
    ['{"a": 1,}', 'line 1: a name in double quotes is expected in place of "}"; export the file again.'],
    ['[01]', 'line 1: a number is expected in place of "01]"; export the file again.'],
    ['[.5]', 'line 1: a value is expected in place of ".5]"; export the file again.'],
    ['{} {}', 'line 1: the end of the file is expected in place of "{}"; export the file again.'],
    ['["a\nb"]', 'line 1: a text in double quotes holds "b"]"; export the file again.'],
    ['["\\x"]', 'line 1: a text in double quotes holds "\\x"]"; export the file again.'],
    ['{\n"a": [\n1, 2', 'line 3: the file ends inside a list that line 2 opens; it may be cut off: export it again.'],
    ['{"a": "b', 'line 1: the file ends inside a text in double quotes; it may be cut off: export it again.'],
  ]
  for (const [text, said] of cases) {
    const result = finish(jsonTape(text))
    expect(result.ok ? 'read' : sentence(result.problem), text).toBe(said)
  }
})

test('depth has a limit, and a bomb of brackets is refused at once', () => {
  expect(tapeOf('['.repeat(128) + ']'.repeat(128)).start.length).toBe(128)
  for (const text of ['['.repeat(129), '['.repeat(20_000_000), '{"a":'.repeat(5_000_000)]) {
    const result = finish(jsonTape(text))
    expect(result.ok ? 'read' : result.problem.code).toBe('too-deep')
  }
})

test('a value knows its line and its path', () => {
  const tape = tapeOf('{"a":\n[1,{"b c":\n[[5,6],\n7]}],"d":8}')
  const found: [string, number][] = []
  for (let i = 0; i < tape.start.length; i += 1) found.push([tape.path(i), tape.line(i)])
  expect(found).toEqual([
    ['', 1],
    ['a', 1],
    ['a', 2],
    ['a[0]', 2],
    ['a[1]', 2],
    ['a[1]["b c"]', 2],
    ['a[1]["b c"]', 3],
    ['a[1]["b c"][0]', 3],
    ['a[1]["b c"][0][0]', 3],
    ['a[1]["b c"][0][1]', 3],
    ['a[1]["b c"][1]', 4],
    ['d', 4],
    ['d', 4],
  ])
  expect(tape.line(0)).toBe(1)
})
