/** Lists of force densities: what stands for edges, later rows over earlier ones, and what they do to a balanced plan. */
import { expect, test } from 'vitest'
import { densitiesFromCsv } from '../../src/formats/densities-csv.ts'
import { balancePlan } from '../../src/job/run.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import { objText } from '../make/ask.ts'

test('joints, ranges, edges by their nodes, voids and all', () => {
  const made = densitiesFromCsv('joint;density\nall;1\nvoids;2,5\nJ3-J9;3\nN4-N5;-1\nj2;4\n', 'd.csv')
  expect(made.ok && made.value.map(({ of, density }) => [of, density])).toEqual([
    ['all', 1], ['voids', 2.5], [{ joints: [2, 8] }, 3], [{ nodes: [3, 4] }, -1], [{ joints: [1, 1] }, 4],
  ])
  for (const text of ['J0,1', 'all,0', 'void edges,2', 'N4-J5,2', 'J9-J3,1']) expect(densitiesFromCsv(text, 'd.csv').ok).toBe(false)
})

/** A square ring round a square void, its inner corners off the middle; spokes J1 to J4. */
async function ring(densities: string) {
  const points = [[0, 0], [9, 0], [9, 9], [0, 9], [3, 3], [7, 3], [6, 6], [3, 6]] as const
  const text = objText(points, [[0, 1, 5, 4], [1, 2, 6, 5], [2, 3, 7, 6], [3, 0, 4, 7]])
  return balancePlan(
    { command: 'balance', source: { name: 'ring.obj', bytes: new TextEncoder().encode(text) }, options: { ...noOptions, unit: 'm', voids: [[5, 5]] }, brief: null, levels: null, given: {} },
    { name: 'd.csv', bytes: new TextEncoder().encode(densities) },
  )
}

test('the rim of a void bears what is typed: its corners stand at 9 v / (s + 2 v) (exact: balance of a corner by symmetry)', async () => {
  // Inner square from a to 9 - a: spoke s a in x against the void's edge v (9 - 2 a), so a = 9 v / (s + 2 v).
  for (const [s, v] of [[1, 1], [1, 0.25], [2, 3]] as const) {
    const made = await ring(`all,${s}\nvoids,${v}\n`)
    if (!made.ok) throw new Error(made.problem.message)
    const { plan } = made.value.after.answer
    const inner = [...plan.x].filter((x) => x > 1e-9 && x < 9 - 1e-9).sort((a, b) => a - b)
    expect(inner).toHaveLength(4)
    expect(inner[0]).toBeCloseTo((9 * v) / (s + 2 * v), 9)
  }
  const outer = await ring('N1-N2,3\n')
  expect(!outer.ok && outer.problem.code).toBe('no-such-edge')
})
