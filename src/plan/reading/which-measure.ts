/**
 * How much the lines of a drawing, or of one of its layers, look like the panels of a roof: how many of the faces that they
 * bound are compact, of one size with a neighbour and near it, and how much of their length bounds nothing.
 *
 * A face alone, as columns and furniture have them, is no panel: panels have neighbours, across a joint or a bar.
 *
 * Tried and dropped: the sum of areas in place of the count. A room or a title block outweighs a roof so.
 */
import { disjointSets } from '../../base/disjoint-sets.ts'
import { alikeSizes, cornerSine, leastCompact, likeSizes, nearShare, panelSizes_m } from '../../base/geometry/tolerance.ts'
import { Integers } from '../../base/growing.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing } from '../drawing.ts'
import { arrangement } from '../lines/arrangement.ts'
import type { LineFrame } from '../lines/frame.ts'
import { joinedPoints } from '../lines/joined.ts'
import type { Cycles } from '../lines/trace-cycles.ts'
import { Graph } from '../lines/trace-graph.ts'
import { trim } from '../lines/trace-trim.ts'

export interface Measure {
  /** Faces that look like panels. */
  readonly panels: number
  /** Length of all lines, and of those that bound no face, in the plan's unit. */
  readonly length: number
  readonly loose: number
  /** Corners of lines inside the plan where nothing else meets: joints meet, furniture has corners of its own. */
  readonly bends: number
  /** Area of all faces; how many there are. */
  readonly area: number
  readonly faces: number
  /** Middle size (square root of the area) of the faces that look like panels; 0 where there is none. */
  readonly size: number
  /** Faces that look like panels and lie near each other, the most first. */
  readonly groups: readonly Group[]
  /**
   * Group that each segment, outline and hole of the drawing belongs to: -1 none, -2 what goes round the first group or lies
   * clear of all groups and is no panel either, -3 a single panel of the first group's kind.
   */
  readonly groupOfSegment: Int32Array
  readonly groupOfOutline: Int32Array
  readonly groupOfHole: Int32Array
}

export interface Group {
  readonly panels: number
  /** All faces of its figures, and the share of its length that bounds none. */
  readonly faces: number
  readonly loose: number
  readonly size: number
  /** Of its panels, in plan coordinates .. */
  readonly box: Box
  /** .. and of all its lines. */
  readonly around: Box
  /** Whether its lines go round another group beside its panels: the frame of a sheet with its title block. */
  readonly isSheet: boolean
}

export interface Box {
  readonly left: number
  readonly low: number
  readonly right: number
  readonly high: number
}

/** Faces of the largest group that look like panels, less its share of lines that bound nothing: many columns are many small groups. */
export const score = ({ groups }: Measure): number => (groups.length === 0 ? 0 : groups[0].panels * (1 - groups[0].loose))

interface Faces {
  readonly cycle: Int32Array
  readonly size: Float64Array
  /** left, low, right, high of each. */
  readonly box: Float64Array
  readonly isCompact: Uint8Array
}

/** What the lines of the drawing come to; null where they cannot be told apart (hatches, crossing texts). `metres`: in one unit. */
export function* linesMeasured(drawing: Drawing, frame: LineFrame, metres: number): Steps<Measure | null> {
  const ends = lineEnds(drawing)
  const lines = ends.a.length
  const points = yield* joinedPoints(frame.x, frame.y, ends.a, ends.b, frame)
  const { nodeOf, pointOf } = points
  yield { stage: 'Joining points', done: 1 }
  const a = ends.a.map((p) => nodeOf[p]), b = ends.b.map((p) => nodeOf[p])
  const arranged = yield* arrangement(Float64Array.from(pointOf, (p) => frame.x[p]), Float64Array.from(pointOf, (p) => frame.y[p]), a, b, frame)
  if (!arranged.ok) return null
  const { chainStart, chain } = arranged.value
  yield { stage: 'Looking for the panels', done: 0.3 }
  const graph = new Graph(arranged.value)
  yield { stage: 'Looking for the panels', done: 0.4 }
  const component = disjointSets(graph.x.length)
  let length = 0
  for (let e = 0; e < graph.edgeCount; e += 1) {
    component.join(graph.origin[2 * e], graph.origin[2 * e + 1])
    length += graph.length(e)
  }
  const { cycles } = trim(graph, frame.snap)
  yield { stage: 'Looking for the panels', done: 0.7 }
  let bound = 0
  for (let e = 0; e < graph.edgeCount; e += 1) if (graph.alive[e] === 1) bound += graph.length(e)
  const faces = facesOf(graph, cycles)
  const { cluster, isPanel } = clusters(faces, metres)
  yield { stage: 'Looking for the panels', done: 0.9 }

  const clusterOfFigure = new Map<number, number>()
  const counted = new Map<number, { panels: number; faces: number; sizes: number[]; box: [number, number, number, number] }>()
  const figureOf = (face: number): number => component.root(cycles.node[cycles.start[faces.cycle[face]]])
  // Figures that share a cluster are one group, and so are clusters in one figure.
  const sets = disjointSets(faces.size.length + 1)
  for (let f = 0; f < faces.size.length; f += 1) {
    if (isPanel[f] === 0) continue
    const figure = figureOf(f)
    const known = clusterOfFigure.get(figure)
    if (known === undefined) clusterOfFigure.set(figure, cluster[f])
    else sets.join(known, cluster[f])
  }
  const groupAt = (figure: number): number => {
    const known = clusterOfFigure.get(figure)
    return known === undefined ? -1 : sets.root(known)
  }
  let area = 0
  for (let f = 0; f < faces.size.length; f += 1) {
    area += faces.size[f] ** 2
    const group = groupAt(figureOf(f))
    if (group < 0) continue
    const own = counted.get(group) ?? { panels: 0, faces: 0, sizes: [], box: [Infinity, Infinity, -Infinity, -Infinity] }
    counted.set(group, own)
    own.faces += 1
    if (isPanel[f] === 0) continue
    own.panels += 1
    own.sizes.push(faces.size[f])
    for (const k of [0, 1]) {
      own.box[k] = Math.min(own.box[k], faces.box[4 * f + k])
      own.box[2 + k] = Math.max(own.box[2 + k], faces.box[4 * f + 2 + k])
    }
  }
  yield { stage: 'Looking for the panels', done: 0.92 }
  const around = boxesOfGroups(graph, component.root, groupAt)
  const isSheet = (group: number): boolean => {
    const [outer, own] = [around.get(group), counted.get(group)?.box]
    if (outer === undefined || own === undefined) return false
    return [...counted].some(([other, { box }]) => other !== group && holds(outer, around.get(other) ?? box) && !holds(own, box))
  }
  const sheets = new Set([...counted.keys()].filter(isSheet))
  yield { stage: 'Looking for the panels', done: 0.94 }
  const order = [...counted.keys()].sort((p, q) => Number(sheets.has(p)) - Number(sheets.has(q)) || (counted.get(q)?.panels ?? 0) - (counted.get(p)?.panels ?? 0) || p - q)
  const rank = new Map(order.map((group, k) => [group, k]))
  const lengths = new Float64Array(order.length), bounds = new Float64Array(order.length)
  for (let e = 0; e < graph.edgeCount; e += 1) {
    const k = rank.get(groupAt(component.root(graph.origin[2 * e])))
    if (k === undefined) continue
    lengths[k] += graph.length(e)
    if (graph.alive[e] === 1) bounds[k] += graph.length(e)
  }
  const placed = ([left, low, right, high]: readonly number[]): Box => ({ left: left + frame.centreX, low: low + frame.centreY, right: right + frame.centreX, high: high + frame.centreY })
  const groups = order.map((group, k): Group => {
    const own = counted.get(group)
    const [left, low, right, high] = own?.box ?? [0, 0, 0, 0]
    return {
      panels: own?.panels ?? 0, faces: own?.faces ?? 0, loose: lengths[k] === 0 ? 0 : 1 - bounds[k] / lengths[k], size: middle(own?.sizes ?? []),
      box: placed([left, low, right, high]), around: placed(around.get(group) ?? [left, low, right, high]), isSheet: sheets.has(group),
    }
  })

  const aside = figuresAside(graph, component.root, groupAt, order.map((group) => counted.get(group)?.box ?? []), nearShare * (groups[0]?.size ?? 0))
  yield { stage: 'Looking for the panels', done: 0.96 }
  const single = singlePanels(faces, figureOf, groupAt, groups[0]?.size ?? 0)
  yield { stage: 'Looking for the panels', done: 0.98 }
  const groupOfLine = new Int32Array(lines).fill(-1)
  for (let i = 0; i < lines; i += 1) {
    if (chainStart[i + 1] === chainStart[i]) continue
    const figure = component.root(graph.origin[chain[chainStart[i]]])
    groupOfLine[i] = rank.get(groupAt(figure)) ?? (single.has(figure) ? -3 : aside.has(figure) ? -2 : -1)
  }
  const ofLoops = (from: number, start: Int32Array): Int32Array => Int32Array.from({ length: start.length - 1 }, (_, l) => {
    for (let k = start[l]; k < start[l + 1]; k += 1) if (groupOfLine[from + k] !== -1) return groupOfLine[from + k]
    return -1
  })
  const { outlines, holes } = drawing
  return {
    bends: bendsOf(graph, cycles), panels: groups.reduce((sum, { panels }) => sum + panels, 0), length, loose: length - bound, area, faces: faces.size.length,
    size: middle(groups.length === 0 ? [] : (counted.get(order[0])?.sizes ?? [])), groups,
    groupOfSegment: groupOfLine.slice(outlines.point.length + holes.point.length), groupOfOutline: ofLoops(0, outlines.start), groupOfHole: ofLoops(outlines.point.length, holes.start),
  }
}

/** Lines that touch nothing, of this length in all. */
export function nothingBound(length: number): Measure {
  const none = new Int32Array(0)
  return { panels: 0, length, loose: length, bends: 0, area: 0, faces: 0, size: 0, groups: [], groupOfSegment: none, groupOfOutline: none, groupOfHole: none }
}

/** Sides of outlines, sides of interior rings, open segments, as points. */
export function lineEnds({ outlines, holes, segments }: Drawing): { a: Int32Array; b: Int32Array } {
  const a = new Integers(), b = new Integers()
  for (const { start, point } of [outlines, holes]) {
    for (let i = 0; i + 1 < start.length; i += 1) {
      for (let k = start[i]; k < start[i + 1]; k += 1) {
        a.push(point[k])
        b.push(point[k + 1 < start[i + 1] ? k + 1 : start[i]])
      }
    }
  }
  for (let i = 0; i < segments.length; i += 2) {
    a.push(segments[i])
    b.push(segments[i + 1])
  }
  return { a: a.array(), b: b.array() }
}

/** Nodes where two edges meet at an angle, faces on both sides. */
function bendsOf({ x, y, origin, alive, degree, edgeCount }: Graph, cycles: Cycles): number {
  const first = new Int32Array(x.length).fill(-1)
  let count = 0
  for (let e = 0; e < edgeCount; e += 1) {
    if (alive[e] === 0 || !(cycles.area[cycles.of[2 * e]] > 0 && cycles.area[cycles.of[2 * e + 1]] > 0)) continue
    for (const node of [origin[2 * e], origin[2 * e + 1]]) {
      if (degree[node] !== 2) continue
      const other = origin[2 * e] === node ? origin[2 * e + 1] : origin[2 * e]
      if (first[node] < 0) {
        first[node] = other
        continue
      }
      const ux = x[first[node]] - x[node], uy = y[first[node]] - y[node], vx = x[other] - x[node], vy = y[other] - y[node]
      if (Math.abs(ux * vy - uy * vx) > cornerSine * Math.sqrt((ux * ux + uy * uy) * (vx * vx + vy * vy))) count += 1
    }
  }
  return count
}

/** Counter-clockwise cycles: 4 pi A / P^2 says how compact each is. */
function facesOf(graph: Graph, cycles: Cycles): Faces {
  const cycle = Int32Array.from(cycles.area.keys()).filter((c) => cycles.area[c] > 0)
  const size = new Float64Array(cycle.length), box = new Float64Array(4 * cycle.length), isCompact = new Uint8Array(cycle.length)
  cycle.forEach((c, f) => {
    let perimeter = 0
    let [left, low, right, high] = [Infinity, Infinity, -Infinity, -Infinity]
    for (let k = cycles.start[c]; k < cycles.start[c + 1]; k += 1) {
      const node = cycles.node[k]
      perimeter += graph.length(cycles.half[k] >> 1)
      left = Math.min(left, graph.x[node])
      right = Math.max(right, graph.x[node])
      low = Math.min(low, graph.y[node])
      high = Math.max(high, graph.y[node])
    }
    size[f] = Math.sqrt(cycles.area[c])
    box.set([left, low, right, high], 4 * f)
    isCompact[f] = 4 * Math.PI * cycles.area[c] >= leastCompact * perimeter * perimeter ? 1 : 0
  })
  return { cycle, size, box, isCompact }
}

/** Compact faces of a plausible size with another of about their size near them; `cluster`: the same for those that hang together. */
function clusters({ size, box, isCompact }: Faces, metres: number): { cluster: Int32Array; isPanel: Uint8Array } {
  const count = size.length
  const sets = disjointSets(count)
  const isPanel = new Uint8Array(count)
  const own = Array.from(size.keys()).filter((f) => isCompact[f] === 1 && size[f] * metres >= panelSizes_m[0] && size[f] * metres <= panelSizes_m[1])
  // A sweep from left to right: only faces whose boxes overlap in x, widened, are compared.
  own.sort((f, g) => box[4 * f] - box[4 * g] || f - g)
  const reach = (f: number): number => nearShare * size[f]
  let open: number[] = []
  let most = 64
  for (const f of own) {
    const gap = (g: number): number => Math.min(reach(f), reach(g))
    if (open.length > most) {
      open = open.filter((g) => box[4 * g + 2] + reach(g) >= box[4 * f])
      most = 64 + 2 * open.length
    }
    for (const g of open) {
      if (box[4 * g + 2] + gap(g) < box[4 * f]) continue
      if (box[4 * g + 1] > box[4 * f + 3] + gap(g) || box[4 * f + 1] > box[4 * g + 3] + gap(g)) continue
      if (Math.max(size[f], size[g]) > likeSizes * Math.min(size[f], size[g])) continue
      isPanel[f] = isPanel[g] = 1
      sets.join(f, g)
    }
    open.push(f)
  }
  return { cluster: Int32Array.from({ length: count }, (_, f) => sets.root(f)), isPanel }
}

type Corners = [left: number, low: number, right: number, high: number]

function boxesOfGroups(graph: Graph, root: (node: number) => number, groupAt: (figure: number) => number): Map<number, Corners> {
  const boxes = new Map<number, Corners>()
  for (let node = 0; node < graph.x.length; node += 1) {
    const group = groupAt(root(node))
    if (group < 0) continue
    const box = boxes.get(group) ?? [Infinity, Infinity, -Infinity, -Infinity]
    boxes.set(group, box)
    widen(box, graph.x[node], graph.y[node])
  }
  return boxes
}

function widen(box: Corners, x: number, y: number): void {
  box[0] = Math.min(box[0], x)
  box[1] = Math.min(box[1], y)
  box[2] = Math.max(box[2], x)
  box[3] = Math.max(box[3], y)
}

const holds = (outer: readonly number[], inner: readonly number[]): boolean => outer[0] < inner[0] && outer[1] < inner[1] && outer[2] > inner[2] && outer[3] > inner[3]

/** Figures without a group whose box holds that of the first group and reaches farther on a side than a rim's bar does (frames of sheets), or meets that of none. */
function figuresAside(graph: Graph, root: (node: number) => number, groupAt: (figure: number) => number, groups: readonly (readonly number[])[], reach: number): Set<number> {
  const found = new Set<number>()
  const [first] = groups
  if (first === undefined) return found
  const boxes = new Map<number, Corners>()
  for (let node = 0; node < graph.x.length; node += 1) {
    const figure = root(node)
    if (groupAt(figure) >= 0) continue
    const box = boxes.get(figure) ?? [Infinity, Infinity, -Infinity, -Infinity]
    boxes.set(figure, box)
    widen(box, graph.x[node], graph.y[node])
  }
  for (const [figure, [left, low, right, high]] of boxes) {
    const isRound = holds([left, low, right, high], first)
      && Math.max(first[0] - left, first[1] - low, right - first[2], high - first[3]) > reach
    if (isRound || groups.every((box) => right < box[0] || left > box[2] || high < box[1] || low > box[3])) found.add(figure)
  }
  return found
}

/** Figures without a group whose faces are compact and of the size of the first group's panels. */
function singlePanels({ size, isCompact }: Faces, figureOf: (face: number) => number, groupAt: (figure: number) => number, usual: number): Set<number> {
  const found = new Set<number>(), others = new Set<number>()
  for (let f = 0; f < size.length; f += 1) {
    const figure = figureOf(f)
    if (groupAt(figure) >= 0) continue
    const isLike = isCompact[f] === 1 && Math.max(size[f], usual) <= alikeSizes * Math.min(size[f], usual)
    ;(isLike ? found : others).add(figure)
  }
  for (const figure of others) found.delete(figure)
  return found
}

function middle(values: readonly number[]): number {
  const sorted = Float64Array.from(values).sort()
  return sorted.length === 0 ? 0 : sorted[sorted.length >> 1]
}
