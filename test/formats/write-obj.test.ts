/** Written models, read back by a reader that shares no code. */
import { expect, test } from 'vitest'
import { micrometreDecimals } from '../../src/base/decimal.ts'
import { units } from '../../src/base/length.ts'
import { random } from '../../src/base/random.ts'
import { finish } from '../../src/base/steps.ts'
import { writeObj } from '../../src/formats/write-obj.ts'
import { readObj } from '../oracle/second-reader.ts'
import { grid, plan } from '../make/plans.ts'

const decode = (bytes: Uint8Array): string => new TextDecoder('utf-8', { fatal: true }).decode(bytes)

test('x and y read back as exactly the doubles they were, z has six decimals in metres, one group a panel', () => {
  const next = random(11)
  const of = grid(7, 5, { loose: 0.3, seed: 5 })
  const x = Float64Array.from(of.x, (each) => 3_456_789 + each + next() / 10)
  const y = Float64Array.from(of.y, (each) => 5_700_000 + each + next() / 10)
  const z = Float64Array.from(of.x, () => next() * 12 - 2)
  const obj = readObj(decode(finish(writeObj({ plan: of, x, y, z, decimals: null, comments: ['one', 'two\nv 1 2 3'] }))))
  expect(obj.nodes.length).toBe(48)
  expect(obj.panels.length).toBe(35)
  expect(obj.comments).toEqual(['# one', '# two v 1 2 3', '# unit: m'])
  obj.panels.forEach(({ name, corners }, p) => {
    expect(name).toBe(`P${p + 1}`)
    expect(corners).toEqual([...of.corner.slice(of.panelStart[p], of.panelStart[p + 1])])
  })
  obj.nodes.forEach((node, n) => {
    expect(node[0]).toBe(x[n])
    expect(node[1]).toBe(y[n])
    expect(Math.abs(node[2] - z[n]!)).toBeLessThanOrEqual(0.5000001e-6)
    expect((obj.digits[n]![2].split('.')[1] ?? '').length).toBeLessThanOrEqual(6)
  })
})

test('decimals that are asked for round all three; nothing is written as minus zero', () => {
  const of = plan([[-0.0004, 0], [1.23456, 0], [1.23456, 2], [-0, 2.00051]], [[0, 1, 2, 3]])
  const text = decode(finish(writeObj({ plan: of, x: of.x, y: of.y, z: new Float64Array([-0, -0.0001, 1.9996, 7]), decimals: 3, comments: [] })))
  expect(text).toBe('# unit: m\nv 0 0 0\nv 1.235 0 0\nv 1.235 2 2\nv 0 2.001 7\ng P1\nf 1 2 3 4\n')
})

test('tiny and huge coordinates come without an exponent', () => {
  const of = plan([[0, 0], [1, 0], [1, 1]], [[0, 1, 2]])
  const [x, y] = [new Float64Array([1e-9, 2.5e22, 1]), new Float64Array([0, 0, 1])]
  const text = decode(finish(writeObj({ plan: of, x, y, z: new Float64Array([4e-7, -6e-7, 1e17]), decimals: null, comments: [] })))
  expect(text.split('\n').slice(1, 4)).toEqual(['v 0.000000001 0 0', 'v 25000000000000000000000 0 -0.000001', 'v 1 1 100000000000000000'])
})

test('a height that is no number is a bug that stops the writing', () => {
  const of = grid(1, 1)
  expect(() => finish(writeObj({ plan: of, x: of.x, y: of.y, z: new Float64Array([0, NaN, 0, 0]), decimals: null, comments: [] }))).toThrow('finite')
})

test('the default shows one micrometre or less in every unit (exact: the international inch is 25.4 mm)', () => {
  const mm = { mm: 1, cm: 10, m: 1000, in: 25.4, ft: 304.8 }
  for (const unit of units) {
    expect(mm[unit] * 10 ** -micrometreDecimals[unit]).toBeLessThanOrEqual(0.001 + 1e-12)
    expect(mm[unit] * 10 ** (1 - micrometreDecimals[unit])).toBeGreaterThan(0.001)
  }
})
