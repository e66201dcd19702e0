/**
 * Smallest vertex separator of a given cut. The unknowns of a minimum vertex cover of the cut edges, once removed, leave no
 * edge across; in a bipartite graph such a cover has the size of a maximum matching and is found from it (D. König 1931;
 * in dissection: J. Liu, ACM Trans. Math. Softw. 15, 1989; C. Ashcraft, J. Liu, SIAM J. Matrix Anal. Appl. 19, 1998).
 *
 * The matching grows by depth-first augmenting paths after a greedy start (M. Hall 1956). Hopcroft and Karp's bound is
 * better, but on cuts of plans all but a few vertices are matched greedily and the paths left are short.
 */

const free = -1

/** Rooms for one bipartite graph at a time; grows when needed, so that thousands of small cuts cost no allocation. */
export class Cover {
  /** Cut vertices of the left side, and their edges to the right side: edge[start[l] .. start[l + 1]) are global numbers. */
  left = new Int32Array(256)
  start = new Int32Array(257)
  edge = new Int32Array(2048)
  leftCount = 0
  /** The cover found last: members[0 .. count). */
  members = new Int32Array(256)
  count = 0

  /** By global number: the left vertex (local number) matched to a right vertex, and the round in which it was seen. */
  private readonly mate: Int32Array
  private readonly seen: Int32Array
  private round = 0
  private partner = new Int32Array(256)
  private stack = new Int32Array(256)
  private cursor = new Int32Array(256)
  private reached = new Uint8Array(256)

  constructor(size: number) {
    this.mate = new Int32Array(size).fill(free)
    this.seen = new Int32Array(size)
  }

  clear(): void {
    this.leftCount = 0
    this.start[0] = 0
  }

  /** Opens room for `more` edges of one more left vertex; the caller writes them to edge[start[leftCount] ..) and calls `close`. */
  open(more: number): number {
    const at = this.start[this.leftCount] as number
    if (at + more > this.edge.length) this.edge = larger(this.edge, at + more)
    return at
  }

  close(vertex: number, end: number): void {
    if (this.leftCount === this.left.length) {
      this.left = larger(this.left, this.leftCount + 1)
      this.start = larger(this.start, this.left.length + 1)
    }
    this.left[this.leftCount++] = vertex
    this.start[this.leftCount] = end
  }

  /** Finds a minimum vertex cover and puts it into members[0 .. count). */
  solve(): void {
    const { leftCount, start, edge, mate, seen } = this
    if (this.partner.length < leftCount) {
      this.partner = new Int32Array(this.left.length)
      this.stack = new Int32Array(this.left.length)
      this.cursor = new Int32Array(this.left.length)
      this.reached = new Uint8Array(this.left.length)
    }
    const { partner, reached } = this
    for (let l = 0; l < leftCount; l++) {
      partner[l] = free
      for (let p = start[l] as number; p < (start[l + 1] as number); p++) {
        const r = edge[p] as number
        if (mate[r] === free) {
          mate[r] = l
          partner[l] = r
          break
        }
      }
    }
    for (let l = 0; l < leftCount; l++) if (partner[l] === free) this.augment(l)

    // Everything that alternating paths reach from free left vertices: the cover is the left not reached and the right reached.
    reached.fill(0, 0, leftCount)
    const round = ++this.round
    let depth = 0
    for (let l = 0; l < leftCount; l++) {
      if (partner[l] !== free) continue
      reached[l] = 1
      this.stack[depth++] = l
    }
    if (this.members.length < leftCount) this.members = new Int32Array(this.left.length)
    let count = 0
    while (depth > 0) {
      const l = this.stack[--depth] as number
      for (let p = start[l] as number; p < (start[l + 1] as number); p++) {
        const r = edge[p] as number
        if (seen[r] === round) continue
        seen[r] = round
        this.members[count++] = r
        const next = mate[r] as number
        if (reached[next] === 0) {
          reached[next] = 1
          this.stack[depth++] = next
        }
      }
    }
    for (let l = 0; l < leftCount; l++) if (reached[l] === 0) this.members[count++] = this.left[l] as number
    this.count = count
    for (let l = 0; l < leftCount; l++) if (partner[l] !== free) mate[partner[l] as number] = free
  }

  /** Looks for an augmenting path from a free left vertex and flips it. */
  private augment(from: number): void {
    const { start, edge, mate, seen, partner, stack, cursor } = this
    const round = ++this.round
    let depth = 0
    stack[0] = from
    cursor[0] = start[from] as number
    while (depth >= 0) {
      const l = stack[depth] as number
      const p = cursor[depth] as number
      if (p === start[l + 1]) {
        depth--
        continue
      }
      cursor[depth] = p + 1
      const r = edge[p] as number
      if (seen[r] === round) continue
      seen[r] = round
      const next = mate[r] as number
      if (next !== free) {
        stack[++depth] = next
        cursor[depth] = start[next] as number
        continue
      }
      // The edge each level took last leads to the end: match along it.
      for (; depth >= 0; depth--) {
        const along = edge[(cursor[depth] as number) - 1] as number
        const member = stack[depth] as number
        mate[along] = member
        partner[member] = along
      }
      return
    }
  }
}

function larger(array: Int32Array, need: number): Int32Array<ArrayBuffer> {
  const room = new Int32Array(Math.max(need, 2 * array.length))
  room.set(array)
  return room
}
