/**
 * The pattern of a sum of small dense blocks, one per panel: every clique of unknowns couples all its pairs. Besides the
 * pattern itself it tells where each entry of each block goes, so that a sum of blocks is one pass without any search.
 */
import { assert } from '../assert.ts'
import { finish, type Steps } from '../steps.ts'
import type { Pattern } from './matrix.ts'

/** Clique c holds unknowns index[start[c] .. start[c + 1]), none twice. */
export interface CliquePattern {
  /** Every diagonal is present, also of unknowns in no clique. */
  readonly pattern: Pattern
  /**
   * For clique c of k unknowns, k(k + 1)/2 entries of the pattern: its lower triangle by columns in clique-local order
   * (for a = 0 .. k - 1, for b = a .. k - 1), one clique after another.
   */
  readonly position: Int32Array
}

/** Above this many rows in a column the typed array's own sort is faster than insertion. */
const shortColumn = 48

/** Columns between two yields: some 10 ms. */
const columnsPerStep = 8192

/** Pattern of the sum over cliques of dense symmetric blocks. Time: the sum of the squares of the clique sizes. */
export function cliquePattern(size: number, start: Int32Array, index: Int32Array): CliquePattern {
  return finish(cliquePatternSteps(size, start, index))
}

/** The same in steps. */
export function* cliquePatternSteps(size: number, start: Int32Array, index: Int32Array): Steps<CliquePattern> {
  const cliques = Math.max(0, start.length - 1)
  // offset[c]: first entry of clique c in `position`.
  const offset = new Int32Array(cliques + 1)
  for (let c = 0; c < cliques; c++) {
    const k = (start[c + 1] ?? 0) - (start[c] ?? 0)
    offset[c + 1] = (offset[c] ?? 0) + (k * (k + 1)) / 2
  }
  const pairs = offset[cliques] ?? 0
  const position = new Int32Array(pairs)
  yield { stage: 'Assembling', done: 0.1 }
  const columns = new Columns(size, start, index, offset, position, memberships(size, start, index))
  for (let j = 0; j < size; j += columnsPerStep) {
    yield { stage: 'Assembling', done: 0.1 + (0.4 * j) / size }
    columns.fill(j, Math.min(size, j + columnsPerStep))
  }
  return { pattern: columns.pattern(), position }
}

/** The pattern under way, a stretch of columns at a time. */
class Columns {
  private readonly begin: Int32Array
  private row: Int32Array
  private readonly place: Int32Array
  private readonly seenBy: Int32Array
  private count = 0
  private readonly size: number
  private readonly start: Int32Array
  private readonly index: Int32Array
  private readonly offset: Int32Array
  private readonly position: Int32Array
  private readonly members: Memberships

  constructor(size: number, start: Int32Array, index: Int32Array, offset: Int32Array, position: Int32Array, members: Memberships) {
    this.size = size
    this.start = start
    this.index = index
    this.offset = offset
    this.position = position
    this.members = members
    this.begin = new Int32Array(size + 1)
    this.row = new Int32Array(Math.max(16, size + (position.length >> 1)))
    this.place = new Int32Array(size)
    this.seenBy = new Int32Array(size).fill(-1)
  }

  pattern(): Pattern {
    this.begin[this.size] = this.count
    return { size: this.size, start: this.begin, row: this.row.slice(0, this.count) }
  }

  fill(fromColumn: number, toColumn: number): void {
    const { start, index, offset, position, begin, place, seenBy } = this
    const { first, slot, owner } = this.members
    let { row, count } = this
    for (let j = fromColumn; j < toColumn; j++) {
      begin[j] = count
      const from = first[j] as number
      const to = first[j + 1] as number
      seenBy[j] = j
      let end = count
      if (end + 1 > row.length) row = grown(row, end + 1)
      row[end++] = j
      for (let m = from; m < to; m++) {
        const c = owner[m] as number
        const stop = start[c + 1] as number
        if (end + stop - (start[c] as number) > row.length) row = grown(row, end + stop - (start[c] as number))
        for (let q = start[c] as number; q < stop; q++) {
          const i = index[q] as number
          if (i > j && seenBy[i] !== j) {
            seenBy[i] = j
            row[end++] = i
          }
        }
      }
      ascending(row, count, end)
      for (let q = count; q < end; q++) place[row[q] as number] = q
      for (let m = from; m < to; m++) {
        const c = owner[m] as number
        const base = start[c] as number
        const k = (start[c + 1] as number) - base
        const here = (slot[m] as number) - base
        for (let b = 0; b < k; b++) {
          const i = index[base + b] as number
          if (i < j) continue
          const low = here < b ? here : b
          const high = here < b ? b : here
          position[(offset[c] as number) + low * k - (low * (low - 1)) / 2 + high - low] = place[i] as number
        }
      }
      count = end
    }
    this.row = row
    this.count = count
  }
}

interface Memberships {
  readonly first: Int32Array
  readonly slot: Int32Array
  readonly owner: Int32Array
}

/** The incidence the other way round: unknown j sits at index[slot[m]] of clique owner[m] for m in first[j] .. first[j + 1). */
function memberships(size: number, start: Int32Array, index: Int32Array): Memberships {
  const cliques = Math.max(0, start.length - 1)
  const first = new Int32Array(size + 2)
  const latest = new Int32Array(size).fill(-1)
  for (let c = 0; c < cliques; c++) {
    for (let q = start[c] as number; q < (start[c + 1] as number); q++) {
      const i = index[q] as number
      assert(i >= 0 && i < size, 'a clique names an unknown that is not there')
      assert(latest[i] !== c, 'a clique names an unknown twice')
      latest[i] = c
      first[i + 2] = (first[i + 2] as number) + 1
    }
  }
  for (let i = 2; i < first.length; i++) first[i] = (first[i] as number) + (first[i - 1] as number)
  const slot = new Int32Array(first[size + 1] as number)
  const owner = new Int32Array(first[size + 1] as number)
  for (let c = 0; c < cliques; c++) {
    for (let q = start[c] as number; q < (start[c + 1] as number); q++) {
      const i = index[q] as number
      const at = first[i + 1] as number
      slot[at] = q
      owner[at] = c
      first[i + 1] = at + 1
    }
  }
  return { first: first.subarray(0, size + 1), slot, owner }
}

function grown(row: Int32Array, need: number): Int32Array<ArrayBuffer> {
  const larger = new Int32Array(Math.max(need, row.length + (row.length >> 1)))
  larger.set(row)
  return larger
}

/** Sorts row[from .. to) in place. */
function ascending(row: Int32Array, from: number, to: number): void {
  if (to - from > shortColumn) {
    row.subarray(from, to).sort()
    return
  }
  for (let p = from + 1; p < to; p++) {
    const value = row[p] as number
    let q = p - 1
    while (q >= from && (row[q] as number) > value) {
      row[q + 1] = row[q] as number
      q--
    }
    row[q + 1] = value
  }
}
