/**
 * Runs that are nearly straight, and the plan in which they are. Each run gets its line of least squares; every node moves
 * to where the lines through it meet (of more than two, nearest to all), and lines are fitted anew until nothing moves.
 * Where two lines meet in a node that is exact after one round. A run that would move a node farther than allowed stays.
 */
import { nearlyStraight } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import { withinBound, type Moved } from './bounded.ts'
import { distance, fitted, weigh } from './lines.ts'
import type { Runs } from '../runs.ts'
import { roundsForOffer, together } from './together.ts'

export interface NearlyStraight extends Moved {
  /** Runs off straight by more than rounding, and their nodes that are. */
  readonly runs: number
  readonly nodes: readonly number[]
  /** How far off its line the worst node lies, in the plan's unit. */
  readonly misfit: number
  /** Runs that stay crooked since nodes would move farther than the bound. */
  readonly runsThatStay: number
}

/** Runs between two yields. */
const runsPerStep = 500

/**
 * null when every run is straight to `silent` or bends by more than a slip would. `given`: coordinates of the nodes, x0 y0 x1
 * y1 ..; lengths in their unit. `isOffer`: only figures are wanted, so that `moved` need not be exact.
 */
export function* nearlyStraightRuns(given: Float64Array, runs: Runs, tolerance: number, silent: number, isOffer: boolean): Steps<NearlyStraight | null> {
  const count = runs.start.length - 1
  const off = new Float64Array(count)
  const weight = new Uint8Array(runs.node.length).fill(1)
  const crooked = new Set<number>()
  let misfit = 0, crookedRuns = 0
  const takes = new Uint8Array(count)
  const candidate = new Uint8Array(count)
  for (let r = 0; r < count; r += 1) {
    if (r % runsPerStep === 0) yield { stage: 'Looking for straight runs', done: r / count }
    let line = fitted(given, runs, r, weight)
    for (let k = runs.start[r]; k < runs.start[r + 1]; k += 1) off[r] = Math.max(off[r], distance(given, runs.node[k], line))
    if (off[r] > nearlyStraight * tolerance || (off[r] > silent && bendsOneWay(given, runs, r))) continue
    takes[r] = candidate[r] = 1
    if (off[r] <= silent) continue
    if (weigh(given, runs, r, weight, silent)) {
      line = fitted(given, runs, r, weight)
      off[r] = 0
      for (let k = runs.start[r]; k < runs.start[r + 1]; k += 1) off[r] = Math.max(off[r], distance(given, runs.node[k], line))
    }
    crookedRuns += 1
    misfit = Math.max(misfit, off[r])
    for (let k = runs.start[r]; k < runs.start[r + 1]; k += 1) if (distance(given, runs.node[k], line) > silent) crooked.add(runs.node[k])
  }
  if (crookedRuns === 0) return null

  const near = { start: runs.start, node: runs.node, takes, off }
  const moved = yield* withinBound(given, given, near, silent, tolerance, () => together(given, { runs, takes, weight }, isOffer ? roundsForOffer : undefined))
  let stay = 0
  for (let r = 0; r < count; r += 1) if (takes[r] === 0 && candidate[r] === 1) stay += 1
  return { runs: crookedRuns, nodes: [...crooked].sort((m, n) => m - n), misfit, ...moved, runsThatStay: stay }
}

/**
 * Whether a run of five nodes or more turns the same way at each of them, and about as much: the chords of a curve, which is
 * meant. Noise turns back at every other node.
 */
function bendsOneWay(at: Float64Array, { start, node }: Runs, r: number): boolean {
  if (start[r + 1] - start[r] < 5) return false
  let least = Infinity, most = -Infinity
  for (let k = start[r] + 1; k + 1 < start[r + 1]; k += 1) {
    const [a, n, b] = [node[k - 1], node[k], node[k + 1]]
    const ux = at[2 * n] - at[2 * a], uy = at[2 * n + 1] - at[2 * a + 1], vx = at[2 * b] - at[2 * n], vy = at[2 * b + 1] - at[2 * n + 1]
    const turn = (ux * vy - uy * vx) / Math.sqrt((ux * ux + uy * uy) * (vx * vx + vy * vy))
    least = Math.min(least, turn)
    most = Math.max(most, turn)
  }
  return least * most > 0 && Math.max(Math.abs(least), Math.abs(most)) <= evenTurns * Math.min(Math.abs(least), Math.abs(most))
}

/** Turns of a curve's chords differ by less than this factor: splines are divided by sagitta, so that tight bends turn more. */
const evenTurns = 3
