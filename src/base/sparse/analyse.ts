/**
 * Symbolic analysis: everything about the factor that the values do not change. The pieces of the dissection, the small ones
 * merged, are the fronts of a multifrontal factorisation (I. Duff, J. Reid, ACM Trans. Math. Softw. 9, 1983; J. Liu, SIAM
 * Review 34, 1992): a front eliminates its own unknowns (pivots) and hands what is left on its boundary to its parent.
 */
import { assert } from '../assert.ts'
import { finish, type Steps } from '../steps.ts'
import { amalgamation } from './amalgamate.ts'
import { boundaries } from './boundaries.ts'
import { four, layout } from './layout.ts'
import type { Pattern } from './matrix.ts'
import type { Ordering } from './order.ts'
import { boundarySizes, lowerNeighbours } from './rows.ts'

/** The storage of panels and Schur complements is described in layout.ts. */
export interface Analysis {
  readonly pattern: Pattern
  readonly ordering: Ordering
  /** place[i]: where unknown i is eliminated (the order of `ordering`, up to the order of independent pieces); unknown: its inverse. */
  readonly place: Int32Array
  readonly unknown: Int32Array
  readonly fronts: number
  /** Front t eliminates places first[t] .. first[t + 1). */
  readonly first: Int32Array
  /** parent[t] > t, -1 for roots; children[childStart[t] .. childStart[t + 1]) come in ascending order. */
  readonly parent: Int32Array
  readonly childStart: Int32Array
  readonly children: Int32Array
  /** Boundary of front t: places boundary[boundaryStart[t] .. boundaryStart[t + 1]), ascending. */
  readonly boundaryStart: Int32Array
  readonly boundary: Int32Array
  /** Beside each boundary entry: its row in the parent's front, where boundary rows are counted on from the rounded pivots. */
  readonly inParent: Int32Array
  /** Front t's entries of L are numbers panel[t] .. panel[t + 1) of the store. */
  readonly panel: Int32Array
  /** Where front t's Schur complement begins in the store. */
  readonly schur: Int32Array
  /** Numbers in the store in all: L, then the two stacks of Schur complements. */
  readonly storeSize: number
  /** target[q]: where value q of the pattern goes in the store. */
  readonly target: Int32Array
  /** The most rows of any front, in slivers. */
  readonly widest: number
  /** Multiplications and additions of the factorisation. */
  readonly operations: number
}

/** The analysis of a pattern in a given order; reused for any values. */
export function analyse(pattern: Pattern, ordering: Ordering): Analysis {
  return finish(analysing(pattern, ordering))
}

/** The same in steps. */
export function* analysing(pattern: Pattern, ordering: Ordering): Steps<Analysis> {
  const { size, start, row } = pattern
  for (let j = 0; j < size; j++) assert(row[start[j] as number] === j, 'every column of a pattern begins with its diagonal')
  const rows = lowerNeighbours(pattern, ordering.rank)
  yield { stage: 'Analysing', done: 0.2 }
  const sizes = boundarySizes(ordering, rows)
  yield { stage: 'Analysing', done: 0.3 }
  const tree = amalgamation(ordering, sizes)
  yield { stage: 'Analysing', done: 0.4 }
  const { fronts, parent, first, boundaryStart, placeOfRank } = tree
  const { panel, schur, storeSize } = layout(tree)
  assert(storeSize < 2 ** 31, 'a factor of more than 16 gigabytes')
  const place = new Int32Array(size)
  const unknown = new Int32Array(size)
  for (let i = 0; i < size; i++) {
    const v = placeOfRank[ordering.rank[i] as number] as number
    place[i] = v
    unknown[v] = i
  }
  const bounds = yield* boundaries(pattern, ordering.rank, rows, tree, panel)
  return {
    pattern, ordering, place, unknown, fronts, first, parent, ...childLists(fronts, parent), boundaryStart,
    ...bounds, panel, schur, storeSize, ...work(first, boundaryStart),
  }
}

function work(first: Int32Array, boundaryStart: Int32Array): { widest: number; operations: number } {
  let widest = 0
  let operations = 0
  for (let t = 0; t + 1 < first.length; t++) {
    const p = four((first[t + 1] as number) - (first[t] as number))
    const b = four((boundaryStart[t + 1] as number) - (boundaryStart[t] as number))
    widest = Math.max(widest, (p + b) >> 2)
    operations += (p * (p + 1) * (2 * p + 1)) / 6 + p * p * b + p * b * b
  }
  return { widest, operations }
}

function childLists(fronts: number, parent: Int32Array): { childStart: Int32Array; children: Int32Array } {
  const childStart = new Int32Array(fronts + 2)
  for (const t of parent) if (t >= 0) childStart[t + 2] = (childStart[t + 2] as number) + 1
  for (let t = 2; t < fronts + 2; t++) childStart[t] = (childStart[t] as number) + (childStart[t - 1] as number)
  const children = new Int32Array(childStart[fronts + 1] as number)
  for (let t = 0; t < fronts; t++) {
    const up = parent[t] as number
    if (up < 0) continue
    const at = childStart[up + 1] as number
    children[at] = t
    childStart[up + 1] = at + 1
  }
  return { childStart: childStart.subarray(0, fronts + 1), children }
}
