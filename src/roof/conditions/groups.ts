/** Sets that grow together (union and find with path halving; Tarjan, van Leeuwen 1984). */

export interface Groups {
  find(item: number): number
  join(a: number, b: number): void
}

/** `size` items, each in a group of its own; a group is named by its lowest item. */
export function groups(size: number): Groups {
  const parent = Int32Array.from({ length: size }, (_, i) => i)
  const find = (item: number): number => {
    let at = item
    while (parent[at] !== at) {
      parent[at] = parent[parent[at]]
      at = parent[at]
    }
    return at
  }
  return {
    find,
    join: (a, b) => {
      const [x, y] = [find(a), find(b)]
      if (x !== y) parent[Math.max(x, y)] = Math.min(x, y)
    },
  }
}

/** The items of the list by group, groups in order of their first item in the list. */
export function gathered(list: Iterable<number>, all: Groups): number[][] {
  const byName = new Map<number, number[]>()
  for (const item of list) {
    const name = all.find(item)
    const group = byName.get(name)
    if (group === undefined) byName.set(name, [item])
    else group.push(item)
  }
  return [...byName.values()]
}
