/** Built clashes: the set that is named clashes, and with any one of it let go the others do not. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../../../src/base/steps.ts'
import type { Plan } from '../../../../src/plan/plan.ts'
import type { Condition } from '../../../../src/plan/project/condition.ts'
import { conditionRows } from '../../../../src/roof/conditions/condition-rows.ts'
import { conditionsThatFlatten } from '../../../../src/roof/cures/clash/smallest-clash.ts'
import { nodeAreas } from '../../../../src/roof/raise/nearest.ts'
import { raised } from '../../../../src/roof/raise/raise.ts'
import { freeRim } from '../../../../src/roof/stress/free-rim.ts'
import { grid, plan as planOf } from '../../../make/plans.ts'

const at = (name: string, node: string, level: number): Condition => ({ name, soft: null, kind: 'level', at: { nodes: [node] }, level })

function asked(plan: Plan, conditions: readonly Condition[]) {
  const rows = conditionRows(plan, conditions, 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const free = finish(freeRim(plan))
  const names = conditions.map(({ name }) => name)
  const areas = nodeAreas(plan)
  const found = finish(raised(plan, free, areas, {
    rows: rows.value, names, shape: 'dome', target: null, rise: null, rule: { down: false, datum: null }, pitched: false, within: () => false,
  }))
  return { found, flatten: () => finish(conditionsThatFlatten(plan, free, rows.value, names, areas)) }
}

/** The set clashes, and none of its members can be spared. */
function expectIrreducible(plan: Plan, conditions: readonly Condition[], names: readonly string[]): void {
  const set = conditions.filter(({ name }) => names.includes(name))
  expect(asked(plan, set).found.clashes.length).toBeGreaterThan(0)
  for (const one of set) expect(asked(plan, set.filter((each) => each !== one)).found.clashes).toEqual([])
}

describe('four levels on one flat panel, and others that have no part in it', () => {
  const plan = grid(3, 1)
  // P1 has the corners N1 (0,0), N2 (1,0), N3 (1,1), N4 (0,1); any three levels are a plane, the fourth is 100 mm off it.
  const four = [at('post A', 'N1', 0), at('post B', 'N2', 0), at('post C', 'N3', 0), at('post D', 'N4', 0.1)]
  const others = [at('wall', 'N7', 1), at('gutter', 'N8', 2)]
  const { clashes } = asked(plan, [...others, ...four]).found
  test('names the four', () => {
    expect(clashes).toHaveLength(1)
    expect([...clashes[0]!.conditions].sort()).toEqual(['post A', 'post B', 'post C', 'post D'])
  })
  test('none of which can be spared', () => expectIrreducible(plan, [...others, ...four], clashes[0]!.conditions))
  test('the miss is shared out evenly (exact: 100 mm over four corners in alternate signs)', () => {
    expect(clashes[0]!.misfit * plan.frame.span).toBeCloseTo(0.025, 6)
  })
})

describe('three levels along a flat run', () => {
  // Exact: a straight run carries two levels; a third off the line contradicts.
  const plan = grid(3, 1)
  const run: Condition = { name: 'south gutter', soft: null, kind: 'straight', at: { run: [[0, 0], [3, 0]] } }
  const south = (x: number): string => `N${Array.from(plan.x.keys()).find((n) => plan.x[n] === x && plan.y[n] === 0)! + 1}`
  const levels = [0, 1, 2, 3].map((x) => at(`bracket ${x + 1}`, south(x), x === 2 ? 0.3 : 0))
  const { clashes } = asked(plan, [run, ...levels]).found
  test('each set named is irreducible', () => {
    expect(clashes.length).toBeGreaterThan(0)
    for (const { conditions } of clashes) {
      expect(conditions).toContain('south gutter')
      expect(conditions).toContain('bracket 3')
      expect(conditions).toHaveLength(4)
      expectIrreducible(plan, [run, ...levels], conditions)
    }
  })
})

test('two conditions for one height: those two', () => {
  const plan = grid(2, 2)
  const rim: Condition = { name: 'eaves', soft: null, kind: 'level', at: { rim: 'outer' }, level: 3 }
  const { clashes } = asked(plan, [rim, at('corner', 'N1', 3.2), at('middle', 'N5', 4)]).found
  expect(clashes.map(({ conditions }) => [...conditions].sort())).toContainEqual(['corner', 'eaves'])
})

describe('a level rim over quads: no roof folds', () => {
  const plan = grid(4, 3)
  const rim: Condition = { name: 'eaves', soft: null, kind: 'level', at: { rim: 'outer' }, level: 0 }
  test('the rim alone is named, not what else is held', () => {
    const middle = `N${Array.from(plan.x.keys()).find((n) => plan.x[n] === 2 && plan.y[n] === 1)! + 1}`
    expect(asked(plan, [at('post', middle, 0), rim]).flatten()).toEqual({ conditions: [1], finished: true })
  })
  test('by sides: two that meet are enough (exact: they hold f and g of z = f_i + g_j)', () => {
    const side = (name: string, a: readonly [number, number], b: readonly [number, number]): Condition => ({ name, soft: null, kind: 'level', at: { run: [a, b] }, level: 0 })
    const sides = [side('south', [0, 0], [4, 0]), side('east', [4, 0], [4, 3]), side('north', [0, 3], [4, 3]), side('west', [0, 0], [0, 3])]
    const { conditions, finished } = asked(plan, sides).flatten()
    expect(finished).toBe(true)
    expect(conditions).toHaveLength(2)
    expect(asked(plan, conditions.map((k) => sides[k]!)).found.verdict).toBe('does not lift')
    for (const k of conditions) expect(asked(plan, [sides[k]!]).found.verdict).not.toBe('does not lift')
  })
})

test('a plan that folds nothing by itself is blamed on no condition', () => {
  // Four 2 x 1 rectangles in a pinwheel round a square: dim 3, so no fold (exact).
  const pinwheel = planOf(
    [[0, 0], [2, 0], [3, 0], [3, 2], [3, 3], [1, 3], [0, 3], [0, 1], [1, 1], [2, 1], [2, 2], [1, 2]],
    [[0, 1, 9, 8, 7], [1, 2, 3, 10, 9], [3, 4, 5, 11, 10], [5, 6, 7, 8, 11], [8, 9, 10, 11]],
  )
  expect(asked(pinwheel, [at('post', 'N1', 0)]).flatten().conditions).toEqual([])
})
