/** Elimination of four pivots at a time inside one front. */

/** What a pivot is judged by, and what became of the lost ones. */
export interface PivotRules {
  /** Stands in for a pivot that is lost. */
  readonly stand: number
  zeros: number
  finite: boolean
}

/**
 * Eliminates four columns whose updates from the left are done. The diagonal block (data[at ..], 4 x 4, entry (i, j) at
 * 4 j + i) becomes unit lower triangular L below its diagonal; pivots go to pivot[0 .. 4). Only the first `real` columns are
 * pivots of the matrix, the others fill up the sliver and get pivot 1. scale[i]: |a_ii| before elimination.
 *
 *   d_j = a_jj - sum_{k<j} l_jk^2 d_k,   l_ij = (a_ij - sum_{k<j} l_ik d_k l_jk) / d_j
 */
export function eliminateFour(
  data: Float64Array, at: number, pivot: Float64Array, pivotAt: number, scale: Float64Array, real: number, rules: PivotRules,
): void {
  for (let j = 0; j < 4; j++) {
    let d = data[at + 5 * j] as number
    if (j >= real) {
      // Nothing was ever added to a column that only fills up.
      pivot[pivotAt + j] = 1
      continue
    }
    if (!(Math.abs(d) > Number.EPSILON * (scale[pivotAt + j] as number))) {
      if (Number.isNaN(d)) rules.finite = false
      d = rules.stand
      rules.zeros++
    } else if (!Number.isFinite(d)) rules.finite = false
    pivot[pivotAt + j] = d
    for (let k = j + 1; k < 4; k++) {
      const l = (data[at + 4 * j + k] as number) / d
      for (let i = k; i < 4; i++) data[at + 4 * k + i] = (data[at + 4 * k + i] as number) - (data[at + 4 * j + i] as number) * l
    }
    for (let i = j + 1; i < 4; i++) data[at + 4 * j + i] = (data[at + 4 * j + i] as number) / d
  }
}

/**
 * The same four columns in the `count` slivers below: X <- X L^-T D^-1, X the 4 x 4 block at c, c + step, c + step + (step +
 * grow) and so on.
 */
export function scaleBelow(
  data: Float64Array, at: number, pivot: Float64Array, pivotAt: number, c: number, step: number, grow: number, count: number,
): void {
  const l10 = data[at + 1] as number
  const l20 = data[at + 2] as number
  const l30 = data[at + 3] as number
  const l21 = data[at + 6] as number
  const l31 = data[at + 7] as number
  const l32 = data[at + 11] as number
  const r0 = 1 / (pivot[pivotAt] as number)
  const r1 = 1 / (pivot[pivotAt + 1] as number)
  const r2 = 1 / (pivot[pivotAt + 2] as number)
  const r3 = 1 / (pivot[pivotAt + 3] as number)
  for (let n = 0; n < count; n++) {
    for (let i = c; i < c + 4; i++) {
      const x0 = data[i] as number
      const x1 = (data[i + 4] as number) - l10 * x0
      const x2 = (data[i + 8] as number) - l20 * x0 - l21 * x1
      const x3 = (data[i + 12] as number) - l30 * x0 - l31 * x1 - l32 * x2
      data[i] = x0 * r0
      data[i + 4] = x1 * r1
      data[i + 8] = x2 * r2
      data[i + 12] = x3 * r3
    }
    c += step
    step += grow
  }
}
