/** Project files that people edited or disks damaged: opened or refused with a sentence, never a crash, never half opened. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { sentence } from '../../../src/base/result.ts'
import { emptyBrief } from '../../../src/plan/project/brief.ts'
import { heldForce, heldNode } from '../../../src/plan/project/edits.ts'
import { projectOf, type Project } from '../../../src/plan/project/project-record.ts'
import { projectSchema } from '../../../src/plan/project/project-schema.ts'
import { projectLine, projectText } from '../../../src/plan/project/project-text.ts'
import { documentKind, readProject } from '../../../src/plan/project/read-project.ts'
import { misfit } from '../../../src/plan/project/schema.ts'
import { grid } from '../../make/plans.ts'
import { mutated } from './mutated.ts'
import { valid } from './standard-schema.ts'

/** Every field of a project. */
function whole(): Project {
  const plan = grid(3, 3, { voids: [[1, 1]], loose: 0.1 })
  const read = {
    plan, heights: plan.x.map((x, n) => (n === 3 ? NaN : x / 3)), marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] }, questions: [],
    repairs: [
      { code: 'joined', state: 'applied', count: 2, message: '2 line ends were joined.', where: [[0, 0], [1, 2.5]] },
      { code: 'double-lines', state: 'proposed', count: 1, message: 'not taken', where: [] },
    ] as const,
    leftOut: [{ kind: 'TEXT', layer: 'notes "A"', count: 4 }], notices: ['One sentence.'],
  }
  const brief = { ...emptyBrief, rise: 1.25, voids: [[1.5, 1.5]] as const, conditions: [heldNode(0, 0.5), { ...heldForce(1, 'ridge'), off: true }] }
  return projectOf(read, { name: 'hall é.dxf', sha256: '0123456789abcdef'.repeat(4), brief, target: plan.y.map((y, n) => (n === 5 ? NaN : y)), leastSlope: 2.5 })
}

const text = projectText(whole())

describe('the file', () => {
  test('reads back as it was, written again byte for byte', () => {
    const read = readProject(text, 'it')
    if (!read.ok) throw new Error(sentence(read.problem))
    expect(read.value).toEqual(whole())
    expect(projectText(read.value)).toBe(text)
    const line = readProject(projectLine(read.value), 'it')
    expect(line.ok && projectText(line.value)).toBe(text)
    expect(read.value.brief.voids).toBeNull()
    expect(read.value.read.repairs.map(({ code }) => code)).toEqual(['joined'])
    expect(documentKind(text)).toBe('project')
  })
  test('voids that a brief names and the plan has not are made on opening', () => {
    const of = whole()
    const read = readProject(projectText({ ...of, brief: { ...of.brief, unit: 'mm', voids: [[500, 500], [1500, 1500]], conditions: [heldNode(5, 0.5)] } }), 'it')
    if (!read.ok) throw new Error(sentence(read.problem))
    expect(read.value.read.plan.panelCount).toBe(7)
    expect(read.value.brief).toMatchObject({ voids: null, conditions: [{ name: 'height of N5' }] })
    expect(readProject(projectText({ ...of, brief: { ...of.brief, voids: [[50, 50]] } }), 'it')).toMatchObject({ ok: false, problem: { code: 'void-nowhere', where: { at: [50, 50], file: 'it' } } })
  })
  test('holds no results', () => {
    expect(Object.keys(JSON.parse(text) as object)).toEqual(
      ['panewise', 'version', 'source', 'unit', 'nodes', 'faces', 'voids', 'heights', 'reading', 'brief', 'target', 'least_slope_deg'])
  })
  test('reads in another order of its fields, with a byte order mark and Windows line ends', () => {
    const turned = JSON.stringify(Object.fromEntries(Object.entries(JSON.parse(text) as object).reverse()), null, 1)
    for (const changed of [turned, `\uFEFF${text}`, text.replaceAll('\n', '\r\n')]) {
      const read = readProject(changed, 'it')
      expect(read.ok && projectText(read.value)).toBe(text)
    }
  })
})

describe('changed', () => {
  test('values: agrees with the standard reading of its schema on 2,000 of them, seed 2', () => {
    const next = random(2)
    let accepted = 0
    for (let i = 0; i < 2000; i += 1) {
      const value = next() < 0.1 ? (JSON.parse(text) as unknown) : mutated(JSON.parse(text), next)
      const ours = misfit(projectSchema, value) === null
      if (ours !== valid(projectSchema as unknown as Record<string, unknown>, value)) throw new Error(`not agreed on ${JSON.stringify(value)}`)
      if (ours) accepted += 1
      const read = readProject(JSON.stringify(value), 'it')
      // Whatever is opened can be saved and opened again.
      if (read.ok) expect(readProject(projectText(read.value), 'it').ok).toBe(true)
      else expect(sentence(read.problem)).toMatch(/^it.*: .*\.$/)
      if (read.ok) expect(ours).toBe(true)
    }
    expect(accepted).toBeGreaterThan(200)
    expect(accepted).toBeLessThan(1800)
  })
  test('letters: opened or refused, 2,000 of them, seed 3', () => {
    const next = random(3)
    let refused = 0
    for (let i = 0; i < 2000; i += 1) {
      const at = Math.floor(next() * text.length)
      const cut = Math.floor(next() * 40)
      const draw = next()
      const changed = draw < 0.3 ? text.slice(0, at) : draw < 0.6 ? text.slice(0, at) + text.slice(at + cut) : draw < 0.8
        ? text.slice(0, at) + '0-.,{}[]":eN'[Math.floor(next() * 12)]! + text.slice(at + 1) : text.slice(0, at) + text.slice(at, at + cut) + text.slice(at)
      const read = readProject(changed, 'it')
      if (!read.ok) {
        refused += 1
        expect(sentence(read.problem)).toMatch(/^it.*: .*\.$/)
      }
    }
    expect(refused).toBeGreaterThan(1200)
  })
})
