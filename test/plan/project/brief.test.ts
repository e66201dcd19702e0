/** The brief: what it accepts, what it says of what it does not, and its schema against the standard's own reading. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { sentence } from '../../../src/base/result.ts'
import { briefSchema } from '../../../src/plan/project/brief-schema.ts'
import { briefOf, readBrief } from '../../../src/plan/project/brief.ts'
import { misfit } from '../../../src/plan/project/schema.ts'
import { mutated } from './mutated.ts'
import { valid } from './standard-schema.ts'

/** One condition of each kind, and every field of a brief. */
const whole = {
  panewise: 'brief', version: 1, unit: 'm', datum: 0, rise: 2.4, down: false, shape: 'dome', flat_mm: 1, voids: [[4.5, 3]],
  conditions: [
    { name: 'south gutter', kind: 'level', at: { run: [[0, 0], [18, 0]] }, level: 0 },
    { kind: 'level', at: { rim: 'void:-4.5,3e0' }, level: 0.3, soft: 2 },
    { kind: 'level', at: { nodes: ['N1', [0, 3]], within_mm: 20 } },
    { kind: 'level', at: { panels: 'all' } },
    { kind: 'fall', at: { run: ['N1', [18, 0], [18, 12]] }, per_mille: 5, level: 3 },
    { kind: 'straight', at: { run: [[0, 0], [18, 0]] } },
    { kind: 'equal', at: { rim: 'outer' } },
    { kind: 'coplanar', at: { panels: ['P1', [2, 2]] } },
    { kind: 'plane', at: { panels: ['P1'] }, pitch_deg: 10, bearing_deg: -90 },
    { kind: 'flush', at: { joints: ['J4', [3, 1.5]] } },
    { kind: 'form-force', at: { joints: ['J4', [3, 1.5]] }, force: -0.25, off: true },
    { kind: 'form-force', at: { joints: ['j5'] }, force: 'valley', soft: 2, off: false },
    { kind: 'profile', at: { run: [[0, 0], [0, 12]] }, section: { arc: { rise: 2.4 } } },
    { kind: 'profile', at: { run: [[0, 0], [0, 12]] }, section: { pitch_deg: 20 }, level: 1 },
    { kind: 'profile', at: { nodes: ['N1', 'N2'] }, section: { points: [[0, 0], [6, 1], [12, 0.5]] } },
  ],
}

const refusal = (text: string): string => {
  const brief = readBrief(text, 'roof.json')
  if (brief.ok) throw new Error('accepted')
  return sentence(brief.problem)
}

/** The sentence for a brief with these fields changed. */
const with_ = (fields: object): string => refusal(JSON.stringify({ panewise: 'brief', version: 1, ...fields }, null, 1))
const withCondition = (...conditions: object[]): string => with_({ conditions })

describe('reading', () => {
  test('every kind and field', () => {
    const brief = readBrief(JSON.stringify(whole), 'roof.json')
    if (!brief.ok) throw new Error(sentence(brief.problem))
    const { value } = brief
    expect(value).toMatchObject({ unit: 'm', datum: 0, rise: 2.4, shape: 'dome', flat_mm: 1, voids: [[4.5, 3]] })
    expect(value.conditions.map((c) => c.name)).toEqual([
      'south gutter', 'level 1', 'level 2', 'level 3', 'fall 1', 'straight 1', 'equal 1', 'coplanar 1', 'plane 1', 'flush 1',
      'form-force 1', 'form-force 2',
      'profile 1', 'profile 2', 'profile 3'])
    expect(value.conditions[1]).toEqual({ kind: 'level', name: 'level 1', at: { rim: [-4.5, 3] }, level: 0.3, soft: 2 })
    expect(value.conditions[2]).toEqual({ kind: 'level', name: 'level 2', at: { nodes: ['N1', [0, 3]], within_mm: 20 }, level: null, soft: null })
    expect(value.conditions[10]).toEqual({ kind: 'form-force', name: 'form-force 1', at: { joints: ['J4', [3, 1.5]] }, force: -0.25, soft: null, off: true })
    expect(value.conditions[11]).toEqual({ kind: 'form-force', name: 'form-force 2', at: { joints: ['j5'] }, force: 'valley', soft: 2 })
    expect(value.conditions[5]).toEqual({ kind: 'straight', name: 'straight 1', at: { run: [[0, 0], [18, 0]] }, soft: null })
  })
  test('the least brief, with a byte order mark', () => {
    expect(readBrief('\uFEFF{"panewise":"brief","version":1}', 'b')).toMatchObject({ ok: true, value: { unit: null, rise: null, voids: null, conditions: [] } })
  })
  test('names by default avoid the names that are given', () => {
    const brief = briefOf({ ...whole, conditions: [{ kind: 'equal', at: { rim: 'outer' } }, { name: 'equal 1', kind: 'equal', at: { rim: 'outer' } }] })
    expect(brief.ok && brief.value.conditions.map((c) => c.name)).toEqual(['equal 2', 'equal 1'])
  })
})

describe('refusals name the place, the fault and the cure', () => {
  test('unknown fields', () => {
    expect(withCondition(...whole.conditions.slice(0, 2), { kind: 'level', at: { rim: 'outer' }, lvel: 1 }))
      .toMatch(/^roof\.json, line \d+, conditions\[2\]\.lvel: this field is not known; perhaps "level" is meant\.$/)
    expect(with_({ raise: 2 })).toBe('roof.json, line 4, raise: this field is not known; perhaps "rise" is meant.')
    expect(withCondition({ kind: 'equal', at: { rim: 'outer' }, level: 1 })).toContain('conditions[0].level: this field is not known; the fields here are kind, name, at, soft')
    expect(withCondition({ kind: 'level', at: { runs: [[0, 0], [1, 1]] } })).toContain('conditions[0].at.runs: this field is not known; perhaps "run" is meant')
    expect(withCondition({ kind: 'fall', at: { rim: 'outer' }, per_mille: 1 })).toContain('conditions[0].at.rim: this field is not known')
    expect(refusal('{"panewise":"brief","version":1,"__proto__":{"rise":2}}')).toContain('__proto__: this field is not known')
    expect(refusal('{"panewise":"brief","version":1,"a[.b[":2}')).toContain('a[.b[: this field is not known')
  })
  test('kinds', () => {
    expect(withCondition({ kind: 'bounds', at: { rim: 'outer' }, leest: 1 })).toMatch(/conditions\[0\]\.leest: this field is not known; perhaps "least" is meant/)
    expect(withCondition({ kind: 'slope', at: { panels: ['P1'] }, least_deg: 95 })).toContain('conditions[0].least_deg: must be less than 90, not 95')
    expect(withCondition({ kind: 'one-way', at: { joints: ['J1'] }, fold: 'up' })).toContain('conditions[0].fold: "up" is none of ridge, valley, no-ridge, no-valley')
    expect(withCondition({ kind: 'levle', at: { rim: 'outer' } })).toMatch(/conditions\[0\]\.kind: "levle" is none of level, fall, .*; perhaps "level" is meant/)
    expect(withCondition({ at: { rim: 'outer' } })).toContain('conditions[0]: the field "kind" is missing')
    expect(withCondition({ kind: 'level' })).toContain('conditions[0]: the field "at" is missing')
    expect(withCondition({ kind: 'level', at: {} })).toContain('conditions[0].at: needs "nodes" or "run" or "rim" or "panels"')
  })
  test('types, ranges and lengths', () => {
    expect(with_({ rise: '2.4' })).toContain('rise: must be a number, not a text')
    expect(with_({ rise: 0 })).toContain('rise: must be more than 0, not 0')
    expect(refusal('{"panewise":"brief","version":1,"rise":1e999}')).toContain('rise: is too large a number')
    expect(with_({ unit: 'km' })).toContain('unit: "km" is none of mm, cm, m, in, ft')
    expect(with_({ voids: [[1, 2, 3]] })).toContain('voids[0]: must have 2 entries, not 3')
    expect(withCondition({ kind: 'level', at: { run: [[0, 0]] } })).toContain('at.run: must have 2 or more entries, not 1')
    expect(withCondition({ kind: 'level', at: { nodes: ['P4'] } })).toContain('at.nodes[0]: "P4" is not a name like N12')
    expect(withCondition({ kind: 'level', at: { rim: 'void' } })).toContain('at.rim: "void" is not "outer" (all outer rims) or "void:X,Y"')
    expect(withCondition({ kind: 'level', at: { panels: 'some' } })).toContain('at.panels: must be "all"')
    expect(withCondition({ kind: 'plane', at: { panels: 'all' }, pitch_deg: 90, bearing_deg: 0 })).toContain('pitch_deg: must be less than 90, not 90')
    expect(withCondition({ kind: 'equal', at: { rim: 'outer' }, soft: 0 })).toContain('soft: must be more than 0')
    expect(withCondition({ kind: 'profile', at: { run: [[0, 0], [1, 1]] }, section: { points: [[0, 0], [0, 1]] } }))
      .toContain('section.points[1]: the distances along must rise from point to point, and 0 follows 0')
    expect(withCondition({ name: 'a', kind: 'equal', at: { rim: 'outer' } }, { name: 'a', kind: 'equal', at: { rim: 'outer' } }))
      .toContain('conditions[1].name: two conditions are called "a"')
  })
  test('other documents and versions', () => {
    expect(with_({ version: 2 })).toContain('this brief has version 2 and this program reads version 1; use a newer version of the program')
    expect(with_({ version: '1' })).toContain('version: must be 1')
    expect(with_({ panewise: 'project' })).toContain('this is a project, not a brief')
    expect(refusal('[]')).toBe('roof.json: this is not a brief.')
    expect(refusal('')).toBe('roof.json: the file is empty.')
  })
  test('broken JSON, with its line', () => {
    expect(refusal('{\n "panewise": "brief",\n "version": 1,\n}')).toBe('roof.json, line 4: } stands where a field name in quotes should be; correct the JSON there.')
    expect(refusal('{\n "panewise": "brief"\n "version": 1}')).toContain('line 3: "version": stands where "," or "}" should be')
    expect(refusal('{"panewise": "brief", "version": 01}')).toContain('stands where')
    expect(refusal('{"panewise":')).toContain('the text ends where a value should be')
    expect(refusal('{"panewise":"brief","version":1} x')).toContain('x stands where the end should be')
    expect(refusal('{"panewise":"brief","rise":1,\n"rise":2}')).toContain('line 2, rise: this field is given twice')
    expect(refusal('['.repeat(100_000))).toContain('more than 100 deep')
    expect(refusal('{"panewise":"brief","version":NaN}')).toContain('NaN} stands where a value should be')
  })
})

test('JSON is read as the language reads it, for texts of every shape', () => {
  for (const text of ['0', '-1.5e-3', '"\\u00e9\\n\\"\\\\/"', '[[],{},[1,[2,{"a":{"b":[null,true,false]}}]]]', ' {"x" : [ 1 , 2 ] }\n', JSON.stringify(whole, null, 3)]) {
    const wrapped = `{"panewise":"brief","version":1,"it":${text}}`
    expect(() => JSON.parse(wrapped) as unknown).not.toThrow()
    expect(refusal(wrapped)).toContain('it: this field is not known')
  }
})

describe('schema', () => {
  test('names the draft and describes every field', () => {
    expect(briefSchema.$schema).toBe('https://json-schema.org/draft/2020-12/schema')
    for (const [field, schema] of Object.entries(briefSchema.properties)) {
      if (field !== 'panewise' && field !== 'version' && field !== 'conditions') expect(schema).toHaveProperty('description')
    }
  })

  test('agrees with the standard reading of it on 20,000 changed briefs, seed 1', () => {
    const next = random(1)
    let accepted = 0
    for (let i = 0; i < 20_000; i += 1) {
      let value: unknown = { ...whole, conditions: whole.conditions.filter(() => next() < 0.3) }
      if (next() < 0.9) value = mutated(value, next)
      const ours = misfit(briefSchema, value) === null
      if (ours !== valid(briefSchema as unknown as Record<string, unknown>, value)) throw new Error(`not agreed on ${JSON.stringify(value)}`)
      if (ours) accepted += 1
    }
    // Both kinds must occur, or the agreement says nothing.
    expect(accepted).toBeGreaterThan(2000)
    expect(accepted).toBeLessThan(15_000)
  })
})
