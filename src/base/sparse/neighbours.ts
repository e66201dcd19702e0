/** The graph of a pattern: who shares an entry with whom. */
import type { Pattern } from './matrix.ts'

/** The neighbours of unknown i are other[start[i] .. start[i + 1]), without i itself. */
export interface Neighbours {
  readonly start: Int32Array
  readonly other: Int32Array
}

/** Both triangles of the pattern, without the diagonal. */
export function neighbours({ size, start, row }: Pattern): Neighbours {
  // Counted two places ahead, so that filling moves each start to where it belongs.
  const first = new Int32Array(size + 2)
  for (let j = 0; j < size; j++) {
    const to = start[j + 1] as number
    let own = 0
    for (let p = start[j] as number; p < to; p++) {
      const i = row[p] as number
      if (i === j) continue
      first[i + 2] = (first[i + 2] as number) + 1
      own++
    }
    first[j + 2] = (first[j + 2] as number) + own
  }
  for (let i = 2; i < size + 2; i++) first[i] = (first[i] as number) + (first[i - 1] as number)
  const other = new Int32Array(first[size + 1] as number)
  for (let j = 0; j < size; j++) {
    const to = start[j + 1] as number
    let own = first[j + 1] as number
    for (let p = start[j] as number; p < to; p++) {
      const i = row[p] as number
      if (i === j) continue
      const at = first[i + 1] as number
      other[at] = j
      first[i + 1] = at + 1
      other[own++] = i
    }
    first[j + 1] = own
  }
  return { start: first.subarray(0, size + 1), other }
}
