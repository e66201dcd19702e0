/**
 * Symmetric sparse matrices as two objects: the pattern, which is ordered and analysed once, and the values, which may
 * change as often as one likes (T. A. Davis, "Direct Methods for Sparse Linear Systems", SIAM 2006, chapter 2).
 */

/** The lower triangle by columns: the rows of column j are row[start[j] .. start[j + 1]), ascending, the diagonal first. */
export interface Pattern {
  readonly size: number
  readonly start: Int32Array
  readonly row: Int32Array
}

export interface SymmetricMatrix {
  readonly pattern: Pattern
  /** One value per entry of `pattern.row`. */
  readonly values: Float64Array
}
