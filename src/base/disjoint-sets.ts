/**
 * Disjoint sets of 0 .. count - 1 (Tarjan, J. ACM 22 (1975), with path halving). The lowest member stays the root of its
 * set, so sets can be numbered by their first member.
 */
export interface DisjointSets {
  /** The lowest member of the set that holds `item`. */
  root(item: number): number
  /** Makes one set of the two that hold a and b. */
  join(a: number, b: number): void
  /** Set of each item, numbered from 0 by first member, and how many sets there are. */
  numbered(): { setOf: Int32Array; setCount: number }
}

export function disjointSets(count: number): DisjointSets {
  const parent = new Int32Array(count)
  for (let i = 0; i < count; i += 1) parent[i] = i
  const root = (item: number): number => {
    let at = item
    while (parent[at] !== at) {
      parent[at] = parent[parent[at]]
      at = parent[at]
    }
    return at
  }
  return {
    root,
    join(a, b) {
      const x = root(a), y = root(b)
      if (x !== y) parent[Math.max(x, y)] = Math.min(x, y)
    },
    numbered() {
      const setOf = new Int32Array(count)
      let setCount = 0
      for (let i = 0; i < count; i += 1) setOf[i] = root(i) === i ? setCount++ : setOf[root(i)]
      return { setOf, setCount }
    },
  }
}
