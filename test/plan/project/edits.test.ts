/** Edits: each makes a new document, touches nothing of the old one, and its condition reads back as it was meant. */
import { describe, expect, test } from 'vitest'
import { briefOf, emptyBrief, readBrief, type Brief } from '../../../src/plan/project/brief.ts'
import { briefText } from '../../../src/plan/project/brief-text.ts'
import {
  heldForce, heldNode, heldPlane, heldRun, movedAlong, renamed, softened, switched, withCondition, withDatum, withDown, withFlatness, withoutConditions, withRise, withShape,
} from '../../../src/plan/project/edits.ts'

type Document = { readonly brief: Brief; readonly target: Float64Array | null; readonly other: string }

function frozen<T>(value: T): T {
  if (typeof value === 'object' && value !== null && !ArrayBuffer.isView(value)) {
    Object.freeze(value)
    for (const entry of Object.values(value)) frozen(entry)
  }
  return value
}

const start: Document = frozen({ brief: emptyBrief, target: Float64Array.of(1, 2), other: 'kept' })
const two = frozen(withCondition(withCondition(start, heldNode(4, 2.5)), heldForce(2, 'ridge')))

describe('an edit', () => {
  test('of the wishes changes that wish alone', () => {
    const made = withFlatness(withDown(withDatum(withRise(start, 2), 0.5), true), 2)
    expect(made).toEqual({ ...start, brief: { ...emptyBrief, rise: 2, datum: 0.5, down: true, flat_mm: 2 } })
    expect(withRise(withRise(start, 2), null)).toEqual(start)
  })
  test('of the shape takes the place of heights set by hand, and a way takes the place of a rise', () => {
    expect(withShape(start, 'barrel')).toEqual({ ...start, brief: { ...emptyBrief, shape: 'barrel' }, target: null })
    const moved = movedAlong(withRise(start, 3), Float64Array.of(1, 2), Float64Array.of(0.5, 1), 0.2)
    expect(moved.brief.rise).toBeNull()
    expect(moved.target).toEqual(Float64Array.of(1.1, 2.2))
  })
  test('of a condition replaces the one of its name, in its place', () => {
    expect(two.brief.conditions.map(({ name }) => name)).toEqual(['height of N5', 'force of J3'])
    const again = withCondition(two, heldNode(4, 3))
    expect(again.brief.conditions).toEqual([heldNode(4, 3), heldForce(2, 'ridge')])
    expect(withoutConditions(again, ['height of N5', 'nobody']).brief.conditions).toEqual([heldForce(2, 'ridge')])
  })
  test('switches, softens and renames', () => {
    const off = switched(two, 'force of J3', true)
    expect(off.brief.conditions[1]).toEqual({ ...heldForce(2, 'ridge'), off: true })
    expect(briefText(switched(off, 'force of J3', false).brief)).toBe(briefText(two.brief))
    expect(softened(two, 'height of N5', 4).brief.conditions[0]).toEqual(heldNode(4, 2.5, 4))
    expect(renamed(two, 'height of N5', '  ridge end ')).toMatchObject({ ok: true, value: { brief: { conditions: [{ name: 'ridge end' }, { name: 'force of J3' }] } } })
    expect(renamed(two, 'height of N5', 'force of J3')).toMatchObject({ ok: false, problem: { code: 'name-twice' } })
    expect(renamed(two, 'height of N5', ' ')).toMatchObject({ ok: false, problem: { code: 'no-name' } })
    expect(renamed(two, 'height of N5', 'height of N5').ok).toBe(true)
  })
})

describe('briefs as text', () => {
  const conditions = [
    heldNode(4, 2.5), heldNode(5, null, 3), heldForce(2, -0.25), heldForce(3, 'valley', 0.5), heldPlane(7, 12, -90),
    heldRun(['N1', [4, 0.125], 'N9'], { arc: { rise: 1.2 } }, 3), heldRun([[0, 0], [6, 0]], { points: [[0, 0], [3, 1], [6, 0]] }, 3), heldRun(['N1', 'N2'], { pitch_deg: 20 }, null),
    { name: 'void', soft: null, kind: 'level', at: { rim: [-4.5, 1e-7] }, level: 0.1 },
    { name: 'rim', soft: 2, kind: 'equal', at: { rim: 'outer' } },
    { name: 'gutter', soft: null, kind: 'fall', at: { run: [[0, 0], [18, 0]] }, per_mille: 5, level: null },
    { name: 'near', soft: null, kind: 'level', at: { nodes: [[1, 2]], within_mm: 20 }, level: null },
    { name: 'roof "A" \u2028', soft: null, kind: 'coplanar', at: { panels: ['P1', [2, 2]] } },
    { name: 'flush', soft: null, kind: 'flush', at: { joints: ['J4'] }, off: true },
  ] as const satisfies Brief['conditions']
  test('read back as they were, every kind and place', () => {
    const brief: Brief = { unit: 'mm', datum: 0, rise: 2.4, down: true, shape: 'hipped', flat_mm: 0.5, voids: [[4.5, 3]], conditions }
    expect(readBrief(briefText(brief), 'b')).toEqual({ ok: true, value: brief })
    expect(heldRun([[0, 0], [6, 0]], { points: [[0, 0], [6, 1]] }, 3).level).toBeNull()
  })
  test('with no field that says nothing', () => {
    expect(briefText(emptyBrief)).toBe('{\n  "panewise": "brief",\n  "version": 1\n}\n')
    expect(briefText(two.brief)).toBe([
      '{', '  "panewise": "brief",', '  "version": 1,', '  "conditions": [',
      '    { "name": "height of N5", "kind": "level", "at": { "nodes": ["N5"] }, "level": 2.5 },',
      '    { "name": "force of J3", "kind": "form-force", "at": { "joints": ["J3"] }, "force": "ridge" }', '  ]', '}', ''].join('\n'))
  })
  test('numbers keep their digits', () => {
    const rise = 0.1 + 0.2
    expect(briefOf(JSON.parse(briefText({ ...emptyBrief, rise })))).toMatchObject({ ok: true, value: { rise } })
  })
})
