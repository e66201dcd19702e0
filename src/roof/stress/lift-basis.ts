/**
 * An orthonormal basis of the lifts of a space, where they are few: then the nearest lift to any wish is a small dense system
 * and costs no solve. Found once a factor, random heights projected and flattened, all columns in one sweep.
 */
import { Matrix, solve } from 'ml-matrix'
import { dot } from '../../base/dot.ts'
import { gaussians } from '../../base/random.ts'
import type { Factor } from '../../base/sparse/factor.ts'
import { flattened, projected, type LiftSpace } from './lift-space.ts'

/** Up to this many dimensions: eight columns go through the factor together, for little more than one. */
const mostColumns = 8

const known = new WeakMap<Factor, readonly Float64Array[]>()

/** The basis (heights, length nodeCount each; conditions kept with their values zero), null where the lifts are many. */
export function liftBasis(space: LiftSpace): readonly Float64Array[] | null {
  const { dimension, factor, probe, plan: { nodeCount } } = space
  if (dimension > mostColumns) return null
  const before = known.get(factor)
  if (before !== undefined) return before
  const tilts = plainTilts(space)
  const basis: Float64Array[] = []
  const others = dimension - tilts.length
  const block = others === 0 ? new Float64Array(0) : flattened(space, others === 1 && probe !== null ? probe.lift : projected(space, gaussians(nodeCount * others, 31), others), others)
  for (let k = 0; k < dimension; k += 1) {
    const column = tilts[k] ?? block.slice((k - tilts.length) * nodeCount, (k + 1 - tilts.length) * nodeCount)
    for (let pass = 0; pass < 2; pass += 1) for (const other of basis) addTo(column, other, -dot(other, column))
    const size = Math.sqrt(dot(column, column))
    for (let i = 0; i < nodeCount; i += 1) column[i] /= size
    basis.push(column)
  }
  known.set(factor, basis)
  return basis
}

/** The heights 1, x, y of a plan of one part on which nothing is held: lifts that need not be looked for. */
function plainTilts({ plan, elimination, dimension }: LiftSpace): Float64Array[] {
  if (plan.partCount > 1 || elimination.free.length < plan.nodeCount || dimension < 3) return []
  return [
    new Float64Array(plan.nodeCount).fill(1),
    Float64Array.from({ length: plan.nodeCount }, (_, i) => plan.work[2 * i]), Float64Array.from({ length: plan.nodeCount }, (_, i) => plan.work[2 * i + 1]),
  ]
}

/** to <- to + share * what. */
export function addTo(to: Float64Array, what: Float64Array, share: number): void {
  for (let i = 0; i < to.length; i += 1) to[i] += share * what[i]
}

/** a - b. */
export function minus(a: Float64Array, b: Float64Array): Float64Array {
  const out = a.slice()
  addTo(out, b, -1)
  return out
}

/** What the heights are nearest in: M as a product, and M times the wish with what soft conditions add. */
interface Measure {
  readonly apply: (heights: Float64Array) => Float64Array
  readonly pull: (wish: Float64Array, zeroSoft: boolean) => Float64Array
  /** The diagonal of M where that is all there is to it. */
  readonly plain?: Float64Array
}

/** roof + B c nearest in the metric M to the wish: B^T M B c = B^T M (wish - roof). */
export function nearestOfFew(basis: readonly Float64Array[], roof: Float64Array, metric: Measure, wish: Float64Array, zeroSoft: boolean): Float64Array {
  const shares = solve(gram(basis, metric), Matrix.columnVector(pulls(basis, roof, metric, wish, zeroSoft)))
  const h = roof.slice()
  basis.forEach((column, k) => addTo(h, column, shares.get(k, 0)))
  return h
}

/** B^T M (wish - roof). */
function pulls(basis: readonly Float64Array[], roof: Float64Array, metric: Measure, wish: Float64Array, zeroSoft: boolean): number[] {
  const { plain } = metric
  const residual = plain === undefined ? minus(metric.pull(wish, zeroSoft), metric.apply(roof)) : minus(wish, roof)
  if (plain !== undefined) for (let i = 0; i < residual.length; i += 1) residual[i] *= plain[i]
  return basis.map((column) => dot(column, residual))
}

const grams = new WeakMap<readonly Float64Array[], { readonly areas: Float64Array; readonly gram: Matrix }>()

/** B^T M B; found once for a diagonal metric. */
function gram(basis: readonly Float64Array[], { apply, plain }: Measure): Matrix {
  const known = grams.get(basis)
  if (known !== undefined && known.areas === plain) return known.gram
  const turned = basis.map((column) => apply(column))
  const made = new Matrix(basis.map((a) => turned.map((b) => dot(a, b))))
  if (plain !== undefined) grams.set(basis, { areas: plain, gram: made })
  return made
}
