/** A binary heap of row numbers, lowest first (Williams 1964). A number that waits already is not to be pushed again. */
export function rowHeap(): { push(row: number): void; pop(): number } {
  const heap: number[] = []
  return {
    push: (row) => {
      let i = heap.length
      heap.push(row)
      while (i > 0) {
        const up = (i - 1) >> 1
        if (heap[up] <= row) break
        heap[i] = heap[up]
        i = up
      }
      heap[i] = row
    },
    /** The lowest number, -1 when none waits. */
    pop: () => {
      const lowest = heap[0]
      const last = heap.pop()
      if (lowest === undefined || last === undefined) return -1
      if (heap.length === 0) return lowest
      let i = 0
      for (;;) {
        let down = 2 * i + 1
        if (down >= heap.length) break
        if (down + 1 < heap.length && heap[down + 1] < heap[down]) down += 1
        if (heap[down] >= last) break
        heap[i] = heap[down]
        i = down
      }
      heap[i] = last
      return lowest
    },
  }
}
