/** Edges without repeats. */

export interface DistinctEdges {
  /** Ends of each distinct edge, in order of first use and as first drawn. */
  readonly a: Int32Array
  readonly b: Int32Array
  /** Half-edge of each input edge: 2 e when it runs like edge e, 2 e + 1 against it, -1 when its ends are one node. */
  readonly half: Int32Array
}

/** Open hashing by the pair of ends; linear in the number of edges even where thousands meet in one node. */
export function distinctEdges(a: Int32Array, b: Int32Array): DistinctEdges {
  const slots = 2 ** Math.ceil(Math.log2(2 * Math.max(8, a.length)))
  const table = new Int32Array(slots).fill(-1)
  const half = new Int32Array(a.length).fill(-1)
  const keptA = new Int32Array(a.length)
  const keptB = new Int32Array(a.length)
  let count = 0
  for (let i = 0; i < a.length; i += 1) {
    if (a[i] === b[i]) continue
    const low = Math.min(a[i], b[i])
    const high = Math.max(a[i], b[i])
    let hash = Math.imul(low, 0x9e3779b1) ^ Math.imul(high, 0x85ebca6b)
    hash = Math.imul(hash ^ (hash >>> 15), 0x2c1b3c6d)
    let at = (hash ^ (hash >>> 13)) & (slots - 1)
    let edge = table[at]
    while (edge >= 0 && !((keptA[edge] === low && keptB[edge] === high) || (keptA[edge] === high && keptB[edge] === low))) {
      at = (at + 1) & (slots - 1)
      edge = table[at]
    }
    if (edge < 0) {
      edge = count
      table[at] = edge
      keptA[edge] = a[i]
      keptB[edge] = b[i]
      count += 1
    }
    half[i] = keptA[edge] === a[i] ? 2 * edge : 2 * edge + 1
  }
  return { a: keptA.slice(0, count), b: keptB.slice(0, count), half }
}
