/**
 * Smallest vertex separator of a given cut. The unknowns of a minimum vertex cover of the cut edges, once removed, leave no
 * edge across; in a bipartite graph such a cover has the size of a maximum matching and is found from it (D. König 1931;
 * in dissection: J. Liu, ACM Trans. Math. Softw. 15, 1989; C. Ashcraft, J. Liu, SIAM J. Matrix Anal. Appl. 19, 1998).
 *
 * The matching grows by depth-first augmenting paths after a greedy start (M. Hall 1956). The bound of J. Hopcroft and R. Karp
 * (1973) is better, but on cuts of plans all but a few vertices are matched greedily and the paths left are short.
 */

const none = -1

/** One bipartite graph at a time, of unknowns by number; its rooms are kept, so that thousands of small cuts allocate nothing. */
export class Cover {
  /** The cover found last: members[0 .. count). */
  members = new Int32Array(64)
  count = 0
  /** Left unknowns with edges; the edges of each are a list: right unknown to[e], next edge next[e], from the newest on. */
  private left = new Int32Array(64)
  private leftCount = 0
  private to = new Int32Array(512)
  private next = new Int32Array(512)
  private edgeCount = 0
  /** By unknown: its newest edge (left side), its partner (either side), the round in which it was reached. */
  private readonly newest: Int32Array
  private readonly partner: Int32Array
  private readonly reached: Int32Array
  private round = 0
  /** A path of left unknowns, and the edge by which each is left. */
  private path = new Int32Array(64)
  private edge = new Int32Array(64)

  constructor(size: number) {
    this.newest = new Int32Array(size).fill(none)
    this.partner = new Int32Array(size).fill(none)
    this.reached = new Int32Array(size)
  }

  /** Adds the edge between an unknown of the left side and one of the right side. */
  add(left: number, right: number): void {
    if (this.newest[left] === none) {
      if (this.leftCount === this.left.length) this.left = larger(this.left)
      this.left[this.leftCount++] = left
    }
    if (this.edgeCount === this.to.length) {
      this.to = larger(this.to)
      this.next = larger(this.next)
    }
    const e = this.edgeCount++
    this.to[e] = right
    this.next[e] = this.newest[left] as number
    this.newest[left] = e
  }

  /** Finds a minimum vertex cover of the edges added, puts it into members[0 .. count), and forgets the edges. */
  solve(): void {
    const { left, leftCount, to, next, newest, partner, reached } = this
    if (this.path.length < leftCount) {
      this.path = new Int32Array(left.length)
      this.edge = new Int32Array(left.length)
      this.members = new Int32Array(left.length)
    }
    for (let m = 0; m < leftCount; m++) {
      const l = left[m] as number
      for (let e = newest[l] as number; e !== none; e = next[e] as number) {
        const r = to[e] as number
        if (partner[r] !== none) continue
        partner[r] = l
        partner[l] = r
        break
      }
    }
    for (let m = 0; m < leftCount; m++) if (partner[left[m] as number] === none) this.augment(left[m] as number)

    // What alternating paths reach from free left unknowns: the cover is the left ones not reached and the right ones reached.
    const { path, members } = this
    const round = ++this.round
    let depth = 0
    for (let m = 0; m < leftCount; m++) {
      const l = left[m] as number
      if (partner[l] !== none) continue
      reached[l] = round
      path[depth++] = l
    }
    let count = 0
    while (depth > 0) {
      const l = path[--depth] as number
      for (let e = newest[l] as number; e !== none; e = next[e] as number) {
        const r = to[e] as number
        if (reached[r] === round) continue
        reached[r] = round
        members[count++] = r
        const mate = partner[r] as number
        if (reached[mate] === round) continue
        reached[mate] = round
        path[depth++] = mate
      }
    }
    for (let m = 0; m < leftCount; m++) {
      const l = left[m] as number
      if (reached[l] !== round) members[count++] = l
      if (partner[l] !== none) partner[partner[l] as number] = none
      partner[l] = none
      newest[l] = none
    }
    this.count = count
    this.leftCount = 0
    this.edgeCount = 0
  }

  /** Looks for an augmenting path from a free left unknown and flips it. */
  private augment(from: number): void {
    const { to, next, newest, partner, reached, path, edge } = this
    const round = ++this.round
    let depth = 0
    path[0] = from
    edge[0] = newest[from] as number
    for (;;) {
      const e = edge[depth] as number
      if (e === none) {
        if (depth === 0) return
        depth--
        edge[depth] = next[edge[depth] as number] as number
        continue
      }
      const r = to[e] as number
      if (reached[r] === round) {
        edge[depth] = next[e] as number
        continue
      }
      reached[r] = round
      const mate = partner[r] as number
      if (mate === none) break
      path[++depth] = mate
      edge[depth] = newest[mate] as number
    }
    for (; depth >= 0; depth--) {
      const l = path[depth] as number
      const r = to[edge[depth] as number] as number
      partner[r] = l
      partner[l] = r
    }
  }
}

function larger(array: Int32Array): Int32Array<ArrayBuffer> {
  const room = new Int32Array(2 * array.length)
  room.set(array)
  return room
}
