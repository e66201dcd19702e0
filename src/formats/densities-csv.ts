/**
 * Force densities as a list: rows joint,density with or without a header line; with semicolons or tabs between them a decimal
 * comma is read too. In the place of a joint J12 stand a range J3-J9, an edge by its nodes N4-N5 (also on the rim of a void),
 * "voids" for all edges round voids, and "all"; later rows win.
 */
import { fail, ok, type Result } from '../base/result.ts'

export interface ListedDensity {
  /** 1-based line of the file. */
  readonly line: number
  /** Numbers are 0-based; voids: all edges round voids; all: these and all joints. */
  readonly of: { readonly joints: readonly [from: number, to: number] } | { readonly nodes: readonly [number, number] } | 'voids' | 'all'
  /** Not 0. */
  readonly density: number
}

/** Reads the list; fails with the line: "no-densities", "columns", "not-a-joint", "not-a-number". */
export function densitiesFromCsv(text: string, file: string): Result<readonly ListedDensity[]> {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\r|\n/)
  const listed: ListedDensity[] = []
  let isFirst = true
  for (const [index, line] of lines.entries()) {
    if (line.trim() === '') continue
    const separator = line.includes(';') ? ';' : line.includes('\t') ? '\t' : ','
    const cells = line.split(separator).map((cell) => cell.trim().replace(/^"(.*)"$/, '$1').replace(/^'(?=[-+=@])/, ''))
    const place = { file, line: index + 1 }
    const isHeader = isFirst && /^joint$/i.test(cells[0])
    isFirst = false
    if (isHeader) continue
    if (cells.length < 2) return fail('columns', 'the row has one column', place, 'write joint,density')
    const density = Number((separator === ',' ? cells[1] : cells[1].replace(',', '.')).replace(/\u2212/g, '-'))
    if (cells[1] === '' || !Number.isFinite(density)) return fail('not-a-number', `"${cells[1]}" is not a number`, place)
    if (density === 0) return fail('zero-density', 'a density of 0 bears nothing', place, 'give another number')
    const word = /^(all|voids)$/i.exec(cells[0])
    if (word !== null) {
      listed.push({ line: index + 1, of: word[1].toLowerCase() === 'all' ? 'all' : 'voids', density })
      continue
    }
    const edge = /^N([1-9]\d{0,8})\s*-\s*N([1-9]\d{0,8})$/i.exec(cells[0])
    if (edge !== null) {
      listed.push({ line: index + 1, of: { nodes: [Number(edge[1]) - 1, Number(edge[2]) - 1] }, density })
      continue
    }
    const match = /^J([1-9]\d{0,8})(?:\s*-\s*J?([1-9]\d{0,8}))?$/i.exec(cells[0])
    if (match === null) return fail('not-a-joint', `"${cells[0]}" is not the name of a joint`, place, 'write J12, J3-J9, N4-N5, voids or all')
    const from = Number(match[1]) - 1
    const to = match[2] === undefined ? from : Number(match[2]) - 1
    if (to < from) return fail('not-a-joint', `the range ${cells[0]} runs backwards`, place)
    listed.push({ line: index + 1, of: { joints: [from, to] }, density })
  }
  return listed.length > 0 ? ok(listed) : fail('no-densities', 'the list of densities is empty', { file })
}
