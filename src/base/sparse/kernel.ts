/**
 * The operations that take nearly all the time: C <- C - A B on slivers of four rows, and its mirror image for the backward
 * sweep of several right-hand sides.
 *
 * In plain JavaScript: four rows by two columns in eight local sums, which with four numbers of A and two of B is what sixteen
 * vector registers hold. `kernel-binary.ts` holds the same operations with two rows in one instruction; both do the same
 * roundings in the same order, so that results do not depend on which of them ran. Measured on 64 x 64 blocks in cache: plain
 * 4.9, binary 12.6 GFlop/s; a whole refactorisation of 100,000 cells: plain 4.1, binary 8.0.
 *
 * Tried and dropped: four by four sums in plain JavaScript (the same speed for twice the text).
 */

/**
 * For n = 0 .. count - 1: the 4 x 4 block C_n (store[c + 4 j + i]) becomes C_n - A_n B_n, or -A_n B_n when `keep` is 0, where
 * A_n is 4 x depth (store[a + 4 k + i]) and B_n is depth x 4 (store[b + 4 k + j]). After each block a, b and c advance by
 * their steps, and aStep and cStep by their growths (rows of a triangle of slivers get longer). depth is a positive multiple
 * of four.
 */
export type Update = (
  a: number, aStep: number, aGrow: number, b: number, bStep: number, c: number, cStep: number, cGrow: number,
  count: number, depth: number, keep: number,
) => void

/**
 * For n = 0 .. count - 1: C_n <- C_n - A B_n^T with all three 4 x 4: C_n at c + 16 n (4 j + i), A at a (4 k + i), B_n at
 * b + 16 n, where (j, k) is at 4 j + k.
 */
export type Mirror = (a: number, b: number, c: number, count: number) => void

export interface Kernels {
  readonly update: Update
  readonly mirror: Mirror
}

/** The operations on a given store. */
export function plainKernels(store: Float64Array): Kernels {
  return {
    update: (a, aStep, aGrow, b, bStep, c, cStep, cGrow, count, depth, keep) => {
      for (let n = 0; n < count; n++) {
        twoColumns(store, a, b, c, depth, keep)
        twoColumns(store, a, b + 2, c + 8, depth, keep)
        a += aStep
        aStep += aGrow
        b += bStep
        c += cStep
        cStep += cGrow
      }
    },
    mirror: (a, b, c, count) => {
      const end = c + 16 * count
      // One column of C_n at a time; b runs through B_n's rows.
      for (; c < end; c += 4, b += 4) {
        const b0 = store[b] as number
        const b1 = store[b + 1] as number
        const b2 = store[b + 2] as number
        const b3 = store[b + 3] as number
        for (let i = 0; i < 4; i++) {
          store[c + i] = (store[c + i] as number) - (store[a + i] as number) * b0 - (store[a + 4 + i] as number) * b1
            - (store[a + 8 + i] as number) * b2 - (store[a + 12 + i] as number) * b3
        }
      }
    },
  }
}

function twoColumns(store: Float64Array, a: number, b: number, c: number, depth: number, keep: number): void {
  let c00 = 0
  let c10 = 0
  let c20 = 0
  let c30 = 0
  let c01 = 0
  let c11 = 0
  let c21 = 0
  let c31 = 0
  if (keep !== 0) {
    c00 = store[c] as number
    c10 = store[c + 1] as number
    c20 = store[c + 2] as number
    c30 = store[c + 3] as number
    c01 = store[c + 4] as number
    c11 = store[c + 5] as number
    c21 = store[c + 6] as number
    c31 = store[c + 7] as number
  }
  const end = a + 4 * depth
  for (; a < end; a += 4, b += 4) {
    const a0 = store[a] as number
    const a1 = store[a + 1] as number
    const a2 = store[a + 2] as number
    const a3 = store[a + 3] as number
    const b0 = store[b] as number
    const b1 = store[b + 1] as number
    c00 -= a0 * b0
    c10 -= a1 * b0
    c20 -= a2 * b0
    c30 -= a3 * b0
    c01 -= a0 * b1
    c11 -= a1 * b1
    c21 -= a2 * b1
    c31 -= a3 * b1
  }
  store[c] = c00
  store[c + 1] = c10
  store[c + 2] = c20
  store[c + 3] = c30
  store[c + 4] = c01
  store[c + 5] = c11
  store[c + 6] = c21
  store[c + 7] = c31
}
