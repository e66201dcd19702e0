/**
 * The ways left to a roof, smoothest first, as people see them: of the tilts that the conditions leave free each way takes
 * the one that moves the rim least (least squares over the rim's nodes), so that a way shapes the roof and does not lean it.
 */
import { Matrix, solve } from 'ml-matrix'
import type { Plan } from '../../plan/plan.ts'
import type { Rows } from '../conditions/rows.ts'
import type { LiftSpace } from './lift-space.ts'
import { smoothestLifts } from './smoothest-lifts.ts'
import { freeTilts } from './tilts.ts'

export interface WayLeft {
  /** Height of each node (length nodeCount): 1 at the peak, nowhere more, so that an amount at the peak moves each node by its share. */
  readonly heights: Float64Array
  /** The node that moves most; the lowest number in a tie. */
  readonly peak: number
}

/** At most `count` ways of the space; `hard` are its rows and `tilts` how many of its dimensions fold nothing. */
export function waysLeft(space: LiftSpace, hard: Rows, tilts: number, areas: Float64Array, count: number): WayLeft[] {
  const { plan } = space
  const lifts = smoothestLifts(space, tilts, areas, count)
  if (lifts.length === 0) return []
  const free = freeTilts(plan, hard)
  return lifts.map((lift) => peaked(lessRimTilt(plan, lift, free)))
}

/** h - sum c_k tilt_k with the c that leave the least squares at the rim's nodes. */
function lessRimTilt(plan: Plan, heights: Float64Array, tilts: readonly Float64Array[]): Float64Array {
  if (tilts.length === 0) return heights
  const rim = Array.from(plan.rimPasses.keys()).filter((node) => plan.rimPasses[node] > 0)
  const product = (a: Float64Array, b: Float64Array): number => rim.reduce((sum, node) => sum + a[node] * b[node], 0)
  const gram = new Matrix(tilts.map((a) => tilts.map((b) => product(a, b))))
  const shares = solve(gram, Matrix.columnVector(tilts.map((tilt) => product(tilt, heights)))).getColumn(0)
  return heights.map((height, node) => shares.reduce((left, share, k) => left - share * tilts[k][node], height))
}

function peaked(heights: Float64Array): WayLeft {
  let peak = 0
  for (let node = 1; node < heights.length; node += 1) if (Math.abs(heights[node]) > Math.abs(heights[peak]) * (1 + tie)) peak = node
  // No minus zero: it is written as a number of its own.
  return { heights: heights.map((height) => height / heights[peak] + 0), peak }
}

/** Peaks that differ by less are one: a symmetric roof has several, equal but for rounding. */
const tie = 1e-9
