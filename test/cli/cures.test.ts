/** `--cure` as a process: what check lists is applied by the option that it names; raise writes the plan that came of it. */
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { gridObj, program, type Program } from './program.ts'

let panewise: Program
beforeAll(async () => {
  panewise = await program()
  panewise.file('bays.obj', gridObj(12, 8, 1.5))
  panewise.file('hall.brief.json', JSON.stringify({ panewise: 'brief', version: 1, conditions: [{ name: 'south gutter', kind: 'level', at: { rim: 'outer' }, level: 0 }] }))
})
afterAll(() => panewise.close())

const held = ['bays.obj', '--brief', 'hall.brief.json']
const json = (words: readonly string[]) => JSON.parse(panewise.run([...words, '--json']).out)

describe('check', () => {
  test('ends with the cures, each with its option', () => {
    const { out, code } = panewise.run(['check', ...held])
    expect(code).toBe(1)
    expect(out).toContain('Yes, if one of these is done:')
    expect(out).toMatch(/1\. Pack the rim up or down by at most 300 mm/)
    expect(out).toMatch(/2\. Divide 4 panels by 4 diagonals: P1 from N1 to N3, /)
    expect(out).toMatch(/3\. Release "south gutter": .*\(--cure "release:south gutter"\)/)
    expect(out).toContain('"south gutter" alone keeps all 172 joints unfolded: all panels stay in one plane.')
  })
  test('every key that the record has', () => {
    const { answer, cures } = json(['check', ...held])
    expect(answer).toBe('yes, if')
    for (const cure of cures) expect(Object.keys(cure)).toEqual(expect.arrayContaining(['code', 'option', 'message', 'largest_mm', 'rms_mm', 'count', 'where', 'leaves']))
  })
  test('with a cure the answer is of the cured plan', () => {
    const ran = panewise.run(['check', ...held, '--cure', 'release:south gutter', '--json'])
    const summary = JSON.parse(ran.out)
    expect(ran.code).toBe(0)
    expect([summary.verdict, summary.answer, summary.stress.freedomLeft, summary.cured.length]).toEqual(['lifts', 'yes', 21, 1])
  })
  test('a kind that does not help, and a word that is none: exit 2', () => {
    const none = panewise.run(['check', ...held, '--cure', 'move-nodes'])
    expect(none.code).toBe(2)
    expect(none.err).toContain('"move-nodes" does not help here')
    expect(panewise.run(['check', ...held, '--cure', 'paint']).code).toBe(2)
  })
})

describe('raise', () => {
  test('with diagonals writes the divided plan, which gives the same answer by itself', () => {
    const summary = json(['raise', ...held, '--cure', 'add-diagonals', '--out', 'divided'])
    expect(summary.files).toEqual(['plan.obj', 'roof.obj', 'panels.csv', 'joints.csv', 'nodes.csv', 'summary.json'])
    expect(readdirSync(join(panewise.room, 'divided')).sort()).toEqual([...summary.files].sort())
    expect(JSON.parse(readFileSync(join(panewise.room, 'divided/summary.json'), 'utf8'))).toEqual(summary)
    const again = json(['check', 'divided/plan.obj', '--brief', 'hall.brief.json'])
    expect([again.plan.panels, again.stress.freedomLeft, again.verdict]).toEqual([100, 1, summary.verdict])
    // Names are those that a reader of the new plan gives.
    panewise.run(['raise', 'divided/plan.obj', '--brief', 'hall.brief.json', '--out', 'again'])
    expect(readFileSync(join(panewise.room, 'again/nodes.csv'), 'utf8')).toBe(readFileSync(join(panewise.room, 'divided/nodes.csv'), 'utf8'))
    // The faces of the roof and those of the plan are the same.
    const faces = (name: string): string[] => readFileSync(join(panewise.room, `divided/${name}`), 'utf8').split('\n').filter((line) => line.startsWith('f '))
    expect(faces('roof.obj')).toEqual(faces('plan.obj'))
  })
  test('with a condition released leaves the plan alone, so it writes none', () => {
    const summary = json(['raise', ...held, '--cure', 'release:south gutter', '--out', 'released'])
    expect(summary.files).not.toContain('plan.obj')
    expect(existsSync(join(panewise.room, 'released/plan.obj'))).toBe(false)
  })
  test('with the rim packed every rim node lies where the list says', () => {
    const summary = json(['raise', ...held, '--cure', 'pack-rim', '--out', 'packed'])
    const rows = readFileSync(join(panewise.room, 'packed/nodes.csv'), 'utf8').trim().split('\r\n').slice(1).map((row) => row.split(','))
    const height = new Map(rows.map(([name, , , z]) => [name, Number(z)]))
    for (const { node, by_mm } of summary.cured[0].packing) expect(height.get(node)! * 1000).toBeCloseTo(by_mm, 2)
    expect(summary.roof.flatnessMax_mm).toBeLessThan(0.01)
  })
})
