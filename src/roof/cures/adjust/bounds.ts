/**
 * What an adjustment may not pass: panels stay convex where they were (no corner newly reflex, none sharper than given), no
 * edge gets shorter than given, no node moves further than given. Each is a quantity g of the positions with g >= least;
 * where a step would pass it, it joins the step as an equality (an active set), and no step is taken that passes it.
 */
import type { Plan } from '../../../plan/plan.ts'
import type { RowBlock } from './rows.ts'

export type BoundKind = 'convex' | 'sharp' | 'edge' | 'shift'

export interface Bounds {
  readonly count: number
  /** Bounds from here on are edges and shifts; before them come the corners. */
  readonly cornersEnd: number
  /** Edges so short that almost any adjustment comes to their limit. */
  readonly likely: readonly number[]
  kindOf(bound: number): BoundKind
  /** Nodes of the quantity: corner (the one before, itself, the one after), edge (two), shift (one). */
  nodesOf(bound: number): readonly number[]
  /**
   * g - least; negative: passed. An edge's length is measured along its direction at `from`, so that one which turns round on
   * the way is seen.
   */
  slack(bound: number, work: Float64Array, from: Float64Array): number
  /**
   * Derivatives of the slack by the nodes' x and y, into `out`; returns the slack itself. A shift is measured along the way to
   * `toward`, where the node is about to go: it has no direction of its own while it stands where it was drawn.
   */
  gradient(bound: number, work: Float64Array, toward: Float64Array, out: Float64Array): number
  /** Whether a plan may not be given out like this. */
  broken(bound: number, work: Float64Array): boolean
  /** The slack below which the next try of a step aims further inside. */
  aim(bound: number): number
  /** The slack below which no step goes, not even for a moment: the panel would turn inside out. */
  floor(bound: number): number
}

export interface BoundOptions {
  /** In spans; null: a quarter of the edge as drawn. */
  readonly leastEdge: number | null
  /** In radians; null: half the corner as drawn. */
  readonly leastAngle: number | null
  /** In spans; null: none. */
  readonly largestShift: number | null
}

/** A convex corner keeps at least this margin to 180 degrees (0.06 degrees), or a tenth of what it has. */
const leastTurn = 1e-3
/** Shares of an edge and of a corner that are kept where nobody says otherwise. */
const edgeShare = 0.25
const angleShare = 0.5
/** Bounds give a little, so a step aims inside what was given by this share, and what it gives out keeps it. */
const inside = 0.01
/** Share of a bound's margin that a step on the way may use up: the next step brings it back. */
const passable = 0.8
/** Edges shorter than this (in spans) are one point: their directions say nothing. */
const onePoint = 1e-9
/** Corners that turn by less are straight: conditions of their own hold them. */
const straight = 1e-3

export function bounds(plan: Plan, options: BoundOptions): Bounds {
  const { corner, panelStart, panelCount, work: drawn, origin, edgeCount, nodeCount } = plan
  const nodes = new Int32Array(3 * corner.length)
  const least = new Float64Array(corner.length)
  for (let p = 0; p < panelCount; p += 1) {
    const from = panelStart[p], count = panelStart[p + 1] - from
    for (let k = 0; k < count; k += 1) {
      const before = corner[from + ((k + count - 1) % count)], node = corner[from + k], after = corner[from + ((k + 1) % count)]
      nodes[3 * (from + k)] = before
      nodes[3 * (from + k) + 1] = node
      nodes[3 * (from + k) + 2] = after
      const isPoint = between(drawn, before, node) < onePoint || between(drawn, node, after) < onePoint
      least[from + k] = isPoint ? NaN : interiorAngle(drawn, before, node, after)
    }
  }
  const corners = least.length
  const edges = edgeCount
  const shifts = options.largestShift === null ? 0 : nodeCount
  const mostAngle = least.map((angle) => (Math.PI - angle > straight ? Math.PI - Math.min(leastTurn, (Math.PI - angle) / 10) : Infinity))
  const leastAngle = least.map((angle) => Math.min(angle, Math.max(angleShare * angle, (1 + inside) * (options.leastAngle ?? 0))))
  const leastLength = new Float64Array(edges)
  for (let e = 0; e < edges; e += 1) {
    const length = between(drawn, origin[2 * e], origin[2 * e + 1])
    leastLength[e] = Math.min(length, Math.max(edgeShare * length, (1 + inside) * (options.leastEdge ?? 0)))
  }
  const mostShift = (options.largestShift ?? Infinity) * (1 - inside)
  const edgeFrom = 2 * corners, shiftFrom = edgeFrom + edges
  const kindOf = (bound: number): BoundKind => (bound < corners ? 'convex' : bound < edgeFrom ? 'sharp' : bound < shiftFrom ? 'edge' : 'shift')
  /** What somebody gave is kept to the last; what we chose ourselves only guards against panels that turn over. */
  const isGiven = (bound: number): boolean => {
    switch (kindOf(bound)) {
      case 'convex': return false
      case 'sharp': return options.leastAngle !== null
      case 'edge': return options.leastEdge !== null
      case 'shift': return true
    }
  }
  return {
    count: shiftFrom + shifts,
    cornersEnd: edgeFrom,
    likely: shortEdges(plan).map((e) => edgeFrom + e),
    kindOf,
    nodesOf(bound) {
      switch (kindOf(bound)) {
        case 'convex':
        case 'sharp': {
          const c = 3 * (bound < corners ? bound : bound - corners)
          return [nodes[c], nodes[c + 1], nodes[c + 2]]
        }
        case 'edge': return [origin[2 * (bound - edgeFrom)], origin[2 * (bound - edgeFrom) + 1]]
        case 'shift': return [bound - shiftFrom]
      }
    },
    aim(bound) {
      return isGiven(bound) ? -inside / 2 : this.floor(bound)
    },
    floor(bound) {
      switch (kindOf(bound)) {
        case 'convex': return -passable * (Math.PI - mostAngle[bound])
        case 'sharp': return -passable * leastAngle[bound - corners]
        case 'edge': return -passable
        case 'shift': return -passable
      }
    },
    slack(bound, work, start) {
      if (bound < edgeFrom) {
        const c = bound < corners ? bound : bound - corners
        if (Number.isNaN(leastAngle[c]) || (bound < corners && mostAngle[c] === Infinity)) return Infinity
        const angle = interiorAngle(work, nodes[3 * c], nodes[3 * c + 1], nodes[3 * c + 2])
        return bound < corners ? mostAngle[c] - angle : angle - leastAngle[c]
      }
      if (bound < shiftFrom) {
        const e = bound - edgeFrom
        if (leastLength[e] < onePoint * edgeShare) return Infinity
        const a = origin[2 * e], b = origin[2 * e + 1]
        const dx = start[2 * b] - start[2 * a], dy = start[2 * b + 1] - start[2 * a + 1]
        const along = ((work[2 * b] - work[2 * a]) * dx + (work[2 * b + 1] - work[2 * a + 1]) * dy) / Math.hypot(dx, dy)
        return (along - leastLength[e]) / leastLength[e]
      }
      const n = bound - shiftFrom
      return 1 - Math.hypot(work[2 * n] - drawn[2 * n], work[2 * n + 1] - drawn[2 * n + 1]) / mostShift
    },
    gradient(bound, work, toward, out) {
      if (bound < edgeFrom) {
        const c = 3 * (bound < corners ? bound : bound - corners)
        const sign = bound < corners ? -1 : 1
        angleGradient(work, nodes[c], nodes[c + 1], nodes[c + 2], sign, out)
        return this.slack(bound, work, work)
      }
      if (bound < shiftFrom) {
        const e = bound - edgeFrom
        const a = origin[2 * e], b = origin[2 * e + 1]
        const scale = 1 / (between(work, a, b) * leastLength[e])
        out[0] = (work[2 * a] - work[2 * b]) * scale
        out[1] = (work[2 * a + 1] - work[2 * b + 1]) * scale
        out[2] = -out[0]
        out[3] = -out[1]
        return this.slack(bound, work, work)
      }
      const n = bound - shiftFrom
      const dx = toward[2 * n] - drawn[2 * n], dy = toward[2 * n + 1] - drawn[2 * n + 1]
      const scale = -1 / (Math.hypot(dx, dy) * mostShift)
      out[0] = dx * scale
      out[1] = dy * scale
      return 1 + out[0] * (work[2 * n] - drawn[2 * n]) + out[1] * (work[2 * n + 1] - drawn[2 * n + 1])
    },
    broken(bound, work) {
      const slack = this.slack(bound, work, work)
      if (slack > 0) return false
      switch (kindOf(bound)) {
        case 'convex': return slack <= mostAngle[bound] - Math.PI
        case 'sharp': return slack < -(isGiven(bound) ? inside : passable) * leastAngle[bound - corners]
        case 'edge': return slack < -(isGiven(bound) ? inside : passable)
        case 'shift': return slack < -inside
      }
    },
  }
}

const between = (work: Float64Array, a: number, b: number): number => Math.hypot(work[2 * b] - work[2 * a], work[2 * b + 1] - work[2 * a + 1])

/** Edges shorter than this share of the middle length are likely to come to their limit. */
const likelyShare = 0.03

function shortEdges({ work, origin, edgeCount }: Plan): number[] {
  const length = Float64Array.from({ length: edgeCount }, (_, e) => between(work, origin[2 * e], origin[2 * e + 1]))
  const below = likelyShare * length.slice().sort()[edgeCount >> 1]
  return [...length.keys()].filter((e) => length[e] < below)
}

/** Angle inside the panel at `node`, 0 to 2 pi. */
function interiorAngle(work: Float64Array, before: number, node: number, after: number): number {
  const ax = work[2 * after] - work[2 * node], ay = work[2 * after + 1] - work[2 * node + 1]
  const bx = work[2 * before] - work[2 * node], by = work[2 * before + 1] - work[2 * node + 1]
  const angle = Math.atan2(ax * by - ay * bx, ax * bx + ay * by)
  return angle < 0 ? angle + 2 * Math.PI : angle
}

/** sign times the derivatives of the interior angle by before, node, after: x y each. d phi = J r . dr / |r|^2 for each arm r. */
function angleGradient(work: Float64Array, before: number, node: number, after: number, sign: number, out: Float64Array): void {
  const ax = work[2 * after] - work[2 * node], ay = work[2 * after + 1] - work[2 * node + 1]
  const bx = work[2 * before] - work[2 * node], by = work[2 * before + 1] - work[2 * node + 1]
  const a = sign / (ax * ax + ay * ay), b = sign / (bx * bx + by * by)
  out[0] = -by * b
  out[1] = bx * b
  out[4] = ay * a
  out[5] = -ax * a
  out[2] = -out[0] - out[4]
  out[3] = -out[1] - out[5]
}

/**
 * What a bound gives: a thousandth of what the node itself costs. Two bounds that contradict each other, or the flatness of
 * their panels, then cost much and not everything (met exactly, eight of them blew a step up a thousandfold).
 */
const give = 1e-3

/**
 * A row for each of the listed bounds. Those that `isActive` says hold bring it to its limit, scaled to size 1, and beyond it
 * by its `lead`: what the straight step was seen to miss it by, since angles at short edges turn on the way. The others say
 * nothing (0 = 0): so the pattern stays while bounds join and leave, and nothing is ordered again.
 */
export function boundBlock(
  plan: Plan, all: Bounds, listed: readonly number[], isActive: (bound: number) => boolean, lead: ReadonlyMap<number, number>, toward: () => Float64Array,
): RowBlock {
  const lists = listed.map((bound) => all.nodesOf(bound))
  const gradient = new Float64Array(6)
  return {
    counts: Int32Array.from(lists, (list) => list.length),
    node: Int32Array.from(lists.flat()),
    at: Float64Array.from(lists.flatMap((list) => {
      const node = list[list.length === 3 ? 1 : 0]
      return [plan.work[2 * node], plan.work[2 * node + 1]]
    })),
    give,
    fill({ work }, { cx, cy, right }, firstEntry, firstRow) {
      let e = firstEntry
      listed.forEach((bound, i) => {
        const count = lists[i].length
        if (!isActive(bound)) {
          cx.fill(0, e, e + count)
          cy.fill(0, e, e + count)
          right[firstRow + i] = 0
          e += count
          return
        }
        const slack = all.gradient(bound, work, toward(), gradient)
        let squares = 0
        for (let k = 0; k < 2 * count; k += 1) squares += gradient[k] ** 2
        const scale = 1 / Math.sqrt(squares)
        for (let k = 0; k < count; k += 1) {
          cx[e] = gradient[2 * k] * scale
          cy[e] = gradient[2 * k + 1] * scale
          e += 1
        }
        right[firstRow + i] = ((lead.get(bound) ?? 0) - slack) * scale
      })
    },
  }
}
