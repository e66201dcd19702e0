/** The items of a list by the set they belong to, sets in order of their first item in the list. */
import type { DisjointSets } from '../../base/disjoint-sets.ts'

export function gathered(list: Iterable<number>, sets: DisjointSets): number[][] {
  const byRoot = new Map<number, number[]>()
  for (const item of list) {
    const root = sets.root(item)
    const set = byRoot.get(root)
    if (set === undefined) byRoot.set(root, [item])
    else set.push(item)
  }
  return [...byRoot.values()]
}
