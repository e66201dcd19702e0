/**
 * The whole theory by dense linear algebra, for small plans: the roofs under conditions as an affine set from singular
 * values, the nearest of them and the near roof by solving their definitions. Working heights h = z / span throughout.
 */
import { Matrix, SVD, pseudoInverse, solve } from 'ml-matrix'
import type { Plan } from '../../src/plan/plan.ts'
import { minimumZone } from '../oracle/second-reader.ts'
import { flatnessRows } from './dense.ts'

/** All h with rows h = values: particular + span of the orthonormal basis; `particular` null: there are none. */
export interface AffineSet {
  readonly particular: number[] | null
  readonly basis: number[][]
}

export function solutions(rows: readonly number[][], values: readonly number[], n: number): AffineSet {
  // Each row at size 1, and zero rows so that there are never fewer rows than columns.
  const sizes = rows.map((row) => Math.hypot(...row))
  const square = rows.map((row, r) => row.map((weight) => weight / sizes[r]!)).filter((_, r) => sizes[r]! > 1e-12)
  const right = values.map((value, r) => value / sizes[r]!).filter((_, r) => sizes[r]! > 1e-12)
  if (values.some((value, r) => sizes[r]! <= 1e-12 && Math.abs(value) > 1e-9)) return { particular: null, basis: [] }
  while (square.length < n) {
    square.push(new Array<number>(n).fill(0))
    right.push(0)
  }
  const svd = new SVD(new Matrix(square), { autoTranspose: true })
  const { leftSingularVectors: u, rightSingularVectors: v, diagonal } = svd
  const particular = new Array<number>(n).fill(0)
  const basis: number[][] = []
  for (let k = 0; k < n; k += 1) {
    const column = Array.from({ length: n }, (_, i) => v.get(i, k))
    if (!(diagonal[k]! > 1e-9 * diagonal[0]!)) {
      basis.push(column)
      continue
    }
    const share = right.reduce((sum, value, r) => sum + u.get(r, k) * value, 0) / diagonal[k]!
    column.forEach((value, i) => (particular[i]! += share * value))
  }
  const miss = square.map((row, r) => Math.abs(dot(row, particular) - right[r]!))
  return { particular: Math.max(0, ...miss) < 1e-9 ? particular : null, basis }
}

/** The roofs of a plan with flat panels that keep the rows. */
export function roofs(plan: Plan, rows: readonly number[][], values: readonly number[]): AffineSet {
  const flat = flatnessRows(plan)
  return solutions([...flat, ...rows], [...flat.map(() => 0), ...values], plan.nodeCount)
}

/** Area-weighted metric of the nodes, by shares of their panels' areas (shoelace), mean 1. */
export function areaShares(plan: Plan): number[] {
  const shares = new Array<number>(plan.nodeCount).fill(0)
  for (let p = 0; p < plan.panelCount; p += 1) {
    const nodes = cornersOf(plan, p)
    const twice = nodes.reduce((sum, a, k) => {
      const b = nodes[(k + 1) % nodes.length]!
      return sum + plan.work[2 * a]! * plan.work[2 * b + 1]! - plan.work[2 * b]! * plan.work[2 * a + 1]!
    }, 0)
    for (const node of nodes) shares[node]! += twice / nodes.length
  }
  const mean = shares.reduce((sum, share) => sum + share, 0) / plan.nodeCount
  return shares.map((share) => share / mean)
}

/** Soft rows with the weight of each: the metric gains sum of weight * row^T row, the pull weight * value * row. */
export interface Soft {
  readonly rows: readonly number[][]
  readonly values: readonly number[]
  readonly weights: readonly number[]
}

export const noSoft: Soft = { rows: [], values: [], weights: [] }

/** Of the set, the h that minimises sum m (h - t)^2 + sum w (row h - value)^2. */
export function nearest(
  { particular, basis }: AffineSet,
  wish: ArrayLike<number>,
  areas: readonly number[],
  soft: Soft = noSoft,
): number[] {
  const start = particular!
  if (basis.length === 0) return start
  const metric = (h: readonly number[]): number[] => {
    const out = h.map((value, i) => areas[i]! * value)
    soft.rows.forEach((row, r) => {
      const along = soft.weights[r]! * dot(row, h)
      row.forEach((weight, i) => (out[i]! += along * weight))
    })
    return out
  }
  const pull = Array.from(wish, (value, i) => areas[i]! * value)
  soft.rows.forEach((row, r) => row.forEach((weight, i) => (pull[i]! += soft.weights[r]! * soft.values[r]! * weight)))
  const rest = metric(start).map((value, i) => pull[i]! - value)
  const gram = new Matrix(basis.map((a) => basis.map((b) => dot(a, metric(b)))))
  const shares = solve(gram, Matrix.columnVector(basis.map((a) => dot(a, rest)))).getColumn(0)
  return start.map((value, i) => value + basis.reduce((sum, column, k) => sum + shares[k]! * column[i]!, 0))
}

/**
 * The near roof of one mu by its definition: minimise sum m (h - t)^2 + mu h^T Q h where rows h = values and, with t' the wish
 * less its tilt, (M t').h = (M t').t. Lagrange multipliers, one dense system.
 */
export function nearRoofAt(
  plan: Plan,
  rows: readonly number[][],
  values: readonly number[],
  wish: readonly number[],
  areas: readonly number[],
  mu: number,
): number[] {
  const n = plan.nodeCount
  const q = flatnessForm(plan)
  const shape = tiltless(plan, wish, areas).map((value, i) => areas[i]! * value)
  const within = solutions([...rows, shape], [...values, dot(shape, wish)], n)
  const { particular, basis } = within.particular === null ? solutions(rows, values, n) : within
  const form = (a: readonly number[], b: readonly number[]): number =>
    a.reduce((sum, value, i) => sum + value * (areas[i]! * b[i]! + mu * dot(q[i]!, b)), 0)
  if (basis.length === 0) return particular!
  const gram = new Matrix(basis.map((a) => basis.map((b) => form(a, b))))
  const pull = basis.map((a) => a.reduce((sum, value, i) => sum + value * areas[i]! * wish[i]!, 0) - form(a, particular!))
  const shares = solve(gram, Matrix.columnVector(pull)).getColumn(0)
  return particular!.map((value, i) => value + basis.reduce((sum, column, k) => sum + shares[k]! * column[i]!, 0))
}

/** Q: for each panel the projector onto what no plane through its corners can be (length nodeCount each way). */
export function flatnessForm(plan: Plan): number[][] {
  const q = Array.from({ length: plan.nodeCount }, () => new Array<number>(plan.nodeCount).fill(0))
  for (let p = 0; p < plan.panelCount; p += 1) {
    const nodes = cornersOf(plan, p)
    const planes = new Matrix(nodes.map((node) => [1, plan.work[2 * node]!, plan.work[2 * node + 1]!]))
    const u = new SVD(planes, { autoTranspose: true }).leftSingularVectors
    nodes.forEach((a, i) =>
      nodes.forEach((b, j) => {
        let share = i === j ? 1 : 0
        for (let k = 0; k < 3; k += 1) share -= u.get(i, k) * u.get(j, k)
        q[a]![b]! += share
      }),
    )
  }
  return q
}

/** Heights less the area-weighted best affine function of each part, by normal equations; nodes in a line have many, all alike on them. */
export function tiltless(plan: Plan, heights: readonly number[], areas: readonly number[]): number[] {
  const part = new Array<number>(plan.nodeCount).fill(-1)
  for (let p = plan.panelCount - 1; p >= 0; p -= 1) for (const node of cornersOf(plan, p)) part[node] = plan.partOf[p]!
  const out = [...heights]
  for (let k = 0; k < plan.partCount; k += 1) {
    const nodes = [...part.keys()].filter((node) => part[node] === k)
    const rows = nodes.map((node) => [1, plan.work[2 * node]!, plan.work[2 * node + 1]!])
    const gram = new Matrix(
      [0, 1, 2].map((a) => [0, 1, 2].map((b) => nodes.reduce((sum, node, i) => sum + areas[node]! * rows[i]![a]! * rows[i]![b]!, 0))),
    )
    const right = [0, 1, 2].map((a) => nodes.reduce((sum, node, i) => sum + areas[node]! * rows[i]![a]! * heights[node]!, 0))
    const plane = pseudoInverse(gram).mmul(Matrix.columnVector(right)).getColumn(0)
    nodes.forEach((node, i) => (out[node]! -= dot(rows[i]!, plane)))
  }
  return out
}

/** Force s |d| of each joint from heights: the slope jump across it, planes by the three corners that span most. */
export function foldForces(plan: Plan, heights: readonly number[]): number[] {
  const gradient = Array.from({ length: plan.panelCount }, (_, p) => gradientOf(plan, cornersOf(plan, p), heights))
  return Array.from({ length: plan.jointCount }, (_, j) => {
    const [a, b] = [plan.origin[2 * j]!, plan.origin[2 * j + 1]!]
    const [dx, dy] = [plan.work[2 * b]! - plan.work[2 * a]!, plan.work[2 * b + 1]! - plan.work[2 * a + 1]!]
    const [left, right] = [gradient[plan.panelOf[2 * j]!]!, gradient[plan.panelOf[2 * j + 1]!]!]
    return ((left[1] - right[1]) * dx - (left[0] - right[0]) * dy) / Math.hypot(dx, dy)
  })
}

function gradientOf(plan: Plan, nodes: readonly number[], heights: readonly number[]): readonly [number, number] {
  const { work } = plan
  let best = { det: 0, gradient: [0, 0] as readonly [number, number] }
  for (const a of nodes) {
    for (const b of nodes) {
      for (const c of nodes) {
        const [ux, uy, uz] = [work[2 * b]! - work[2 * a]!, work[2 * b + 1]! - work[2 * a + 1]!, heights[b]! - heights[a]!]
        const [vx, vy, vz] = [work[2 * c]! - work[2 * a]!, work[2 * c + 1]! - work[2 * a + 1]!, heights[c]! - heights[a]!]
        const det = ux * vy - uy * vx
        if (det > best.det) best = { det, gradient: [(uz * vy - uy * vz) / det, (ux * vz - uz * vx) / det] }
      }
    }
  }
  return best.gradient
}

/** Largest force of each joint over the set: over its basis, and over the particular roof where values are given. */
export function foldSizes(plan: Plan, { particular, basis }: AffineSet): number[] {
  const all = [...basis, particular!].map((heights) => foldForces(plan, heights))
  return Array.from({ length: plan.jointCount }, (_, j) => Math.max(...all.map((forces) => Math.abs(forces[j]!))))
}

/** Largest minimum zone over the panels, in spans, by the second reader's brute force. */
export function largestZone(plan: Plan, heights: ArrayLike<number>): number {
  let largest = 0
  for (let p = 0; p < plan.panelCount; p += 1) {
    const corners = cornersOf(plan, p).map((node) => [plan.work[2 * node]!, plan.work[2 * node + 1]!, heights[node]!] as const)
    largest = Math.max(largest, minimumZone(corners))
  }
  return largest
}

/** Dimension of the lifts without a fold: all nodes of each part in one plane. */
export function tiltDimensionOf(plan: Plan): number {
  const rows = Array.from({ length: plan.partCount }, (_, part) => {
    const panels = [...plan.partOf.keys()].filter((p) => plan.partOf[p] === part)
    return coplanarRows(plan, [...new Set(panels.flatMap((p) => cornersOf(plan, p)))])
  }).flat()
  return solutions(
    rows,
    rows.map(() => 0),
    plan.nodeCount,
  ).basis.length
}

/** Rows that put all these nodes on the plane of the three that span the largest triangle. */
export function coplanarRows(plan: Plan, nodes: readonly number[]): number[][] {
  const { work } = plan
  const area = (a: number, b: number, c: number): number =>
    (work[2 * b]! - work[2 * a]!) * (work[2 * c + 1]! - work[2 * a + 1]!) -
    (work[2 * b + 1]! - work[2 * a + 1]!) * (work[2 * c]! - work[2 * a]!)
  let base: [number, number, number] = [nodes[0]!, nodes[1]!, nodes[2]!]
  for (const a of nodes) for (const b of nodes) for (const c of nodes) if (area(a, b, c) > area(...base)) base = [a, b, c]
  const [a, b, c] = base
  const whole = area(a, b, c)
  return nodes
    .filter((node) => !base.includes(node))
    .map((node) => {
      const row = new Array<number>(plan.nodeCount).fill(0)
      row[node] = 1
      row[a] = -area(node, b, c) / whole
      row[b] = -area(a, node, c) / whole
      row[c] = -area(a, b, node) / whole
      return row
    })
}

export const cornersOf = (plan: Plan, p: number): number[] => [...plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1])]

export function dot(a: ArrayLike<number>, b: ArrayLike<number>): number {
  let sum = 0
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!
  return sum
}
