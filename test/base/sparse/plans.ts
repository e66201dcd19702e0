/** Plans as corner lists, and their flatness forms, for tests of the solver: nothing here is shared with the product. */
import { random } from '../../../src/base/random.ts'
import { cliquePattern, type CliquePattern } from '../../../src/base/sparse/cliques.ts'
import type { SymmetricMatrix } from '../../../src/base/sparse/matrix.ts'

export interface TestPlan {
  readonly coordinates: Float64Array
  readonly start: Int32Array
  readonly index: Int32Array
}

export function planOf(points: readonly (readonly [number, number])[], faces: readonly (readonly number[])[]): TestPlan {
  const start = new Int32Array(faces.length + 1)
  faces.forEach((face, f) => (start[f + 1] = start[f]! + face.length))
  return { coordinates: Float64Array.from(points.flat()), start, index: Int32Array.from(faces.flat()) }
}

/** nx x ny quads, inner nodes shifted by up to `jitter` of a panel. Freedom of such a grid is nx + ny - 2 or more. */
export function quads(nx: number, ny: number, jitter = 0.1, seed = 1): TestPlan {
  const next = random(seed)
  const points: [number, number][] = []
  for (let i = 0; i <= nx; i++) for (let j = 0; j <= ny; j++) points.push([i + jitter * (2 * next() - 1), j + jitter * (2 * next() - 1)])
  const at = (i: number, j: number): number => i * (ny + 1) + j
  const faces: number[][] = []
  for (let i = 0; i < nx; i++) for (let j = 0; j < ny; j++) faces.push([at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)])
  return planOf(points, faces)
}

/** A honeycomb as a brick wall: panels of six corners, three at a node. */
export function bricks(nx: number, ny: number, jitter = 0.1, seed = 1): TestPlan {
  const next = random(seed)
  const width = 2 * nx + 2
  const points: [number, number][] = []
  for (let j = 0; j <= ny; j++) {
    for (let i = 0; i < width; i++) points.push([i + jitter * (2 * next() - 1), 1.7 * j + ((i + j) % 2) * 0.5 + jitter * (2 * next() - 1)])
  }
  const faces: number[][] = []
  for (let j = 0; j < ny; j++) {
    for (let k = 0; k < nx; k++) {
      const a = j * width + 2 * k + (j % 2)
      faces.push([a, a + 1, a + 2, a + 2 + width, a + 1 + width, a + width])
    }
  }
  return planOf(points, faces)
}

export function cliquesOf(plan: TestPlan): CliquePattern {
  return cliquePattern(plan.coordinates.length / 2, plan.start, plan.index)
}

/**
 * The flatness form: over all panels the projector I - B (B^T B)^-1 B^T with B = [x y 1] of the corners, plus `shift` I.
 * The basis is orthogonalised by Gram and Schmidt, twice.
 */
export function flatnessForm(plan: TestPlan, shift: number, { pattern, position }: CliquePattern = cliquesOf(plan)): SymmetricMatrix {
  const values = new Float64Array(pattern.row.length)
  const { coordinates, start, index } = plan
  let span = 0
  for (let axis = 0; axis < 2; axis++) {
    const list = Array.from({ length: pattern.size }, (_, i) => coordinates[2 * i + axis]!)
    span = Math.max(span, list.reduce((a, b) => Math.max(a, b), -Infinity) - list.reduce((a, b) => Math.min(a, b), Infinity))
  }
  let at = 0
  for (let f = 0; f + 1 < start.length; f++) {
    const face = index.subarray(start[f]!, start[f + 1]!)
    const k = face.length
    const mean = [0, 1].map((axis) => face.reduce((sum, i) => sum + coordinates[2 * i + axis]!, 0) / k)
    const basis: number[][] = []
    const centred = [0, 1].map((axis) => Array.from(face, (i) => (coordinates[2 * i + axis]! - mean[axis]!) / span))
    const raw = [Array.from(face, () => 1), ...centred]
    for (const column of raw) {
      let v = column
      const before = Math.hypot(...v)
      for (let pass = 0; pass < 2; pass++) {
        for (const b of basis) {
          const dot = b.reduce((sum, value, i) => sum + value * v[i]!, 0)
          v = v.map((value, i) => value - dot * b[i]!)
        }
      }
      const length = Math.hypot(...v)
      if (length > 1e-12 * before) basis.push(v.map((value) => value / length))
    }
    for (let a = 0; a < k; a++) {
      for (let b = a; b < k; b++) {
        let value = a === b ? 1 : 0
        for (const column of basis) value -= column[a]! * column[b]!
        values[position[at]!] = values[position[at]!]! + value
        at++
      }
    }
  }
  for (let j = 0; j < pattern.size; j++) values[pattern.start[j]!] = values[pattern.start[j]!]! + shift
  return { pattern, values }
}

export function dense({ pattern: { size, start, row }, values }: SymmetricMatrix): number[][] {
  const full = Array.from({ length: size }, () => new Array<number>(size).fill(0))
  for (let j = 0; j < size; j++) {
    for (let p = start[j]!; p < start[j + 1]!; p++) {
      full[row[p]!]![j] = values[p]!
      full[j]![row[p]!] = values[p]!
    }
  }
  return full
}

/** Whether two arrays hold the same bytes. */
export function same(a: Float64Array | Int32Array, b: Float64Array | Int32Array): boolean {
  return Buffer.from(a.buffer, a.byteOffset, a.byteLength).equals(Buffer.from(b.buffer, b.byteOffset, b.byteLength))
}
