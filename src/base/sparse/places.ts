/** Unknowns in the order of one coordinate, by a radix sort: linear in their number, and the same for equal inputs. */

export interface Places {
  /** Unknowns by ascending coordinate, equal ones by number. */
  readonly sorted: Int32Array
  /** place[i]: where unknown i stands in `sorted`. */
  readonly place: Int32Array
}

const digit = 11
const radix = 1 << digit
const largestKey = 2 ** 31 - 1

/**
 * Sorts by coordinates[2 i + axis], taken to 31 bits of their range: finer differences are treated as equal, which costs
 * at most a slightly worse cut. Coordinates that are not finite count as the smallest or largest.
 *
 * Every loop is a function of its own here and in the files beside: an engine that optimises a running loop has seen nothing
 * of what follows it, and would have to throw the code away at the loop's end (12 times in one cold run of an earlier version).
 */
export function places(coordinates: Float64Array, axis: 0 | 1): Places {
  const key = keys(coordinates, axis)
  let from = numbers(key.length)
  let to = new Int32Array(key.length)
  const count = new Int32Array(radix)
  for (let shift = 0; shift < 31; shift += digit) {
    starts(key, shift, count)
    distribute(key, shift, count, from, to)
    const swap = from
    from = to
    to = swap
  }
  invert(from, to)
  return { sorted: from, place: to }
}

function keys(coordinates: Float64Array, axis: 0 | 1): Int32Array {
  const low = extreme(coordinates, axis, -1)
  const high = extreme(coordinates, axis, 1)
  const scale = high > low ? largestKey / (high - low) : 0
  const key = new Int32Array(coordinates.length >> 1)
  for (let i = 0; i < key.length; i++) {
    const k = ((coordinates[2 * i + axis] as number) - low) * scale
    key[i] = k > 0 ? Math.min(k, largestKey) | 0 : 0
  }
  return key
}

/** The largest (sign 1) or smallest (sign -1) finite coordinate; 0 when there is none. */
function extreme(coordinates: Float64Array, axis: 0 | 1, sign: 1 | -1): number {
  let most = -Infinity
  for (let i: number = axis; i < coordinates.length; i += 2) {
    const c = sign * (coordinates[i] as number)
    if (c > most && c < Infinity) most = c
  }
  return most === -Infinity ? 0 : sign * most
}

function numbers(size: number): Int32Array<ArrayBuffer> {
  const list = new Int32Array(size)
  for (let i = 0; i < size; i++) list[i] = i
  return list
}

/** count[d]: how many keys have a smaller digit than d. */
function starts(key: Int32Array, shift: number, count: Int32Array): void {
  count.fill(0)
  for (let i = 0; i < key.length; i++) {
    const d = ((key[i] as number) >>> shift) & (radix - 1)
    count[d] = (count[d] as number) + 1
  }
  let sum = 0
  for (let d = 0; d < radix; d++) {
    const c = count[d] as number
    count[d] = sum
    sum += c
  }
}

function distribute(key: Int32Array, shift: number, count: Int32Array, from: Int32Array, to: Int32Array): void {
  for (let k = 0; k < from.length; k++) {
    const i = from[k] as number
    const d = ((key[i] as number) >>> shift) & (radix - 1)
    const at = count[d] as number
    to[at] = i
    count[d] = at + 1
  }
}

function invert(sorted: Int32Array, place: Int32Array): void {
  for (let k = 0; k < sorted.length; k++) place[sorted[k] as number] = k
}
