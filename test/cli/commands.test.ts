/** The commands as a script meets them: words in, exit code, standard output and standard error out. */
import { spawnSync } from 'node:child_process'
import { existsSync, mkdirSync, readFileSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { columnOf, readCsv } from '../oracle/second-reader.ts'
import { gridObj, program, type Program } from './program.ts'

let cli: Program
beforeAll(async () => {
  cli = await program()
  cli.file('bays.obj', gridObj(12, 8, 1.5))
  // A node halfway along a joint: the stem between two collinear joints never folds (exact: worked out by hand).
  cli.file('stem.obj', 'v 0 0 0\nv 4 0 0\nv 8 0 0\nv 8 4 0\nv 8 8 0\nv 0 8 0\nv 4 4 0\nv 0 4 0\nf 1 2 7 8\nf 2 3 4 7\nf 5 6 8 7 4\n')
  cli.file('one.obj', 'v 0 0 0\nv 2 0 0\nv 2 1 0\nv 0 1 0\nf 1 2 3 4\n')
  cli.file('broken.obj', 'v 0 0 0\nv 1 zero 0\nf 1 2 3\n')
  cli.file('brief.json', JSON.stringify({ panewise: 'brief', version: 1, rise: 2, conditions: [{ name: 'south gutter', kind: 'level', at: { run: [[0, 0], [18, 0]] } }] }))
})
afterAll(() => cli.close())

describe('exit codes', () => {
  test('0: every joint folds, one panel, a pitch that is met', () => {
    expect(cli.run(['check', 'bays.obj']).code).toBe(0)
    expect(cli.run(['check', 'one.obj']).code).toBe(0)
    expect(cli.run(['check', 'bays.obj', '--pitch', '15']).code).toBe(0)
  })

  test('3: some joints fold', () => {
    const { code, out } = cli.run(['check', 'stem.obj'])
    expect(code).toBe(3)
    expect(out).toContain('Verdict: lifts in part.')
  })

  test('3: the nearest roof is within the tolerance; 1: it is not', () => {
    expect(cli.run(['check', 'bays.obj', '--rim', 'level', '--flat', '10m']).code).toBe(3)
    const { code, out, err } = cli.run(['check', 'bays.obj', '--rim', 'level'])
    expect(code).toBe(1)
    expect(out).toContain('two edges on the level rim')
    expect(err).toBe('')
  })

  test('2: bad use and bad input, each with one sentence and nothing on standard output', () => {
    for (const words of [[], ['chekc', 'bays.obj'], ['check'], ['check', 'bays.obj', '--rsie', '2'], ['check', 'missing.obj'], ['check', 'broken.obj'], ['raise', 'bays.obj'], ['help', 'me']]) {
      const { code, out, err } = cli.run(words)
      expect([words, code, out]).toEqual([words, 2, ''])
      expect(err).toMatch(/^[^\n]+\.\n$/)
      expect(err).not.toMatch(/\n {4}at /)
    }
  })
})

describe('sentences for people', () => {
  test('the first sentence says it all; the caution is last', () => {
    const { out } = cli.run(['check', 'bays.obj', '--shape', 'barrel'])
    expect(out.split('\n')[0]).toMatch(/^All 96 panels can be flat; 18 independent adjustments left; with the rim free it varies by \d+\.\d\d m\.$/)
    expect(out.split('\n')[1]).toBe('Verdict: lifts.')
    expect(out.trimEnd().split('\n').at(-1)).toContain('This is geometry only.')
    expect(out).not.toMatch(/\b0\.00\b|NaN|undefined|null/)
    // Not a terminal: nothing is marked.
    expect(out).not.toContain('\u001b')
  })

  test.each([
    [['check', 'bays.obj', '--rsie', '2'], 'There is no option --rsie; perhaps --rise is meant.'],
    [['chekc', 'bays.obj'], 'There is no command "chekc"; perhaps "check" is meant.'],
    [['check', 'bays.obj', '--rise', '-2'], 'use --down'],
    [['check', 'bays.obj', '--brief', 'none.json'], 'none.json, --brief: the file cannot be read, since it does not exist'],
    [['check', '-', '--brief', '-'], 'stdin can be read once only'],
    [['check', '.'], 'this is a folder, not a plan'],
    [['raise', 'bays.obj'], 'raise needs a folder to write into; add --out DIR.'],
  ])('%j', (words, sentence) => {
    const { code, err } = cli.run(words, { input: '' })
    expect(code).toBe(2)
    expect(err.toLowerCase()).toContain(sentence.toLowerCase())
  })

  test('values may begin with a minus', () => {
    cli.file('lines.obj', 'v -5 2 0\nv -1 2 0\nv -1 6 0\nv -5 6 0\nv 3 2 0\nv 3 6 0\nl 1 2 3 4 1\nl 2 5 6 3\n')
    expect(cli.run(['read', 'lines.obj']).out).toContain('a plan of 2 panels with 1 joint.')
    expect(cli.run(['read', 'lines.obj', '--void', '-3,4']).out).toContain('a plan of 1 panel with 0 joints')
    expect(cli.run(['read', 'lines.obj', '--void=-3;4,0']).out).toContain('a plan of 1 panel with 0 joints')
    expect(JSON.parse(cli.run(['check', 'one.obj', '--rim', 'level=-2.5', '--datum', '-2.5m', '--json']).out)).toMatchObject({ options: { rim: 'level=-2.5', datum: '-2.5m' } })
  })

  test('names cannot steer the terminal', () => {
    const { err } = cli.run(['check', 'no\u001b[2Jsuch\nfile.obj'])
    expect(err).not.toContain('\u001b')
    expect(err.split('\n').length).toBe(2)
  })
})

describe('help', () => {
  test('lists commands, options, topics; the version is the package\'s', () => {
    expect(cli.run(['--version']).out.trim()).toBe((JSON.parse(readFileSync(join(import.meta.dirname, '../../package.json'), 'utf8')) as { version: string }).version)
    for (const words of [['--help'], ['-h'], ['help']]) expect(cli.run(words).out).toContain('panewise raise PLAN... --out DIR')
    for (const command of ['read', 'check', 'raise']) {
      const { code, out } = cli.run([command, '--help'])
      expect(code).toBe(0)
      expect(out).toContain(`panewise ${command} PLAN...`)
      expect(cli.run(['help', command]).out).toBe(out)
    }
    expect(cli.run(['check', '--help']).out).toContain('--overwrite')
    expect(cli.run(['read', '--help']).out).not.toContain('--near')
  })

  test('the schema of a brief is JSON', () => {
    expect(JSON.parse(cli.run(['help', 'brief']).out)).toMatchObject({ $schema: 'https://json-schema.org/draft/2020-12/schema', properties: { panewise: { const: 'brief' } } })
  })

  test('formats and codes are there', () => {
    expect(cli.run(['help', 'formats']).out).toContain('LWPOLYLINE')
    expect(cli.run(['help', 'codes']).out).toContain('130')
  })
})

describe('--json', () => {
  const keys = ['version', 'input', 'options', 'plan', 'repairs', 'questions', 'leftOut', 'notices', 'stress', 'held', 'verdict', 'reason', 'reasonKind', 'roof', 'caution']

  test('one object and nothing else, with every key that scripts rely on', () => {
    const { out, err, code } = cli.run(['check', 'bays.obj', '--json', '--rise', '2'])
    expect(err).toBe('')
    expect(code).toBe(0)
    const summary = JSON.parse(out) as Record<string, Record<string, unknown>>
    for (const key of keys) expect(Object.keys(summary)).toContain(key)
    expect(Object.keys(summary.plan!)).toEqual(['panels', 'joints', 'rimEdges', 'nodes', 'interiorNodes', 'voids', 'parts', 'unit'])
    for (const key of ['freedom', 'count', 'freedomLeft', 'gap', 'residual', 'decided', 'frozenJoints', 'flatGroups']) expect(Object.keys(summary.stress!)).toContain(key)
    for (const key of ['rise', 'riseAsked', 'rimVariation', 'cornerMax_mm', 'flatnessMax_mm', 'flatnessRms_mm', 'exactFlatnessMax_mm', 'worstPanels', 'closingError']) expect(Object.keys(summary.roof!)).toContain(key)
    expect(summary).toMatchObject({
      input: { name: 'bays.obj' },
      options: { rise: '2' },
      plan: { panels: 96, joints: 172, rimEdges: 40, nodes: 117, interiorNodes: 77, voids: 0, parts: 1, unit: 'm' },
      stress: { freedom: 18, freedomLeft: 21 },
      verdict: 'lifts',
      reason: null,
      roof: { riseAsked: 2 },
    })
    // The hash is the file's, as a tool outside has it.
    const hash = spawnSync('sha256sum', [join(cli.room, 'bays.obj')], { encoding: 'utf8' }).stdout.split(' ')[0]
    if (hash !== '') expect(summary.input!.sha256).toBe(hash)
  })

  test('a problem is an object too, and a sentence on standard error', () => {
    for (const words of [['check', 'broken.obj', '--json'], ['check', 'missing.obj', '--json'], ['check', '--json'], ['check', 'bays.obj', '--json', '--rsie', '2'], ['nothing', '--json']]) {
      const { code, out, err } = cli.run(words)
      expect(code).toBe(2)
      const { error } = JSON.parse(out) as { error: Record<string, unknown> }
      expect(Object.keys(error)).toEqual(['code', 'message', 'where', 'cure'])
      expect(err.toLowerCase()).toContain(String(error['message']).toLowerCase())
    }
    expect(JSON.parse(cli.run(['check', 'broken.obj', '--json']).out)).toMatchObject({ error: { where: { file: 'broken.obj', line: 2 } } })
  })

  test('an open question goes with the error; read proposes it and exits with 0', () => {
    cli.file('vast.obj', gridObj(4, 3, 1500))
    const { code, out, err } = cli.run(['check', 'vast.obj', '--json'])
    expect(code).toBe(2)
    expect(err).toMatch(/^vast\.obj: .*[.?] Answer with --unit mm or --unit m\.\n$/)
    expect(JSON.parse(out)).toMatchObject({ error: { code: 'unit' }, questions: [{ code: 'unit' }] })
    expect(cli.run(['check', 'vast.obj', '--unit', 'mm']).code).toBe(0)
    const read = cli.run(['read', 'vast.obj', '--json'])
    expect(read.code).toBe(0)
    expect(JSON.parse(read.out)).toMatchObject({ plan: { panels: 12 }, questions: [{ code: 'unit' }] })
  })

  test('read gives the plan and what was done to it', () => {
    expect(Object.keys(JSON.parse(cli.run(['read', 'bays.obj', '--json']).out) as object)).toEqual(expect.arrayContaining(['plan', 'repairs', 'questions', 'leftOut', 'notices']))
  })
})

describe('ways in and out', () => {
  test('standard input', () => {
    const { code, out } = cli.run(['check', '-', '--json'], { input: gridObj(3, 2, 2) })
    expect(code).toBe(0)
    expect(JSON.parse(out)).toMatchObject({ input: { name: 'stdin' }, plan: { panels: 6 } })
    expect(cli.run(['check', 'bays.obj', '--brief', '-', '--json'], { input: readFileSync(join(cli.room, 'brief.json')) }).out).toContain('"brief": "-"')
  })

  test('--quiet prints nothing but errors', () => {
    expect(cli.run(['check', 'bays.obj', '--quiet'])).toEqual({ code: 0, out: '', err: '' })
    expect(cli.run(['check', 'bays.obj', '--quiet', '--rim', 'level'])).toEqual({ code: 1, out: '', err: '' })
    expect(cli.run(['check', 'missing.obj', '--quiet']).err).toContain('missing.obj')
  })

  test('a closed pipe is no error, and the verdict still comes out', () => {
    const line = `"${process.execPath}" "${cli.path}" check stem.obj --json | true; echo "\${PIPESTATUS[0]}"`
    const { stdout, stderr } = spawnSync('bash', ['-c', line], { cwd: cli.room, encoding: 'utf8' })
    expect([stdout.trim(), stderr]).toEqual(['3', ''])
  })

  test.skipIf(!existsSync('/dev/full'))('standard output on a full disk is a sentence', () => {
    const { stderr, status } = spawnSync('bash', ['-c', `"${process.execPath}" "${cli.path}" check one.obj > /dev/full`], { cwd: cli.room, encoding: 'utf8' })
    expect(status).toBe(2)
    expect(stderr).toContain('Standard output cannot be written, since the disk is full.')
  })

  test('the brief holds, the options win', () => {
    expect(JSON.parse(cli.run(['check', 'bays.obj', '--brief', 'brief.json', '--json']).out)).toMatchObject({ roof: { riseAsked: 2 }, options: { brief: 'brief.json' } })
    expect(JSON.parse(cli.run(['check', 'bays.obj', '--brief', 'brief.json', '--rise', '1200mm', '--json']).out)).toMatchObject({ roof: { riseAsked: 1.2 } })
  })
})

describe('the report of read', () => {
  const files = ['reading.html', 'reading.md', 'reading.svg']
  test('all files at the end or none; foreign files and inputs stay', () => {
    cli.file('to-read.obj', gridObj(2, 1, 1))
    const done = cli.run(['read', 'to-read.obj', '--out', 'report'])
    expect([done.code, done.err]).toEqual([0, ''])
    expect(done.out).toContain('Written to report: reading.html, reading.md, reading.svg.')
    expect(readdirSync(join(cli.room, 'report')).sort()).toEqual(files)
    expect(cli.run(['read', 'to-read.obj', '--out', 'report']).err).toContain('add --overwrite')
    cli.file('report/own.txt', 'mine')
    expect((JSON.parse(cli.run(['read', 'to-read.obj', '--out', 'report', '--overwrite', '--json']).out) as { files: string[] }).files).toEqual(files)
    expect(readdirSync(join(cli.room, 'report')).sort()).toEqual(['own.txt', ...files])
    expect(cli.run(['read', 'nowhere.obj', '--out', 'none']).code).toBe(2)
    expect(readdirSync(cli.room)).not.toContain('none')
  })
  test('several plans: a folder each', () => {
    cli.file('a.obj', gridObj(1, 1, 1))
    cli.file('b.obj', gridObj(2, 2, 1))
    expect(cli.run(['read', 'a.obj', 'nowhere.obj', 'b.obj', '--out', 'reports']).code).toBe(2)
    expect(readdirSync(join(cli.room, 'reports')).sort()).toEqual(['a', 'b'])
    expect(readdirSync(join(cli.room, 'reports', 'b')).sort()).toEqual(files)
  })
})

describe('several plans', () => {
  test('a folder each, an overview, the worst exit code; a bad one does not stop the rest', () => {
    mkdirSync(join(cli.room, 'other'), { recursive: true })
    cli.file('other/bays.obj', gridObj(2, 2, 1))
    const { code, err, out } = cli.run(['raise', 'bays.obj', 'broken.obj', 'stem.obj', 'other/bays.obj', '--out', 'many'])
    expect(code).toBe(2)
    expect(err).toContain('broken.obj')
    expect(readdirSync(join(cli.room, 'many')).sort()).toEqual(['bays', 'bays-2', 'stem', 'summary.csv'])
    const rows = readCsv(readFileSync(join(cli.room, 'many/summary.csv'), 'utf8'))
    expect(columnOf(rows, 'plan')).toEqual(['bays.obj', 'broken.obj', 'stem.obj', 'other/bays.obj'])
    expect(columnOf(rows, 'folder')).toEqual(['bays', '', 'stem', 'bays-2'])
    expect(columnOf(rows, 'exit')).toEqual(['0', '2', '3', '0'])
    expect(columnOf(rows, 'panels')).toEqual(['96', '', '3', '4'])
    expect(columnOf(rows, 'reason')[1]).toContain('broken.obj')
    expect(out).toContain('stem.obj\n  All 3 panels can be flat, but')
    expect(out.trimEnd().split('\n').at(-1)).toContain('This is geometry only.')
  })

  test('the worst in the order 2, 1, 3, 0; --json is one object', () => {
    expect(cli.run(['check', 'bays.obj', 'stem.obj']).code).toBe(3)
    const { code, out } = cli.run(['check', 'bays.obj', 'one.obj', 'stem.obj', '--rim', 'level', '--json'])
    expect(code).toBe(1)
    const { plans } = JSON.parse(out) as { plans: { input: { name: string } }[] }
    expect(plans.map(({ input }) => input.name)).toEqual(['bays.obj', 'one.obj', 'stem.obj'])
  })

  test('all bad: the overview says so, exit 2', () => {
    expect(cli.run(['raise', 'broken.obj', 'missing.obj', '--out', 'bad']).code).toBe(2)
    expect(readdirSync(join(cli.room, 'bad'))).toEqual(['summary.csv'])
  })
})
