/**
 * Linear programs, solved by HiGHS (Huangfu, Hall, Math. Prog. Comp. 10, 2018): minimise cost . x with
 *
 *   rowLower <= A x <= rowUpper      lower <= x <= upper
 *
 * by the primal simplex method, presolve off. All programs here start at a point that keeps their rows, where the primal
 * method is four to seven times quicker than the dual one (0.0007 of margin among 3,000 joints: 1.4 s for 9). With presolve on, a plan whose closure conditions hold to the solver's tolerance only
 * was given margin 0, "optimal", and a certificate of one joint, while its margin is 0.2. An answer is a vertex, so that few
 * multipliers are not zero. Whoever asks checks the answer on exact lifts.
 *
 * The solver is WebAssembly of 3.5 MB: it is loaded when the first program is asked for, and kept.
 */
import type { Highs } from 'highs'
import { Bug } from '../../../base/assert.ts'
import type { Steps } from '../../../base/steps.ts'

/** Columns: the unknowns; rows: A by rows, entries start[r] .. start[r + 1) of column and value. */
export interface LinearProgram {
  readonly cost: Float64Array
  readonly lower: Float64Array
  readonly upper: Float64Array
  readonly start: Int32Array
  readonly column: Int32Array
  readonly value: Float64Array
  readonly rowLower: Float64Array
  readonly rowUpper: Float64Array
}

export interface LinearAnswer {
  readonly status: 'optimal' | 'infeasible' | 'unbounded' | 'undecided'
  readonly objective: number
  readonly x: Float64Array
  /** Change of the objective per unit of each row's bound (length: rows). */
  readonly rowDual: Float64Array
  readonly columnDual: Float64Array
  /** Simplex steps, in whole slices. */
  readonly steps: number
}

export interface LinearSolver {
  /** Runs in slices of simplex steps, so that it can be stopped. `stage`: what the progress calls it. */
  solved(program: LinearProgram, stage: string): Steps<LinearAnswer>
}

/** Simplex steps between two turns of whoever drives: some 50 ms on dense programs; by size, since a clock would change the answer's bytes. */
const sliceOf = (entries: number): number => Math.min(500, Math.max(50, Math.round(1e7 / (entries + 1))))

/** The solver's number for the primal simplex method. */
const primal = 4

/**
 * A program is given up after so many entries times steps, and not under a thousand steps: about half a minute. Triangulations of
 * 1,000 nodes take a tenth of it, those of 3,000 use it up. Tried and dropped: the solver's interior point method, quicker there but not to
 * be stopped between its steps, and it ended with a fault in our trials.
 */
const mostWork = 6e9
const leastSteps = 1000

let loaded: Promise<LinearSolver> | null = null

/** The solver, loaded once. */
export function linearSolver(): Promise<LinearSolver> {
  loaded ??= import('highs').then(async ({ default: load }) => solverOf(await load()))
  return loaded
}

/** A row list that grows into a program's rows. */
export function programRows(): {
  row(columns: ArrayLike<number>, values: ArrayLike<number>, low: number, high: number): void
  rows(): Pick<LinearProgram, 'start' | 'column' | 'value' | 'rowLower' | 'rowUpper'>
} {
  const start = [0]
  const column: number[] = [], value: number[] = [], low: number[] = [], high: number[] = []
  return {
    row(columns, values, from, to) {
      for (let k = 0; k < columns.length; k += 1) {
        if (values[k] === 0) continue
        column.push(columns[k])
        value.push(values[k])
      }
      start.push(column.length)
      low.push(from)
      high.push(to)
    },
    rows: () => ({
      start: Int32Array.from(start), column: Int32Array.from(column), value: Float64Array.from(value),
      rowLower: Float64Array.from(low), rowUpper: Float64Array.from(high),
    }),
  }
}

function solverOf(highs: Highs): LinearSolver {
  const { modelStatus } = highs.constants
  return {
    *solved(program, stage) {
      yield { stage, done: 0 }
      const columns = program.cost.length
      const rows = program.rowLower.length
      const model = highs.createModel({
        numCols: columns, numRows: rows, colCost: program.cost, colLower: bounded(program.lower), colUpper: bounded(program.upper),
        rowLower: bounded(program.rowLower), rowUpper: bounded(program.rowUpper),
        matrix: { format: 'csr', numRows: rows, numCols: columns, starts: program.start, indices: program.column, values: program.value },
      })
      try {
        model.options.set({
          output_flag: false, presolve: 'off', solver: 'simplex', simplex_strategy: primal, random_seed: 1,
          primal_feasibility_tolerance: 1e-9, dual_feasibility_tolerance: 1e-9,
        })
        const slice = sliceOf(program.value.length)
        const mostSteps = Math.max(leastSteps, Math.round(mostWork / (program.value.length + 1)))
        let steps = 0
        for (;;) {
          model.options.set('simplex_iteration_limit', slice)
          model.run()
          const status = model.getModelStatus()
          if (status !== modelStatus.iterationLimit || steps >= mostSteps) {
            const { colValue, rowDual, colDual } = model.getSolution()
            const named = status === modelStatus.optimal ? 'optimal' : status === modelStatus.infeasible ? 'infeasible'
              : status === modelStatus.unbounded || status === modelStatus.unboundedOrInfeasible ? 'unbounded' : 'undecided'
            return { status: named, objective: named === 'optimal' ? model.getObjectiveValue() : NaN, x: colValue, rowDual, columnDual: colDual, steps }
          }
          steps += slice
          yield { stage, done: Math.max(steps / (steps + 4 * (columns + rows)), steps / mostSteps) }
        }
      } finally {
        model.dispose()
      }

      function bounded(values: Float64Array): Float64Array {
        return values.map((value) => {
          if (Number.isNaN(value)) throw new Bug('a bound of a linear program is not a number')
          return value === Infinity ? highs.infinity : value === -Infinity ? -highs.infinity : value
        })
      }
    },
  }
}
