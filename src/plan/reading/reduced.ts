/** A drawing of double lines brought to its centre lines, and what is said and asked about it. */
import { significant } from '../../base/decimal.ts'
import { NearPoints } from '../../base/geometry/near-points.ts'
import type { Question, Repair } from '../../base/repair.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing, Loops } from '../drawing.ts'
import { lineIndex, touchingNodes } from '../lines/cuts.ts'
import type { LineFrame } from '../lines/frame.ts'
import { panelFaces, type PanelFaces } from '../lines/panels-of-lines.ts'
import { counted } from '../lines/words.ts'
import type { Outlines } from '../lines/double-centres.ts'
import { pairKey, type DoubleLines } from '../lines/double-lines.ts'
import type { Plan } from '../plan.ts'
import type { ReadOptions } from '../read-plan.ts'

/** Panes that meet in one node come to it within this share of the narrowest bar: what bars of uneven width leave. */
const meetShare = 0.3

/** Panels on centre lines, one for each pane and in the same order; null when the centre lines do not close round every pane. */
export function* centreLineFaces(doubles: DoubleLines, drawing: Drawing, frame: LineFrame, mmPerUnit: number): Steps<PanelFaces | null> {
  const met = yield* metOutlines(doubles.outlines, Math.max(frame.snap, meetShare * doubles.widths[0]))
  if (met === null) return null
  const { start, point, x, y } = met
  const count = x.length
  const loops = (start: Int32Array, point: Int32Array): Loops => ({ start, point, layer: new Int32Array(start.length - 1), line: new Int32Array(start.length - 1) })
  const none = new Int32Array(0)
  const outlines: Drawing = {
    ...drawing, format: 'centre lines', points: new Float64Array(3 * count), hasHeight: new Uint8Array(count), segments: none, segmentLayer: none, segmentLine: none,
    outlines: loops(start, point), holes: loops(new Int32Array(1), none), repairs: [], leftOut: [],
  }
  const { centreX, centreY } = frame
  const faces = yield* panelFaces(outlines, { ...frame, planX: x.map((v) => v + centreX), planY: y.map((v) => v + centreY), x, y }, mmPerUnit, [])
  return faces.ok && faces.value.start.length - 1 === doubles.panes ? faces.value : null
}

/** Outlines with common points: corners within `snap` of each other are their mean, and outlines pass the corners on their sides. */
function* metOutlines({ start, x, y }: Outlines, snap: number): Steps<{ start: Int32Array; point: Int32Array; x: Float64Array; y: Float64Array } | null> {
  const near = new NearPoints(snap, x.length)
  const nodeOf = new Int32Array(x.length)
  for (let k = 0; k < x.length; k += 1) {
    const known = near.nearest(x[k], y[k])
    nodeOf[k] = known >= 0 ? known : near.add(x[k], y[k])
  }
  const times = new Int32Array(near.count)
  const nodeX = near.x.slice()
  const nodeY = near.y.slice()
  // Differences from the first point, so that corners that agree keep all their digits.
  const sumX = new Float64Array(near.count), sumY = new Float64Array(near.count)
  for (let k = 0; k < x.length; k += 1) {
    times[nodeOf[k]] += 1
    sumX[nodeOf[k]] += x[k] - nodeX[nodeOf[k]]
    sumY[nodeOf[k]] += y[k] - nodeY[nodeOf[k]]
  }
  for (let n = 0; n < near.count; n += 1) {
    nodeX[n] += sumX[n] / times[n]
    nodeY[n] += sumY[n] / times[n]
  }
  const a = nodeOf
  const b = new Int32Array(x.length)
  for (let p = 0; p + 1 < start.length; p += 1) for (let k = start[p]; k < start[p + 1]; k += 1) b[k] = nodeOf[k + 1 < start[p + 1] ? k + 1 : start[p]]
  const lines = { x: nodeX, y: nodeY, a, b }
  const index = yield* lineIndex(lines, snap)
  const touched = yield* touchingNodes(lines, index, snap)
  if (!touched.ok) return null
  const onSide = new Map<number, number[]>()
  const edge = touched.value.edge.view(), node = touched.value.node.view()
  for (let k = 0; k < edge.length; k += 1) {
    const known = onSide.get(edge[k])
    if (known === undefined) onSide.set(edge[k], [node[k]])
    else if (!known.includes(node[k])) known.push(node[k])
  }
  const newStart = new Int32Array(start.length)
  const point: number[] = []
  for (let p = 0; p + 1 < start.length; p += 1) {
    for (let k = start[p]; k < start[p + 1]; k += 1) {
      if (a[k] === b[k]) continue
      point.push(a[k])
      const along = (n: number): number => (nodeX[n] - nodeX[a[k]]) * (nodeX[b[k]] - nodeX[a[k]]) + (nodeY[n] - nodeY[a[k]]) * (nodeY[b[k]] - nodeY[a[k]])
      for (const n of (onSide.get(k) ?? []).sort((m, n) => along(m) - along(n))) point.push(n)
    }
    newStart[p + 1] = point.length
  }
  return { start: newStart, point: Int32Array.from(point), x: nodeX, y: nodeY }
}

/** Width of the bar along each edge of the plan on centre lines, NaN where a single line was drawn. */
export function barWidths({ panelOf, origin, edgeCount, x, y }: Plan, { between, scale }: DoubleLines, { centreX, centreY }: LineFrame): Float64Array {
  const out = new Float64Array(edgeCount).fill(NaN)
  for (let e = 0; e < edgeCount; e += 1) {
    const a = origin[2 * e], b = origin[2 * e + 1]
    const mx = (x[a] + x[b]) / 2 - centreX, my = (y[a] + y[b]) / 2 - centreY
    let least = Infinity
    // A corner pane has two strips to the outside: the one that runs along this edge counts.
    for (const strip of between.get(pairKey(panelOf[2 * e], panelOf[2 * e + 1])) ?? []) {
      const off = Math.abs((mx - strip.x) * strip.uy - (my - strip.y) * strip.ux)
      if (off > strip.width || off >= least) continue
      least = off
      out[e] = Math.round(strip.width * scale) / scale
    }
  }
  return out
}

/** Widths of bars as people name them: "60 mm", "50 and 80 mm", "40 to 90 mm" where there are more than three. */
export function widthWords(widths: Float64Array, mmPerUnit: number): string {
  const mm: number[] = []
  // Widths within a twentieth of the first of a group are one width, measured with what the drawing leaves.
  let from = 0
  for (let k = 1; k <= widths.length; k += 1) {
    if (k < widths.length && widths[k] * mmPerUnit - widths[from] * mmPerUnit <= Math.max(1, 0.05 * widths[from] * mmPerUnit)) continue
    mm.push(widths[(from + k - 1) >> 1] * mmPerUnit)
    from = k
  }
  const word = (value: number): string => significant(value, value >= 100 ? 3 : 2)
  if (mm.length === 1) return `${word(mm[0])} mm`
  return mm.length <= 3 ? `${mm.slice(0, -1).map(word).join(', ')} and ${word(mm[mm.length - 1])} mm` : `${word(mm[0])} to ${word(mm[mm.length - 1])} mm`
}

export interface Taken {
  readonly repair: Repair
  readonly question: Question | null
}

/**
 * The proposal and the question. `state`: applied where the lines as drawn are no plan at all. `faces`: panels of the
 * lines as drawn, 0 for none; `reduced`: whether the centre lines make a plan.
 */
export function doubleLineWords(
  { drawn, strips, crossings, panes, widths, where }: DoubleLines, state: Repair['state'], faces: number, reduced: boolean, options: ReadOptions,
  { mmPerUnit, centreX, centreY }: { mmPerUnit: number; centreX: number; centreY: number },
): Taken {
  const wide = widthWords(widths, mmPerUnit)
  const what = drawn
    ? `Bars are drawn as double lines: ${counted(strips, 'strip', 'strips')} ${wide} wide${crossings > 0 ? ` and ${counted(crossings, 'crossing', 'crossings')}` : ''} round ${counted(panes, 'pane', 'panes')}`
    : `Panes are drawn apart: ${counted(strips, 'gap', 'gaps')} ${wide} wide between ${counted(panes, 'pane', 'panes')}`
  const then = !reduced ? '; their centre lines do not close round every pane'
    : state === 'proposed' ? `; on centre lines they are a plan of ${counted(panes, 'panel', 'panels')}`
      : `, brought to ${drawn ? 'their centre lines' : 'the middle of the gaps'}; the widths stay with the joints`
  const repair: Repair = { code: 'double-lines', state, count: strips, message: `${what}${then}.`, where: where.map(([x, y]) => [x + centreX, y + centreY]) }
  if (state !== 'proposed' || leaves(options, 'double-lines')) return { repair, question: null }
  const asked = reduced
    ? `Reduce them to ${counted(panes, 'panel', 'panels')} on centre lines, or is it ${counted(faces, 'panel', 'panels')} as drawn?`
    : `Is it ${counted(faces, 'panel', 'panels')} as drawn? If not, draw one line a bar.`
  return { repair, question: { code: 'double-lines', message: `${what}. ${asked}`, options: [...(reduced ? ['--accept double-lines'] : []), '--leave double-lines'] } }
}

/** Whether a proposal is taken. */
export function takes({ accept }: ReadOptions, code: Repair['code']): boolean {
  return accept.includes(code) || accept.includes('all')
}

/** Whether its question is answered with no. */
export function leaves({ leave = [] }: ReadOptions, code: Repair['code']): boolean {
  return leave.includes(code) || leave.includes('all')
}
