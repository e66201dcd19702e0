/** Sparse elimination of condition rows against dense linear algebra (ml-matrix), and the naming of contradictions. */
import { Matrix, SingularValueDecomposition } from 'ml-matrix'
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { eliminate, type Elimination } from '../../../src/roof/conditions/eliminate.ts'
import { rowList, type Rows } from '../../../src/roof/conditions/rows.ts'

/** T as a dense matrix, nodes by unknowns. */
function dense({ free, start, unknown, weight }: Elimination): Matrix {
  const nodes = start.length - 1
  const T = Matrix.zeros(nodes, Math.max(1, free.length))
  for (let n = 0; n < nodes; n += 1) for (let i = start[n]!; i < start[n + 1]!; i += 1) T.set(n, unknown[i]!, T.get(n, unknown[i]!) + weight[i]!)
  return T
}

function denseRows(rows: Rows, nodes: number): Matrix {
  const R = Matrix.zeros(Math.max(1, rows.value.length), nodes)
  for (let r = 0; r < rows.value.length; r += 1) {
    for (let i = rows.start[r]!; i < rows.start[r + 1]!; i += 1) R.set(r, rows.node[i]!, R.get(r, rows.node[i]!) + rows.weight[i]!)
  }
  return R
}

function rankOf(R: Matrix): number {
  const { diagonal } = new SingularValueDecomposition(R.rows >= R.columns ? R : R.transpose())
  return diagonal.filter((s) => s > 1e-9).length
}

/** Random rows that the heights `truth` satisfy: held nodes, pairs, triples and repeats of earlier rows in combination. */
function randomRows(seed: number, nodes: number, count: number, truth: Float64Array): Rows {
  const next = random(seed)
  const list = rowList()
  const made: { nodes: number[]; weights: number[] }[] = []
  for (let r = 0; r < count; r += 1) {
    let row: { nodes: number[]; weights: number[] }
    if (made.length > 3 && next() < 0.25) {
      const sum = new Map<number, number>()
      for (let k = 0; k < 3; k += 1) {
        const from = made[Math.floor(next() * made.length)]!
        const by = 2 * next() - 1
        from.nodes.forEach((n, i) => sum.set(n, (sum.get(n) ?? 0) + by * from.weights[i]!))
      }
      row = { nodes: [...sum.keys()], weights: [...sum.values()] }
    } else {
      const size = 1 + Math.floor(next() * 4)
      const chosen = new Set<number>()
      while (chosen.size < size) chosen.add(Math.floor(next() * nodes))
      row = { nodes: [...chosen], weights: [...chosen].map((_, i) => (i === 0 ? 1 : 2 * next() - 1)) }
    }
    made.push(row)
    list.emit(r)(row.nodes, row.weights, row.nodes.reduce((sum, n, i) => sum + row.weights[i]! * truth[n]!, 0))
  }
  return list.rows()
}

describe('the affine set against ml-matrix', () => {
  for (let seed = 1; seed <= 60; seed += 1) {
    test(`random consistent rows, seed ${seed}`, () => {
      const next = random(1000 + seed)
      const nodes = 5 + Math.floor(next() * 30)
      const truth = Float64Array.from({ length: nodes }, () => 2 * next() - 1)
      const rows = randomRows(seed, nodes, Math.floor(next() * 1.5 * nodes), truth)
      const names = Array.from(rows.value, (_, i) => `row ${i}`)
      const { elimination, clashes } = eliminate(rows, nodes, names)
      expect(clashes).toEqual([])
      const R = denseRows(rows, nodes)
      // Dimension: nodes less the rank of the rows, by singular values.
      expect(elimination.free.length).toBe(nodes - (rows.value.length === 0 ? 0 : rankOf(R)))
      // Every h = particular + T y meets every row, and T has full rank: it is the identity on the free nodes.
      const T = dense(elimination)
      if (elimination.free.length > 0) expect(R.mmul(T).to2DArray().flat().every((v) => Math.abs(v) < 1e-8 * Math.max(1, T.max(), -T.min()))).toBe(true)
      elimination.free.forEach((n, u) => elimination.free.forEach((_, v) => expect(T.get(n, v)).toBe(u === v ? 1 : 0)))
      const y = Matrix.columnVector(elimination.free.length > 0 ? Array.from(elimination.free, (n) => truth[n]!) : [0])
      const h = T.mmul(y)
      for (let n = 0; n < nodes; n += 1) expect(h.get(n, 0) + elimination.particular[n]!).toBeCloseTo(truth[n]!, 7)
    })
  }
})

describe('contradictions', () => {
  const rows = (...list: [condition: number, nodes: number[], weights: number[], value: number][]): Rows => {
    const made = rowList()
    for (const [condition, nodes, weights, value] of list) made.emit(condition)(nodes, weights, value)
    return made.rows()
  }
  const names = ['a', 'b', 'c', 'd']

  test('two held heights at one node', () => {
    const { clashes, elimination } = eliminate(rows([0, [2], [1], 0.25], [1, [2], [1], 0.5], [1, [1], [1], 0.5]), 4, names)
    expect(clashes).toEqual([{ conditions: ['a', 'b'], misfit: 0.25 }])
    expect(Array.from(elimination.particular)).toEqual([0, 0.5, 0.25, 0])
    expect(Array.from(elimination.free)).toEqual([0, 3])
  })

  test('names only what contradicts: an equal pair between two levels, beside a condition elsewhere', () => {
    const { clashes } = eliminate(
      rows([3, [5], [1], 0.1], [3, [5, 6], [1, -1], 0], [0, [0], [1], 0], [2, [0, 1], [1, -1], 0], [2, [1, 2], [1, -1], 0], [1, [2], [1], 0.3]), 7, names)
    expect(clashes).toHaveLength(1)
    expect(clashes[0]!.conditions).toEqual(['a', 'b', 'c'])
    expect(clashes[0]!.misfit).toBeCloseTo(0.3, 12)
  })

  test('a row that cancels out of the combination is not named', () => {
    // Rows 0 (condition a) and 1 (b) put h0 = h1 = h2; condition c says h1 - h2 = 0.2, which b alone denies.
    const { clashes } = eliminate(rows([0, [0, 1], [1, -1], 0], [1, [1, 2], [1, -1], 0], [2, [1, 2], [1, -1], 0.2]), 3, names)
    expect(clashes).toHaveLength(1)
    expect(clashes[0]!.conditions).toEqual(['b', 'c'])
    expect(clashes[0]!.misfit).toBeCloseTo(0.2, 12)
  })

  test('repeats within 1e-9 of the span agree, beyond it they clash', () => {
    expect(eliminate(rows([0, [0], [1], 0], [1, [0], [1], 0.9e-9]), 1, names).clashes).toEqual([])
    expect(eliminate(rows([0, [0], [1], 0], [1, [0], [1], 1.1e-9]), 1, names).clashes).toHaveLength(1)
  })
})
