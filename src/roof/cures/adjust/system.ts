/**
 * The least move, in the metric W of the mobilities, that brings linear rows J u = b and the rise: the multipliers solve
 *     (J W^-1 J^T) y = b,   u = W^-1 J^T y,
 * a sparse symmetric matrix over the conditions (panels that share a node couple), positive definite where the conditions are
 * independent. Where they are not it is raised by a tiny share of its largest entry, and refinement against the matrix as it
 * is takes the difference out again (proximal multipliers, Rockafellar 1976). The rise, one dense row, is bordered on.
 *
 * Tried and dropped: the system in positions, heights and planes (three times as many unknowns, indefinite, needs pivots).
 */
import { dot } from '../../../base/dot.ts'
import { analyse } from '../../../base/sparse/analyse.ts'
import { cliquePattern, type CliquePattern } from '../../../base/sparse/cliques.ts'
import { factor, refactor, type Factor } from '../../../base/sparse/factor.ts'
import { multiply } from '../../../base/sparse/multiply.ts'
import { solve } from '../../../base/sparse/solve.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Mobility } from './mobility.ts'
import type { MoveRows, StackedRows } from './rows.ts'
import { rowOrdering } from './order.ts'

export interface MoveSystem {
  readonly stack: StackedRows
  readonly cliques: CliquePattern
  /** Entries of the rows by node: entry[start[n] .. start[n + 1]), and the row of each entry. */
  readonly entryStart: Int32Array
  readonly entry: Int32Array
  readonly rowOf: Int32Array
  readonly values: Float64Array
  readonly factor: Factor
  /** What the factor answers to the rise's row; null: not asked since it was made. */
  borderAnswer: Float64Array | null
}

/** Moves of the nodes: in plan x y x y .., and in height. */
export interface Moves {
  readonly plan: Float64Array
  readonly height: Float64Array
}

/** One dense row on the heights: sum weight * dz = value. */
export interface RiseRow {
  readonly weight: Float64Array
  readonly value: number
}

/** Share of the largest diagonal entry by which the matrix is raised: as tau is to the flatness form. */
const raisedBy = 1e-13

/** Rounds of refinement at most; with independent conditions none is needed. */
const mostRounds = 5
/** A solution is taken as it is when it misses by less than this share of its right-hand side. */
const enoughDigits = 1e-10

/** A rise whose row the conditions answer by less than this share of its own size is theirs to say. */
const leastAnswer = 1e-9

/** Order and analyse; to be done again only when the rows' nodes change. */
export function* moveSystem(stack: StackedRows, nodeCount: number, mobility: Mobility): Steps<MoveSystem> {
  const { rows, at } = stack
  const rowCount = rows.right.length
  const rowOf = new Int32Array(rows.node.length)
  for (let r = 0; r < rowCount; r += 1) rowOf.fill(r, rows.start[r], rows.start[r + 1])
  const entryStart = new Int32Array(nodeCount + 2)
  for (const node of rows.node) entryStart[node + 2] += 1
  for (let n = 2; n < nodeCount + 2; n += 1) entryStart[n] += entryStart[n - 1]
  const entry = new Int32Array(rows.node.length)
  for (let e = 0; e < rows.node.length; e += 1) entry[entryStart[rows.node[e] + 1]++] = e
  const byNode = entryStart.subarray(0, nodeCount + 1)
  const rowsByNode = entry.map((e) => rowOf[e])
  const cliques = cliquePattern(rowCount, byNode, rowsByNode)
  const analysis = analyse(cliques.pattern, yield* rowOrdering(rows, at, byNode, rowsByNode))
  const values = new Float64Array(cliques.pattern.row.length)
  const system = { stack, cliques, entryStart: byNode, entry, rowOf, values, borderAnswer: null }
  assemble(system, mobility)
  return { ...system, factor: yield* factor(analysis, raisedValues(cliques, values)) }
}

/** The factor at the rows' present values. */
export function* refactored(system: MoveSystem, mobility: Mobility): Steps<void> {
  assemble(system, mobility)
  system.borderAnswer = null
  yield* refactor(system.factor, raisedValues(system.cliques, system.values))
}

function assemble({ stack: { rows, give }, cliques, entryStart, entry, values }: Pick<MoveSystem, 'stack' | 'cliques' | 'entryStart' | 'entry' | 'values'>, mobility: Mobility): void {
  const { cx, cy, cz } = rows
  const { xx, xy, yy, zz } = mobility
  values.fill(0)
  let at = 0
  for (let n = 0; n + 1 < entryStart.length; n += 1) {
    for (let i = entryStart[n]; i < entryStart[n + 1]; i += 1) {
      const a = entry[i]
      const ux = xx[n] * cx[a] + xy[n] * cy[a]
      const uy = xy[n] * cx[a] + yy[n] * cy[a]
      const uz = zz[n] * cz[a]
      for (let j = i; j < entryStart[n + 1]; j += 1) {
        const b = entry[j]
        values[cliques.position[at++]] += ux * cx[b] + uy * cy[b] + uz * cz[b]
      }
    }
  }
  for (let r = 0; r < give.length; r += 1) values[cliques.pattern.start[r]] += give[r]
}

function raisedValues({ pattern }: CliquePattern, values: Float64Array): Float64Array {
  let largest = 0
  for (let i = 0; i < pattern.size; i += 1) largest = Math.max(largest, values[pattern.start[i]])
  const raised = values.slice()
  for (let i = 0; i < pattern.size; i += 1) raised[pattern.start[i]] += raisedBy * (largest > 0 ? largest : 1)
  return raised
}

/** W^-1 J^T y. */
export function movesOf(rows: MoveRows, mobility: Mobility, multipliers: Float64Array): Moves {
  const nodeCount = mobility.xx.length
  const plan = new Float64Array(2 * nodeCount)
  const height = new Float64Array(nodeCount)
  for (let r = 0; r < multipliers.length; r += 1) {
    const y = multipliers[r]
    for (let e = rows.start[r]; e < rows.start[r + 1]; e += 1) {
      const n = rows.node[e]
      plan[2 * n] += rows.cx[e] * y
      plan[2 * n + 1] += rows.cy[e] * y
      height[n] += rows.cz[e] * y
    }
  }
  for (let n = 0; n < nodeCount; n += 1) {
    const px = plan[2 * n], py = plan[2 * n + 1]
    plan[2 * n] = mobility.xx[n] * px + mobility.xy[n] * py
    plan[2 * n + 1] = mobility.xy[n] * px + mobility.yy[n] * py
    height[n] *= mobility.zz[n]
  }
  return { plan, height }
}

/** J u. */
export function applied(rows: MoveRows, moves: Moves): Float64Array {
  const out = new Float64Array(rows.right.length)
  for (let r = 0; r < out.length; r += 1) {
    let sum = 0
    for (let e = rows.start[r]; e < rows.start[r + 1]; e += 1) {
      const n = rows.node[e]
      sum += rows.cx[e] * moves.plan[2 * n] + rows.cy[e] * moves.plan[2 * n + 1] + rows.cz[e] * moves.height[n]
    }
    out[r] = sum
  }
  return out
}

export interface LeastMove extends Moves {
  /** Multiplier of each row: what a unit of its right-hand side costs (half the squared move's derivative). */
  readonly multipliers: Float64Array
}

/** The least move with J u = right and, where a rise is given, weight . dz = value. */
export function leastMove(system: MoveSystem, mobility: Mobility, right: Float64Array, rise: RiseRow | null): LeastMove {
  const { rows } = system.stack
  if (rise === null) {
    const multipliers = refinedSolve(system, right, 1)
    return { ...movesOf(rows, mobility, multipliers), multipliers }
  }
  // Border: b = J W^-1 c, d = c^T W^-1 c. Any y1 gives the rise exactly, so that of an earlier state of the rows serves too.
  const free = rise.weight.map((weight, n) => weight * mobility.zz[n])
  const border = applied(rows, { plan: new Float64Array(2 * free.length), height: free })
  let y0: Float64Array
  if (system.borderAnswer === null) {
    const both = new Float64Array(2 * right.length)
    both.set(right)
    both.set(border, right.length)
    const answers = refinedSolve(system, both, 2)
    y0 = answers.subarray(0, right.length)
    system.borderAnswer = answers.slice(right.length)
  } else y0 = refinedSolve(system, right, 1)
  const y1 = system.borderAnswer
  const size = dot(rise.weight, free)
  const pivot = size - dot(border, y1)
  const share = pivot > leastAnswer * size ? (rise.value - dot(border, y0)) / pivot : 0
  const multipliers = y0.map((y, r) => y - share * y1[r])
  const moves = movesOf(rows, mobility, multipliers)
  for (let n = 0; n < free.length; n += 1) moves.height[n] += share * free[n]
  return { ...moves, multipliers }
}

/** Columns stored one after another; refined together until each misses by few digits, or no more is to be had. */
function refinedSolve({ factor: factored, cliques: { pattern }, values }: MoveSystem, right: Float64Array, columns: number): Float64Array {
  const matrix = { pattern, values }
  let x = solve(factored, right, columns)
  let left = missing(right, multiply(matrix, x, columns), columns)
  for (let round = 0; round < mostRounds && left.share > enoughDigits; round += 1) {
    const correction = solve(factored, left.vector, columns)
    const next = x.map((value, i) => value + correction[i])
    const nextLeft = missing(right, multiply(matrix, next, columns), columns)
    if (!(nextLeft.share < left.share)) break
    const slow = nextLeft.share > left.share / 2
    x = next
    left = nextLeft
    if (slow) break
  }
  return x
}

/** right - product, and its size as a share of right's in the column where that is largest. */
function missing(right: Float64Array, product: Float64Array, columns: number): { vector: Float64Array; share: number } {
  const vector = right.map((value, i) => value - product[i])
  const rows = right.length / columns
  let share = 0
  for (let c = 0; c < columns; c += 1) {
    const [off, of] = [vector.subarray(c * rows, (c + 1) * rows), right.subarray(c * rows, (c + 1) * rows)]
    const size = dot(of, of)
    if (size > 0) share = Math.max(share, Math.sqrt(dot(off, off) / size))
  }
  return { vector, share }
}
