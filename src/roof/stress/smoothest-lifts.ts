/**
 * The ways a plan can still lift, smoothest first: Rayleigh-Ritz on the fold energy (sum of squared form forces) over the
 * height less its tilt, within a block of lifts. With few dimensions the block spans all lifts and the ways are exact;
 * with many it is made of the lifts nearest to the smooth functions 1, x, y, x^2 .. y^4 and a few random ones.
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix'
import { gaussians } from '../../base/random.ts'
import { forces, stressOfGradients } from './forces.ts'
import { projected, type LiftSpace } from './lift-space.ts'
import { panelPlanes } from './panel-bases.ts'
import { lessTilt } from './tilt-part.ts'

/** Up to this many dimensions the block is the whole space. */
const wholeSpace = 24

/**
 * At most `count` lifts (heights, conditions kept with their values zero), orthogonal in fold energy, each with greatest
 * height 1 over its mean plane; fewer when fewer fold. `tilts` is how many dimensions of the space fold nothing.
 */
export function smoothestLifts(space: LiftSpace, tilts: number, areas: Float64Array, count: number): Float64Array[] {
  const { plan } = space
  const folding = space.dimension - tilts
  if (folding <= 0) return []
  const n = plan.nodeCount
  const start = space.dimension <= wholeSpace ? gaussians(n * space.dimension, 11) : smoothStart(plan.work, n)
  const columns = start.length / n
  const block = projected(space, start, columns)
  const lifts = Array.from({ length: columns }, (_, k) => block.subarray(k * n, (k + 1) * n))
  const shapes = lifts.map((lift) => lessTilt(plan, lift, areas))
  const folds = lifts.map((lift) => forces(plan, stressOfGradients(plan, panelPlanes(plan, space.bases, lift).gradient)))

  // Whiten the sizes first: directions without size (tilts, repeats) are left out.
  const size = gram(shapes, areas)
  const sizes = new EigenvalueDecomposition(size, { assumeSymmetric: true })
  const largest = Math.max(...sizes.realEigenvalues)
  const kept = sizes.realEigenvalues.map((value, k) => ({ value, k })).filter(({ value }) => value > 1e-10 * largest)
  kept.sort((a, b) => b.value - a.value)
  kept.length = Math.min(kept.length, folding)
  const white = new Matrix(columns, kept.length)
  kept.forEach(({ value, k }, j) => {
    for (let i = 0; i < columns; i += 1) white.set(i, j, sizes.eigenvectorMatrix.get(i, k) / Math.sqrt(value))
  })
  const energy = white.transpose().mmul(gram(folds, null)).mmul(white)
  const ritz = new EigenvalueDecomposition(energy, { assumeSymmetric: true })
  const order = ritz.realEigenvalues.map((value, k) => ({ value, k })).sort((a, b) => a.value - b.value).slice(0, count)
  return order.map(({ k }) => {
    const mix = white.mmul(new Matrix([ritz.eigenvectorMatrix.getColumn(k)]).transpose()).getColumn(0)
    const way = new Float64Array(n)
    mix.forEach((share, j) => {
      for (let i = 0; i < n; i += 1) way[i] += share * lifts[j][i]
    })
    let peak = 0
    for (const value of lessTilt(plan, way, areas)) if (Math.abs(value) > Math.abs(peak)) peak = value
    return way.map((value) => value / peak)
  })
}

/** Monomials x^a y^b up to degree 4 over the plan, and eight random vectors, one after another. */
function smoothStart(work: Float64Array, n: number): Float64Array {
  const columns: Float64Array[] = []
  for (let degree = 0; degree <= 4; degree += 1) {
    for (let b = 0; b <= degree; b += 1) {
      columns.push(Float64Array.from({ length: n }, (_, i) => (2 * work[2 * i]) ** (degree - b) * (2 * work[2 * i + 1]) ** b))
    }
  }
  const noise = gaussians(8 * n, 13)
  for (let k = 0; k < 8; k += 1) columns.push(noise.subarray(k * n, (k + 1) * n))
  const out = new Float64Array(n * columns.length)
  columns.forEach((column, k) => out.set(column, k * n))
  return out
}

/** Matrix of the weighted inner products of the vectors. */
function gram(vectors: readonly Float64Array[], weights: Float64Array | null): Matrix {
  const out = new Matrix(vectors.length, vectors.length)
  for (let a = 0; a < vectors.length; a += 1) {
    for (let b = a; b < vectors.length; b += 1) {
      let sum = 0
      for (let i = 0; i < vectors[a].length; i += 1) sum += vectors[a][i] * vectors[b][i] * (weights === null ? 1 : weights[i])
      out.set(a, b, sum)
      out.set(b, a, sum)
    }
  }
  return out
}
