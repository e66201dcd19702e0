/**
 * Tables as CSV: RFC 4180, UTF-8 without a mark, lines end with CR LF. For spreadsheets that expect a decimal comma there
 * is the same with semicolons. A text cell that a spreadsheet would run as a formula gets an apostrophe in front; numbers
 * stay numbers, also negative ones.
 */
import type { Steps } from '../base/steps.ts'
import type { Column, Table } from '../base/table.ts'
import { ByteSink } from './byte-sink.ts'

export type CsvStyle = 'comma' | 'semicolon'

export const csvStyles: readonly CsvStyle[] = ['comma', 'semicolon']

const carriageReturn = 13
const lineFeed = 10

/** Rows between two looks at the clock: about a millisecond. */
const slice = 1024

export function* writeCsv(table: Table, style: CsvStyle = 'comma', stage = 'Writing the lists'): Steps<Uint8Array> {
  const separator = style === 'comma' ? ',' : ';'
  const point = (style === 'comma' ? '.' : ',').charCodeAt(0)
  const comma = separator.charCodeAt(0)
  const sink = new ByteSink()
  const cells = table.columns.map((column) => cellWriter(column, separator, point, sink))
  sink.text(table.columns.map(({ title }) => textCell(title, separator)).join(separator))
  sink.text('\r\n')
  for (let row = 0; row < table.rows; row += 1) {
    for (let at = 0; at < cells.length; at += 1) {
      if (at > 0) sink.code(comma)
      cells[at]?.(row)
    }
    sink.code(carriageReturn)
    sink.code(lineFeed)
    if (row % slice === 0) yield { stage, done: row / table.rows }
  }
  return sink.done()
}

/** What puts down one row's cell of a column. */
function cellWriter(column: Column, separator: string, point: number, sink: ByteSink): (row: number) => void {
  switch (column.kind) {
    case 'number':
      return numberWriter(column.values, column.digits, point, sink)
    case 'name': {
      const letter = column.letter
      const index = column.index
      return (row) => {
        sink.text(letter)
        sink.integer(index[row] + 1)
      }
    }
    case 'word': {
      const words = column.words.map((word) => textCell(word, separator))
      return (row) => sink.text(words[column.index[row]] ?? '')
    }
    case 'text':
      return (row) => sink.text(textCell(column.values[row] ?? '', separator))
  }
}

type Digits = Extract<Column, { kind: 'number' }>['digits']

function numberWriter(values: Float64Array | Int32Array, digits: Digits, point: number, sink: ByteSink): (row: number) => void {
  if (values instanceof Int32Array) return (row) => sink.integer(values[row])
  /** Puts down what is a number; an empty cell says that there is none. */
  const unlessEmpty = (put: (value: number) => void) => (row: number): void => {
    const value = values[row]
    if (!Number.isNaN(value)) put(value)
  }
  if (digits === 'shortest') return unlessEmpty((value) => sink.shortest(value, point))
  if ('decimals' in digits) return unlessEmpty((value) => sink.decimal(value, digits.decimals, true, point))
  return unlessEmpty((value) => sink.significant(value, digits.significant, point))
}

/** A text cell, quoted where the format asks for it. */
function textCell(text: string, separator: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text
  return safe.includes(separator) || /["\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}
