/** A cure that changes the plan, put into the project, saved and opened again: the answer is the one that was promised. */
import { expect, test } from 'vitest'
import { Session } from '../../src/job/session.ts'
import { withChangedPlan } from '../../src/plan/project/changed-plan.ts'
import { projectOf } from '../../src/plan/project/project-record.ts'
import { projectText } from '../../src/plan/project/project-text.ts'
import { readProject } from '../../src/plan/project/read-project.ts'
import type { ReadPlan } from '../../src/plan/read-plan.ts'
import { emptyBrief, type Brief } from '../../src/plan/project/brief.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import { grid, plan } from '../make/plans.ts'

const readOf = (made: ReadPlan['plan']): ReadPlan => ({
  plan: made, heights: null, marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] }, repairs: [], questions: [], leftOut: [], notices: [],
})

/** Bays with a level rim need diagonals; a frustum whose spokes miss one another needs its nodes moved (Maxwell 1864). */
const level: Brief = { ...emptyBrief, conditions: [{ name: 'eaves', soft: null, kind: 'level', at: { rim: 'outer' }, level: 0 }] }
const frustum = plan([[0, 0], [12, 0], [0, 12], [2, 2], [10, 1], [2.5, 8]], [[0, 1, 4, 3], [1, 2, 5, 4], [2, 0, 3, 5], [3, 4, 5]])

test.each([['add-diagonals', grid(6, 4, { bay: 1.5 }), level], ['move-nodes', frustum, emptyBrief]] as const)('%s', async (code, drawn, brief) => {
  const session = new Session(readOf(drawn), 'hall')
  await session.answer(brief, noOptions, null)
  const cures = await session.cures()
  const cure = cures.ok ? cures.value.cures.find((each) => each.code === code)! : null
  const applied = session.applied(cure!)
  if (!applied.ok) throw new Error(applied.problem.message)
  const project = projectOf(readOf(drawn), { name: 'hall.obj', sha256: null, brief, target: null, leastSlope: null })
  const made = withChangedPlan({ ...project, brief: applied.value.brief, target: applied.value.target }, applied.value.read, 'Done.')
  if (!made.ok) throw new Error(made.problem.message)
  const again = readProject(projectText(made.value), 'hall.panewise.json')
  if (!again.ok) throw new Error(again.problem.message)
  for (const { read, brief: asked, target } of [made.value, again.value]) {
    // Names are by order, so the order must be the cured plan's own.
    expect([...read.plan.corner]).toEqual([...applied.value.read.plan.corner])
    expect([...read.plan.origin]).toEqual([...applied.value.read.plan.origin])
    expect([...read.plan.x]).toEqual([...applied.value.read.plan.x])
    expect(read.notices).toEqual(['Done.'])
    const answer = await new Session(read, 'hall').answer(asked, noOptions, target)
    if (!answer.ok) throw new Error(answer.problem.message)
    const { verdict, stress, held, roof } = answer.value.answer.summary
    expect([verdict, stress.freedomLeft, held.frozenJoints, roof?.rise]).toEqual([cure!.verdict, cure!.freedomLeft, cure!.frozenJoints, expect.closeTo(cure!.rise!, 9)])
  }
})
