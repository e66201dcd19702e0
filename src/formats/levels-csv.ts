/**
 * Levels as a list: rows of name,x,y,level or x,y,level, with or without a header line, separated by commas, semicolons, tabs
 * or blanks. A decimal comma, blanks and apostrophes between digits are read where they cannot be separators. Quotes as in
 * RFC 4180. Columns of a header may stand in any order when it names x, y and level (or easting, northing, z, height).
 *
 * Without such a header the order of the columns is a guess: every other order is returned too, so that whoever knows the
 * plan can take the one whose places lie on it. Even under a header x and y may be swapped: in surveys x often points north.
 */
import { fail, ok, type Place, type Result } from '../base/result.ts'

export interface ListedLevel {
  /** null where the list has no names. */
  readonly name: string | null
  readonly at: readonly [x: number, y: number]
  readonly level: number
}

export interface ListedLevels {
  readonly rows: readonly ListedLevel[]
  /** The same rows with their columns read otherwise, each with what that is: "level, x, y". */
  readonly otherwise: readonly { readonly order: string; readonly rows: readonly ListedLevel[] }[]
}

type Column = 'name' | 'x' | 'y' | 'level'
type Order = Readonly<Record<Column, number>>

const columnNames: Readonly<Record<Column, readonly string[]>> = {
  name: ['name', 'point', 'id', 'no', 'nr', 'number', 'punkt', 'pnr'],
  x: ['x', 'easting', 'east', 'e', 'rechtswert', 'ost'],
  y: ['y', 'northing', 'north', 'n', 'hochwert', 'nord'],
  level: ['level', 'z', 'height', 'elevation', 'h', 'h\u00f6he', 'hoehe', 'kote'],
}

/** Columns of numbers beyond these are not tried in every order. */
const mostColumns = 5

interface Row {
  readonly cells: readonly string[]
  readonly numbers: readonly number[]
  readonly place: Place
}

/** Reads the list; fails with the line: "no-levels", "not-a-number", "columns". */
export function levelsFromCsv(text: string, file: string): Result<ListedLevels> {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\r|\n/)
  const filled = [...lines.entries()].filter(([, line]) => line.trim() !== '')
  if (filled.length === 0) return fail('no-levels', 'the list of levels is empty', { file })
  const separator = separatorOf(filled.map(([, line]) => line))
  const all = filled.map(([index, line]): Row => {
    const cells = cellsOf(line, separator)
    return { cells: cells.map(({ text: cell }) => cell), numbers: cells.map(({ text: cell, quoted }) => numberOf(cell, separator !== ',' || quoted)), place: { file, line: index + 1 } }
  })
  const header = headerOrder(all[0].cells)
  const isHeader = header !== null || (all.length > 1 && all[0].numbers.every((value) => !Number.isFinite(value)) && all[1].numbers.some((value) => Number.isFinite(value)))
  const rows = isHeader ? all.slice(1) : all
  if (rows.length === 0) return fail('no-levels', 'the list of levels has a header and no rows', { file })

  const width = rows[0].cells.length
  const usual: Order = header ?? (width >= 4 ? { name: 0, x: 1, y: 2, level: 3 } : { name: -1, x: 0, y: 1, level: 2 })
  const numeric = Array.from({ length: width }, (_, c) => c).filter((c) => rows.every(({ numbers }) => Number.isFinite(numbers[c])))
  const orders = header === null ? ordersOf(numeric, width) : [{ ...header, x: header.y, y: header.x }]
  const fits = (['x', 'y', 'level'] as const).every((key) => numeric.includes(usual[key]))
  const first = fits || header !== null ? usual : (orders[0] ?? usual)
  const read = levelsIn(rows, first)
  if (!read.ok) return read
  const otherwise = orders.filter((order) => !sameOrder(order, first)).flatMap((order) => {
    const other = levelsIn(rows, order)
    return other.ok ? [{ order: wordsOf(order), rows: other.value }] : []
  })
  return ok({ rows: read.value, otherwise })
}

function levelsIn(rows: readonly Row[], order: Order): Result<readonly ListedLevel[]> {
  const levels: ListedLevel[] = []
  for (const { cells, numbers, place } of rows) {
    if (cells.length <= Math.max(order.x, order.y, order.level)) return fail('columns', `the row has ${cells.length} columns`, place, 'write name,x,y,level or x,y,level')
    const wrong = [order.x, order.y, order.level].find((column) => !Number.isFinite(numbers[column]))
    if (wrong !== undefined) return fail('not-a-number', `"${cells[wrong]}" is not a number`, place)
    levels.push({ name: order.name >= 0 ? (cells[order.name] ?? null) : null, at: [numbers[order.x], numbers[order.y]], level: numbers[order.level] })
  }
  return ok(levels)
}

/** Every way of taking three of the columns of numbers as x, y and level; a column left over is the name. */
function ordersOf(numeric: readonly number[], width: number): Order[] {
  const own = numeric.slice(0, mostColumns)
  const orders: Order[] = []
  for (const x of own) for (const y of own) for (const level of own) {
    if (x === y || x === level || y === level) continue
    const name = Array.from({ length: width }, (_, c) => c).find((c) => c !== x && c !== y && c !== level) ?? -1
    orders.push({ name, x, y, level })
  }
  return orders
}

const sameOrder = (p: Order, q: Order): boolean => p.x === q.x && p.y === q.y && p.level === q.level

/** "name, y, x, level", as the columns stand. */
function wordsOf(order: Order): string {
  return (['name', 'x', 'y', 'level'] as const).filter((key) => order[key] >= 0).sort((p, q) => order[p] - order[q]).join(', ')
}

function headerOrder(cells: readonly string[]): Order | null {
  // A unit in brackets says what the column is counted in, not what it is.
  const words = cells.map((cell) => cell.toLowerCase().replace(/\s*[[(].*[\])]\s*$/, '').trim())
  const column = (key: Column): number => words.findIndex((word) => columnNames[key].includes(word))
  const order = { name: column('name'), x: column('x'), y: column('y'), level: column('level') }
  return order.x >= 0 && order.y >= 0 && order.level >= 0 ? order : null
}

/** Blanks separate where nothing else does, or where commas are those of decimals: "7 3512345,25 5412345,75 112,35". */
function separatorOf(lines: readonly string[]): string {
  const [first] = lines
  if (first.includes(';')) return ';'
  if (first.includes('\t')) return '\t'
  const last = lines[lines.length - 1]
  const words = last.trim().split(/ +/)
  const isSpaced = words.length >= 3 && words.filter((word) => /^[+\-\u2212]?\d+(?:[.,]\d+)?$/.test(word)).length >= 3
  return isSpaced ? ' ' : ','
}

/** A number as lists have it; `takesComma`: a comma cannot be the separator here. */
function numberOf(cell: string, takesComma: boolean): number {
  let text = cell.trim().replace(/\u2212/g, '-').replace(/(\d)[\s\u00a0\u2009\u202f'\u2019](?=\d)/g, '$1')
  if (takesComma) {
    // Of a point and a comma the later one is the decimal sign, the other groups digits by threes.
    if (/^[+-]?\d{1,3}(?:\.\d{3})+,\d*$/.test(text)) text = text.replace(/\./g, '')
    else if (/^[+-]?\d{1,3}(?:,\d{3})+\.\d*$/.test(text)) text = text.replace(/,/g, '')
    text = text.replace(',', '.')
  }
  return /^[+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?$/i.test(text) ? Number(text) : NaN
}

/** The cells of a line; a quoted cell may hold separators and doubled quotes. */
function cellsOf(line: string, separator: string): { text: string; quoted: boolean }[] {
  const cells: { text: string; quoted: boolean }[] = []
  const source = separator === ' ' ? line.trim().replace(/ +/g, ' ') : line
  let cell = ''
  let quoted = false, wasQuoted = false
  const push = (): void => {
    cells.push({ text: cell.trim(), quoted: wasQuoted })
    cell = ''
    wasQuoted = false
  }
  for (let i = 0; i < source.length; i += 1) {
    const sign = source[i]
    if (quoted && sign === '"' && source[i + 1] === '"') {
      cell += '"'
      i += 1
    } else if (sign === '"') {
      quoted = !quoted
      wasQuoted = true
    } else if (sign === separator && !quoted) push()
    else cell += sign
  }
  push()
  return cells
}
