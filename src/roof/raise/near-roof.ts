/**
 * The near roof, where no exact one exists: minimise sum m (z - t)^2 + mu z^T Q z under the conditions with t'.z = t'.t,
 * the product weighted by the node areas m as well (t' = the wish less its tilt, so no tilt helps: this holds the rise); of mu = 1, 10, .. 1e8 the least that brings every panel within the
 * tolerance, else 1e8. Pattern and ordering are those of the exact question, so each mu costs one factor.
 */
import { dot } from '../../base/dot.ts'
import { factor, refactor, type Factor } from '../../base/sparse/factor.ts'
import { solve } from '../../base/sparse/solve.ts'
import type { Steps } from '../../base/steps.ts'
import { expand, reduce, weightedForm, type LiftSpace } from '../stress/lift-space.ts'
import { applyForm } from '../stress/panel-bases.ts'
import { lessTilt } from '../stress/tilt-part.ts'

export interface NearRoof {
  readonly heights: Float64Array
  readonly mu: number
  /** Whether `within` accepted it. */
  readonly within: boolean
}

const greatestPower = 8

/** `within` says whether every panel of these heights is flat enough; flatness improves with mu, so the powers are bisected. */
export function* nearRoof(space: LiftSpace, wish: Float64Array, areas: Float64Array, within: (heights: Float64Array) => boolean): Steps<NearRoof> {
  const { plan, elimination, form, analysis } = space
  // M t': orthogonal to every tilt, as t' is in the areas' own product.
  const shape = lessTilt(plan, wish, areas).map((height, i) => areas[i] * height)
  let factored: Factor | null = null
  function* at(power: number): Steps<Float64Array> {
    const mu = 10 ** power
    const values = weightedForm(plan, elimination, form, areas, 1, mu)
    if (factored === null) factored = yield* factor(analysis, values)
    else yield* refactor(factored, values)
    return heldRise(space, factored, wish, shape, areas, mu)
  }
  const best = yield* at(greatestPower)
  if (!within(best)) return { heights: best, mu: 10 ** greatestPower, within: false }
  let found = best
  let low = -1, high = greatestPower
  while (high - low > 1) {
    const middle = (low + high) >> 1
    yield { stage: 'Coming nearest', done: 1 - (high - low) / (greatestPower + 1) }
    const heights = yield* at(middle)
    if (within(heights)) {
      high = middle
      found = heights
    } else low = middle
  }
  return { heights: found, mu: 10 ** high, within: true }
}

/** Minimiser of the sum for one mu: z0 without the rise condition, plus the multiple of its answer to M t' that meets it. */
function heldRise(space: LiftSpace, factored: Factor, wish: Float64Array, shape: Float64Array, areas: Float64Array, mu: number): Float64Array {
  const { elimination, plan, bases } = space
  const h0 = elimination.particular
  const formed = applyForm(plan, bases, h0)
  const right = reduce(elimination, wish.map((t, i) => areas[i] * (t - h0[i]) - mu * formed[i]))
  const free = expand(elimination, solve(factored, right)).map((value, i) => value + h0[i])
  const answer = expand(elimination, solve(factored, reduce(elimination, shape)))
  const gain = dot(shape, answer)
  const missing = dot(shape, wish) - dot(shape, free)
  // Under conditions that hold everything the answer vanishes: the rise is then theirs to say.
  if (!(gain > 1e-9 * dot(shape, shape) * smallestAnswer(mu))) return free
  const share = missing / gain
  return free.map((value, i) => value + share * answer[i])
}

/** An answer smaller than this is rounding: with mu Q over M the free heights answer by about 1 / (1 + mu lambda). */
const smallestAnswer = (mu: number): number => 1 / (1 + mu)

