/**
 * Bars drawn as two or more parallel lines, and panes drawn apart by a joint's width: which regions are panes, which are
 * bars, and what the plan is on centre lines.
 *
 * Regions are told apart by their mean width: what lies below the widest step in the sorted widths may be bars. It is when
 * most of the panes' edges then face another pane, or the outside, across an even width. Whether lines run through
 * crossings, end at them or are mitred makes no difference so: only the panes and their surroundings are looked at.
 *
 * Tried and dropped: strips found one by one as four-sided regions with two long sides. Mitred, trimmed and through lines
 * need a case each, and panes drawn apart have no such regions at all.
 */
import { barsAlong, barShare } from '../../base/geometry/tolerance.ts'
import type { Steps } from '../../base/steps.ts'
import { widenedPanes, type Outlines } from './double-centres.ts'
import { facingSides, type Facing, type FacingSides } from './double-facing.ts'
import { sidesOf, type Sides } from './double-sides.ts'
import { mostPlaces } from './words.ts'
import type { Cycles } from './trace-cycles.ts'
import type { Graph } from './trace-graph.ts'
import { inRows, type Polygons } from './trace-order.ts'
import type { Regions } from './trace-regions.ts'

export interface DoubleLines {
  /** Panes on centre lines, in the frame's coordinates. */
  readonly outlines: Outlines
  readonly panes: number
  /** Strips or gaps between two panes or between a pane and the outside .. */
  readonly strips: number
  /** .. and regions that only touch strips, where bars cross. */
  readonly crossings: number
  /** Whether lines bound the strips (else panes are drawn apart and nothing lies between). */
  readonly drawn: boolean
  /** Width of each strip, sorted. */
  readonly widths: Float64Array
  /** The strips between two panes, -1 for the outside, by `pairKey`. */
  readonly between: ReadonlyMap<string, readonly Facing[]>
  /** Lengths are rounded to multiples of 1 / scale. */
  readonly scale: number
  /** Share of the panes' edges, by length, that run along strips. */
  readonly share: number
  readonly where: readonly (readonly [x: number, y: number])[]
}

export const pairKey = (p: number, q: number): string => (p < q ? `${p} ${q}` : `${q} ${p}`)

export interface RegionInput {
  readonly graph: Graph
  readonly cycles: Cycles
  readonly regions: Regions
  /** 1 for regions that are no panes, whatever their width. */
  readonly isVoid: Uint8Array
  /** Regions in the order of their panes; null: in rows. */
  readonly order: Int32Array | null
  readonly snap: number
}

/** The double lines of a drawing; null when it has none. */
export function* doubleLines(input: RegionInput): Steps<DoubleLines | null> {
  const width = regionWidths(input)
  let best: DoubleLines | null = null
  for (const { limit, from } of splits(width, input)) {
    yield { stage: 'Looking for bars', done: 0 }
    const found = yield* barsBelow(input, width, limit, from)
    if (found !== null && (best === null || found.share > best.share)) best = found
  }
  return best
}

/** Mean width 2 A / perimeter of each region, its inner cycles included. */
function regionWidths({ graph, cycles, regions }: RegionInput): { width: Float64Array; perimeter: Float64Array } {
  const count = regions.cycle.length
  const area = new Float64Array(count)
  const perimeter = new Float64Array(count)
  for (let c = 0; c < cycles.area.length; c += 1) {
    const region = regions.of[cycles.half[cycles.start[c]]]
    if (region >= 0) area[region] += cycles.area[c]
  }
  for (let r = 0; r < count; r += 1) for (let k = regions.start[r]; k < regions.start[r + 1]; k += 1) perimeter[r] += graph.length(regions.half[k] >> 1)
  return { width: area.map((a, r) => (perimeter[r] === 0 ? 0 : (2 * a) / perimeter[r])), perimeter }
}

interface Split {
  /** Regions up to this mean width may be bars .. */
  readonly limit: number
  /** .. and panes are at least this wide. */
  readonly from: number
}

/** How many steps in the widths are tried. */
const mostSplits = 4

/**
 * The widest steps in the widths of the regions, with enough edges on both sides of it; and none at all, for panes that
 * are drawn apart.
 */
function splits({ width, perimeter }: { width: Float64Array; perimeter: Float64Array }, { isVoid, regions, graph }: RegionInput): Split[] {
  const order = Array.from(width.keys()).filter((r) => isVoid[r] === 0).sort((p, q) => width[p] - width[q] || p - q)
  if (order.length < 2) return []
  let all = 0
  for (const r of order) all += perimeter[r]
  const steps: (Split & { readonly ratio: number })[] = []
  let below = 0
  for (let k = 0; k + 1 < order.length; k += 1) {
    below += perimeter[order[k]]
    const ratio = width[order[k + 1]] / Math.max(width[order[k]], Number.MIN_VALUE)
    // Bars have at least about as much edge as half of their panes.
    if (ratio >= barShare / 1.5 && below >= 0.3 * (all - below)) steps.push({ limit: width[order[k]], from: width[order[k + 1]], ratio })
  }
  steps.sort((p, q) => q.ratio - p.ratio)
  const found: Split[] = steps.slice(0, mostSplits)
  let open = 0, edges = 0
  for (let e = 0; e < graph.edgeCount; e += 1) {
    if (graph.alive[e] === 0) continue
    edges += 1
    const isPane = (h: number): boolean => regions.of[h] >= 0 && isVoid[regions.of[h]] === 0
    if (isPane(2 * e) !== isPane(2 * e + 1)) open += 1
  }
  if (2 * open >= edges) found.push({ limit: 0, from: width[order[0]] })
  return found
}

function* barsBelow(input: RegionInput, { width }: { width: Float64Array }, limit: number, from: number): Steps<DoubleLines | null> {
  const { graph, cycles, regions, isVoid, order, snap } = input
  const isPane = (r: number): boolean => r >= 0 && isVoid[r] === 0 && width[r] > limit
  const isBar = (r: number): boolean => r >= 0 && isVoid[r] === 0 && width[r] <= limit
  const paneRegions = (order ?? regions.cycle.map((_, r) => r)).filter(isPane)
  if (paneRegions.length < 2) return null
  const panes = polygonsOf(graph, cycles, regions, paneRegions, order === null)
  const rest: number[] = []
  let crossings = 0, bars = 0
  for (let r = 0; r < regions.cycle.length; r += 1) {
    if (!isBar(r)) continue
    bars += 1
    let touches = false
    for (let k = regions.start[r]; k < regions.start[r + 1]; k += 1) {
      const back = regions.half[k] ^ 1
      const beyond = regions.of[back]
      if (isPane(beyond)) touches = true
      else if (!isBar(beyond)) rest.push(graph.origin[back], graph.origin[back ^ 1])
    }
    if (!touches) crossings += 1
  }
  const sides = sidesOf(graph.x, graph.y, panes, rest, 2 * snap)
  const sorted = paneRegions.map((r) => r).sort((p, q) => width[p] - width[q])
  const usual = width[sorted[sorted.length >> 1]]
  // A strip is up to 1.5 times as wide as its mean width; several may lie side by side.
  const widest = bars === 0 ? Math.min(usual / barShare, from) : Math.min(usual / (barShare / 2), 3.5 * limit)
  const facing = yield* facingSides(sides, widest, snap)
  return measured(sides, facing, { widest, crossings, isDrawn: bars > 0, panes: paneRegions.length, scale: roundingScale(graph.x, graph.y), usual })
}

/** The panes as polygons of nodes; in rows where the file gives no order. */
function polygonsOf({ x, y }: Graph, cycles: Cycles, regions: Regions, paneRegions: Int32Array, rows: boolean): Polygons {
  const start = new Int32Array(paneRegions.length + 1)
  paneRegions.forEach((r, p) => { start[p + 1] = start[p] + cycles.start[regions.cycle[r] + 1] - cycles.start[regions.cycle[r]] })
  const node = new Int32Array(start[paneRegions.length])
  paneRegions.forEach((r, p) => { node.set(cycles.node.subarray(cycles.start[regions.cycle[r]], cycles.start[regions.cycle[r] + 1]), start[p]) })
  return rows ? inRows(x, y, { start, node }) : { start, node }
}

interface Measure {
  readonly widest: number
  readonly crossings: number
  readonly isDrawn: boolean
  readonly panes: number
  readonly scale: number
  /** Middle mean width of the panes. */
  readonly usual: number
}

function measured(sides: Sides, facing: FacingSides, { widest, crossings, isDrawn, panes, scale, usual }: Measure): DoubleLines | null {
  const widths: number[] = []
  const where: [number, number][] = []
  const between = new Map<string, Facing[]>()
  let along = 0, all = 0
  for (let s = 0; s < sides.pane.length; s += 1) {
    if (sides.pane[s] < 0) continue
    for (const strip of facing[s]) {
      const { other, width, from, to, x, y } = strip
      const beyond = sides.pane[other]
      all += to - from
      if (width === 0) continue
      along += to - from
      if (beyond >= 0 && other < s) continue
      const key = pairKey(sides.pane[s], beyond)
      const known = between.get(key)
      if (known === undefined) between.set(key, [strip])
      else known.push(strip)
      widths.push(Math.round(width * scale) / scale)
      if (where.length < mostPlaces) where.push([x, y])
    }
  }
  const sorted = Float64Array.from(widths).sort()
  const share = all === 0 ? 0 : along / all
  // What is half as wide as the panes beside it is a panel of its own.
  if (share < barsAlong || sorted[sorted.length >> 1] * barShare > 2 * usual) return null
  return {
    outlines: widenedPanes(sides, facing, widest, scale),
    panes, strips: sorted.length, crossings, drawn: isDrawn, widths: sorted, between, scale, share, where,
  }
}

/** A power of ten: one unit divided by it is far below anything drawn and above rounding, a hundred-billionth of the extent. */
function roundingScale(x: Float64Array, y: Float64Array): number {
  let most = 0
  for (const list of [x, y]) for (const value of list) most = Math.max(most, Math.abs(value))
  return 10 ** Math.max(0, 11 - Math.ceil(Math.log10(most)))
}
