/** Nodes moved as far as a bound allows: what asks for more is left out, the worst first. */
import type { Steps } from '../../base/steps.ts'

/** What may be taken: candidate c is about the nodes node[start[c] .. start[c + 1]). */
export interface Candidates {
  readonly start: Int32Array
  readonly node: Int32Array
  /** 1: taken; what must be left out becomes 0. */
  readonly takes: Uint8Array
  /** How far off each is as drawn. */
  readonly off: Float64Array
}

export interface Moved {
  /** Coordinates x0 y0 x1 y1 .. as far as the bound allows, and the largest move. */
  readonly moved: Float64Array
  readonly largest: number
  /** Nodes that move by more than `silent`. */
  readonly movedNodes: number
}

/**
 * The moves that `solve` finds from `at` for what is taken, so that no node is farther than `bound` from where it was
 * `drawn`. Lengths in the unit of the coordinates.
 */
export function* withinBound(drawn: Float64Array, at: Float64Array, candidates: Candidates, silent: number, bound: number, solve: () => Steps<Float64Array>): Steps<Moved> {
  for (;;) {
    const moved = yield* solve()
    const tooFar = new Set<number>()
    for (let n = 0; 2 * n < at.length; n += 1) if (apart(moved, drawn, n) > bound) tooFar.add(n)
    if (tooFar.size > 0 && drop(candidates, tooFar, silent)) continue
    let largest = 0, movedNodes = 0
    for (let n = 0; 2 * n < at.length; n += 1) {
      const move = apart(moved, at, n)
      largest = Math.max(largest, move)
      if (move > silent) movedNodes += 1
    }
    return { moved, largest, movedNodes }
  }
}

const apart = (a: Float64Array, b: Float64Array, n: number): number => Math.hypot(a[2 * n] - b[2 * n], a[2 * n + 1] - b[2 * n + 1])

/**
 * Leaves out, for each node that moved too far, the candidate through it that is off most; where all of those are exact as
 * drawn, the one of the plan that is off most, which drags them along. False when there is none that could be left out.
 */
function drop({ start, node, takes, off }: Candidates, tooFar: ReadonlySet<number>, silent: number): boolean {
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
