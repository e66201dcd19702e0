/**
 * Solving with a factor: L y = b, D z = y, L^T x = z. Both sweeps read all of L from memory (twice 150 MB at 200,000 unknowns)
 * for two operations a number, so memory sets the pace of one right-hand side, and several at once cost little more.
 */
import { assert } from '../assert.ts'
import { finish, type Steps } from '../steps.ts'
import type { Factor } from './factor.ts'
import { backwardFour, forwardFour } from './sweep-four.ts'
import { backward, forward } from './sweep.ts'

/** x with A x = right for `columns` right-hand sides stored one after another (size * columns numbers); a new array. */
export function solve(factor: Factor, right: Float64Array, columns = 1): Float64Array {
  return finish(solving(factor, right, columns))
}

/** Right-hand sides that go through the fronts together: the panel of a front is read from memory once for all of them. */
const together = 8

/** Numbers of L between two looks at the clock. */
const numbersPerLook = 1e6
const sliceMs = 40

/** The same in steps, for many right-hand sides of a large matrix. */
export function* solving(factor: Factor, right: Float64Array, columns = 1): Steps<Float64Array> {
  const { analysis: { pattern: { size } } } = factor
  assert(factor.ready, 'the factor is complete')
  assert(right.length === size * columns, 'a right-hand side has the length of the matrix')
  const result = new Float64Array(size * columns)
  const groups = Array.from({ length: columns < 2 ? 0 : (Math.min(together, columns) + 3) >> 2 }, () => new Float64Array(4 * size))
  for (let column = 0; column < columns; ) {
    const taken = Math.min(together, columns - column)
    const from = right.subarray(column * size, (column + taken) * size)
    const to = result.subarray(column * size, (column + taken) * size)
    if (taken === 1) yield* one(factor, from, to)
    else yield* several(factor, from, to, taken, groups.slice(0, (taken + 3) >> 2))
    column += taken
  }
  return result
}

function* one(factor: Factor, right: Float64Array, result: Float64Array): Steps<void> {
  const { place, widest, pattern: { size } } = factor.analysis
  // The room of the last solve serves again; while it is in use another solve makes its own.
  const { x, y } = rooms.get(factor) ?? { x: new Float64Array(size), y: new Float64Array(4 * widest) }
  rooms.delete(factor)
  for (let i = 0; i < x.length; i++) x[place[i] as number] = right[i] as number
  yield* sweeps(factor, 1, (t) => forward(factor, x, y, t), (t) => backward(factor, x, y, t))
  for (let i = 0; i < x.length; i++) result[i] = x[place[i] as number] as number
  rooms.set(factor, { x, y })
}

interface Room {
  /** By place. */
  readonly x: Float64Array
  readonly y: Float64Array
}

const rooms = new WeakMap<Factor, Room>()

/** groups[g]: four columns each, four numbers a place; what an unused column holds does not matter. */
function* several(
  factor: Factor, right: Float64Array, result: Float64Array, columns: number, groups: readonly Float64Array[],
): Steps<void> {
  const { place, pattern: { size } } = factor.analysis
  groups.forEach((x, g) => {
    for (let c = 0; c < Math.min(4, columns - 4 * g); c++) {
      const shift = (4 * g + c) * size
      for (let i = 0; i < size; i++) x[4 * (place[i] as number) + c] = right[shift + i] as number
    }
  })
  yield* sweeps(
    factor, columns,
    (t) => { for (const x of groups) forwardFour(factor, x, t) },
    (t) => { for (const x of groups) backwardFour(factor, x, t) },
  )
  groups.forEach((x, g) => {
    for (let c = 0; c < Math.min(4, columns - 4 * g); c++) {
      const shift = (4 * g + c) * size
      for (let i = 0; i < size; i++) result[shift + i] = x[4 * (place[i] as number) + c] as number
    }
  })
}

/** All fronts upwards, then downwards, with looks at the clock. */
function* sweeps(
  { analysis: { fronts, panel } }: Factor, columns: number, up: (t: number) => void, down: (t: number) => void,
): Steps<void> {
  let turn = performance.now()
  let numbers = 0
  for (let n = 0; n < 2 * fronts; n++) {
    const t = n < fronts ? n : 2 * fronts - 1 - n
    if (n < fronts) up(t)
    else down(t)
    numbers += ((panel[t + 1] as number) - (panel[t] as number)) * columns
    if (numbers < numbersPerLook) continue
    numbers = 0
    if (performance.now() - turn > sliceMs) {
      yield { stage: 'Solving', done: n / (2 * fronts) }
      turn = performance.now()
    }
  }
}
