/** CSV as RFC 4180 has it, read back by a reader that shares no code. */
import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { finish } from '../../src/base/steps.ts'
import type { Column } from '../../src/base/table.ts'
import { writeCsv, type CsvStyle } from '../../src/formats/write-csv.ts'
import { columnOf, readCsv } from '../oracle/second-reader.ts'

const write = (rows: number, columns: readonly Column[], style?: CsvStyle): string =>
  new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(finish(writeCsv({ rows, columns }, style)))

const text = (title: string, values: readonly string[]): Column => ({ kind: 'text', title, values })

describe('text cells', () => {
  test('separators, quotes and line breaks are quoted, and read back as they were', () => {
    const values = ['plain', 'a,b', 'say "no"', 'two\r\nlines', '', 'Dach-Süd ⌂', ';']
    const file = write(values.length, [text('name', values)])
    expect(columnOf(readCsv(file), 'name')).toEqual(values)
    expect(file).toContain('"say ""no"""')
    expect(file.endsWith(';\r\n')).toBe(true)
    expect(file.startsWith('name\r\n')).toBe(true)
  })

  test('what a spreadsheet would run gets an apostrophe; numbers do not', () => {
    const values = ['=1+1', '+4', '-3', '@SUM(A1)', '\tx', '\rx', 'a=b']
    const file = write(values.length, [text('=name', values), { kind: 'number', title: 'dz', values: Float64Array.from(values, (_, i) => -i), digits: 'shortest' }])
    const rows = readCsv(file)
    expect(rows[0]).toEqual(["'=name", 'dz'])
    expect(rows.slice(1).map((row) => row[0])).toEqual(["'=1+1", "'+4", "'-3", "'@SUM(A1)", "'\tx", "'\rx", 'a=b'])
    expect(columnOf(rows, 'dz')).toEqual(['0', '-1', '-2', '-3', '-4', '-5', '-6'])
  })
})

describe('numbers', () => {
  const numbers = (values: readonly number[], digits: Extract<Column, { kind: 'number' }>['digits'], style?: CsvStyle): string[] =>
    columnOf(readCsv(write(values.length, [{ kind: 'number', title: 'n', values: Float64Array.from(values), digits }], style), style === 'semicolon' ? ';' : ','), 'n')

  test('fixed decimals keep their zeros, minus zero is zero, no value is an empty cell', () => {
    expect(numbers([1, -0, -0.0000004, 0.0000006, -1.5, NaN, 180, 1234567.8901234], { decimals: 6 })).toEqual(
      ['1.000000', '0.000000', '0.000000', '0.000001', '-1.500000', '', '180.000000', '1234567.890123'],
    )
  })

  test('semicolons come with a decimal comma', () => {
    expect(numbers([1.5, -0.25, 1e22, 3], { decimals: 2 }, 'semicolon')).toEqual(['1,50', '-0,25', '10000000000000000000000', '3,00'])
    expect(numbers([0.1, 1e-7], 'shortest', 'semicolon')).toEqual(['0,1', '0,0000001'])
    expect(numbers([1 / 3], { significant: 3 }, 'semicolon')).toEqual(['0,333'])
  })

  test('seed 7: shortest digits read back exactly; fixed ones agree with the language to the last place', () => {
    const next = random(7)
    const values = Array.from({ length: 3000 }, (_, i) => (next() - 0.5) * 10 ** ((i % 24) - 12))
    expect(numbers(values, 'shortest').map(Number)).toEqual(values)
    for (const decimals of [0, 1, 3, 6, 9]) {
      const form = decimals === 0 ? /^-?\d+$/ : new RegExp(`^-?\\d+\\.\\d{${decimals}}$`)
      const unit = 10 ** -decimals
      const wrong = numbers(values, { decimals }).filter((cell, i) => {
        const isOff = Math.abs(Number(cell) - values[i]!) > 0.5 * unit + 4e-16 * Math.abs(values[i]!)
        return !form.test(cell) || /^-0(\.0*)?$/.test(cell) || isOff
      })
      expect(wrong, `${decimals} decimals`).toEqual([])
    }
    expect(numbers(values, { significant: 9 }).filter((cell, i) => !(Math.abs(Number(cell) / values[i]! - 1) < 0.5000001e-8))).toEqual([])
  })

  test('whole numbers, names and words', () => {
    const rows = readCsv(
      write(3, [
        { kind: 'name', title: 'joint', letter: 'J', index: Int32Array.of(0, 9, 123456) },
        { kind: 'number', title: 'corners', values: Int32Array.of(3, 2147483647, -4), digits: 'shortest' },
        { kind: 'word', title: 'fold', words: ['flush', 'ridge, sort of'], index: Uint8Array.of(1, 0, 1) },
      ]),
    )
    expect(rows.slice(1)).toEqual([['J1', '3', 'ridge, sort of'], ['J10', '2147483647', 'flush'], ['J123457', '-4', 'ridge, sort of']])
  })
})

test('a table without rows is its titles', () => {
  expect(write(0, [text('a', []), text('b', [])])).toBe('a,b\r\n')
})
