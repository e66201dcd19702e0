/**
 * Runs that are nearly straight, and the plan in which they are. Each run gets its line of least squares; every node moves
 * to where the lines through it meet (of more than two, nearest to all), and lines are fitted anew until nothing moves.
 * Where two lines meet in a node that is exact after one round. A run that would move a node farther than allowed stays.
 */
import { nearlyStraight } from '../base/geometry/tolerance.ts'
import type { Steps } from '../base/steps.ts'
import type { Plan } from './plan.ts'
import { runsOf, type Runs } from './office-runs.ts'

export interface NearlyStraight {
  /** Runs off straight by more than rounding, and their nodes that are. */
  readonly runs: number
  readonly nodes: readonly number[]
  /** How far off its line the worst node lies, in the plan's unit. */
  readonly misfit: number
  /** Straight as far as the bound allows: coordinates less the plan's centre, in its unit (x0 y0 x1 y1 ..), and the largest move. */
  readonly moved: Float64Array
  readonly largest: number
  /** Nodes that move, and runs that stay crooked since they would move farther than the bound. */
  readonly movedNodes: number
  readonly runsThatStay: number
}

/** Rounds where nodes have three lines and more; a plan whose nodes have two needs two. */
const mostRounds = 1500

/** Runs between two yields. */
const runsPerStep = 500

/** Rounds for an offer: its figures have two digits. */
const roundsForOffer = 20


/**
 * null when every run is straight to `silent` or bends by more than a slip would. Lengths in the plan's unit; `isOffer`:
 * only figures are wanted, so that `moved` need not be exact.
 */
export function* nearlyStraightRuns(plan: Plan, tolerance: number, silent: number, isOffer: boolean): Steps<NearlyStraight | null> {
  const { span } = plan.frame
  const runs = yield* runsOf(plan)
  if (!runs.areMeant) return null
  const given = plan.work.map((w) => w * span)
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

  for (;;) {
    const moved = yield* straightened(given, runs, takes, weight, isOffer ? roundsForOffer : mostRounds)
    const tooFar: number[] = []
    for (let n = 0; n < plan.nodeCount; n += 1) {
      if (Math.hypot(moved[2 * n] - given[2 * n], moved[2 * n + 1] - given[2 * n + 1]) > tolerance) tooFar.push(n)
    }
    if (tooFar.length > 0 && dropRuns(runs, takes, new Set(tooFar), off, silent)) continue
    let largest = 0, movedNodes = 0, stay = 0
    for (let n = 0; n < plan.nodeCount; n += 1) {
      const move = Math.hypot(moved[2 * n] - given[2 * n], moved[2 * n + 1] - given[2 * n + 1])
      largest = Math.max(largest, move)
      if (move > silent) movedNodes += 1
    }
    for (let r = 0; r < count; r += 1) if (takes[r] === 0 && candidate[r] === 1) stay += 1
    return { runs: crookedRuns, nodes: [...crooked].sort((m, n) => m - n), misfit, moved, largest, movedNodes, runsThatStay: stay }
  }
}

/**
 * Leaves out, for each node that moved too far, the most crooked run through it; where all of those are straight as drawn,
 * the most crooked of the plan, which drags them along. False when there is none that could be left out.
 */
function dropRuns({ start, node }: Runs, takes: Uint8Array, tooFar: ReadonlySet<number>, off: Float64Array, silent: number): boolean {
  const worstThrough = new Map<number, number>()
  let worst = -1
  for (let r = 0; r < takes.length; r += 1) {
    if (takes[r] === 0 || off[r] <= silent) continue
    if (worst < 0 || off[r] > off[worst]) worst = r
    for (let k = start[r]; k < start[r + 1]; k += 1) {
      const known = tooFar.has(node[k]) ? worstThrough.get(node[k]) : r
      if (known === undefined || off[r] > off[known]) worstThrough.set(node[k], r)
    }
  }
  if (worst < 0) return false
  for (const r of worstThrough.values()) takes[r] = 0
  if (worstThrough.size === 0) takes[worst] = 0
  return true
}

interface Line {
  /** n . p = c with n a unit vector. */
  readonly nx: number
  readonly ny: number
  readonly c: number
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

/**
 * Gives the nodes of a run the weight 0 that are off the line on which at least three others, and more than half, lie as
 * exactly as coordinates are written: one node that slipped must not tilt the line of all. True when there is such a line.
 * Lines through up to `mostTried` nodes of the run are tried.
 */
function weigh(at: Float64Array, { start, node }: Runs, r: number, weight: Uint8Array, silent: number): boolean {
  const from = start[r], count = start[r + 1] - from
  const stride = Math.ceil(count / mostTried)
  let best: Line | null = null
  let most = Math.max(2, Math.floor(count / 2))
  for (let i = 0; i < count; i += stride) {
    for (let j = i + stride; j < count; j += stride) {
      const a = node[from + i], b = node[from + j]
      const dx = at[2 * b] - at[2 * a], dy = at[2 * b + 1] - at[2 * a + 1]
      const length = Math.hypot(dx, dy)
      const line: Line = { nx: -dy / length, ny: dx / length, c: (at[2 * a + 1] * dx - at[2 * a] * dy) / length }
      let on = 0
      for (let k = from; k < start[r + 1]; k += 1) if (distance(at, node[k], line) <= silent) on += 1
      if (on > most) [best, most] = [line, on]
    }
  }
  if (best === null) return false
  for (let k = from; k < start[r + 1]; k += 1) weight[k] = distance(at, node[k], best) <= silent ? 1 : 0
  return true
}

const mostTried = 16

/** The line of least squares through the nodes of a run that have weight: through their mean, along the long axis of their scatter. */
function fitted(at: Float64Array, { start, node }: Runs, r: number, weight: Uint8Array): Line {
  const from = start[r], to = start[r + 1]
  const ox = at[2 * node[from]], oy = at[2 * node[from] + 1]
  let mx = 0, my = 0, all = 0
  for (let k = from; k < to; k += 1) {
    mx += weight[k] * (at[2 * node[k]] - ox)
    my += weight[k] * (at[2 * node[k] + 1] - oy)
    all += weight[k]
  }
  mx /= all
  my /= all
  let xx = 0, xy = 0, yy = 0
  for (let k = from; k < to; k += 1) {
    const dx = at[2 * node[k]] - ox - mx, dy = at[2 * node[k] + 1] - oy - my
    xx += weight[k] * dx * dx
    xy += weight[k] * dx * dy
    yy += weight[k] * dy * dy
  }
  // The axis of the scatter: tan 2 a = 2 xy / (xx - yy).
  const angle = Math.atan2(2 * xy, xx - yy) / 2
  const nx = -Math.sin(angle), ny = Math.cos(angle)
  return { nx, ny, c: nx * (ox + mx) + ny * (oy + my) }
}

const distance = (at: Float64Array, n: number, { nx, ny, c }: Line): number => Math.abs(nx * at[2 * n] + ny * at[2 * n + 1] - c)

/** All nodes moved onto the lines of the runs taken. */
function* straightened(given: Float64Array, runs: Runs, takes: Uint8Array, weight: Uint8Array, rounds: number): Steps<Float64Array> {
  const at = given.slice()
  const nodes = at.length / 2
  const normal = new Float64Array(3 * nodes)
  const right = new Float64Array(2 * nodes)
  let largest = 0
  for (const value of given) largest = Math.max(largest, Math.abs(value))
  const still = largest * 1e-14
  for (let round = 0; round < rounds; round += 1) {
    yield { stage: 'Looking for straight runs', done: round / rounds }
    normal.fill(0)
    right.fill(0)
    for (let r = 0; r < takes.length; r += 1) {
      if (takes[r] === 0) continue
      const line = fitted(at, runs, r, weight)
      const { nx, ny } = line
      for (let k = runs.start[r]; k < runs.start[r + 1]; k += 1) {
        const n = runs.node[k]
        const gap = line.c - nx * at[2 * n] - ny * at[2 * n + 1]
        normal[3 * n] += nx * nx
        normal[3 * n + 1] += nx * ny
        normal[3 * n + 2] += ny * ny
        right[2 * n] += nx * gap
        right[2 * n + 1] += ny * gap
      }
    }
    let most = 0
    for (let n = 0; n < nodes; n += 1) {
      const a = normal[3 * n], b = normal[3 * n + 1], d = normal[3 * n + 2]
      const trace = a + d
      if (trace === 0) continue
      const determinant = a * d - b * b
      // One line, or lines that run alike: straight onto it; else where they meet, M step = right.
      const alone = determinant < 1e-6 * trace * trace
      const dx = alone ? right[2 * n] / trace : (d * right[2 * n] - b * right[2 * n + 1]) / determinant
      const dy = alone ? right[2 * n + 1] / trace : (a * right[2 * n + 1] - b * right[2 * n]) / determinant
      at[2 * n] += dx
      at[2 * n + 1] += dy
      most = Math.max(most, Math.abs(dx), Math.abs(dy))
    }
    if (most <= still) break
  }
  return at
}
