/** The panels of a drawing as clean faces: the closed outlines where they are the panels, else every region of its lines. */
import { isStrip } from '../../base/geometry/polygon-width.ts'
import type { Repair } from '../../base/repair.ts'
import { fail, ok, type Problem, type Result } from '../../base/result.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing } from '../drawing.ts'
import { arrangement, type Arrangement } from './arrangement.ts'
import type { LineFrame } from './frame.ts'
import { joinedPoints } from './joined.ts'
import { faceRepairs, lineRepairs } from './repairs.ts'
import type { Traced } from './traced.ts'
import { doubleLines, type DoubleLines } from './double-lines.ts'
import { closedOutlines, type ClosedOutlines } from './outlines-closed.ts'
import { outlineFaces, type OutlineFaces } from './outlines-faces.ts'
import { cyclesOf, type Cycles } from './trace-cycles.ts'
import { Graph } from './trace-graph.ts'
import { isOneFigure, nestedComponents, type Nested } from './trace-nesting.ts'
import { inRows } from './trace-order.ts'
import { regionsInside, regionsOf, type Regions } from './trace-regions.ts'
import { trim } from './trace-trim.ts'
import { regionAt } from './trace-void.ts'

export interface PanelFaces {
  /** Nodes, in the plan's coordinates: as drawn, except crossings and ends that were moved onto a line. */
  readonly x: Float64Array
  readonly y: Float64Array
  /** Panel p has the nodes corner[start[p] .. start[p + 1]). */
  readonly start: Int32Array
  readonly corner: Int32Array
  /** Node of each point of the drawing, -1 for points that no line uses. */
  readonly nodeOfPoint: Int32Array
  /** The largest distance at which ends were joined; 0 where all meet. */
  readonly meets: number
  /** Line of the file behind each panel, 0 when there is no single one. */
  readonly lineOfPanel: Int32Array
  readonly repairs: readonly Repair[]
  readonly notices: readonly string[]
  /** Bars drawn as double lines, if there are any. */
  readonly doubles: DoubleLines | null
  /** Why the lines as drawn make no plan, so that only their centre lines can; there are no panels then. */
  readonly problem: Problem | null
}

type Points = readonly (readonly [x: number, y: number])[]

/**
 * Fails with "no-panels", "no-area", "self-crossing", "corner-twice", "panels-overlap", "panel-twice", "three-panels",
 * "panel-round-hole", "island", "void-nowhere", "too-many-crossings", "too-many-lines", "tangled".
 */
export function* panelFaces(drawing: Drawing, frame: LineFrame, mmPerUnit: number, voids: Points): Steps<Result<PanelFaces>> {
  const { outlines: loops, holes } = drawing
  const ends = lineEnds(drawing, frame)
  const points = yield* joinedPoints(frame.x, frame.y, ends.a, ends.b, frame)
  const { nodeOf, pointOf } = points
  for (const list of [ends.a, ends.b]) for (let i = 0; i < list.length; i += 1) list[i] = list[i] < 0 ? -1 : nodeOf[list[i]]
  const nodeX = new Float64Array(pointOf.length)
  const nodeY = new Float64Array(pointOf.length)
  for (let node = 0; node < pointOf.length; node += 1) {
    nodeX[node] = frame.x[pointOf[node]]
    nodeY[node] = frame.y[pointOf[node]]
  }
  const arranged = yield* arrangement(nodeX, nodeY, ends.a, ends.b, frame)
  if (!arranged.ok) {
    const { problem } = arranged
    const at = problem.where?.at
    return at === undefined ? arranged : { ok: false, problem: { ...problem, where: { at: [at[0] + frame.centreX, at[1] + frame.centreY] } } }
  }
  const lines = arranged.value
  const x = new Float64Array(lines.x.length)
  const y = new Float64Array(lines.x.length)
  for (let node = 0; node < x.length; node += 1) {
    const isDrawn = node < pointOf.length && lines.moved[node] === 0
    x[node] = isDrawn ? frame.planX[pointOf[node]] : lines.x[node] + frame.centreX
    y[node] = isDrawn ? frame.planY[pointOf[node]] : lines.y[node] + frame.centreY
  }
  const traced: Traced = {
    drawing, frame, mmPerUnit, points, lines,
    firstHole: loops.point.length, firstSegment: loops.point.length + holes.point.length,
    at: (node) => [x[node], y[node]],
  }
  yield { stage: 'Tracing panels', done: 0 }
  const graph = new Graph(lines)
  yield { stage: 'Tracing panels', done: 0.5 }
  const nodeOfPoint = new Int32Array(nodeOf.length)
  for (let i = 0; i < nodeOf.length; i += 1) nodeOfPoint[i] = nodeOf[i] < 0 ? -1 : lines.sameAs[nodeOf[i]]
  let meets = points.joined.largest
  for (const gap of lines.touchGap) if (gap > frame.silent) meets = Math.max(meets, gap)
  const common = { x, y, nodeOfPoint, meets }

  let notices: string[] = []
  // Outlines that overlap make no panels, unless they are bars that cross.
  let overlap: Problem | null = null
  if (loops.line.length > 0) {
    const outlines = closedOutlines(lines, loops, 0)
    yield { stage: 'Tracing panels', done: 0.6 }
    let whole: Figures | null = null
    const figures = (): Figures => (whole ??= figuresOf(graph, lines))
    const onHole = new Uint8Array(graph.edgeCount)
    for (let k = lines.chainStart[traced.firstHole]; k < lines.chainStart[traced.firstSegment]; k += 1) onHole[lines.chain[k] >> 1] = 1
    const judged = outlineFaces({
      drawing, lines, graph, outlines, onHole, isOne: isOneFigure(graph), figures, snap: frame.snap, rounding: frame.rounding, x: frame.x, y: frame.y,
      at: traced.at, pointAt: (point) => [frame.planX[point], frame.planY[point]],
    })
    if (!judged.ok && !(barsMayCross.includes(judged.problem.code) && drawing.format !== 'OBJ')) return judged
    yield { stage: 'Tracing panels', done: 0.8 }
    if (!judged.ok) overlap = judged.problem
    else if (judged.value.areFaces) {
      const voided = voidPanels(traced, figures, outlines, judged.value.panels, voids)
      if (!voided.ok) return voided
      const panels = judged.value.panels.filter((panel) => !voided.value.has(panel))
      if (panels.length === 0) return nothingClosed()
      return ok({
        ...common, ...facesOf(graph, outlines, panels),
        lineOfPanel: Int32Array.from(panels, (panel) => loops.line[panel]),
        repairs: faceRepairs(traced, judged.value, outlines), notices: judged.value.notice === null ? [] : [judged.value.notice], problem: null,
        doubles: yield* doublesOfOutlines(graph, figures, outlines, panels, frame.snap),
      })
    } else if (judged.value.notice !== null) notices = [judged.value.notice]
  }

  const trimmed = trim(graph, frame.snap)
  yield { stage: 'Tracing panels', done: 0.7 }
  const { cycles } = trimmed
  const nested = nestedComponents(graph, cycles, lines.index)
  const regions = regionsOf(cycles, nested)
  yield { stage: 'Tracing panels', done: 0.8 }
  if (regions.cycle.length === 0) return nothingClosed()
  const isVoid = holeRegions(traced, regions)
  for (const point of voids) {
    const region = regionAt(lines, cycles, regions, point[0] - frame.centreX, point[1] - frame.centreY)
    if (region < 0) return voidNowhere(point)
    isVoid[region] = 1
  }
  const doubles = yield* doubleLines({ graph, cycles, regions, isVoid, order: null, snap: frame.snap })
  const onlyCentreLines = (problem: Problem): Result<PanelFaces> => ok({
    ...common, start: new Int32Array(1), corner: new Int32Array(0), lineOfPanel: new Int32Array(0),
    repairs: lineRepairs(traced, trimmed), notices: [], doubles, problem,
  })
  if (overlap !== null) return doubles === null ? { ok: false, problem: overlap } : onlyCentreLines(overlap)
  for (let f = 0; f < nested.within.length; f += 1) {
    const holder = nested.within[f] < 0 ? -1 : regions.of[cycles.half[cycles.start[nested.within[f]]]]
    if (holder >= 0 && isVoid[holder] === 0) {
      const island = fail('island', 'the lines here are joined to nothing round them, so a panel would have a hole', { at: traced.at(nested.node[f]) },
        'join them to the lines outside, leave their layer out, or name the space round them as a void (--void X,Y)')
      return doubles === null ? island : onlyCentreLines(island.problem)
    }
  }
  const kept = Array.from(regions.cycle).filter((_, region) => isVoid[region] === 0)
  if (kept.length === 0) return nothingClosed()
  const start = new Int32Array(kept.length + 1)
  kept.forEach((cycle, p) => { start[p + 1] = start[p] + cycles.start[cycle + 1] - cycles.start[cycle] })
  const node = new Int32Array(start[kept.length])
  kept.forEach((cycle, p) => { node.set(cycles.node.subarray(cycles.start[cycle], cycles.start[cycle + 1]), start[p]) })
  const ordered = inRows(lines.x, lines.y, { start, node })
  return ok({
    ...common, start: ordered.start, corner: ordered.node, lineOfPanel: new Int32Array(kept.length),
    repairs: lineRepairs(traced, trimmed), notices, doubles, problem: null,
  })
}

/** What closed outlines of bars that cross are refused as. */
const barsMayCross: readonly string[] = ['panels-overlap', 'three-panels']

/**
 * Double lines where the outlines are the panels: panes drawn apart from each other, or the outlines of the bars, so that
 * the panes are what they leave open. Looked for where most edges have a panel on one side only.
 */
function* doublesOfOutlines(
  graph: Graph, figures: () => Figures, outlines: ClosedOutlines, panels: OutlineFaces['panels'], snap: number,
): Steps<DoubleLines | null> {
  const isUsed = new Uint8Array(2 * graph.edgeCount)
  for (const panel of panels) for (let k = outlines.start[panel]; k < outlines.start[panel + 1]; k += 1) isUsed[outlines.half[k]] = 1
  let open = 0, edges = 0
  for (let e = 0; e < graph.edgeCount; e += 1) {
    const sides = isUsed[2 * e] + isUsed[2 * e + 1]
    if (sides > 0) edges += 1
    if (sides === 1) open += 1
  }
  if (2 * open < edges) return null
  const { cycles, nested } = figures()
  const regions = regionsOf(cycles, nested)
  const regionOf = panels.map((panel) => regions.of[outlines.half[outlines.start[panel]]])
  const isVoid = new Uint8Array(regions.cycle.length).fill(1)
  for (const region of regionOf) isVoid[region] = 0
  const apart = yield* doubleLines({ graph, cycles, regions, isVoid, order: regionOf, snap })
  return apart ?? (yield* doubleLines({ graph, cycles, regions, isVoid: isVoid.fill(0), order: null, snap }))
}

/**
 * Ends of all lines as points: sides of outlines, sides of interior rings, open segments. An outline narrower than the
 * snap distance is left out (-1), so that what lies on its two sides can be joined.
 */
function lineEnds({ outlines, holes, segments }: Drawing, { x, y, snap }: LineFrame): { a: Int32Array; b: Int32Array } {
  const a = new Int32Array(outlines.point.length + holes.point.length + segments.length / 2)
  const b = new Int32Array(a.length)
  let filled = 0
  for (const { start, point } of [outlines, holes]) {
    for (let i = 0; i + 1 < start.length; i += 1) {
      if (isStrip(x, y, point, start[i], start[i + 1], snap)) {
        a.fill(-1, filled, filled + start[i + 1] - start[i])
        b.fill(-1, filled, filled + start[i + 1] - start[i])
        filled += start[i + 1] - start[i]
        continue
      }
      for (let k = start[i]; k < start[i + 1]; k += 1, filled += 1) {
        a[filled] = point[k]
        b[filled] = point[k + 1 < start[i + 1] ? k + 1 : start[i]]
      }
    }
  }
  for (let i = 0; i < segments.length; i += 2, filled += 1) {
    a[filled] = segments[i]
    b[filled] = segments[i + 1]
  }
  return { a, b }
}

interface Figures {
  readonly cycles: Cycles
  readonly nested: Nested
}

function figuresOf(graph: Graph, lines: Arrangement): Figures {
  const cycles = cyclesOf(graph)
  return { cycles, nested: nestedComponents(graph, cycles, lines.index) }
}

function facesOf(graph: Graph, outlines: ClosedOutlines, panels: Int32Array): { start: Int32Array; corner: Int32Array } {
  const start = new Int32Array(panels.length + 1)
  panels.forEach((panel, p) => { start[p + 1] = start[p] + outlines.start[panel + 1] - outlines.start[panel] })
  const corner = new Int32Array(start[panels.length])
  panels.forEach((panel, p) => {
    for (let k = 0; k < start[p + 1] - start[p]; k += 1) corner[start[p] + k] = graph.origin[outlines.half[outlines.start[panel] + k]]
  })
  return { start, corner }
}

/** Outlines that a void point lies in: they are no panels. */
function voidPanels(
  { lines, frame }: Traced, figures: () => Figures, outlines: ClosedOutlines, panels: Int32Array, voids: Points,
): Result<Set<number>> {
  const dropped = new Set<number>()
  if (voids.length === 0) return ok(dropped)
  const { cycles, nested } = figures()
  const regions = regionsOf(cycles, nested)
  const panelOfRegion = new Map<number, number>()
  for (const panel of panels) panelOfRegion.set(regions.of[outlines.half[outlines.start[panel]]], panel)
  for (const point of voids) {
    const region = regionAt(lines, cycles, regions, point[0] - frame.centreX, point[1] - frame.centreY)
    if (region < 0) return voidNowhere(point)
    const panel = panelOfRegion.get(region)
    if (panel !== undefined) dropped.add(panel)
  }
  return ok(dropped)
}

/** 1 for the regions inside interior rings, except what smaller outlines cover there. */
function holeRegions({ drawing, lines, firstHole }: Traced, regions: Regions): Uint8Array {
  const isVoid = new Uint8Array(regions.cycle.length)
  if (drawing.holes.line.length === 0) return isVoid
  const holes = closedOutlines(lines, drawing.holes, firstHole)
  const outlines = closedOutlines(lines, drawing.outlines, 0)
  const part = (loops: ClosedOutlines, i: number): Int32Array => loops.half.subarray(loops.start[i], loops.start[i + 1])
  for (let h = 0; h < holes.area.length; h += 1) {
    const inside = regionsInside(regions, part(holes, h))
    for (const region of inside) isVoid[region] = 1
    const hole = new Set(inside)
    for (let i = 0; i < outlines.area.length; i += 1) {
      if (outlines.area[i] >= holes.area[h]) continue
      const chain = part(outlines, i)
      if (chain.length === 0 || !hole.has(regions.of[chain[0]])) continue
      for (const region of regionsInside(regions, chain)) isVoid[region] = 0
    }
  }
  return isVoid
}

function nothingClosed(): Result<never> {
  return fail('no-panels', 'there is no closed panel: the lines bound no region', null,
    'close the outlines, choose the layers of the joints with --layer, or join wider gaps with --snap')
}

function voidNowhere(point: readonly [number, number]): Result<never> {
  return fail('void-nowhere', 'the void point lies in no bounded region', { at: [point[0], point[1]] }, 'put it inside the void, clear of its lines')
}
