/** Projects through the job: the same numbers as the drawing they came from, and what options still do to them. */
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import { sentence, type Result } from '../../src/base/result.ts'
import { finish } from '../../src/base/steps.ts'
import { reading } from '../../src/job/reading.ts'
import { run } from '../../src/job/run.ts'
import type { Checked } from '../../src/job/check.ts'
import { Session } from '../../src/job/session.ts'
import { briefOf, emptyBrief, type Brief } from '../../src/plan/project/brief.ts'
import { briefText } from '../../src/plan/project/brief-text.ts'
import { heldForce, heldNode, movedAlong, switched, withCondition, withRise } from '../../src/plan/project/edits.ts'
import { noOptions, type Options } from '../../src/plan/project/options.ts'
import { projectOf, type Project } from '../../src/plan/project/project-record.ts'
import { projectText } from '../../src/plan/project/project-text.ts'
import { readProject } from '../../src/plan/project/read-project.ts'
import { grid } from '../make/plans.ts'
import { objText } from '../make/ask.ts'

type Source = { name: string; bytes: Uint8Array }

const root = join(import.meta.dirname, '../..')
const folders = ['samples', 'test/corpus/obj', 'test/corpus/dxf', 'test/corpus/svg', 'test/corpus/geojson']
const drawings = folders.flatMap((folder) => readdirSync(join(root, folder)).filter((name) => /\.(obj|dxf|svg|geojson)$/.test(name)).map((name) => join(folder, name)))

const encoded = (name: string, text: string): Source => ({ name, bytes: new TextEncoder().encode(text) })
const request = (source: Source, options: Partial<Options> = {}, brief: string | null = null) =>
  ({ command: 'check', source, options: { ...noOptions, ...options }, brief: brief === null ? null : { name: 'b.json', text: brief }, levels: null, given: {} }) as const

const value = <T>(made: Result<T>): T => {
  if (!made.ok) throw new Error(sentence(made.problem))
  return made.value
}
const read = (source: Source, options: Partial<Options> = {}, brief: string | null = null) => finish(reading(request(source, options, brief)))
const answer = async (source: Source, options: Partial<Options> = {}, brief: string | null = null): Promise<Checked> => value(await run(request(source, options, brief)))

/** The project that the page would save of a drawing. */
function saved(source: Source, options: Partial<Options> = {}, brief: Brief = emptyBrief): Project {
  const made = value(read(source, options))
  return projectOf(made.read, { name: source.name, sha256: 'ab'.repeat(32), brief, target: null, leastSlope: 3 })
}
const fileOf = (project: Project): Source => encoded('hall.panewise.json', projectText(project))

/** Everything that an answer says but where it came from and what it offers, and every array of its plan and roof. */
const said = ({ answer }: Checked): unknown => {
  // What was offered and not taken stays behind with the drawing.
  const repairs = answer.summary.repairs.filter(({ state }) => state !== 'proposed')
  return { ...answer, summary: { ...answer.summary, input: null, repairs } }
}

/** What answers the questions that a drawing raises: the unit or scale that the reader itself proposes. */
function answers(source: Source): Partial<Options> | null {
  const made = read(source)
  if (!made.ok) return null
  const [question] = made.value.read.questions
  if (question === undefined) return {}
  const [, name, asked] = /^--(unit|scale) (.+)$/.exec(question.options[0]!)!
  return name === 'unit' ? { unit: asked as NonNullable<Options['unit']> } : { scale: Number(asked!.replace('1:', '')) }
}

describe('a project gives what its drawing gives', () => {
  const plans = drawings.map((path) => ({ path, source: { name: path, bytes: new Uint8Array(readFileSync(join(root, path))) } })).map((entry) => ({ ...entry, options: answers(entry.source) }))
  test('there are drawings of every format to compare', () => {
    const formats = plans.filter(({ options }) => options !== null).map(({ path }) => path.split('.').pop())
    expect(new Set(formats)).toEqual(new Set(['obj', 'dxf', 'svg', 'geojson']))
    expect(formats.length).toBeGreaterThan(12)
  })
  test.each(plans.filter(({ options }) => options !== null))('$path', async ({ source, options }) => {
    const drawn = await answer(source, options!)
    const project = saved(source, options!)
    const text = projectText(project)
    // The same bytes every time, and what reads back writes the same again.
    expect(projectText(value(readProject(text, 'it')))).toBe(text)
    const opened = await answer(encoded('it.panewise.json', text))
    expect(said(opened)).toEqual(said(drawn))
    expect(opened.answer.summary.input.sha256).not.toBe(drawn.answer.summary.input.sha256)
  }, 120_000)
})

const [bays, hall] = ['samples/tern-yard-bays.obj', 'samples/tern-yard-court.geojson'].map((path) => ({ name: path, bytes: new Uint8Array(readFileSync(join(root, path!))) }))

describe('what is asked of a project', () => {
  test('its brief holds, options win, another brief takes its place', async () => {
    const brief = value(briefOf({ panewise: 'brief', version: 1, rise: 1.5, shape: 'barrel', conditions: [{ name: 'corner', kind: 'level', at: { nodes: ['N1'] }, level: 0.25 }] }))
    const file = fileOf(saved(bays!, {}, brief))
    const drawn = await answer(bays!, {}, briefText(brief))
    expect(said(await answer(file))).toEqual(said(drawn))
    expect(said(await answer(file, { rise: 2, shape: 'dome' }))).toEqual(said(await answer(bays!, { rise: 2, shape: 'dome' }, briefText(brief))))
    expect(said(await answer(file, {}, briefText(emptyBrief)))).toEqual(said(await answer(bays!)))
  })
  test('a condition that is off asks nothing', async () => {
    const held = withCondition(saved(bays!), heldNode(4, 3))
    const off = switched(held, 'height of N5', true)
    expect((await answer(fileOf(held))).answer.roof!.heights[4]).toBeCloseTo(3, 12)
    expect(said(await answer(fileOf(off)))).toEqual(said(await answer(bays!)))
    expect(value(readProject(projectText(off), 'it')).brief.conditions).toEqual(off.brief.conditions)
  })
  test('reading options that come too late are said; a unit of another kind is refused', async () => {
    const file = fileOf(saved(bays!))
    const { notices } = (await answer(file, { snap_mm: 5, layers: ['A'], unit: 'm' })).answer.summary
    expect(notices).toContain('The plan of a project is as it was accepted: --layer, --snap change nothing.')
    expect(await run(request(file, { unit: 'mm' }))).toMatchObject({ ok: false, problem: { code: 'unit-settled', message: 'the plan of this project is in m' } })
    expect(await run(request(file, { scale: 100 }))).toMatchObject({ ok: false, problem: { code: 'unit-settled', where: { field: '--scale' } } })
  })
  test('voids that options name are voids, as in the drawing', async () => {
    // A panel inside the plan and one at its rim.
    for (const at of [[6.75, 5.25], [0.7, 0.7]] as const) {
      const drawn = (await answer(bays!, { voids: [at] })).answer.summary
      const opened = (await answer(fileOf(saved(bays!)), { voids: [at] })).answer.summary
      expect({ ...opened.plan, ...opened.stress, residual: 0, gap: 0 }).toEqual({ ...drawn.plan, ...drawn.stress, residual: 0, gap: 0 })
      expect(drawn.plan.panels).toBe((await answer(bays!)).answer.summary.plan.panels - 1)
      expect(opened.roof!.rise).toBeCloseTo(drawn.roof!.rise, 9)
    }
    expect(await run(request(fileOf(saved(bays!)), { voids: [[-50, 0]] }))).toMatchObject({ ok: false, problem: { code: 'void-nowhere', where: { at: [-50, 0] } } })
  })
  test('a brief that names voids does so on a project as on its drawing', async () => {
    const brief = value(briefOf({ panewise: 'brief', version: 1, voids: [[6.75, 5.25]] }))
    const { panels } = (await answer(bays!, {}, briefText(brief))).answer.summary.plan
    expect((await answer(fileOf(saved(bays!, {}, brief)))).answer.summary.plan.panels).toBe(panels)
    expect((await answer(fileOf(saved(bays!)), {}, briefText(brief))).answer.summary.plan.panels).toBe(panels)
    expect((await answer(fileOf(saved(bays!)))).answer.summary.plan.panels).toBe(panels + 1)
  })
  test('a brief in the place of a plan is sent to its option', async () => {
    expect(await run(request(encoded('b.json', briefText(emptyBrief))))).toMatchObject({ ok: false, problem: { code: 'brief-as-plan', cure: 'give it with --brief, beside a plan' } })
  })
})

describe('the page and the command line agree', () => {
  test('on a way moved by an amount, a form force and a height, by hand', async () => {
    const start = saved(bays!)
    const session = new Session(start.read, start.name)
    const first = value(await session.answer(start.brief, noOptions, null))
    const way = value(session.ways(3))[1]!
    const moved = movedAlong(withRise(start, 2.5), first.answer.roof!.heights, way.heights, 0.3)
    expect(moved.brief.rise).toBeNull()
    const after = value(await session.answer(moved.brief, noOptions, moved.target))
    // The target is a roof that the conditions allow, so it is met as it is.
    after.answer.roof!.heights.forEach((height, n) => expect(height).toBeCloseTo(moved.target![n]!, 9))
    const shaped = withCondition(withCondition(moved, heldForce(30, -0.08)), heldNode(0, 0.1))
    const page = value(await session.answer(shaped.brief, noOptions, shaped.target))
    const line = await answer(fileOf(shaped))
    expect(line.answer.roof).toEqual(page.answer.roof)
    expect({ ...line.answer.summary, input: 0 }).toEqual({ ...page.answer.summary, input: 0 })
    expect(line.answer.roof!.heights[0]).toBeCloseTo(0.1, 12)
    // A shape asked for on the command line wins over heights set by hand.
    expect((await answer(fileOf(moved), { shape: 'barrel' })).answer.roof!.heights).toEqual((await answer(bays!, { shape: 'barrel' })).answer.roof!.heights)
  })
})

describe('a file that cannot be opened says why', () => {
  const text = projectText(saved(hall!))
  const refusal = async (changed: string, name = 'roof.panewise.json'): Promise<string> => {
    const made = await run(request(encoded(name, changed)))
    return made.ok ? 'opened' : sentence(made.problem)
  }
  test('newer, damaged, of another kind', async () => {
    expect(await refusal(text.replace('"version": 1', '"version": 2'))).toBe(
      'roof.panewise.json, version: this project has version 2 and this program reads version 1; use a newer version of the program; this file was left as it is.')
    expect(await refusal(text.slice(0, text.length >> 1))).toMatch(/^roof\.panewise\.json, line \d+: the project is damaged: it ends in the middle; open an older copy; this file was left as it is\.$/)
    expect(await refusal(text.replace('],\n', ']\n'))).toMatch(/^roof\.panewise\.json, line \d+: the project is damaged: .* stands where "," or .* should be; open an older copy/)
    expect(await refusal('')).toBe('roof.panewise.json: the file is empty.')
    expect(await refusal('{"panewise": "brief", "version": 1}')).toContain('this is a brief, not a plan')
    expect(await refusal('{"type": "FeatureCollection"}')).toBe('roof.panewise.json, line 1, panewise: this is not a project; a project begins with "panewise": "project".'.replace(', line 1', ''))
  })
  test('fields of the wrong kind, by their line', async () => {
    expect(await refusal(text.replace('"unit": "m"', '"unit": "km"'))).toMatch(/line 5, unit: "km" is none of mm, cm, m, in, ft/)
    expect(await refusal(text.replace(/"nodes": \[\n *\[[^,]+,/, '"nodes": [\n    [null,'))).toMatch(/line 7, nodes\[0\]\[0\]: must be a number, not null/)
    expect(await refusal(text.replace(/"faces": \[\n *\[\d+/, '"faces": [\n    [9999'))).toMatch(/line \d+, faces\[0\]\[0\]: there is no node 9999, the project has \d+/)
    expect(await refusal(text.replace('"brief": {', '"brief": { "rise": -1,'))).toMatch(/brief\.rise: must be more than 0, not -1/)
    expect(await refusal(text.replace('"brief"', '"breif"'))).toMatch(/the field "brief" is missing|breif: this field is not known/)
    expect(await refusal(text.replace('"voids": [', '"voids": [0, '))).toMatch(/voids\[0\]: must be 1 or more, not 0/)
  })
})

test('a grid that the file has clockwise keeps its names', async () => {
  const on = grid(3, 2)
  const points = Array.from(on.x, (x, n): [number, number] => [x, on.y[n]!])
  const faces = Array.from({ length: on.panelCount }, (_, p) => Array.from(on.corner.subarray(on.panelStart[p], on.panelStart[p + 1])).reverse())
  const source = encoded('back.obj', objText(points, faces))
  expect(said(await answer(fileOf(saved(source))))).toEqual(said(await answer(source)))
})
