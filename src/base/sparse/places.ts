/** Unknowns in the order of one coordinate, by a radix sort: linear in their number, and the same for equal inputs. */

export interface Places {
  /** Unknowns by ascending coordinate, equal ones by number. */
  readonly sorted: Int32Array
  /** place[i]: where unknown i stands in `sorted`. */
  readonly place: Int32Array
  /** Smallest and largest finite coordinate; 0 and 0 when there is none. */
  readonly low: number
  readonly high: number
}

const digit = 11
const radix = 1 << digit

/**
 * Sorts by coordinates[2 i + axis], taken to 32 bits of their range: finer differences are treated as equal, which costs
 * at most a slightly worse cut. Coordinates that are not finite count as the smallest.
 */
export function places(coordinates: Float64Array, axis: 0 | 1): Places {
  const size = coordinates.length >> 1
  let low = Infinity
  let high = -Infinity
  for (let i = axis; i < coordinates.length; i += 2) {
    const c = coordinates[i] as number
    if (c < low && c !== -Infinity) low = c
    if (c > high && c !== Infinity) high = c
  }
  if (!(low <= high)) low = high = 0
  const scale = high > low ? 4294967295 / (high - low) : 0
  const key = new Uint32Array(size)
  for (let i = 0; i < size; i++) {
    const k = ((coordinates[2 * i + axis] as number) - low) * scale
    key[i] = k > 0 ? Math.min(k, 4294967295) : 0
  }
  let from = new Int32Array(size)
  let to = new Int32Array(size)
  for (let i = 0; i < size; i++) from[i] = i
  const count = new Int32Array(radix)
  for (let shift = 0; shift < 32; shift += digit) {
    count.fill(0)
    for (let i = 0; i < size; i++) {
      const d = ((key[i] as number) >>> shift) & (radix - 1)
      count[d] = (count[d] as number) + 1
    }
    let sum = 0
    for (let d = 0; d < radix; d++) {
      const c = count[d] as number
      count[d] = sum
      sum += c
    }
    for (let k = 0; k < size; k++) {
      const i = from[k] as number
      const d = ((key[i] as number) >>> shift) & (radix - 1)
      const at = count[d] as number
      to[at] = i
      count[d] = at + 1
    }
    const swap = from
    from = to
    to = swap
  }
  for (let k = 0; k < size; k++) to[from[k] as number] = k
  return { sorted: from, place: to, low, high }
}
