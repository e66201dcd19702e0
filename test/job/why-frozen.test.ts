/** Why joints cannot fold, in words; and a form force asked of one. */
import { describe, expect, test } from 'vitest'
import type { Checked } from '../../src/job/check.ts'
import { whyFrozen as reasonOf } from '../../src/job/why-frozen.ts'
import { heldForce } from '../../src/plan/project/edits.ts'
import { ask, objText } from '../make/ask.ts'
import { grid } from '../make/plans.ts'
import type { Plan } from '../../src/plan/plan.ts'

const whyFrozen = ({ answer, free, under, rows }: Checked, joint: number) => reasonOf(answer.plan, free, under, rows, joint)

const bond = objText(
  [[0, 0], [3, 0], [6, 0], [0, 1], [2, 1], [3, 1], [4, 1], [6, 1], [0, 2], [2, 2], [4, 2], [6, 2]],
  [[0, 1, 5, 4, 3], [1, 2, 7, 6, 5], [3, 4, 9, 8], [4, 5, 6, 10, 9], [6, 7, 11, 10]],
)
const tower = objText(
  [[0, 0], [4, 0], [4, 1], [2, 1], [0, 1], [2, 2], [0, 2], [4, 2], [2, 3], [0, 3], [4, 3]],
  [[0, 1, 2, 3, 4], [4, 3, 5, 6], [3, 2, 7, 5], [6, 5, 8, 9], [5, 7, 10, 8]],
)
const textOf = (on: Plan): string => objText(
  Array.from(on.x, (x, n) => [x, on.y[n]!] as const), Array.from({ length: on.panelCount }, (_, p) => [...on.corner.subarray(on.panelStart[p], on.panelStart[p + 1])]))

/** The joint whose middle is there. */
function jointAt({ answer: { plan: on } }: Checked, x: number, y: number): number {
  return Array.from({ length: on.jointCount }, (_, j) => j).find((j) => {
    const [a, b] = [on.origin[2 * j]!, on.origin[2 * j + 1]!]
    return (on.x[a]! + on.x[b]!) / 2 === x && (on.y[a]! + on.y[b]!) / 2 === y
  })!
}

describe('the plan itself', () => {
  test('the stem of a T-junction, and a joint that can fold', async () => {
    const made = await ask({ text: bond })
    const stem = jointAt(made, 2, 1.5)
    expect(whyFrozen(made, stem)).toMatchObject({ by: 'plan', rule: 'stem', conditions: [] })
    expect(whyFrozen(made, stem)!.words).toMatch(new RegExp(`^J${stem + 1} cannot fold: it is the stem of a T-junction at N\\d+, over J\\d+ and J\\d+ in line$`))
    expect(whyFrozen(made, jointAt(made, 3.5, 1))).toBeNull()
  })
  test('a stem over a stem', async () => {
    const made = await ask({ text: tower })
    const [lower, upper] = [jointAt(made, 2, 1.5), jointAt(made, 2, 2.5)]
    expect(whyFrozen(made, upper)!.words).toMatch(new RegExp(`^J${upper + 1} cannot fold: at N\\d+ it is the stem over J\\d+ and J\\d+ in line, since J${lower + 1} cannot fold either$`))
  })
  test('panels that share a corner beside the joint', async () => {
    const made = await ask({ text: objText([[0, 0], [4, 0], [4, 3], [2, 3], [0, 3], [2, 2], [1, 1], [3, 1]], [[0, 6, 5, 3, 4], [0, 1, 2, 3, 5, 7, 6]]) })
    const joint = jointAt(made, 2, 2.5)
    expect(whyFrozen(made, joint)).toMatchObject({ rule: 'shared-corner', panels: [0, 1] })
    expect(whyFrozen(made, joint)!.words).toMatch(/^J\d cannot fold: P1 and P2 also meet at N\d, beside it$/)
  })
  test('no short reason: the flat group', async () => {
    // Three triangles round a triangle, its corners joined to a far triangle without balance: a skewed octahedron's net.
    const made = await ask({ text: objText([[0, 0], [10, 0], [3, 9], [4, 2], [6, 4], [3.2, 4.5]], [[3, 4, 5], [0, 1, 4, 3], [1, 2, 5, 4], [2, 0, 3, 5]]) })
    expect(made.answer.summary.stress.freedom).toBe(0)
    expect(whyFrozen(made, 0)).toMatchObject({ by: 'plan', rule: 'group', panels: [0, 1, 2, 3] })
    expect(whyFrozen(made, 0)!.words).toBe('J1 cannot fold: all 4 panels stay in one plane in every roof on this plan')
  })
})

describe('the conditions', () => {
  const quads = textOf(grid(4, 3))
  const rim = { name: 'rim', kind: 'level', at: { rim: 'outer' } }
  test('a level rim over quads', async () => {
    const made = await ask({ text: quads, brief: { conditions: [rim] } })
    const joint = jointAt(made, 2, 1.5)
    expect(whyFrozen(made, joint)).toMatchObject({ by: 'conditions', rule: 'held', conditions: ['rim'] })
    expect(whyFrozen(made, joint)!.words).toMatch(/^J\d+ cannot fold: "rim" holds P\d+ and P\d+ in one plane$/)
    expect(whyFrozen(await ask({ text: quads }), joint)).toBeNull()
  })
  test('flush over its own joint, and over the row that must follow', async () => {
    const free = await ask({ text: quads })
    const joint = jointAt(free, 2, 0.5)
    const made = await ask({ text: quads, brief: { conditions: [{ name: 'flat', kind: 'flush', at: { joints: [`J${joint + 1}`] } }] } })
    expect(whyFrozen(made, joint)).toMatchObject({ rule: 'held', conditions: ['flat'] })
    // f(x) + g(y): a line that does not fold at one bay folds at none. Exact: by hand.
    const follower = jointAt(made, 2, 2.5)
    expect(whyFrozen(made, follower)).toMatchObject({ by: 'conditions', rule: 'group' })
    expect(whyFrozen(made, follower)!.words).toMatch(/^J\d+ cannot fold: P\d+ and P\d+ stay in one plane under "flat"$/)
  })
  test('a form force asked of a frozen joint: the reason is the joint\'s', async () => {
    const free = await ask({ text: quads })
    const joint = jointAt(free, 2, 1.5)
    for (const force of [-0.1, 'ridge'] as const) {
      const { name, at, kind } = heldForce(joint, force)
      const made = await ask({ text: quads, brief: { conditions: [rim, { name, kind, at, force }] } })
      expect(made.answer.summary).toMatchObject({ verdict: 'does not lift', reasonKind: 'clash' })
      expect(made.answer.summary.reason).toMatch(new RegExp(`^"force of J${joint + 1}" cannot be met, since J${joint + 1} cannot fold: "rim" holds P\\d+ and P\\d+ in one plane$`))
      expect(made.answer.summary.held.clashes[0]!.conditions).toEqual(['rim', name])
    }
    const stem = jointAt(await ask({ text: bond }), 2, 1.5)
    const { name, at, kind } = heldForce(stem, 0.2)
    const made = await ask({ text: bond, brief: { conditions: [{ name, kind, at, force: 0.2 }] } })
    expect(made.answer.summary.reason).toMatch(/^"force of J\d+" cannot be met, since J\d+ cannot fold: it is the stem of a T-junction at N\d+/)
  })
  test('where they clash only what the plan freezes is frozen', async () => {
    const made = await ask({ text: quads, brief: { conditions: [rim, { name: 'up', kind: 'level', at: { nodes: ['N1'] }, level: 1 }] } })
    for (let joint = 0; joint < made.answer.plan.jointCount; joint += 1) expect(whyFrozen(made, joint)).toBeNull()
  })
})
