/** A plan as it was read and before it is accepted: lines of one weight, faces to be told panel from void, repairs in balloons. */
import { metres } from '../../base/length.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import { axisItems } from './axis-drawing.ts'
import { Batch, dots, label, moved, polyline, type DisplayList, type Item } from './display-list.ts'
import { figure } from './figures.ts'
import { northPoint, scaleBar } from './furniture.ts'
import { detailAt, detailItems, type Detail } from './detail-circle.ts'
import { centres, nodesOnSheet } from './plan-drawing.ts'
import { panelArea } from './panel-readings.ts'
import { fitted, toSheet, type PlanWindow } from './plan-window.ts'

export interface ReadDrawingOptions {
  readonly width: number
  readonly height: number
  readonly window: PlanWindow | null
  /** Panel under the pointer, -1: none. */
  readonly panel: number
  /** Index of the repair that is asked about, -1: none, and which of its places a detail is drawn of. */
  readonly repair: number
  readonly place?: number
  /** Lines as drawn, x0 y0 x1 y1 .., for the detail; null: not known. */
  readonly drawn?: Float64Array | null
  /** Whether all lines as drawn stand behind the plan, so that a window or an outline can be chosen among them. */
  readonly whole?: boolean
  /** A window in hand, its corners on the sheet; null: none. */
  readonly dragged?: readonly [x1: number, y1: number, x2: number, y2: number] | null
}

/** Places that are ringed for the chosen repair. */
const mostPlaces = 2000

export const readWindow = (read: ReadPlan, width: number, height: number): PlanWindow =>
  fitted(read.plan, { left: 40, top: 40, right: width - 56, bottom: height - 66 })

/** The window that shows all lines as drawn: those of a title block and a section too. */
export function wholeWindow(read: ReadPlan, drawn: Float64Array, width: number, height: number): PlanWindow {
  const fit = readWindow(read, width, height)
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity]
  for (let i = 0; i < drawn.length; i += 2) {
    x0 = Math.min(x0, drawn[i])
    x1 = Math.max(x1, drawn[i])
    y0 = Math.min(y0, drawn[i + 1])
    y1 = Math.max(y1, drawn[i + 1])
  }
  if (!(x1 > x0 && y1 > y0)) return fit
  return { ...fit, centreX: (x0 + x1) / 2, centreY: (y0 + y1) / 2, scale: Math.min((width - 96) / (x1 - x0), (height - 106) / (y1 - y0)) }
}

export function readDrawing(read: ReadPlan, options: ReadDrawingOptions): DisplayList {
  const { plan } = read
  const { width, height } = options
  const window = options.window ?? readWindow(read, width, height)
  const px = nodesOnSheet(plan, window)
  const items: Item[] = []
  if (options.whole === true && options.drawn !== null && options.drawn !== undefined) items.push(...linesBehind(options.drawn, window))
  const faces = new Batch()
  for (let p = 0; p < plan.panelCount; p += 1) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) faces.point(px[2 * plan.corner[c]], px[2 * plan.corner[c] + 1])
    faces.end(p)
  }
  items.push(faces.fills('cool1'))
  if (options.panel >= 0 && options.panel < plan.panelCount) {
    const one = new Batch()
    for (let c = plan.panelStart[options.panel]; c < plan.panelStart[options.panel + 1]; c += 1) one.point(px[2 * plan.corner[c]], px[2 * plan.corner[c] + 1])
    one.end()
    items.push(one.fills('handWash'), one.strokes('held', null, true))
  }
  const lines = new Batch()
  for (let e = 0; e < plan.edgeCount; e += 1) {
    const a = 2 * plan.origin[2 * e]
    const b = 2 * plan.origin[2 * e + 1]
    lines.segment(px[a], px[a + 1], px[b], px[b + 1])
  }
  items.push(lines.strokes('thin'), ...voids(read, px))
  if (options.panel >= 0 && options.panel < plan.panelCount) {
    const [x, y] = centres(plan, px, options.panel)
    const area = panelArea(plan, options.panel) * metres[plan.unit] ** 2
    items.push(label(x, y - 2, 'panel', { tone: 'hand', bold: true, anchor: 'middle', size: 11 }), label(x, y + 11, `${figure(area, 2)} m\u00b2`, { tone: 'hand', anchor: 'middle', size: 11 }))
  }
  items.push(...axisItems(read.axes ?? [], window, { width, height: height - 40 }), ...levelItems(read, px))
  items.push(...balloons(read, window, options))
  if (options.dragged !== null && options.dragged !== undefined) {
    const [x1, y1, x2, y2] = options.dragged
    items.push(polyline('held', [x1, y1, x2, y1, x2, y2, x1, y2], null, true))
  }
  const at = placeOf(read, options)
  const detail = at === null ? null : readDetail(read, window, options)
  if (at !== null && detail !== null) items.push(...detailItems(plan, window, at, read.repairs[options.repair].where, options.drawn ?? null, detail))
  items.push(...moved(scaleBar(plan.unit, window.scale).items, 40, height - 36), ...moved(northPoint().items, width - 40, 14))
  return {
    width, height, items, title: 'Plan as read',
    description: `${figure(plan.panelCount)} panels, ${figure(plan.jointCount)} joints, ${figure(plan.edgeCount - plan.jointCount)} rim edges; ${figure(read.repairs.length)} repairs.`,
  }
}

function linesBehind(drawn: Float64Array, window: PlanWindow): Item[] {
  const lines = new Batch()
  for (let i = 0; i < drawn.length; i += 4) lines.segment(...toSheet(window, drawn[i], drawn[i + 1]), ...toSheet(window, drawn[i + 2], drawn[i + 3]))
  return lines.empty ? [] : [lines.strokes('axis')]
}

/** Levels that the drawing states and that hold: a tick at the node and the level beside it. */
function levelItems({ levels = [], plan }: ReadPlan, px: Float64Array): Item[] {
  if (levels.length === 0) return []
  const points = levels.flatMap(({ node }) => [px[2 * node], px[2 * node + 1]])
  const inMetres = metres[plan.unit]
  return [dots(points, 3, 'ink', null), ...levels.map(({ node, level }) => label(px[2 * node] + 6, px[2 * node + 1] - 5, `${level < 0 ? '\u2212' : '+'}${figure(Math.abs(level * inMetres), 3)}`, { size: 10, plate: true, face: 'pen' }))]
}

function placeOf({ repairs }: ReadPlan, { repair, place = 0 }: Pick<ReadDrawingOptions, 'repair' | 'place'>): readonly [number, number] | null {
  const where = repairs[repair]?.where ?? []
  return where.length === 0 ? null : where[place % where.length]
}

/** The detail circle of the chosen repair; null: none is drawn. */
export function readDetail(read: ReadPlan, window: PlanWindow, options: Pick<ReadDrawingOptions, 'repair' | 'place' | 'width' | 'height' | 'drawn'>): Detail | null {
  const at = placeOf(read, options)
  return at === null || options.width < 380 ? null : detailAt(read.plan, window, at, options.drawn ?? null, options)
}

function voids({ plan }: ReadPlan, px: Float64Array): Item[] {
  const items: Item[] = []
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 0) continue
    let left = Infinity
    let right = -Infinity
    let top = Infinity
    let bottom = -Infinity
    for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) {
      const node = plan.origin[plan.rimHalf[k]]
      left = Math.min(left, px[2 * node])
      right = Math.max(right, px[2 * node])
      top = Math.min(top, px[2 * node + 1])
      bottom = Math.max(bottom, px[2 * node + 1])
    }
    // A small cross in the middle: the box's corners need not lie in the void.
    const x = (left + right) / 2
    const y = (top + bottom) / 2
    const r = Math.min(right - left, bottom - top) * 0.28
    items.push(polyline('voidCross', [x - r, y - r, x + r, y + r]), polyline('voidCross', [x - r, y + r, x + r, y - r]))
    items.push(label(x, y + 4, 'void', { tone: 'ink', anchor: 'middle', plate: true, bold: true }))
  }
  return items
}

/** 26 px from its place, turned on by steps of 0.7 until it stands clear of the others (x0 y0 x1 y1 ..), farther out after a whole turn. */
function balloonSpot(px: number, py: number, turn: number, width: number, height: number, others: readonly number[]): readonly [number, number] {
  const at = (k: number): readonly [number, number] => {
    const reach = k < 9 ? 26 : 46
    return [Math.max(12, Math.min(width - 12, px + reach * Math.cos(turn + 0.7 * k))), Math.max(12, Math.min(height - 12, py + reach * Math.sin(turn + 0.7 * k)))]
  }
  const isClear = ([x, y]: readonly [number, number]): boolean => {
    for (let i = 0; i < others.length; i += 2) if (Math.hypot(others[i] - x, others[i + 1] - y) < 19) return false
    return true
  }
  for (let k = 0; k < 18; k += 1) {
    const spot = at(k)
    if (isClear(spot)) return spot
  }
  return at(0)
}

function balloons(read: ReadPlan, window: PlanWindow, { repair: chosen, place = 0, width, height }: ReadDrawingOptions): Item[] {
  const items: Item[] = []
  const leaders = new Batch()
  const spots: number[] = []
  const filled: number[] = []
  const open: number[] = []
  const words: Item[] = []
  for (const [i, repair] of read.repairs.entries()) {
    for (const [k, [x, y]] of repair.where.slice(0, chosen === i ? mostPlaces : 3).entries()) {
      const [px, py] = toSheet(window, x, y)
      if (px < -20 || py < -20 || px > width + 20 || py > height + 20) continue
      spots.push(px, py)
      // One balloon says which repair it is; its other places are ringed.
      if (chosen === i && k !== place % repair.where.length) continue
      // Out of the middle, so that balloons stand clear of one another and of what they point at.
      const turn = Math.atan2(py - height / 2, px - width / 2) + (k % 3) * 0.7
      const [bx, by] = balloonSpot(px, py, turn, width, height, [...open, ...filled])
      leaders.segment(px, py, bx, by)
      ;(chosen === i ? filled : open).push(bx, by)
      words.push(label(bx, by + 4, String(i + 1), { size: 11, bold: true, anchor: 'middle', tone: chosen === i ? 'paper' : 'fault' }))
    }
  }
  if (!leaders.empty) items.push(leaders.strokes('water', 0.9))
  if (spots.length > 0) items.push(dots(spots, 3.5, null, 'fault', 1.1))
  if (open.length > 0) items.push(dots(open, 9, 'paper', 'fault', 1.2))
  if (filled.length > 0) items.push(dots(filled, 9, 'fault', 'fault', 1.2))
  return [...items, ...words]
}
