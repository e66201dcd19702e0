/**
 * What dividing a panel by a diagonal would allow: for panel p of k corners with N an orthonormal basis of its k - 3 flatness
 * conditions, a diagonal lets the corners on its one side turn about it, so the panel's misfit N^T z may be any multiple of
 * v = N^T phi, phi = distance from the diagonal on that side and 0 elsewhere. Both diagonals of a quad give the same v.
 */
import { epsilon } from '../../../base/geometry/tolerance.ts'
import type { Plan } from '../../../plan/plan.ts'
import type { PanelBases } from '../../stress/panel-bases.ts'

/** Two corners of a panel, by their place round it (0 .. k - 1, from < to), that are no neighbours. */
export interface Diagonal {
  readonly panel: number
  readonly from: number
  readonly to: number
}

export interface DivisiblePanel {
  readonly panel: number
  /** Corners k, flatness conditions k - 3. */
  readonly corners: number
  /** N, corner by corner: basis[c * (k - 3) + r]. */
  readonly basis: Float64Array
  readonly diagonals: readonly Diagonal[]
  /** v of each diagonal, of length 1: v[d * (k - 3) + r]. */
  readonly allowed: Float64Array
}

/** Panels of more corners are left whole: their diagonals are too many to weigh, and nobody glazes them. */
const mostCorners = 20

/** A side of a diagonal with a smaller width than this share of its length is no panel. */
const leastWidth = 1e-3

/** The panels that diagonals can divide. */
export function divisiblePanels(plan: Plan, bases: PanelBases): DivisiblePanel[] {
  const found: DivisiblePanel[] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    const k = plan.panelStart[p + 1] - plan.panelStart[p]
    if (k < 4 || k > mostCorners) continue
    const basis = conditionsOf(plan, bases, p)
    // Both diagonals of a quad allow the same, so one stands for both until the roof is known.
    const diagonals = diagonalsOf(plan, p).slice(0, k === 4 ? 1 : undefined)
    if (diagonals.length === 0) continue
    const allowed = new Float64Array(diagonals.length * (k - 3))
    diagonals.forEach((diagonal, d) => allowed.set(allowedBy(plan, diagonal, basis, k), d * (k - 3)))
    found.push({ panel: p, corners: k, basis, diagonals, allowed })
  }
  return found
}

/** Orthonormal N (k x (k - 3)): unit vectors less what the affine functions and the vectors before have of them, largest first. */
function conditionsOf(plan: Plan, { e }: PanelBases, p: number): Float64Array {
  const from = plan.panelStart[p], k = plan.panelStart[p + 1] - from
  if (k === 4) return conditionOfQuad(plan, from)
  const taken: Float64Array[] = [
    new Float64Array(k).fill(1 / Math.sqrt(k)),
    Float64Array.from({ length: k }, (_, c) => e[2 * (from + c)]),
    Float64Array.from({ length: k }, (_, c) => e[2 * (from + c) + 1]),
  ]
  while (taken.length < k) {
    let best: Float64Array = taken[0], size = -1
    for (let c = 0; c < k; c += 1) {
      const unit = new Float64Array(k)
      unit[c] = 1
      for (let pass = 0; pass < 2; pass += 1) {
        for (const other of taken) {
          let share = 0
          for (let i = 0; i < k; i += 1) share += other[i] * unit[i]
          for (let i = 0; i < k; i += 1) unit[i] -= share * other[i]
        }
      }
      const left = Math.hypot(...unit)
      if (left > size * (1 + 1e-9)) {
        best = unit.map((value) => value / left)
        size = left
      }
    }
    taken.push(best)
  }
  const basis = new Float64Array(k * (k - 3))
  for (let r = 0; r < k - 3; r += 1) for (let c = 0; c < k; c += 1) basis[c * (k - 3) + r] = taken[3 + r][c]
  return basis
}

/** Of a quad: each corner's weight is the area of the triangle of the other three, with signs in turn. */
function conditionOfQuad({ corner, work }: Plan, from: number): Float64Array {
  const area = (i: number, j: number, k: number): number => {
    const [a, b, c] = [2 * corner[from + i], 2 * corner[from + j], 2 * corner[from + k]]
    return (work[b] - work[a]) * (work[c + 1] - work[a + 1]) - (work[b + 1] - work[a + 1]) * (work[c] - work[a])
  }
  const weights = [area(1, 2, 3), -area(0, 2, 3), area(0, 1, 3), -area(0, 1, 2)]
  const size = Math.hypot(...weights)
  return Float64Array.from(weights, (weight) => weight / size)
}

/** All diagonals that run inside the panel and leave a panel on both sides. */
export function diagonalsOf(plan: Plan, panel: number): Diagonal[] {
  const from = plan.panelStart[panel], k = plan.panelStart[panel + 1] - from
  const at = (c: number): readonly [number, number] => [plan.work[2 * plan.corner[from + c]], plan.work[2 * plan.corner[from + c] + 1]]
  const found: Diagonal[] = []
  for (let i = 0; i < k; i += 1) {
    for (let j = i + 2; j < k; j += 1) {
      if (i === 0 && j === k - 1) continue
      if (isInside(at, k, i, j)) found.push({ panel, from: i, to: j })
    }
  }
  return found
}

/** Whether i - j lies inside: it leaves both ends inwards, crosses no edge, and no side is a sliver. */
function isInside(at: (c: number) => readonly [number, number], k: number, i: number, j: number): boolean {
  const [ax, ay] = at(i), [bx, by] = at(j)
  const length = Math.hypot(bx - ax, by - ay)
  const off = (c: number): number => {
    const [x, y] = at(c)
    return ((bx - ax) * (y - ay) - (by - ay) * (x - ax)) / length
  }
  const least = Math.max(leastWidth * length, epsilon)
  const right = sideWidth(off, i + 1, j, k), left = sideWidth(off, j + 1, i + k, k)
  // Corners i .. j lie on its right when the panel runs counter-clockwise, the others on its left.
  if (!(right.low < -least && left.high > least)) return false
  for (let c = 0; c < k; c += 1) {
    const d = (c + 1) % k
    if (c === i || c === j || d === i || d === j) continue
    if (crosses(at(i), at(j), at(c), at(d))) return false
  }
  return right.high <= least && left.low >= -least ? true : middleInside(at, k, (ax + bx) / 2, (ay + by) / 2)
}

function sideWidth(off: (c: number) => number, from: number, to: number, k: number): { low: number; high: number } {
  let low = Infinity, high = -Infinity
  for (let c = from; c < to; c += 1) {
    low = Math.min(low, off(c % k))
    high = Math.max(high, off(c % k))
  }
  return { low, high }
}

function crosses(a: readonly number[], b: readonly number[], c: readonly number[], d: readonly number[]): boolean {
  const turn = (p: readonly number[], q: readonly number[], r: readonly number[]): number => (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0])
  return turn(a, b, c) * turn(a, b, d) <= 0 && turn(c, d, a) * turn(c, d, b) <= 0
}

function middleInside(at: (c: number) => readonly [number, number], k: number, x: number, y: number): boolean {
  let inside = false
  for (let c = 0, before = k - 1; c < k; before = c, c += 1) {
    const [px, py] = at(c), [qx, qy] = at(before)
    if (py > y !== qy > y && x < ((qx - px) * (y - py)) / (qy - py) + px) inside = !inside
  }
  return inside
}

/** v = N^T phi over its length; phi = distance from the diagonal of the corners between `from` and `to`, 0 elsewhere. */
function allowedBy(plan: Plan, { panel, from, to }: Diagonal, basis: Float64Array, k: number): Float64Array {
  const first = plan.panelStart[panel]
  const [a, b] = [plan.corner[first + from], plan.corner[first + to]]
  const dx = plan.work[2 * b] - plan.work[2 * a], dy = plan.work[2 * b + 1] - plan.work[2 * a + 1]
  const v = new Float64Array(k - 3)
  for (let c = from + 1; c < to; c += 1) {
    const n = plan.corner[first + c]
    const phi = dx * (plan.work[2 * n + 1] - plan.work[2 * a + 1]) - dy * (plan.work[2 * n] - plan.work[2 * a])
    for (let r = 0; r < k - 3; r += 1) v[r] += basis[c * (k - 3) + r] * phi
  }
  const size = Math.hypot(...v)
  return v.map((value) => value / size)
}

/** Whether two diagonals of one panel cross. */
export function crossing(one: Diagonal, other: Diagonal): boolean {
  const within = (c: number): boolean => c > one.from && c < one.to
  const outside = (c: number): boolean => c < one.from || c > one.to
  return (within(other.from) && outside(other.to)) || (within(other.to) && outside(other.from))
}
