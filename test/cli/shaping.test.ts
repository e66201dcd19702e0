/** One-way folds, bounds, balancing and many plans, as a script meets them. */
import { existsSync, readFileSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { readCsv } from '../oracle/second-reader.ts'
import { gridObj, program, type Program } from './program.ts'

let cli: Program
beforeAll(async () => {
  cli = await program()
  cli.file('bays.obj', gridObj(4, 3, 1.5))
  // The classic triangulation whose three folds cancel (De Loera, Rambau, Santos, "Triangulations", 2010), and its control.
  const nodes = 'v 4 0 0\nv 0 4 0\nv 0 0 0\nv 2 1 0\nv 1 2 0\nv 1 1 0\n'
  cli.file('twisted.obj', `${nodes}f 4 5 6\nf 1 4 2\nf 2 4 5\nf 2 3 5\nf 3 5 6\nf 1 3 6\nf 1 4 6\n`)
  cli.file('control.obj', `${nodes}f 4 5 6\nf 1 2 5\nf 1 4 5\nf 2 3 5\nf 3 5 6\nf 1 3 6\nf 1 4 6\n`)
  cli.file('broken.obj', 'v 0 0 0\nv 1 zero 0\nf 1 2 3\n')
})
afterAll(() => cli.close())

test('one-way folds: margin and certificate in the record, the names in the sentence, the roof in a file', () => {
  const no = JSON.parse(cli.run(['check', 'twisted.obj', '--unit', 'm', '--one-way', 'all', '--json']).out)
  expect(no.oneWay).toMatchObject({ margin: 0, on: 'force', joints: 9, decided: true })
  expect(no.oneWay.certificate).toHaveLength(3)
  const names = no.oneWay.certificate.map(({ joint }: { joint: string }) => joint).join(', ')
  expect(cli.run(['check', 'twisted.obj', '--unit', 'm', '--one-way', 'all']).out).toContain(`${names} cannot all be ridges`)
  // Published margin on forces of the control.
  const yes = JSON.parse(cli.run(['check', 'control.obj', '--unit', 'm', '--one-way', 'all', '--json']).out)
  expect(yes.oneWay.margin).toBeCloseTo(0.157297, 6)
  expect(cli.run(['raise', 'control.obj', '--unit', 'm', '--one-way', 'all', '--out', 'control']).code).toBe(0)
  expect(readFileSync(join(cli.room, 'control/one-way.obj'), 'utf8')).toContain('all ridges')
  expect(cli.run(['check', 'control.obj', '--one-way', 'J1,J99']).err).toContain('there is no joint "J99"; the plan has joints J1 to J9')
})

test('balance: uniform bays stand where they stood; an unknown joint is refused with its line', () => {
  const done = cli.run(['balance', 'bays.obj', '--unit', 'm', '--densities', 'uniform', '--out', 'balanced', '--rise', '1', '--json'])
  expect(done.code).toBe(0)
  const record = JSON.parse(done.out)
  // Every node is the mean of its four neighbours already (exact).
  expect(record.balanced).toMatchObject({ outcome: 'balanced', densities: 'uniform', count: 0 })
  expect(record.roof.rise).toBeCloseTo(1, 6)
  for (const name of record.files) expect(existsSync(join(cli.room, 'balanced', name))).toBe(true)
  cli.file('list.csv', 'joint,density\nall,1\nJ3-J5,2\nJ999,1\n')
  const wrong = cli.run(['balance', 'bays.obj', '--unit', 'm', '--densities', 'list.csv', '--out', 'wrong'])
  expect([wrong.code, wrong.err]).toEqual([2, 'list.csv, line 4: there is no joint "J999"; the plan has joints J1 to J17.\n'])
  cli.file('list.csv', 'joint,density\nall,1\nJ3,-9\nJ8,-9\n')
  const crossed = cli.run(['balance', 'bays.obj', '--unit', 'm', '--densities', 'list.csv', '--out', 'crossed', '--json'])
  expect(crossed.code).toBe(1)
  expect(JSON.parse(crossed.out).balanced.crossed.length).toBeGreaterThan(0)
  expect(readdirSync(join(cli.room, 'crossed'))).toEqual(['summary.json'])
})

test('bounds in a brief hold and say what they cost', () => {
  const conditions = [
    { name: 'south', kind: 'level', at: { run: [[0, 0], [6, 0]] } },
    { name: 'north', kind: 'level', at: { run: [[0, 4.5], [6, 4.5]] } },
    { name: 'envelope', kind: 'bounds', at: { panels: 'all' }, most: 0.4 },
  ]
  cli.file('brief.json', JSON.stringify({ panewise: 'brief', version: 1, unit: 'm', rise: 1, shape: 'barrel', conditions }))
  const record = JSON.parse(cli.run(['check', 'bays.obj', '--unit', 'm', '--brief', 'brief.json', '--json']).out)
  expect(record.roof.rise).toBeCloseTo(0.4, 6)
  expect(record.held.binding).toMatchObject([{ condition: 'envelope' }])
  expect(record.held.binding[0].rise_mm).toBeCloseTo(600, 0)
})

test('several plans: a bad one stops no other, and two at a time write the bytes of one at a time', () => {
  const words = ['raise', 'bays.obj', 'broken.obj', 'twisted.obj', 'control.obj', '--unit', 'm']
  const one = cli.run([...words, '--out', 'one', '--at-once', '1'])
  const two = cli.run([...words, '--out', 'two', '--at-once', '2'])
  expect([one.code, two.code]).toEqual([2, 2])
  expect(two.out).toBe(one.out)
  expect(two.err).toBe(one.err)
  expect(one.err).toContain('broken.obj, line 2')
  const files = (folder: string): string[] => readdirSync(join(cli.room, folder), { recursive: true }).map(String).sort()
  expect(files('two')).toEqual(files('one'))
  expect(files('one').filter((name) => name.endsWith('roof.obj'))).toHaveLength(3)
  for (const name of files('one').filter((each) => each.includes('.'))) expect(readFileSync(join(cli.room, 'two', name)).equals(readFileSync(join(cli.room, 'one', name)))).toBe(true)
  const rows = readCsv(readFileSync(join(cli.room, 'one/summary.csv'), 'utf8'))
  expect(rows.map((row) => row[0]).filter((cell) => cell !== '').slice(0, 5)).toEqual(['plan', 'bays.obj', 'broken.obj', 'twisted.obj', 'control.obj'])
})

test('several plans stopped on the way: every thread ends and nothing is written', async () => {
  cli.file('large.obj', gridObj(70, 60, 1.5))
  const child = cli.start(['raise', 'large.obj', 'bays.obj', 'large.obj', '--unit', 'm', '--out', 'stopped', '--at-once', '2'])
  const ended = new Promise<number | null>((resolve) => child.on('close', resolve))
  while (!readdirSync(cli.room).some((name) => name.includes('stopped.panewise-'))) await new Promise((resolve) => setTimeout(resolve, 5))
  child.kill('SIGINT')
  expect(await ended).toBe(130)
  expect(readdirSync(cli.room).filter((name) => name.includes('stopped'))).toEqual([])
})

test('few folds: a pitched wish over bays folds along the ridge alone', () => {
  cli.file('four.obj', gridObj(6, 4, 1.5))
  cli.file('eaves.json', JSON.stringify({ panewise: 'brief', version: 1, unit: 'm', datum: 0, rise: 1, shape: 'pitched', conditions: [{ kind: 'level', at: { run: [[0, 0], [9, 0]] } }, { kind: 'level', at: { run: [[0, 6], [9, 6]] } }] }))
  const done = cli.run(['raise', 'four.obj', '--unit', 'm', '--brief', 'eaves.json', '--few-folds', '--out', 'few', '--json'])
  const record = JSON.parse(done.out)
  expect(record.notices.join()).toContain('Folded along 6 of 38 joints')
  expect(record.roof.rise).toBeCloseTo(1, 6)
})
