/** Words of a command line into what the job asks for, without a process each. */
import { expect, test } from 'vitest'
import { sentence, type Result } from '../../src/base/result.ts'
import { parseWords } from '../../src/cli/arguments.ts'
import { asked, type Asked } from '../../src/cli/asked.ts'
import { noKeeps } from '../../src/plan/project/keep-options.ts'

async function read(...words: string[]): Promise<Result<Asked>> {
  const args = parseWords('check', ['plan.obj', ...words])
  return args.ok ? asked(args.value) : args
}

test.each([
  [['--rsie', '2'], 'there is no option --rsie; perhaps --rise is meant.'],
  [['-x'], 'there is no option -x; panewise check --help lists all.'],
  [['--rise'], '--rise needs a value; write --rise LENGTH.'],
  [['--rise', '--down'], '--rise needs a value; write --rise LENGTH.'],
  [['--rise='], '--rise needs a value; write --rise LENGTH.'],
  [['--down=3'], '--down takes no value; write --down alone.'],
  [['--rise', '2', '--rise', '3'], '--rise stands there twice; give it once.'],
  [['--rise', 'two'], `--rise: "two" is not a length; write it like 1.2m, 1200mm or 4' 6".`],
  [['--shape', 'tent'], '--shape: "tent" is not one of dome, barrel, pitched, hipped.'],
  [['--csv', 'tab'], '--csv: "tab" is not one of comma, semicolon.'],
  [['--void', '3'], "--void: \"3\" is not a point; write it like 3.2,-4.5, in the plan's unit."],
  [['--void', '3,4,5'], "--void: \"3,4,5\" is not a point; write it like 3.2,-4.5, in the plan's unit."],
  [['--flat', '0'], '--flat: this length must be more than 0.'],
  [['--snap', '-1'], '--snap: this length must be 0 or more.'],
  [['--pitch', 'steep'], '--pitch: "steep" is not a number.'],
  [['--pitch', '1e999'], '--pitch: "1e999" is not a number.'],
  [['--decimals', '40'], '--decimals: "40" is not a whole number from 0 to 15.'],
  [['--decimals', '1.5'], '--decimals: "1.5" is not a whole number from 0 to 15.'],
  [['--scale', '1:0'], '--scale: "1:0" is not a scale; write it like 1:100.'],
  [['--unit', 'yd'], '--unit: "yd" is not one of mm, cm, m, in, ft.'],
  [['--rim', 'up'], '--rim: "up" is not free, level or level=H.'],
  [['--rim', 'level=up'], `--rim: "up" is not a length; write it like 1.2m, 1200mm or 4' 6".`],
])('%j is refused', async (words, expected) => {
  const result = await read(...words)
  expect(result.ok ? '' : sentence(result.problem)).toBe(expected)
})

test('read knows no options of the roof', () => {
  expect(parseWords('read', ['plan.obj', '--rise', '2'])).toMatchObject({ ok: false, problem: { code: 'unknown-option' } })
})

test('values as people type them', async () => {
  const result = await read(
    '--rise', '2,4 m', '--datum', '-1.5', '--rim=level = +3.2m', '--void', '-3,4', '--void', '1,5;-2', '--flat', '0.05in', '--snap', '0', '--sagitta', '1cm',
    '--scale', '1 : 50', '--pitch', '12,5°', '--bearing', '-90', '--unit', 'MM', '--shape', 'Barrel', '--layer', 'A,B', '--layer', 'C', '--accept', 'all',
    '--decimals', '0', '--csv', 'semicolon', '--target', 'none', '--down', '--near', '--full', '--levels-within', '10cm',
  )
  if (!result.ok) throw new Error(sentence(result.problem))
  expect(result.value.options).toEqual({
    unit: 'mm', scale: 50, layers: ['A,B', 'C'], snap_mm: 0, sagitta_mm: 10, voids: [[-3, 4], [1.5, -2]], accept: ['all'], leave: [], scaleFrom: null,
    rim: { level: '+3.2m' }, datum: '-1.5', levels: null, oneWay: null, levelsWithin: '10cm', pitch_deg: 12.5, bearing_deg: -90,
    rise: '2,4 m', down: true, shape: 'barrel', target: 'none', flat_mm: expect.closeTo(1.27, 12) as number, decimals: 0, near: true, csv: 'semicolon', full: true, keeps: noKeeps, planTolerance_mm: null,
  })
  expect(result.value.given).toMatchObject({ rise: '2,4 m', void: ['-3,4', '1,5;-2'], layer: ['A,B', 'C'], down: true })
})

test('two points and a length, and codes of proposals that are none', async () => {
  const result = await read('--scale-from', '0,0,-100,0,7.5m', '--leave', 'Unit')
  expect(result).toMatchObject({ ok: true, value: { options: { scaleFrom: { from: [0, 0], to: [-100, 0], length: '7.5m' }, leave: ['unit'] } } })
  expect(await read('--scale-from', '0,5;0;10,5;0;7,5 m')).toMatchObject({ ok: true, value: { options: { scaleFrom: { from: [0.5, 0], to: [10.5, 0], length: '7,5 m' } } } })
  expect(await read('--scale-from', '0,0,100,0')).toMatchObject({ ok: false, problem: { code: 'not-a-scale' } })
  expect(await read('--accept', 'double-line')).toMatchObject({ ok: false, problem: { code: 'not-one-of', where: { field: '--accept' } } })
})

test('words after "--" are plans, whatever they begin with', () => {
  expect(parseWords('check', ['a.obj', '--rise', '2', '--', '-b.obj', '--down'])).toMatchObject({ ok: true, value: { plans: ['a.obj', '-b.obj', '--down'] } })
  expect(parseWords('check', ['-'])).toMatchObject({ ok: true, value: { plans: ['-'] } })
})

test('what no answer depends on is not recorded', async () => {
  const result = await read('--json', '--quiet', '--out', 'somewhere', '--overwrite', '--rise', '1')
  expect(result.ok && result.value.given).toEqual({ rise: '1' })
})
