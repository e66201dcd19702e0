/**
 * Nodes brought to where everything that is kept of them holds at once: runs straight, some at a given direction, bays along
 * them equal, mirror images met. Each kind in turn moves the nodes by as little as it needs, round after round until nothing
 * moves: projections onto subspaces in turn come to their intersection (von Neumann 1950; for lines that are fitted anew in
 * each round, measured).
 */
import type { Steps } from '../../base/steps.ts'
import { evenly, type EqualBays } from './equal.ts'
import { fitted } from './lines.ts'
import type { Runs } from '../runs.ts'
import type { Mirror } from './symmetric.ts'

export interface Kept {
  readonly runs: Runs
  /** Per run: 1 where it is straight. */
  readonly takes: Uint8Array
  /** Per entry of `runs.node`: 0 where the node has no say in the line. */
  readonly weight: Uint8Array
  /** Per run: the angle of its line where it is given, else NaN. */
  readonly angle?: Float64Array
  /** Groups of equal bays, and which of them are taken. */
  readonly bays?: { readonly groups: EqualBays; readonly takes: Uint8Array }
  readonly mirrors?: readonly Mirror[]
}

/** Rounds where nodes have three lines and more; a plan whose nodes have two needs two. */
const mostRounds = 1500

/** Rounds for an offer: its figures have two digits. */
export const roundsForOffer = 20

/** Coordinates of all nodes, x0 y0 x1 y1 .., as given and then moved. */
export function* together(given: Float64Array, kept: Kept, rounds = mostRounds): Steps<Float64Array> {
  const at = given.slice()
  const pull = new Pull(at.length / 2)
  let largest = 0
  for (const value of given) largest = Math.max(largest, Math.abs(value))
  const still = largest * 1e-14
  for (let round = 0; round < rounds; round += 1) {
    yield { stage: 'Making regular', done: round / rounds }
    pullToLines(pull, at, kept)
    let most = pull.move(at)
    if (kept.bays !== undefined) {
      pullToEqualBays(pull, at, kept.bays)
      most = Math.max(most, pull.move(at))
    }
    for (const mirror of kept.mirrors ?? []) most = Math.max(most, mirrored(at, mirror))
    if (most <= still) break
  }
  return at
}

/** What draws each node: steps along directions, of which a node may have several. */
class Pull {
  /** Normal equations per node: M = sum d d^T as xx xy yy, and sum d (d . step). */
  private readonly normal: Float64Array
  private readonly right: Float64Array

  constructor(private readonly nodes: number) {
    this.normal = new Float64Array(3 * nodes)
    this.right = new Float64Array(2 * nodes)
  }

  /** Node n is to move by `by` along the unit vector (dx, dy). */
  add(n: number, dx: number, dy: number, by: number): void {
    this.normal[3 * n] += dx * dx
    this.normal[3 * n + 1] += dx * dy
    this.normal[3 * n + 2] += dy * dy
    this.right[2 * n] += dx * by
    this.right[2 * n + 1] += dy * by
  }

  /** Moves all nodes and forgets what drew them; the largest step along x or y. */
  move(at: Float64Array): number {
    const { normal, right } = this
    let most = 0
    for (let n = 0; n < this.nodes; n += 1) {
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
    normal.fill(0)
    right.fill(0)
    return most
  }
}

function pullToLines(pull: Pull, at: Float64Array, { runs, takes, weight, angle }: Kept): void {
  for (let r = 0; r < takes.length; r += 1) {
    if (takes[r] === 0) continue
    const { nx, ny, c } = fitted(at, runs, r, weight, angle?.[r])
    for (let k = runs.start[r]; k < runs.start[r + 1]; k += 1) {
      const n = runs.node[k]
      pull.add(n, nx, ny, c - nx * at[2 * n] - ny * at[2 * n + 1])
    }
  }
}

/** Places s = u . p of a group's nodes along it are to be first + k bay, both by least squares. */
function pullToEqualBays(pull: Pull, at: Float64Array, { groups, takes }: NonNullable<Kept['bays']>): void {
  for (let g = 0; g < takes.length; g += 1) {
    if (takes[g] === 0) continue
    const { ux, uy, first, bay } = evenly(at, groups, g)
    for (let k = groups.start[g]; k < groups.start[g + 1]; k += 1) {
      const n = groups.node[k]
      pull.add(n, ux, uy, first + (k - groups.start[g]) * bay - ux * at[2 * n] - uy * at[2 * n + 1])
    }
  }
}

/** Each node halfway to the mirror image of its partner; the largest step. */
function mirrored(at: Float64Array, { cx, cy, cosine, sine, image }: Mirror): number {
  let most = 0
  for (let n = 0; n < image.length; n += 1) {
    const m = image[n]
    if (m < n) continue
    const dx = at[2 * m] - cx, dy = at[2 * m + 1] - cy
    const halfX = (cx + cosine * dx + sine * dy - at[2 * n]) / 2, halfY = (cy + sine * dx - cosine * dy - at[2 * n + 1]) / 2
    at[2 * n] += halfX
    at[2 * n + 1] += halfY
    if (m !== n) {
      const ex = at[2 * n] - cx, ey = at[2 * n + 1] - cy
      at[2 * m] = cx + cosine * ex + sine * ey
      at[2 * m + 1] = cy + sine * ex - cosine * ey
    }
    most = Math.max(most, Math.abs(halfX), Math.abs(halfY))
  }
  return most
}
