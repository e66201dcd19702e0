/**
 * The edges of an arrangement as a planar graph: at every node the half-edges in their exact angular order, and from it
 * the next half-edge along the region on the left. Edges can be taken out without building anew.
 *
 * Half-edge 2 e runs from a[e] to b[e], 2 e + 1 back; the twin of h is h ^ 1.
 */
import { orientation } from '../../base/geometry/orientation.ts'
import type { Arrangement } from './arrangement.ts'

export class Graph {
  readonly x: Float64Array
  readonly y: Float64Array
  /** Node where each half-edge starts. */
  readonly origin: Int32Array
  /** Next and previous half-edge along the region on the left. */
  readonly next: Int32Array
  readonly previous: Int32Array
  /** 0 once the edge is taken out. */
  readonly alive: Uint8Array
  /** Edges alive at each node. */
  readonly degree: Int32Array
  readonly edgeCount: number

  constructor({ x, y, a, b }: Pick<Arrangement, 'x' | 'y' | 'a' | 'b'>) {
    this.x = x
    this.y = y
    this.edgeCount = a.length
    this.origin = new Int32Array(2 * a.length)
    for (let e = 0; e < a.length; e += 1) {
      this.origin[2 * e] = a[e]
      this.origin[2 * e + 1] = b[e]
    }
    this.alive = new Uint8Array(a.length).fill(1)
    this.degree = new Int32Array(x.length)
    for (const node of this.origin) this.degree[node] += 1
    this.next = new Int32Array(2 * a.length)
    this.previous = new Int32Array(2 * a.length)
    this.turnRoundNodes()
  }

  /** Takes out an edge: the regions on its two sides become one (or a region loses a spur). */
  remove(edge: number): void {
    const h = 2 * edge, t = h + 1
    const { next, previous } = this
    if (previous[h] !== t) this.link(previous[h], next[t])
    if (next[h] !== t) this.link(previous[t], next[h])
    this.alive[edge] = 0
    this.degree[this.origin[h]] -= 1
    this.degree[this.origin[t]] -= 1
  }

  length(edge: number): number {
    const a = this.origin[2 * edge], b = this.origin[2 * edge + 1]
    const dx = this.x[b] - this.x[a], dy = this.y[b] - this.y[a]
    return Math.sqrt(dx * dx + dy * dy)
  }

  private link(from: number, to: number): void {
    this.next[from] = to
    this.previous[to] = from
  }

  private turnRoundNodes(): void {
    const { origin, x } = this
    const start = new Int32Array(x.length + 1)
    for (const node of origin) start[node + 1] += 1
    for (let i = 0; i < x.length; i += 1) start[i + 1] += start[i]
    const fill = start.slice(0, x.length)
    const fan = new Int32Array(origin.length)
    for (let h = 0; h < origin.length; h += 1) fan[fill[origin[h]]++] = h
    for (let node = 0; node < x.length; node += 1) {
      const from = start[node], to = start[node + 1]
      if (to - from > 24) {
        fan.subarray(from, to).sort((g, h) => this.turn(node, g, h))
      } else {
        for (let k = from + 1; k < to; k += 1) {
          const half = fan[k]
          let slot = k
          while (slot > from && this.turn(node, fan[slot - 1], half) > 0) {
            fan[slot] = fan[slot - 1]
            slot -= 1
          }
          fan[slot] = half
        }
      }
      // Arriving along the twin of fan[k], the region on the left goes on along its clockwise neighbour.
      for (let k = from, before = to - 1; k < to; before = k, k += 1) this.link(fan[k] ^ 1, fan[before])
    }
  }

  /** Negative when half-edge g leaves the node at a smaller angle (from the positive x axis, counter-clockwise) than h. */
  private turn(node: number, g: number, h: number): number {
    const { x, y, origin } = this
    const p = origin[g ^ 1], q = origin[h ^ 1]
    const upperP = y[p] > y[node] || (y[p] === y[node] && x[p] > x[node])
    const upperQ = y[q] > y[node] || (y[q] === y[node] && x[q] > x[node])
    if (upperP !== upperQ) return upperP ? -1 : 1
    const side = orientation(x[node], y[node], x[p], y[p], x[q], y[q])
    return side > 0 ? -1 : side < 0 ? 1 : g - h
  }
}
