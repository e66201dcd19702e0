/**
 * The walk to the nearest plan that lifts: sequential least-change steps (Gauss-Newton with the conditions linearised at the
 * present state: each step is the least total change from p0, t that meets them), an l1 merit function with halving and a
 * second-order correction (Fletcher 1982), an active set for the bounds on corners, edges and shifts, and at the end a few
 * steps on the conditions alone.
 */
import { dot } from '../../../base/dot.ts'
import type { Steps } from '../../../base/steps.ts'
import type { Plan } from '../../../plan/plan.ts'
import { boundBlock, type Bounds } from './bounds.ts'
import { unflatness } from './flatness.ts'
import type { MobilityFacts } from './mobility.ts'
import { filled, stacked, type RowBlock, type StackedRows, type State } from './rows.ts'
import { applied, leastMove, moveSystem, refactored, type LeastMove, type MoveSystem, type RiseRow } from './system.ts'

/** settled: steps are below what counts; stuck: no step helps; slow: flat or not, it crept on; far: see `farBeyond` of the question. */
export type Ending = 'settled' | 'stuck' | 'slow' | 'far'

/** Relative change of the shifts at which they count as settled; their sum of squares is then right to about its square. */
export const settled = 1e-3

const mostSteps = 60
/** Steps below this share of the shifts change the merit, a sum of squares, by less than its rounding shows. */
const unresolved = 1e-6
/** What creeps is ended: in so many steps the merit has to fall by the first share, or the step by the second. */
const leastGain = 0.02
const leastSettling = 0.3
/** The next step, foretold from the last two, has to be within this share of what counts as settled. */
const surely = 0.5
const patience = 8
/** So many times `farBeyond` is out of reach. */
const outOfReach = 3
const mostHalvings = 12
/** Bounds that a step leaves less than this share of their margin get a row, so that they may join without a new order. */
const usedUp = 0.5
/** Rounds of the active set within one step. */
const mostRounds = 5
/** Decrease that a step has to bring, as a share of the predicted one (Armijo 1966). */
const enough = 1e-4
/** Panels flatter than this (in spans) are flat to rounding. */
const flatEnough = 1e-15

export class Walk {
  state: State
  iterations = 0
  private system: MoveSystem | null = null
  /** Bounds that have a row in the system, ascending, and where; of them those that hold. */
  private listed: readonly number[]
  private placeOf = new Map<number, number>()
  private readonly holds = new Set<number>()
  /** Conditions other than flatness, stacked once. */
  private readonly others: StackedRows
  /** Whether bounds joined or left during the last step. */
  private changed = false
  /** Where the last step would have gone. */
  private toward: Float64Array
  /** By bound: how far beyond its limit the step at hand aims (see `boundBlock`). */
  private readonly lead = new Map<number, number>()
  private penalty = 0
  /** Bounds before this one are not looked at yet. */
  private first: number
  private readonly plan: Plan
  private readonly anchor: State
  private readonly rise: Float64Array | null
  private readonly mobile: MobilityFacts
  private readonly all: Bounds
  private readonly blocks: readonly RowBlock[]
  private readonly heightCost: Float64Array
  private readonly home: Int32Array | null

  constructor(
    plan: Plan, anchor: State, rise: Float64Array | null, mobile: MobilityFacts, all: Bounds, blocks: readonly RowBlock[], shapeWeight: number, areas: Float64Array,
    home: Int32Array | null,
  ) {
    this.home = home
    this.plan = plan
    this.anchor = anchor
    this.rise = rise
    this.mobile = mobile
    this.all = all
    this.blocks = blocks
    this.heightCost = areas.map((area) => shapeWeight * area)
    this.first = all.cornersEnd
    this.listed = all.likely
    this.others = stacked(blocks.slice(1))
    this.toward = anchor.work
    this.state = { work: anchor.work.slice(), heights: anchor.heights.slice() }
  }

  /**
   * Edges and shifts are bounded all the way; corners only once the plan is nearly liftable. On the way to it a corner at a
   * short edge turns this way and that, and holding it then sets off its neighbours (20,000 bounds on 2,500 cells, no step).
   */
  *settle(share: number, farBeyond: number | null): Steps<Ending> {
    const ended = yield* this.walk(share, farBeyond)
    if (ended === 'far' || ended === 'stuck' || !this.turnsCorners()) return ended
    this.first = 0
    return yield* this.walk(share, farBeyond)
  }

  /** Bounds that hold, ascending. */
  get active(): number[] {
    return [...this.holds].sort((a, b) => a - b)
  }

  private turnsCorners(): boolean {
    for (let bound = 0; bound < this.all.cornersEnd; bound += 1) if (this.all.slack(bound, this.state.work, this.state.work) < 0) return true
    return false
  }

  private *walk(share: number, farBeyond: number | null): Steps<Ending> {
    let merits: number[] = []
    let changes: number[] = []
    let lifts: number[] = []
    let penalty = this.penalty
    for (let step = 0; step < mostSteps; step += 1) {
      yield { stage: 'Adjusting', done: 1 - 0.8 ** step }
      this.iterations += 1
      const to = yield* this.proposed()
      const taken = this.searched(to)
      const size = rootMeanSquare(difference(this.state.work, this.anchor.work))
      if (taken === null) return rootMeanSquare(to.plan) <= unresolved * size + flatEnough ? 'settled' : 'stuck'
      const change = rootMeanSquare(difference(taken.work, this.state.work))
      const lift = rootMeanSquare(difference(taken.heights, this.state.heights))
      this.state = taken
      if (farBeyond !== null && largest(difference(taken.work, this.anchor.work)) > outOfReach * farBeyond) return 'far'
      const limit = share * size + flatEnough
      if (change <= limit && lift <= limit) return 'settled'
      // Steps shrink at least as they did: the next one would be within.
      const last = changes.length - 1
      if (!this.changed && last >= 0 && change * change <= surely * limit * changes[last] && lift * lift <= surely * limit * lifts[last]) return 'settled'
      // Merits of different penalties do not compare.
      if (this.penalty > penalty) {
        merits = []
        changes = []
        lifts = []
      }
      penalty = this.penalty
      merits.push(this.merit(taken))
      const now = merits.length - 1
      changes.push(change)
      lifts.push(lift)
      if (now >= patience && merits[now] > (1 - leastGain) * merits[now - patience] && change > leastSettling * changes[now - patience]) return 'slow'
    }
    return 'slow'
  }

  /** Steps on the conditions alone: the last digits of flatness, without moving along the roof of choice. */
  *polish(): Steps<void> {
    this.lead.clear()
    let left = this.misfit(this.state)
    let fresh = false
    // Once every panel is flat to rounding, steps that help no more are not asked of another factor.
    const nothing = flatEnough * (1 + this.plan.panelCount)
    for (let step = 0; step < 12 && left > nothing / 10; step += 1) {
      yield { stage: 'Adjusting', done: 0.95 }
      const system = yield* this.prepared(fresh)
      // Bounds stay where they are: they give a little, and pushing them again would never end.
      const right = system.stack.rows.right.slice()
      right.fill(0, system.stack.firstRow[this.blocks.length])
      const move = leastMove(system, this.mobile, right, this.riseRow(this.state.heights, this.anchor.heights))
      const next = moved(this.state, move, 1)
      const nextLeft = this.misfit(next)
      if (!(nextLeft < left)) {
        if (fresh || left <= nothing) return
        fresh = true
        continue
      }
      fresh = nextLeft > left / 10 && nextLeft > nothing
      this.state = next
      left = nextLeft
    }
  }

  /** Where the linearised problem would go, bounds that it passes held: the move from the present state. */
  private *proposed(): Steps<LeastMove> {
    this.lead.clear()
    this.changed = false
    for (let round = 0; ; round += 1) {
      const system = yield* this.prepared(true)
      const { rows } = system.stack
      const sinceAnchor = { plan: difference(this.state.work, this.anchor.work), height: difference(this.state.heights, this.anchor.heights) }
      const reached = applied(rows, sinceAnchor)
      const right = rows.right.map((value, r) => value + reached[r])
      const total = leastMove(system, this.mobile, right, this.riseRow(this.anchor.heights, this.anchor.heights))
      const move: LeastMove = {
        plan: difference(total.plan, sinceAnchor.plan), height: difference(total.height, sinceAnchor.height), multipliers: total.multipliers,
      }
      if (round === mostRounds) return move
      const first = system.stack.firstRow[this.blocks.length]
      const { work } = moved(this.state, move, 1)
      this.toward = work
      // A bound that pulls the wrong way is let go, once a step; what the step would pass is held, or aimed at with a lead.
      let isSame = true
      if (round === 0) {
        for (const bound of this.active) {
          if (total.multipliers[first + (this.placeOf.get(bound) ?? 0)] >= 0 || this.all.slack(bound, this.state.work, this.state.work) < 0) continue
          this.holds.delete(bound)
          isSame = false
        }
      }
      for (let bound = this.first; bound < this.all.count; bound += 1) {
        const slack = this.all.slack(bound, work, this.state.work)
        if (slack >= 0) continue
        if (!this.holds.has(bound)) this.holds.add(bound)
        else if (slack < this.all.aim(bound)) this.lead.set(bound, (this.lead.get(bound) ?? 0) - slack)
        else continue
        isSame = false
      }
      if (isSame) return move
      this.changed = true
    }
  }

  /** The rows at the present state, and their factor (as it was, unless `fresh` or the rows are others). */
  private *prepared(fresh: boolean): Steps<MoveSystem> {
    if (this.system !== null && [...this.holds].every((bound) => this.placeOf.has(bound))) {
      filled(this.system.stack, this.state)
      if (fresh) yield* refactored(this.system, this.mobile)
      return this.system
    }
    if (this.system !== null) this.listed = this.near()
    this.placeOf = new Map(this.listed.map((bound, i) => [bound, i]))
    const block = boundBlock(this.plan, this.all, this.listed, (bound) => this.holds.has(bound), this.lead, () => this.toward)
    const stack = stacked([...this.blocks, block])
    if (this.home !== null) placedAtHome(stack, this.home, this.anchor.work)
    filled(stack, this.state)
    this.system = yield* moveSystem(stack, this.plan.nodeCount, this.mobile)
    return this.system
  }

  /** The bounds that have a row, those that hold, and those that the step at hand brings half the way to their limit. */
  private near(): number[] {
    const { all, anchor, toward } = this
    const near = new Set([...this.listed, ...this.holds])
    for (let bound = this.first; bound < all.count; bound += 1) {
      if (all.slack(bound, toward, this.state.work) < usedUp * all.slack(bound, anchor.work, anchor.work)) near.add(bound)
    }
    return [...near].sort((a, b) => a - b)
  }

  /** weight . (z - from) = weight . (target - from). */
  private riseRow(from: Float64Array, target: Float64Array): RiseRow | null {
    return this.rise === null ? null : { weight: this.rise, value: dot(this.rise, target) - dot(this.rise, from) }
  }

  /** The first state on the way that the merit accepts and no bound forbids; null: there is none. */
  private searched(move: LeastMove): State | null {
    const { rows, firstRow } = (this.system as MoveSystem).stack
    this.penalty = Math.max(this.penalty, 2 * largestMultiplier(move.multipliers.subarray(0, firstRow[this.blocks.length]), rows.start))
    const before = this.merit(this.state)
    const gain = this.penalty * this.misfit(this.state) - this.slope(move)
    for (let halving = 0, share = 1; halving < mostHalvings; halving += 1, share /= 2) {
      const next = moved(this.state, move, share)
      if (!this.allowed(next.work)) continue
      const target = before - enough * share * Math.max(gain, 0) + 1e-14 * Math.abs(before)
      if (this.merit(next) <= target) return next
      if (halving > 3) continue
      const corrected = this.corrected(next)
      if (this.allowed(corrected.work) && this.merit(corrected) <= target) return corrected
    }
    return null
  }

  /** Second-order correction: the conditions are met again at the new place, with the factor at hand. */
  private corrected(next: State): State {
    const system = this.system as MoveSystem
    filled(system.stack, next)
    const move = leastMove(system, this.mobile, system.stack.rows.right, this.riseRow(next.heights, this.anchor.heights))
    filled(system.stack, this.state)
    return moved(next, move, 1)
  }

  private allowed(work: Float64Array): boolean {
    const from = this.state.work
    for (let bound = this.first; bound < this.all.count; bound += 1) {
      const slack = this.all.slack(bound, work, from)
      if (slack < this.all.floor(bound) && !(slack > this.all.slack(bound, from, from))) return false
    }
    return true
  }

  /** 1/2 |u - anchor|^2 in the metric + penalty * misfit. */
  private merit(state: State): number {
    const { work, heights } = this.anchor
    let sum = 0
    for (let i = 0; i < work.length; i += 1) sum += (state.work[i] - work[i]) ** 2
    for (let n = 0; n < heights.length; n += 1) sum += this.heightCost[n] * (state.heights[n] - heights[n]) ** 2
    return sum / 2 + this.penalty * this.misfit(state)
  }

  /** Derivative of the first half along the move. */
  private slope(move: LeastMove): number {
    const { work, heights } = this.anchor
    let sum = 0
    for (let i = 0; i < work.length; i += 1) sum += (this.state.work[i] - work[i]) * move.plan[i]
    for (let n = 0; n < heights.length; n += 1) sum += this.heightCost[n] * (this.state.heights[n] - heights[n]) * move.height[n]
    return sum
  }

  /** Unflatness of the panels and what the other conditions miss. */
  private misfit(state: State): number {
    let sum = unflatness(this.plan, state.work, state.heights).sum
    filled(this.others, state)
    for (const value of this.others.rows.right) sum += Math.abs(value)
    return sum
  }
}

function moved(state: State, move: LeastMove, share: number): State {
  return { work: state.work.map((value, i) => value + share * move.plan[i]), heights: state.heights.map((value, i) => value + share * move.height[i]) }
}

/** Rows about nodes and rows about their images are neighbours: a symmetric plan is ordered folded onto itself. */
function placedAtHome({ rows: { start, node }, at }: StackedRows, home: Int32Array, work: Float64Array): void {
  for (let r = 0; r + 1 < start.length; r += 1) {
    at.fill(0, 2 * r, 2 * r + 2)
    for (let e = start[r]; e < start[r + 1]; e += 1) {
      for (const axis of [0, 1]) at[2 * r + axis] += work[2 * home[node[e]] + axis] / (start[r + 1] - start[r])
    }
  }
}

/** No smaller than the 2-norm of any panel's multipliers: its k - 3 rows have k entries each. */
function largestMultiplier(multipliers: Float64Array, start: Int32Array): number {
  let most = 0
  for (let r = 0; r < multipliers.length; r += 1) {
    most = Math.max(most, Math.abs(multipliers[r]) * Math.sqrt(Math.max(1, start[r + 1] - start[r] - 3)))
  }
  return most
}

function difference(a: Float64Array, b: Float64Array): Float64Array {
  return a.map((value, i) => value - b[i])
}

function largest(values: Float64Array): number {
  return values.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
}

function rootMeanSquare(values: Float64Array): number {
  return Math.sqrt(dot(values, values) / Math.max(1, values.length))
}

