/** Levels out of files, held at the plan's nodes. Exact: the grid's corners lie where the lists put them. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import { planQuestion } from '../../src/job/question.ts'
import { noOptions, type LevelRow } from '../../src/plan/project/options.ts'
import { at, dxfText, insert, line } from '../formats/dxf-writer.ts'
import { objText } from '../make/ask.ts'
import { levelText, scaled } from '../make/sheet.ts'

const corners: [number, number][] = [[0, 0], [6, 0], [6, 4], [0, 4]]

/** Rows as they are held on one pane of 6 by 4 m, 100 and 200 from the origin, and what is said of them. */
function held(name: string, text: string, { unit = 'm', layer = null as string | null } = {}): { rows: readonly LevelRow[]; said: string } {
  const size = unit === 'mm' ? 1000 : 1
  const plan = `# unit: ${unit}\n${objText(corners.map(([x, y]) => [(100 + x) * size, (200 + y) * size] as const), [[0, 1, 2, 3]])}`
  const made = finish(planQuestion({
    command: 'check', source: { name: 'plan.obj', bytes: new TextEncoder().encode(plan) }, options: { ...noOptions, unit: unit as 'm' }, brief: null, given: {},
    levels: { source: { name, bytes: new TextEncoder().encode(text) }, layer },
  }, '0', ''))
  if (!made.ok) throw new Error(made.problem.message)
  return { rows: made.value.request.options.levels?.rows ?? [], said: made.value.read.notices.filter((each) => each.startsWith('Levels')).join(' ') }
}
const own = corners.map(([x, y], k): LevelRow => ({ name: `P${k}`, at: [100 + x, 200 + y], level: 112 + k / 10 }))
const list = (order: (row: LevelRow) => unknown[]): string => own.map((row) => order(row).join(';').replace(/\./g, ',')).join('\n')

describe('a list', () => {
  test('as it is written, nothing said', () => {
    expect(held('a.csv', list(({ name, at: [x, y], level }) => [name, x, y, level]))).toEqual({ rows: own, said: '' })
  })
  test.each([
    ['easting and northing swapped', 'name, y, x, level', ({ name, at: [x, y], level }: LevelRow) => [name, y, x, level]],
    ['the level first', 'name, level, x, y', ({ name, at: [x, y], level }: LevelRow) => [name, level, x, y]],
  ])('%s: the plan tells, and it is said', (_, order, write) => {
    expect(held('a.csv', list(write))).toEqual({ rows: own, said: `Levels of a.csv: its columns are read as ${order}, since 4 of its 4 places then lie at nodes.` })
  })
  test('a header that calls the northing x', () => {
    expect(held('a.csv', `point;x;y;h\n${list(({ name, at: [x, y], level }) => [name, y, x, level])}`).rows).toEqual(own)
  })
  test('in metres beside a plan in mm', () => {
    const { rows, said } = held('a.csv', list(({ name, at: [x, y], level }) => [name, x, y, level]), { unit: 'mm' })
    expect(rows).toEqual(own)
    expect(said).toBe('Levels of a.csv: it is read in m, since 4 of its 4 places then lie at nodes.')
  })
})

describe('a drawing', () => {
  const dxf = (entities: Parameters<typeof scaled>[0]): string => dxfText({ units: 6, entities, blocks: { LEVELPOINT: [line([-0.05, 0], [0.05, 0])] } })
  test('words beside crosses, blocks with attributes and points with heights', () => {
    const [a, b, c, d] = own.map(({ at: [x, y] }) => [x, y] as const)
    const text = dxf([
      ...levelText('112.0', a!), ...levelText('+112.100', b!),
      insert('LEVELPOINT', c![0], c![1], [[66, 1]], 'SURVEY'), { kind: 'ATTRIB', layer: 'SURVEY', pairs: [...at(10, c![0], c![1]), [40, 0.12], [1, '112.2'], [2, 'LEVEL']] }, { kind: 'SEQEND', layer: 'SURVEY' },
      { kind: 'POINT', layer: 'SURVEY', pairs: at(10, d![0], d![1], 112.3) },
    ])
    const { rows } = held('levels.dxf', text)
    expect(rows.map(({ at: [x, y], level }) => [x, y, level]).sort((p, q) => p[2]! - q[2]!)).toEqual(own.map(({ at: [x, y], level }) => [x, y, level]))
  })
  test('without any level it says so', () => {
    expect(() => held('levels.dxf', dxf([line([0, 0], [1, 1])]))).toThrow('there are no points, blocks or words with levels')
  })
})
