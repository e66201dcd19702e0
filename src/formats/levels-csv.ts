/**
 * Levels as a list: rows of name,x,y,level or x,y,level, with or without a header line, separated by commas, semicolons or
 * tabs; with semicolons or tabs a decimal comma is read too. Quotes as in RFC 4180. Columns of a header may stand in any
 * order when it names x, y and level (or easting, northing, z, height).
 */
import { fail, ok, type Result } from '../base/result.ts'

export interface ListedLevel {
  /** null where the list has no names. */
  readonly name: string | null
  readonly at: readonly [x: number, y: number]
  readonly level: number
}

const columnNames: Readonly<Record<'name' | 'x' | 'y' | 'level', readonly string[]>> = {
  name: ['name', 'point', 'id', 'no', 'nr'],
  x: ['x', 'easting', 'east', 'e'],
  y: ['y', 'northing', 'north', 'n'],
  level: ['level', 'z', 'height', 'elevation', 'h'],
}

/** Reads the list; fails with the line: "no-levels", "not-a-number", "columns". */
export function levelsFromCsv(text: string, file: string): Result<readonly ListedLevel[]> {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\r|\n/)
  const first = lines.find((line) => line.trim() !== '')
  if (first === undefined) return fail('no-levels', 'the list of levels is empty', { file })
  const separator = first.includes(';') ? ';' : first.includes('\t') ? '\t' : ','
  let order: Readonly<Record<'name' | 'x' | 'y' | 'level', number>> | null = null
  const levels: ListedLevel[] = []
  for (const [index, line] of lines.entries()) {
    if (line.trim() === '') continue
    const cells = cellsOf(line, separator)
    const place = { file, line: index + 1 }
    if (order === null) {
      const header = headerOrder(cells)
      order = header ?? (cells.length >= 4 ? { name: 0, x: 1, y: 2, level: 3 } : { name: -1, x: 0, y: 1, level: 2 })
      if (header !== null) continue
    }
    if (cells.length <= Math.max(order.x, order.y, order.level)) {
      return fail('columns', `the row has ${cells.length} columns`, place, 'write name,x,y,level or x,y,level')
    }
    const numbers = [order.x, order.y, order.level].map((column) => numberOf(cells[column], separator))
    const wrong = numbers.findIndex((value) => !Number.isFinite(value))
    if (wrong >= 0) return fail('not-a-number', `"${cells[[order.x, order.y, order.level][wrong]]}" is not a number`, place)
    levels.push({ name: order.name >= 0 ? cells[order.name] : null, at: [numbers[0], numbers[1]], level: numbers[2] })
  }
  return levels.length > 0 ? ok(levels) : fail('no-levels', 'the list of levels has a header and no rows', { file })
}

function headerOrder(cells: readonly string[]): Record<'name' | 'x' | 'y' | 'level', number> | null {
  const words = cells.map((cell) => cell.toLowerCase().trim())
  const column = (key: keyof typeof columnNames): number => words.findIndex((word) => columnNames[key].includes(word))
  const order = { name: column('name'), x: column('x'), y: column('y'), level: column('level') }
  return order.x >= 0 && order.y >= 0 && order.level >= 0 ? order : null
}

function numberOf(cell: string, separator: string): number {
  const text = cell.trim().replace(/\u2212/g, '-')
  return text === '' ? NaN : Number(separator === ',' ? text : text.replace(',', '.'))
}

/** The cells of a line; a quoted cell may hold separators and doubled quotes. */
function cellsOf(line: string, separator: string): string[] {
  const cells: string[] = []
  let cell = ''
  let quoted = false
  for (let i = 0; i < line.length; i += 1) {
    const sign = line[i]
    if (quoted && sign === '"' && line[i + 1] === '"') {
      cell += '"'
      i += 1
    } else if (sign === '"') quoted = !quoted
    else if (sign === separator && !quoted) {
      cells.push(cell.trim())
      cell = ''
    } else cell += sign
  }
  cells.push(cell.trim())
  return cells
}
