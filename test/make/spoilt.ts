/**
 * Clean plans spoilt as offices spoil them: a way of drawing (single lines, double lines of many kinds, panes apart) and
 * faults of the hand and of programs on top, alone and together. Seeded; shares no code with the reader.
 */
import { random } from '../../src/base/random.ts'
import type { Plan } from '../../src/plan/plan.ts'
import type { ReadPlan } from '../../src/plan/read-plan.ts'
import { reading, type Point, type Segment, type Sketch } from '../plan/drawings.ts'
import { cells, grid, honeycomb, plan, type Points } from './plans.ts'
import { besideFaults, besideOnPoints } from './spoilt-beside.ts'

type Random = () => number

/** A brick bond of n rows: bars that run through, with stems that end on them, half a bay apart from row to row. */
export function bond(m: number, n: number, bay = 1.4): Plan {
  const points: [number, number][] = []
  const at = new Map<string, number>()
  const node = (x: number, y: number): number => {
    const key = `${x} ${y}`
    const known = at.get(key) ?? points.push([x * bay, y * bay]) - 1
    at.set(key, known)
    return known
  }
  const cuts = (row: number): number[] => [0, ...Array.from({ length: m }, (_, i) => i + (row % 2 === 0 ? 1 : 0.5)).filter((x) => x < m), m]
  const faces: number[][] = []
  for (let row = 0; row < n; row += 1) {
    const own = cuts(row)
    for (let k = 0; k + 1 < own.length; k += 1) {
      const [left, right] = [own[k]!, own[k + 1]!]
      const on = (other: number): number[] => (other < 0 || other >= n ? [] : cuts(other).filter((x) => x > left && x < right))
      faces.push([node(left, row), ...on(row - 1).map((x) => node(x, row)), node(right, row), node(right, row + 1), ...on(row + 1).reverse().map((x) => node(x, row + 1)), node(left, row + 1)])
    }
  }
  return plan(points, faces)
}

/** A grid whose two families of bars cross at `angle_deg`, every second bay with a diagonal when `braced`. */
export function skewGrid(m: number, n: number, angle_deg: number, braced = false, bay = 1.6): Plan {
  const [c, s] = [Math.cos((angle_deg * Math.PI) / 180), Math.sin((angle_deg * Math.PI) / 180)]
  const points: Points = Array.from({ length: (m + 1) * (n + 1) }, (_, k) => [bay * ((k % (m + 1)) + c * Math.floor(k / (m + 1))), bay * s * Math.floor(k / (m + 1))] as const)
  const faces: number[][] = []
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      const [p, q, r, t] = [j * (m + 1) + i, j * (m + 1) + i + 1, (j + 1) * (m + 1) + i + 1, (j + 1) * (m + 1) + i]
      if (braced && (i + j) % 2 === 0) faces.push([p, q, r], [p, r, t])
      else faces.push([p, q, r, t])
    }
  }
  return plan(points, faces)
}

/** The first random cells from the seed on whose edges are all longer than `shortest`. */
function coarseCells(count: number, seed: number, shortest: number): Plan {
  for (let at = seed; ; at += 1000) {
    const made = cells(count, at)
    let least = Infinity
    for (let e = 0; e < made.edgeCount; e += 1) {
      const [a, b] = [made.origin[2 * e]!, made.origin[2 * e + 1]!]
      least = Math.min(least, Math.hypot(made.x[b]! - made.x[a]!, made.y[b]! - made.y[a]!))
    }
    if (least > shortest) return made
  }
}

export interface Named {
  readonly name: string
  readonly plan: Plan
}

/** Clean plans of every kind, the sizes drawn by lot. */
export function cleanPlan(kind: number, seed: number): Named {
  const next = random(seed)
  const size = (least: number, most: number): number => least + Math.floor(next() * (most - least + 1))
  const bay = 1 + 0.5 * Math.round(2 * next())
  switch (kind % 6) {
    case 0: return { name: 'grid', plan: grid(size(3, 8), size(2, 6), { bay }) }
    case 1: return { name: 'bond', plan: bond(size(3, 6), size(2, 5)) }
    case 2: return { name: 'hexagons', plan: honeycomb(size(3, 6), size(3, 5)) }
    case 3: return { name: 'cells', plan: coarseCells(size(8, 14), seed, 0.25) }
    case 4: return { name: 'skew', plan: skewGrid(size(3, 6), size(3, 5), [35, 50, 65][size(0, 2)]!) }
    default: return { name: 'braced', plan: skewGrid(size(3, 6), size(3, 5), 90, true) }
  }
}

const ring = (p: Plan, panel: number): number[] => Array.from(p.corner.subarray(p.panelStart[panel], p.panelStart[panel + 1]))
const pointOf = (p: Plan, node: number): Point => [p.x[node]!, p.y[node]!]

/** A closed ring moved to its left by a width per edge (negative: to its right); corners where the moved sides meet. */
function moved(points: readonly Point[], by: readonly number[]): Point[] {
  const count = points.length
  return points.map((point, k) => {
    const [before, after] = [points[(k + count - 1) % count]!, points[(k + 1) % count]!]
    const side = (a: Point, b: Point, w: number): { at: Point; u: Point } => {
      const length = Math.hypot(b[0] - a[0], b[1] - a[1])
      const u: Point = [(b[0] - a[0]) / length, (b[1] - a[1]) / length]
      return { at: [point[0] - u[1] * w, point[1] + u[0] * w], u }
    }
    const p = side(before, point, by[(k + count - 1) % count]!), q = side(point, after, by[k]!)
    const sine = p.u[0] * q.u[1] - p.u[1] * q.u[0]
    if (Math.abs(sine) < 1e-6) return q.at
    const along = ((q.at[0] - p.at[0]) * q.u[1] - (q.at[1] - p.at[1]) * q.u[0]) / sine
    return [p.at[0] + along * p.u[0], p.at[1] + along * p.u[1]]
  })
}

const closed = (points: readonly Point[]): Segment[] => points.map((p, k) => [p, points[(k + 1) % points.length]!])

/** Width of each edge's bar: all the same, or one of two by the edge's direction, so that a straight bar keeps its width. */
function widths(p: Plan, next: Random, varied: boolean): Float64Array {
  const one = 0.03 + 0.01 * Math.floor(6 * next())
  const other = one + 0.02
  return Float64Array.from({ length: p.edgeCount }, (_, e) => {
    const [a, b] = [p.origin[2 * e]!, p.origin[2 * e + 1]!]
    return !varied || Math.abs(p.y[b]! - p.y[a]!) < 0.3 * Math.abs(p.x[b]! - p.x[a]!) ? one : other
  })
}

interface Bars {
  readonly panes: Point[][]
  readonly rims: Point[][]
}

/** Panes inside their bars, and the bars' outer lines. `rim`: whether the rim has a bar too. */
function barsOf(p: Plan, width: Float64Array, rim: boolean): Bars {
  const half = (h: number): number => (rim || (h >> 1) < p.jointCount ? width[h >> 1]! / 2 : 0)
  const panes = Array.from({ length: p.panelCount }, (_, panel) =>
    moved(ring(p, panel).map((n) => pointOf(p, n)), Array.from(p.cornerHalf.subarray(p.panelStart[panel], p.panelStart[panel + 1]), half)))
  const rims = Array.from({ length: p.rimStart.length - 1 }, (_, l) => {
    const halves = Array.from(p.rimHalf.subarray(p.rimStart[l], p.rimStart[l + 1]))
    return moved(halves.map((h) => pointOf(p, p.origin[h]!)), halves.map(half))
  })
  return { panes, rims }
}

const edgeLines = (p: Plan): Segment[] => Array.from({ length: p.edgeCount }, (_, e) => [pointOf(p, p.origin[2 * e]!), pointOf(p, p.origin[2 * e + 1]!)])

/** Ways of drawing a plan. `outcome`: what must come of it, at once or after the right question. */
export interface Way {
  readonly name: string
  readonly outcome: 'clean' | 'clean once asked'
  readonly draw: (p: Plan, next: Random) => Sketch
}

export const ways: readonly Way[] = [
  { name: 'single lines', outcome: 'clean', draw: (p) => ({ lines: edgeLines(p) }) },
  { name: 'outlines', outcome: 'clean', draw: (p) => ({ outlines: Array.from({ length: p.panelCount }, (_, panel) => ring(p, panel).map((n) => pointOf(p, n))) }) },
  {
    name: 'double lines, trimmed', outcome: 'clean',
    draw: (p, next) => {
      const { panes, rims } = barsOf(p, widths(p, next, false), true)
      return { lines: [...panes, ...rims].flatMap(closed) }
    },
  },
  {
    name: 'double lines, two widths', outcome: 'clean',
    draw: (p, next) => {
      const { panes, rims } = barsOf(p, widths(p, next, true), true)
      return { lines: [...panes, ...rims].flatMap(closed) }
    },
  },
  {
    name: 'double lines, mitred', outcome: 'clean',
    draw: (p, next) => {
      const { panes, rims } = barsOf(p, widths(p, next, false), true)
      const mitres = panes.flatMap((pane, panel) => pane.map((point, k): Segment => [point, pointOf(p, ring(p, panel)[k]!)]))
      return { lines: [...[...panes, ...rims].flatMap(closed), ...mitres] }
    },
  },
  {
    name: 'triple lines', outcome: 'clean',
    draw: (p, next) => {
      const { panes, rims } = barsOf(p, widths(p, next, false), true)
      return { lines: [...[...panes, ...rims].flatMap(closed), ...edgeLines(p)] }
    },
  },
  {
    // Every bar a closed rectangle from node to node: they overlap at the nodes.
    name: 'bars as rectangles', outcome: 'clean',
    draw: (p, next) => {
      const width = widths(p, next, false)
      return {
        outlines: edgeLines(p).map(([a, b], e) => {
          const length = Math.hypot(b[0] - a[0], b[1] - a[1])
          const [ux, uy] = [((b[0] - a[0]) / length) * (width[e]! / 2), ((b[1] - a[1]) / length) * (width[e]! / 2)]
          return [[a[0] + uy - ux, a[1] - ux - uy], [b[0] + uy + ux, b[1] - ux + uy], [b[0] - uy + ux, b[1] + ux + uy], [a[0] - uy - ux, a[1] + ux - uy]] as Point[]
        }),
      }
    },
  },
  { name: 'panes apart', outcome: 'clean once asked', draw: (p, next) => ({ outlines: barsOf(p, widths(p, next, false).map((w) => w / 3), false).panes }) },
  {
    name: 'panes apart in a frame', outcome: 'clean',
    draw: (p, next) => {
      const { panes, rims } = barsOf(p, widths(p, next, false), true)
      return { outlines: [...panes, ...rims] }
    },
  },
]

/** Faults on top of any drawing. */
export interface Fault {
  readonly name: string
  /** Whether a question is right for small plans: the fault looks as much like panels as they do. */
  readonly mayAsk?: true
  /** Something beside the panels rather than a fault of theirs. */
  readonly isBeside?: true
  readonly spoil: (sketch: Sketch, next: Random) => Spoilt
}

/** A spoilt drawing; `move` says where a point of the clean plan is now. */
export interface Spoilt {
  readonly sketch: Sketch
  readonly move?: (p: Point) => Point
}

const onPoints = (sketch: Sketch, change: (p: Point) => Point): Sketch => ({
  ...sketch,
  ...(sketch.lines === undefined ? {} : { lines: sketch.lines.map(([p, q]): Segment => [change(p), change(q)]) }),
  ...(sketch.outlines === undefined ? {} : { outlines: sketch.outlines.map((o) => o.map((p) => change([p[0], p[1]]))) }),
  ...(sketch.beside === undefined ? {} : { beside: sketch.beside.map((each) => besideOnPoints(each, change)) }),
})

/** A place well inside some pane or outline of the sketch: next to the middle of a side, a third of its length away from it. */
function someInside(sketch: Sketch, next: Random): Point {
  const middle = (points: readonly Point[]): Point => [points.reduce((sum, p) => sum + p[0], 0) / points.length, points.reduce((sum, p) => sum + p[1], 0) / points.length]
  const outlines = (sketch.outlines ?? []).map((o) => o.map((p): Point => [p[0], p[1]]))
  // The widest of some outlines is a pane; among lines, the place of some that is farthest from all ends and middles.
  const marks = (sketch.lines ?? []).flatMap(([p, q]) => [p, q, middle([p, q])])
  const all = [...outlines.flat(), ...marks]
  const [low, high] = [[Math.min(...all.map((p) => p[0])), Math.min(...all.map((p) => p[1]))], [Math.max(...all.map((p) => p[0])), Math.max(...all.map((p) => p[1]))]]
  const sides = [...(sketch.lines ?? []), ...outlines.flatMap(closed)]
  const off = (at: Point): number => Math.min(...sides.map(([p, q]) => {
    const [ux, uy] = [q[0] - p[0], q[1] - p[1]]
    const share = Math.max(0, Math.min(1, ((at[0] - p[0]) * ux + (at[1] - p[1]) * uy) / (ux * ux + uy * uy)))
    return Math.hypot(at[0] - p[0] - share * ux, at[1] - p[1] - share * uy)
  }))
  const tried = Array.from({ length: 30 }, (): Point => [low[0]! + next() * (high[0]! - low[0]!), low[1]! + next() * (high[1]! - low[1]!)])
  return tried.reduce((best, at) => (off(at) > off(best) ? at : best))
}

const survey = ([x, y]: Point): Point => [x + 3512345.25, y + 5412345.75]

export const faults: readonly Fault[] = [
  { name: 'no fault', spoil: (sketch) => ({ sketch }) },
  ...besideFaults,
  {
    // Nodes moved, the same in every line that ends there: before faults that move each end by itself.
    name: 'nodes set by hand to 0.4 mm',
    spoil: (sketch, next) => {
      const shifts = new Map<string, Point>()
      return {
        sketch: onPoints(sketch, ([x, y]) => {
          const key = `${Math.round(1e6 * x)} ${Math.round(1e6 * y)}`
          const shift = shifts.get(key) ?? [4e-4 * (2 * next() - 1), 4e-4 * (2 * next() - 1)]
          shifts.set(key, shift)
          return [x + shift[0], y + shift[1]]
        }),
      }
    },
  },
  { name: 'rounded to 0.1 mm', spoil: (sketch) => ({ sketch: onPoints(sketch, ([x, y]) => [Math.round(x * 1e4) / 1e4, Math.round(y * 1e4) / 1e4]) }) },
  { name: 'ends off by 0.3 mm', spoil: (sketch, next) => ({ sketch: onPoints(sketch, ([x, y]) => [x + 3e-4 * (2 * next() - 1), y + 3e-4 * (2 * next() - 1)]) }) },
  { name: 'sixteen digits', spoil: (sketch, next) => ({ sketch: onPoints(sketch, ([x, y]) => [x * (1 + 2e-16 * (next() - 0.5)), y + 1e-15 * next()]) }) },
  { name: 'survey coordinates', spoil: (sketch) => ({ sketch: onPoints(sketch, survey), move: survey }) },
  {
    name: 'turned',
    spoil: (sketch, next) => {
      const angle = 2 * Math.PI * next()
      const turn = ([x, y]: Point): Point => [Math.cos(angle) * x - Math.sin(angle) * y, Math.sin(angle) * x + Math.cos(angle) * y]
      return { sketch: onPoints(sketch, turn), move: turn }
    },
  },
  {
    name: 'drawn twice, backwards',
    spoil: (sketch, next) => {
      const twice = (l: Segment): Segment[] => (next() < 0.3 ? [l, [l[1], l[0]]] : next() < 0.5 ? [l] : [[l[1], l[0]]])
      return { sketch: { ...sketch, ...(sketch.lines === undefined ? {} : { lines: sketch.lines.flatMap(twice) }) } }
    },
  },
  { name: 'seen from below', spoil: (sketch) => ({ sketch: onPoints(sketch, ([x, y]) => [-x, y]), move: ([x, y]) => [-x, y] }) },
  {
    // Lines broken at a place between their ends, as trimming and exploding leave them.
    name: 'lines in pieces',
    spoil: (sketch, next) => {
      const pieces = ([p, q]: Segment): Segment[] => {
        if (next() < 0.5) return [[p, q]]
        const share = 0.2 + 0.6 * next()
        const middle: Point = [p[0] + share * (q[0] - p[0]), p[1] + share * (q[1] - p[1])]
        return [[p, middle], [middle, q]]
      }
      return { sketch: { ...sketch, ...(sketch.lines === undefined ? {} : { lines: sketch.lines.flatMap(pieces) }) } }
    },
  },
  {
    name: 'half of it rounded to 0.1 mm',
    spoil: (sketch, next) => ({ sketch: onPoints(sketch, ([x, y]) => (next() < 0.5 ? [x, y] : [Math.round(x * 1e4) / 1e4, Math.round(y * 1e4) / 1e4])) }),
  },
  {
    // A line left behind, kilometres away.
    name: 'something far away',
    spoil: (sketch) => ({ sketch: { ...sketch, lines: [...(sketch.lines ?? []), [[9000, 7000], [9004, 7000]]] } }),
  },
  {
    // Strokes of an exploded hatch in the middle of a pane, touching nothing.
    name: 'strokes in a pane',
    spoil: (sketch, next) => {
      const at = someInside(sketch, next)
      const strokes = Array.from({ length: 5 }, (_, k): Segment => [[at[0] - 0.05, at[1] + 0.01 * k], [at[0] + 0.05, at[1] + 0.01 * k]])
      return { sketch: { ...sketch, lines: [...(sketch.lines ?? []), ...strokes] } }
    },
  },
  {
    // A sliver of 0.2 mm along a line or side that is there.
    name: 'a sliver',
    spoil: (sketch, next) => {
      const sides = [...(sketch.lines ?? []), ...(sketch.outlines ?? []).flatMap((o) => closed(o.map((p): Point => [p[0], p[1]])))]
      const [p, q] = sides[Math.floor(next() * sides.length)]!
      const length = Math.hypot(q[0] - p[0], q[1] - p[1])
      const off: Point = [p[0] + (q[0] - p[0]) / 2 - (2e-4 * (q[1] - p[1])) / length, p[1] + (q[1] - p[1]) / 2 + (2e-4 * (q[0] - p[0])) / length]
      if (sketch.outlines !== undefined && sketch.lines === undefined) return { sketch: { ...sketch, outlines: [...sketch.outlines, [p, q, off]] } }
      return { sketch: { ...sketch, lines: [...(sketch.lines ?? []), [p, off], [off, q]] } }
    },
  },
  {
    name: 'unit in the header wrong',
    spoil: (sketch) => ({ sketch: onPoints({ ...sketch, unit: 'm' }, ([x, y]) => [1000 * x, 1000 * y]), move: ([x, y]) => [1000 * x, 1000 * y] }),
  },
]

/** Nodes where one edge was only drawn in two pieces: two edges, and no farther than `within` from the line past it. */
function inBetween(p: Plan, within: number): Set<number> {
  const beside = new Map<number, number[]>()
  for (let h = 0; h < p.origin.length; h += 1) beside.set(p.origin[h]!, [...(beside.get(p.origin[h]!) ?? []), p.origin[h ^ 1]!])
  const out = new Set<number>()
  for (const [n, ends] of beside) {
    if (ends.length !== 2) continue
    const [[ax, ay], [bx, by], [x, y]] = [pointOf(p, ends[0]!), pointOf(p, ends[1]!), pointOf(p, n)]
    if (Math.abs((bx - ax) * (y - ay) - (by - ay) * (x - ax)) <= within * Math.hypot(bx - ax, by - ay) && (x - ax) * (x - bx) + (y - ay) * (y - by) < 0) out.add(n)
  }
  return out
}

/**
 * Whether the plan read is the clean one: the same panels (by their nodes, in any order), nodes within `within` after `move`.
 * A node in the middle of an edge that was drawn in two pieces is as drawn and changes no panel.
 */
export function isClean(clean: Plan, read: Plan, within: number, move: (p: Point) => Point = (p) => p): boolean {
  const extra = inBetween(read, within)
  if (read.panelCount !== clean.panelCount || read.nodeCount - extra.size !== clean.nodeCount) return false
  const nodeOf: number[] = []
  for (let n = 0; n < clean.nodeCount; n += 1) {
    const [x, y] = move(pointOf(clean, n))
    let best = -1, least = within
    for (let m = 0; m < read.nodeCount; m += 1) {
      if (extra.has(m)) continue
      const off = Math.hypot(read.x[m]! - x, read.y[m]! - y)
      if (off <= least) [best, least] = [m, off]
    }
    if (best < 0) return false
    nodeOf.push(best)
  }
  const key = (nodes: readonly number[]): string => [...nodes].sort((a, b) => a - b).join(' ')
  const panels = new Set(Array.from({ length: read.panelCount }, (_, p) => key(ring(read, p).filter((m) => !extra.has(m)))))
  return Array.from({ length: clean.panelCount }, (_, p) => key(ring(clean, p).map((n) => nodeOf[n]!))).every((k) => panels.has(k))
}

/** What came of a spoilt plan: clean (at once or, where asked, with the proposal taken), asked (a question that leads elsewhere), refused, wrong in silence. */
export type Outcome = 'clean' | 'clean once asked' | 'asked' | 'refused' | 'wrong'

/** `reads` reads the drawing with the proposals of these codes taken; null when it refuses. */
export function outcome(reads: (accept: readonly string[]) => ReadPlan | null, fits: (plan: Plan) => boolean): Outcome {
  const first = reads([])
  if (first === null) return 'refused'
  if (first.questions.length === 0) return fits(first.plan) ? 'clean' : 'wrong'
  // A question about the lines comes before those about what they are.
  const codes = first.questions.map(({ code }) => code)
  for (let round = 0; round < 3; round += 1) {
    const next = reads(codes)
    if (next === null) return 'asked'
    if (next.questions.length === 0) return fits(next.plan) ? 'clean once asked' : 'asked'
    codes.push(...next.questions.map(({ code }) => code))
  }
  return 'asked'
}

/** How far from its clean place a node may be read, in metres: twice what the roughest fault moves a line's end. */
const within_m = 0.002

/** One clean plan of the kind, drawn this way, with these faults one after another. */
export function spoiltOutcome(way: Way, list: readonly Fault[], kind: number, seed: number): Outcome {
  const { plan: clean } = cleanPlan(kind, seed)
  const next = random(7919 * seed + kind)
  let sketch = way.draw(clean, next)
  const moves: ((p: Point) => Point)[] = []
  for (const fault of list) {
    const made = fault.spoil(sketch, next)
    sketch = made.sketch
    if (made.move !== undefined) moves.push(made.move)
  }
  const move = (p: Point): Point => moves.reduce((at, each) => each(at), p)
  const scale = list.some(({ name }) => name.startsWith('unit')) ? 1000 : 1
  return outcome((accept) => {
    const result = reading(sketch, { accept })
    return result.ok ? result.value : null
  }, (read) => isClean(clean, read, within_m * scale, move) && (scale === 1 || read.unit === 'mm'))
}
