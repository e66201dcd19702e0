/** Lines through the nodes of runs, by least squares, with nodes that slipped left out. */
import type { Runs } from '../runs.ts'

export interface Line {
  /** n . p = c with n a unit vector. */
  readonly nx: number
  readonly ny: number
  readonly c: number
}

/**
 * Gives the nodes of a run the weight 0 that are off the line on which at least three others, and more than half, lie as
 * exactly as coordinates are written: one node that slipped must not tilt the line of all. True when there is such a line.
 * Lines through up to `mostTried` nodes of the run are tried.
 */
export function weigh(at: Float64Array, { start, node }: Runs, r: number, weight: Uint8Array, silent: number): boolean {
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

/** The line of least squares through the nodes of a run that have weight: through their mean, along the long axis of their scatter or at the angle given. */
export function fitted(at: Float64Array, { start, node }: Runs, r: number, weight: Uint8Array, given = NaN): Line {
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
  const angle = Number.isNaN(given) ? Math.atan2(2 * xy, xx - yy) / 2 : given
  const nx = -Math.sin(angle), ny = Math.cos(angle)
  return { nx, ny, c: nx * (ox + mx) + ny * (oy + my) }
}

export const distance = (at: Float64Array, n: number, { nx, ny, c }: Line): number => Math.abs(nx * at[2 * n] + ny * at[2 * n + 1] - c)

/** How far off its line of least squares the worst node of each run is. */
export function straightness(at: Float64Array, runs: Runs, weight: Uint8Array): Float64Array {
  const off = new Float64Array(runs.start.length - 1)
  for (let r = 0; r < off.length; r += 1) {
    const line = fitted(at, runs, r, weight)
    for (let k = runs.start[r]; k < runs.start[r + 1]; k += 1) off[r] = Math.max(off[r], distance(at, runs.node[k], line))
  }
  return off
}

/** Nodes of some runs that are off the lines at the given angles by more than `silent`, in order. */
export function nodesOff(at: Float64Array, runs: Runs, weight: Uint8Array, angle: Float64Array, some: Uint8Array, silent: number): number[] {
  const nodes = new Set<number>()
  for (let r = 0; r < some.length; r += 1) {
    if (some[r] === 0) continue
    const line = fitted(at, runs, r, weight, angle[r])
    for (let k = runs.start[r]; k < runs.start[r + 1]; k += 1) if (distance(at, runs.node[k], line) > silent) nodes.add(runs.node[k])
  }
  return [...nodes].sort((m, n) => m - n)
}
