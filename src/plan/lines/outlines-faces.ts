/**
 * Whether the closed outlines of a drawing are its panels. They are when none overlap, none cross or touch themselves and
 * no other line runs inside one; then each is one region of the arrangement: at every corner its next side is also the
 * graph's next edge, and no figure floats inside it.
 *
 * A region of a map that runs all round another is left out and becomes a void; anywhere else it is refused.
 *
 * Where they overlap, a mesh (OBJ) is refused: it says itself what its faces are. In drawings one outline inside another is
 * a perimeter or a zone, and all is line work; outlines that cut across each other are refused, since reading them as line
 * work would make slivers of panels that overlap by mistake.
 */
import { meanWidth } from '../../base/geometry/polygon-width.ts'
import { fail, ok, type Place, type Result } from '../../base/result.ts'
import type { Drawing } from '../drawing.ts'
import type { Arrangement } from './arrangement.ts'
import { Places } from './words.ts'
import { panelName } from '../names.ts'
import type { ClosedOutlines } from './outlines-closed.ts'
import { outlinesCross } from './outlines-overlap.ts'
import type { Cycles } from './trace-cycles.ts'
import type { Graph } from './trace-graph.ts'
import type { Nested } from './trace-nesting.ts'

export interface OutlineFaces {
  /** False: all is line work, and `notice` says why. */
  readonly areFaces: boolean
  readonly notice: string | null
  /** Outlines that are panels, in file order. */
  readonly panels: Int32Array
  readonly repeats: Places
  readonly collapsed: Places
}

export interface OutlineInput {
  readonly drawing: Drawing
  readonly lines: Arrangement
  readonly graph: Graph
  readonly outlines: ClosedOutlines
  /** Edges that sides of interior rings run along. */
  readonly onHole: Uint8Array
  /** Whether lines connect everything, so that nothing can float inside an outline. */
  readonly isOne: boolean
  /** The graph's cycles, and what floats in which; made when first asked for. */
  readonly figures: () => { readonly cycles: Cycles; readonly nested: Nested }
  /** Outlines whose mean width is below this have collapsed. */
  readonly snap: number
  readonly rounding: number
  /** Coordinates per point of the drawing. */
  readonly x: Float64Array
  readonly y: Float64Array
  /** Coordinates of a node, and of a point of the drawing, in the plan. */
  readonly at: (node: number) => [number, number]
  readonly pointAt: (point: number) => [number, number]
}

/** What stands in the way of taking outlines as panels: each kind with its first place. */
interface Findings {
  lineInside: [number, number] | null
  overlap: { readonly place: Place; readonly panels: readonly number[]; readonly three: boolean } | null
  /** Panels that run all round a hole, with the first place of each. */
  rings: Map<number, Place>
}

export function outlineFaces(input: OutlineInput): Result<OutlineFaces> {
  const { drawing, graph, outlines, onHole, at } = input
  const { outlines: loops } = drawing
  const isMesh = drawing.format === 'OBJ'
  const repeats = new Places()
  const collapsed = new Places()
  const findings: Findings = { lineInside: null, overlap: null, rings: new Map() }
  const place = (loop: number, node: number, others: readonly number[] = []): Place => ({
    ...(loops.line[loop] > 0 ? { line: loops.line[loop] } : {}),
    names: [...others, loop].map(panelName),
    at: at(node),
  })

  const outlineOf = new Int32Array(2 * graph.edgeCount).fill(-1)
  const uses = new Uint8Array(graph.edgeCount)
  const panels: number[] = []
  let itself: { readonly loop: number; readonly node: number } | null = null
  for (let i = 0; i + 1 < outlines.start.length; i += 1) {
    const from = outlines.start[i], to = outlines.start[i + 1]
    if (outlines.twice[i] >= 0) {
      itself ??= { loop: i, node: outlines.twice[i] }
      continue
    }
    let perimeter = 0
    for (let k = from; k < to; k += 1) perimeter += graph.length(outlines.half[k] >> 1)
    if (2 * outlines.area[i] <= input.snap * perimeter) {
      const drawn = meanWidth(input.x, input.y, loops.point, loops.start[i], loops.start[i + 1])
      const corner = input.pointAt(loops.point[loops.start[i]])
      if (drawn <= input.rounding) {
        return fail('no-area', 'the panel has no area', { ...(loops.line[i] > 0 ? { line: loops.line[i] } : {}), names: [panelName(i)], at: corner }, 'delete it, or give it its corners')
      }
      collapsed.note(corner[0], corner[1], drawn)
      continue
    }
    const first = outlineOf[outlines.half[from]]
    if (first >= 0 && outlines.start[first + 1] - outlines.start[first] === to - from && sameLoop(outlineOf, outlines.half, from, to, first)) {
      const node = graph.origin[outlines.half[from]]
      // In a drawing a line drawn over another is a slip; a mesh that has a face twice is wrong in itself.
      if (isMesh) return fail('panel-twice', 'the panel is there twice', place(i, node, [first]), 'delete one of the two')
      const [x, y] = at(node)
      repeats.note(x, y)
      continue
    }
    panels.push(i)
    for (let k = from; k < to; k += 1) {
      const half = outlines.half[k]
      if (uses[half >> 1] < 255) uses[half >> 1] += 1
      if (outlineOf[half] < 0) outlineOf[half] = i
      else findings.overlap ??= { place: place(i, graph.origin[half], [outlineOf[half]]), panels: [outlineOf[half], i], three: false }
      if (uses[half >> 1] > 2) findings.overlap = three(findings.overlap, place(i, graph.origin[half], [outlineOf[half ^ 1]]), i)
    }
  }

  for (const i of panels) {
    const from = outlines.start[i], to = outlines.start[i + 1]
    for (let k = from, before = to - 1; k < to; before = k, k += 1) {
      // Half-edges in the corner's angle, if there are any.
      for (let half = graph.next[outlines.half[before]]; half !== outlines.half[k]; half = graph.next[half ^ 1]) {
        noteInside(half >> 1, i, graph.origin[half])
      }
    }
  }
  if (!input.isOne) {
    const { cycles, nested } = input.figures()
    for (let f = 0; f < nested.within.length; f += 1) {
      const holder = nested.within[f] < 0 ? -1 : outlineOf[cycles.half[cycles.start[nested.within[f]]]]
      if (holder < 0) continue
      const outer = nested.outer[f]
      for (let k = cycles.start[outer]; k < cycles.start[outer + 1]; k += 1) noteInside(cycles.half[k] >> 1, holder, nested.node[f])
    }
  }

  function noteInside(edge: number, holder: number, node: number): void {
    if (onHole[edge] === 1) {
      if (!findings.rings.has(holder)) findings.rings.set(holder, place(holder, node))
    }
    else if (uses[edge] === 0) findings.lineInside ??= at(node)
    else {
      const other = Math.max(outlineOf[2 * edge], outlineOf[2 * edge + 1])
      findings.overlap ??= { place: place(Math.max(holder, other), node, [Math.min(holder, other)]), panels: [holder, other], three: false }
    }
  }

  const asLines = (why: string, [x, y]: readonly [number, number]): Result<OutlineFaces> =>
    ok({ areFaces: false, notice: `${why} (at ${Number(x.toFixed(3))}, ${Number(y.toFixed(3))}), so everything is read as line work.`, panels: new Int32Array(0), repeats, collapsed })
  if (findings.lineInside !== null) return asLines('A line runs inside a closed outline', findings.lineInside)
  if (itself !== null) {
    const crosses = itself.node >= input.lines.moved.length
    return crosses
      ? fail('self-crossing', 'the outline of the panel crosses itself', place(itself.loop, itself.node), 'put its corners in order')
      : fail('corner-twice', 'the panel passes one of its corners twice', place(itself.loop, itself.node), 'draw it as two panels')
  }
  if (findings.overlap !== null) {
    const { place: where, three: isThree } = findings.overlap
    const { cycles, nested } = input.figures()
    const crossed = isMesh ? null : outlinesCross(graph, cycles, nested, outlines, panels)
    if (!isMesh && crossed === null) return asLines('One closed outline lies inside another', where.at ?? [0, 0])
    if (isThree) return fail('three-panels', 'three panels share one joint', where, 'a roof has two panels at a joint: delete or redraw one')
    const [one, other] = crossed ?? findings.overlap.panels
    const spot = crossed === null ? where : place(Math.max(one, other), crossed[2], [Math.min(one, other)])
    return fail('panels-overlap', 'two panels overlap', spot, 'delete one, or redraw its outline')
  }
  const [ring] = findings.rings.values()
  const rest = panels.filter((panel) => !findings.rings.has(panel))
  if (ring !== undefined && drawing.format === 'GeoJSON' && rest.length > 0) return ok({ areFaces: true, notice: ringsLeftOut(findings.rings), panels: Int32Array.from(rest), repeats, collapsed })
  if (ring !== undefined) {
    return fail('panel-round-hole', 'the panel runs all round a hole that no joint reaches', ring, 'divide it by a joint from its rim to the hole')
  }
  return ok({ areFaces: true, notice: null, panels: Int32Array.from(panels), repeats, collapsed })
}

/** A map is not refused for a region with an enclave: the region becomes a void, which is said. */
function ringsLeftOut(rings: Findings['rings']): string {
  const named = [...rings.values()].slice(0, 3).map(({ line, at: [x, y] = [0, 0] }) => `${line === undefined ? '' : `line ${line}, `}at ${Number(x.toFixed(3))}, ${Number(y.toFixed(3))}`)
  const more = rings.size > named.length ? ` and ${rings.size - named.length} more` : ''
  return `${rings.size === 1 ? '1 region runs' : `${rings.size} regions run`} all round a hole, which a panel cannot: left out, so that ${rings.size === 1 ? 'it counts as a void' : 'they count as voids'} (${named.join('; ')}${more}). Divide ${rings.size === 1 ? 'it' : 'each'} by a joint from its rim to the hole to make panels of it.`
}

function three(known: Findings['overlap'], place: Place, panel: number): Findings['overlap'] {
  return known?.three === true ? known : { place, panels: [panel, panel], three: true }
}

function sameLoop(outlineOf: Int32Array, half: Int32Array, from: number, to: number, loop: number): boolean {
  for (let k = from; k < to; k += 1) if (outlineOf[half[k]] !== loop) return false
  return true
}
