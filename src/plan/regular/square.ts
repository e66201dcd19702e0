/** Right angles: straight runs whose directions are one angle or square to it, or nearly. */
import { nearlyStraight, squareSine, widerTurns } from '../../base/geometry/tolerance.ts'
import { distance, fitted } from './lines.ts'
import type { Runs } from '../runs.ts'

export interface SquareRuns {
  /** Per run: the angle that its line has when it is square to others, NaN where it is not meant to be. */
  readonly angle: Float64Array
  /** Per run: how far the end of the run is off that line through its middle, 0 where `angle` is NaN. */
  readonly off: Float64Array
}

/** Where more than this many runs have no right angle for each that nearly has one, that is by chance. */
const freeRuns = 3

/** Fewest runs of one right angle, both ways together: a single corner is seldom meant. */
const fewestRuns = 3

/**
 * Directions are gathered where most length of run has nearly the same one, quarter turns apart; the middle one by length
 * is taken, or the drawing's own axes where that moves no end by more than the tolerance. A fan of runs, in which as many
 * lie beside the window as in it, has no right angle. Lengths in the unit of `at`; `silent`: what is no misfit.
 */
export function squareRuns(at: Float64Array, runs: Runs, isStraight: Uint8Array, weight: Uint8Array, tolerance: number, silent: number): SquareRuns {
  const count = isStraight.length
  const angle = new Float64Array(count).fill(NaN)
  const off = new Float64Array(count)
  const own = new Float64Array(count), length = new Float64Array(count)
  for (let r = 0; r < count; r += 1) {
    if (isStraight[r] === 0) continue
    const { nx, ny } = fitted(at, runs, r, weight)
    own[r] = Math.atan2(-nx, ny)
    const a = runs.node[runs.start[r]], b = runs.node[runs.start[r + 1] - 1]
    length[r] = Math.hypot(at[2 * b] - at[2 * a], at[2 * b + 1] - at[2 * a + 1])
  }
  const gathered: number[][] = []
  let open = Array.from(isStraight.keys()).filter((r) => isStraight[r] === 1)
  while (open.length >= fewestRuns) {
    const sorted = open.map((r) => ({ r, quarter: quarterOf(own[r]) })).sort((p, q) => p.quarter - q.quarter || p.r - q.r)
    const window = heaviestWindow(sorted, length)
    const middle = middleOf(window, length)
    const reach = Math.max(...window.map(({ r }) => length[r])) / 2
    const common = Math.abs(Math.sin(turned(middle, 0))) * reach <= tolerance ? 0 : middle
    const near = sorted.filter(({ r, quarter }) => Math.abs(turned(quarter, common)) <= squareSine && (length[r] / 2) * Math.abs(Math.sin(turned(quarter, common))) <= nearlyStraight * tolerance)
    const beside = sorted.filter(({ quarter }) => Math.abs(turned(quarter, common)) <= widerTurns * squareSine).length - near.length
    const lines = near.map(({ r, quarter }) => ({ r, line: own[r] - turned(quarter, common) }))
    const along = lines.filter(({ line }) => Math.abs(Math.sin(line - common)) < 0.5).length
    if (near.length >= fewestRuns && along > 0 && along < near.length && 2 * beside <= near.length) {
      for (const { r, line } of lines) {
        angle[r] = line
        const ends = fitted(at, runs, r, weight, line)
        off[r] = Math.max(distance(at, runs.node[runs.start[r]], ends), distance(at, runs.node[runs.start[r + 1] - 1], ends))
      }
    }
    gathered.push(near.map(({ r }) => r).filter((r) => !Number.isNaN(angle[r]) && off[r] > silent))
    const done = new Set([...window, ...near].map(({ r }) => r))
    open = open.filter((r) => !done.has(r))
  }
  const free = angle.filter((a, r) => isStraight[r] === 1 && Number.isNaN(a)).length
  for (const off of gathered) if (off.length * freeRuns < free) for (const r of off) angle[r] = NaN
  for (let r = 0; r < count; r += 1) if (Number.isNaN(angle[r])) off[r] = 0
  return { angle, off }
}

const quarterTurn = Math.PI / 2

/** An angle less whole quarter turns, 0 up to a quarter. */
function quarterOf(angle: number): number {
  const rest = angle % quarterTurn
  return rest < 0 ? rest + quarterTurn : rest
}

/** How far an angle is turned from another, whole quarter turns aside: -1/8 to 1/8 of a turn. */
function turned(angle: number, from: number): number {
  const rest = quarterOf(angle - from)
  return rest > quarterTurn / 2 ? rest - quarterTurn : rest
}

interface Direction {
  readonly r: number
  readonly quarter: number
}

/** The directions within `squareSine` after one of them that have most length of run; the list goes round. */
function heaviestWindow(sorted: readonly Direction[], length: Float64Array): Direction[] {
  const count = sorted.length
  let best = 0, bestTo = 1, most = 0, to = 0, sum = 0
  for (let from = 0; from < count; from += 1) {
    const within = (k: number): boolean => k < from + count && sorted[k % count].quarter + (k >= count ? quarterTurn : 0) - sorted[from].quarter <= squareSine
    for (; to < from + count && within(to); to += 1) sum += length[sorted[to % count].r]
    if (sum > most * (1 + 1e-12)) [best, bestTo, most] = [from, to, sum]
    sum -= length[sorted[from].r]
  }
  return Array.from({ length: bestTo - best }, (_, k) => sorted[(best + k) % count])
}

/** The direction with half of the length of run on either side: exact where more than half agree. */
function middleOf(window: readonly Direction[], length: Float64Array): number {
  const half = window.reduce((sum, { r }) => sum + length[r], 0) / 2
  let sum = 0
  for (const { r, quarter } of window) {
    sum += length[r]
    if (sum >= half) return quarter
  }
  return window[0].quarter
}
