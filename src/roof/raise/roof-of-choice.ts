/**
 * One roof out of many: the nearest to the wish under the conditions, brought to the asked rise by scale where the
 * conditions leave the scale free, else by the amplitude of the wish. Working heights: (z - datum) / span.
 */
import { epsilon, keptShare } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import type { LiftSpace } from '../stress/lift-space.ts'
import { smoothestLifts } from '../stress/smoothest-lifts.ts'
import { sizeLessTilt } from '../stress/tilt-part.ts'
import { nearestLift } from './nearest.ts'
import type { OneSided } from './one-sided.ts'
import { riseOf, springing, type RiseRule } from './rise.ts'
import type { Metric } from './soft.ts'

/** What the user wants the roof to be like. */
export interface Wish {
  /** Heights to come near to (length nodeCount). */
  readonly heights: Float64Array
  /** The level that these heights stand at: amplitudes grow from there. */
  readonly level: number
  /** The rise to reach; null leaves the nearest roof as it is (a target without a rise). */
  readonly rise: number | null
  readonly rule: RiseRule
  /** Move the roof so that its springing lies on the datum, where the conditions leave that open. */
  readonly settle: boolean
}

export interface Choice {
  readonly heights: Float64Array
  /** A sentence for the user where the wish could not be followed, else null. */
  readonly notice: string | null
  /** 2-norm, area-weighted, of the roof less its tilt over that of the wish less its tilt. */
  readonly kept: number
}

export interface Ground {
  readonly space: LiftSpace
  /** Dimensions of the space that fold nothing. */
  readonly tilts: number
  readonly areas: Float64Array
  /** Node areas and soft conditions: what the nearest roof is nearest in. */
  readonly metric: Metric
  /** Conditions that bound one side, which some roof is known to keep; null: there are none. */
  readonly sides: OneSided | null
  readonly rim: Int32Array
  /** The conditions, soft ones too, stay as they are met when all heights are scaled about the datum. */
  readonly scaleFree: boolean
  /** The conditions stay met when all heights are moved up or down together. */
  readonly shiftFree: boolean
}

/** `start` is a roof that meets the conditions (see `under-conditions.ts`). */
export function* roofOfChoice(ground: Ground, start: Float64Array, wish: Wish): Steps<Choice> {
  const { space, metric, rim } = ground
  if (wish.rise === null) {
    const nearest = yield* nearestLift(space, start, metric, wish.heights, false)
    const heights = settled(ground, yield* onSides(ground, nearest), wish)
    return { heights, notice: null, kept: keptOf(ground, heights, wish.heights) }
  }
  if (ground.scaleFree) {
    const nearest = yield* nearestLift(space, start, metric, wish.heights, false)
    yield { stage: 'Raising', done: 0.5 }
    const kept = keptOf(ground, nearest, wish.heights)
    const chosen = kept >= keptShare ? nearest : smoothest(ground, wish)
    // Settled first: a rise from a stated datum changes when the roof is moved.
    const shape = chosen === null ? null : settled(ground, chosen, wish)
    const rise = shape === null ? 0 : riseOf(shape, rim, wish.rule)
    if (shape === null || rise === 0) return { heights: settled(ground, nearest, wish), notice: null, kept }
    const scale = wish.rise / rise
    return { heights: along(new Float64Array(shape.length), shape, scale), notice: kept >= keptShare ? null : smoothestSaid, kept }
  }
  return yield* byAmplitude(ground, start, wish, wish.rise)
}

const smoothestSaid = 'no roof under these conditions comes near the starting shape, so the smoothest one was taken'

/** Roofs h(a) = h0 + a h1, h0 nearest to flat at the wish's level, h1 the answer to the wish: the a whose rise is the asked one. */
function* byAmplitude(ground: Ground, start: Float64Array, wish: Wish, asked: number): Steps<Choice> {
  const { space, metric, rim } = ground
  const zero = new Float64Array(start.length)
  const rest = yield* nearestLift(space, start, metric, new Float64Array(start.length).fill(wish.level), false)
  let direction = yield* nearestLift(space, zero, metric, moved(wish.heights, -wish.level), true)
  const kept = keptOf(ground, direction, wish.heights)
  let notice: string | null = null
  if (space.dimension > 0 && kept < keptShare) {
    const way = smoothest(ground, wish)
    if (way !== null) {
      direction = way
      notice = smoothestSaid
    }
  }
  function* at(a: number): Steps<Float64Array> {
    return settled(ground, yield* onSides(ground, along(rest, direction, a)), wish)
  }
  function* riseAt(a: number): Steps<number> {
    return riseOf(yield* at(a), rim, wish.rule)
  }
  const scale = riseOf(direction, rim, { ...wish.rule, datum: null }) + spread(direction)
  if (!(scale > 1e-12 * (spread(rest) + asked))) return { heights: yield* at(0), notice, kept }
  const unit = asked / scale
  const a = yield* amplitudeFor(riseAt, asked, unit, ground.sides !== null)
  return { heights: yield* at(a), notice, kept }
}

/** The nearest roof that keeps the one-sided conditions too. */
function* onSides({ sides }: Ground, heights: Float64Array): Steps<Float64Array> {
  return sides === null ? heights : (yield* sides.held(heights)).heights
}

/** Share of a bracket that golden sections keep. */
const golden = (Math.sqrt(5) - 1) / 2

/**
 * The a of the highest rise between `low` and `high`. Under an upper bound the rise need not level out: a wish that lies far
 * above the bound all over has the level roof at the bound for its nearest, so that the rise falls again.
 */
function* highest(riseAt: (a: number) => Steps<number>, low: number, high: number): Steps<number> {
  let left = high - golden * (high - low), right = low + golden * (high - low)
  let atLeft = yield* riseAt(left), atRight = yield* riseAt(right)
  while (high - low > 1e-6 * high) {
    if (atLeft >= atRight) {
      high = right
      right = left
      atRight = atLeft
      left = high - golden * (high - low)
      atLeft = yield* riseAt(left)
    } else {
      low = left
      left = right
      atLeft = atRight
      right = low + golden * (high - low)
      atRight = yield* riseAt(right)
    }
  }
  return atLeft >= atRight ? left : right
}

/**
 * Smallest a >= 0 with rise(a) = asked for a convex rise; where the rise is above the asked one all the way, the a of the
 * least rise; where it never gets there (the peak is held, by conditions that bound one side too), `unit`.
 */
function* amplitudeFor(riseAt: (a: number) => Steps<number>, asked: number, unit: number, isBounded: boolean): Steps<number> {
  let low = 0
  let high = unit
  let goal = asked
  if ((yield* riseAt(0)) > asked) {
    // Above already: walk down the convex valley on the side where it falls.
    let left = -64 * unit, right = 64 * unit
    for (let k = 0; k < 100; k += 1) {
      const a = left + (right - left) / 3, b = right - (right - left) / 3
      if ((yield* riseAt(a)) < (yield* riseAt(b))) right = b
      else left = a
    }
    const bottom = (left + right) / 2
    if ((yield* riseAt(bottom)) >= asked) return bottom
    low = bottom
    high = 0
  } else {
    // Within bounds the rise may come to an end: once doubling the wish four times brings nothing, that end is gone for.
    let doublings = 0, idle = 0, last = -Infinity, best = unit
    for (;;) {
      const rise = yield* riseAt(high)
      if (rise >= asked) break
      idle = isBounded && rise <= last + 1e-9 * asked ? idle + 1 : 0
      if (rise > last) best = high
      last = Math.max(last, rise)
      if (doublings === 60) return unit
      if (idle === 4) {
        high = yield* highest(riseAt, best / 2, best * 2)
        goal = Math.min(asked, (yield* riseAt(high)) * (1 - 1e-9))
        break
      }
      high *= 2
      doublings += 1
    }
  }
  // Regula falsi, with the end that stays halved (the Illinois rule: Dowell, Jarratt, BIT 11, 1971): the rise is made of
  // straight pieces, so a few steps find the one that crosses the goal and one more ends on it; halving took fifty.
  let below = (yield* riseAt(low)) - goal, above = (yield* riseAt(high)) - goal
  let stayed = 0
  for (let k = 0; k < 100; k += 1) {
    const middle = (low + high) / 2
    if (middle === low || middle === high) break
    const crossing = low - (below * (high - low)) / (above - below)
    // Within bounds the rise levels out, where secants creep: there halving serves.
    const a = !isBounded && (crossing - low) * (crossing - high) < 0 ? crossing : middle
    const off = (yield* riseAt(a)) - goal
    if (!isBounded && Math.abs(off) <= 4 * epsilon * asked) return a
    if (off < 0) {
      low = a
      below = off
      if (stayed === 1) above /= 2
      stayed = 1
    } else {
      high = a
      above = off
      if (stayed === -1) below /= 2
      stayed = -1
    }
  }
  return (low + high) / 2
}

function spread(values: Float64Array): number {
  let low = Infinity, high = -Infinity
  for (const value of values) {
    low = Math.min(low, value)
    high = Math.max(high, value)
  }
  return high - low
}

/** The smoothest lift, turned the way the wish goes; null when nothing folds. */
function smoothest(ground: Ground, wish: Wish): Float64Array | null {
  const way = smoothestLifts(ground.space, ground.tilts, ground.areas, 1)[0]
  if (way === undefined) return null
  const sign = wish.rule.down ? -1 : 1
  return way.map((height) => sign * height)
}

/** Moved so that the springing lies on the datum, where that is wished and the conditions allow it. */
function settled(ground: Ground, heights: Float64Array, wish: Wish): Float64Array {
  if (!ground.shiftFree || !wish.settle) return heights
  const level = springing(heights, ground.rim, { ...wish.rule, datum: null })
  return level === 0 ? heights : moved(heights, -level)
}

function keptOf(ground: Ground, heights: Float64Array, wish: Float64Array): number {
  const { plan } = ground.space
  const wished = sizeLessTilt(plan, wish, ground.areas)
  return wished > 0 ? sizeLessTilt(plan, heights, ground.areas) / wished : 0
}

/** from + by * what. */
function along(from: Float64Array, what: Float64Array, by: number): Float64Array {
  const out = new Float64Array(from.length)
  for (let i = 0; i < out.length; i += 1) out[i] = from[i] + by * what[i]
  return out
}

function moved(heights: Float64Array, by: number): Float64Array {
  const out = heights.slice()
  for (let i = 0; i < out.length; i += 1) out[i] += by
  return out
}
