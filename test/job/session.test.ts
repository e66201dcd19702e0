/**
 * A session keeps factors and what answers are linear in between edits: whatever was asked before, an answer is the one that a
 * new session gives: in all that is written and decided to the last digit, in heights before rounding to 1e-10 (both are looked
 * for within 1e-11 of the nearest roof, as two-norms, and are sums of a few such).
 */
import { expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { sentence, type Result } from '../../src/base/result.ts'
import { Session } from '../../src/job/session.ts'
import { emptyBrief, type Brief } from '../../src/plan/project/brief.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { heldForce, heldNode, heldPlane } from '../../src/plan/project/edits.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import type { Answer } from '../../src/roof/answer/answer.ts'
import { grid } from '../make/plans.ts'
import { level } from '../make/raise.ts'

const value = <T>(made: Result<T>): T => {
  if (!made.ok) throw new Error(sentence(made.problem))
  return made.value
}

/** The answer without heights that are not rounded yet and without figures that are rounding themselves. */
function decided({ roof, summary, ...rest }: Answer): object {
  const written = roof === null ? null : { z: roof.written, x: roof.writtenX, y: roof.writtenY, corner: roof.corner_mm, flatness: roof.flatness_mm, isNear: roof.isNear }
  const stress = { ...summary.stress, residual: 0 }
  const binding = summary.held.binding?.map(({ rise_mm, move_mm, ...which }) => ({ ...which, rise: nanometres(rise_mm), move: nanometres(move_mm) }))
  const said = { ...summary, stress, held: { ...summary.held, binding } }
  if (summary.roof === null) return { rest, written, summary: said }
  const figures = { ...summary.roof, closingError: 0, exactFlatnessMax_mm: 0, heightError: 0 }
  return { rest, written, summary: { ...said, roof: figures } }
}

const nanometres = (mm: number): number => Math.round(1e6 * mm) + 0
const apart = (a: Float64Array, b: Float64Array): number => Math.max(...a.map((value, i) => Math.abs(value - b[i]!)))
const largest = (a: Float64Array): number => Math.max(...a.map(Math.abs))

test.each([1, 2, 3])('drags, switches and clashes in any order, seed %i', async (seed) => {
  const next = random(seed)
  const on = grid(7, 5, { loose: 0.1, seed })
  const read = { plan: on, heights: null, marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] }, repairs: [], questions: [], leftOut: [], notices: [] }
  const kept = new Session(read, 'it')
  const pick = (n: number): number => Math.floor(next() * n)
  let conditions: readonly Condition[] = []
  let reused = 0
  let space: unknown = null
  for (let edit = 0; edit < 25; edit += 1) {
    // Mostly the value of what is held already, as a drag asks; now and then another condition, or all of them gone.
    const make = [
      () => heldNode(3, next()), () => heldForce(20, next() - 0.5), () => heldPlane(9, 20 * next(), 360 * next()), () => heldForce(31, next() < 0.5 ? 'ridge' : 'valley'),
      () => level('two', { nodes: ['N1', 'N40'] }, next()), () => heldNode(pick(on.nodeCount), next()),
    ]
    const made = make[next() < 0.6 ? pick(2) : pick(make.length)]!()
    conditions = next() < 0.06 ? [] : [...conditions.filter(({ name }) => name !== made.name), made].slice(-4).sort((a, b) => (a.name < b.name ? -1 : 1))
    const brief: Brief = { ...emptyBrief, rise: 1, conditions }
    const here = value(await kept.answer(brief, noOptions, null))
    // What is rehearsed in between changes nothing.
    if (edit % 5 === 0) await kept.rehearse(2)
    const fresh = value(await new Session(read, 'it').answer(brief, noOptions, null))
    const exact = decided(here.answer)
    expect(exact).toEqual(decided(fresh.answer))
    const [some, same] = [here.answer.roof, fresh.answer.roof]
    expect(some === null).toBe(same === null)
    if (some !== null && same !== null) {
      expect(apart(some.heights, same.heights)).toBeLessThan(1e-10 * largest(same.heights))
      // Slopes are heights over a panel's side, a seventh of the span here.
      expect(apart(some.gradient, same.gradient)).toBeLessThan(1e-9 * largest(same.gradient))
      expect(apart(some.stress, same.stress)).toBeLessThan(1e-9 * largest(same.stress))
    }
    if (conditions.length > 0 && here.under.space.factor === space) reused += 1
    space = here.under.space.factor
  }
  expect(reused).toBeGreaterThan(3)
})
