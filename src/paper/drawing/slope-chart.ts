/**
 * The slope chart: Maxwell's reciprocal figure, a point a panel at the tangent of its slope in the direction its water
 * goes, joined wherever two panels share a joint. Each edge is perpendicular to its joint and as long as its form force.
 */
import { panelName } from '../../plan/names.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { Batch, dots, label, polyline, type DisplayList, type Item } from './display-list.ts'
import { fallPoint } from './fall.ts'
import { figure, slopeFigure, type SlopeUnit } from './figures.ts'
import type { Joints } from './joint-kinds.ts'
import type { Selection } from './plan-drawing.ts'
import type { Reading } from './reading.ts'
import { slopeReading } from './panel-readings.ts'

export interface ChartWindow {
  /** px for a slope of 1 (45 degrees). */
  readonly scale: number
  readonly middleX: number
  readonly middleY: number
}

export interface SlopeChartOptions {
  readonly width: number
  readonly height: number
  readonly joints: Joints
  readonly leastSlope: number | null
  readonly unit: SlopeUnit
  readonly window: ChartWindow | null
  readonly selection: Selection | null
  /** Gradients before the edit in hand, gx gy ..: how far each panel has moved is drawn; null: no edit in hand. */
  readonly before: Float64Array | null
  /** The slope reading, whose tones the points take; null: worked out here. */
  readonly tones: Reading | null
  /** The level point can be dragged. */
  readonly handle?: boolean
}

/** Rings that may be drawn, round figures of each unit, in its words; those within the figure and the next one beyond it are. */
const ringFigures: Readonly<Record<SlopeUnit, readonly number[]>> = {
  degrees: [1, 2, 5, 10, 15, 20, 25, 30, 45, 60, 75],
  percent: [1, 2, 5, 10, 15, 20, 30, 40, 50, 75, 100, 150, 250, 400],
  ratio: [100, 50, 40, 30, 20, 15, 10, 8, 6, 5, 4, 3, 2, 1.5, 1, 0.5, 0.25],
}

interface Ring {
  /** Tangent of the slope: the radius for a scale of 1. */
  readonly tangent: number
  readonly text: string
}

function ringsOf(unit: SlopeUnit): Ring[] {
  return ringFigures[unit].map((value) => {
    const text = String(value)
    if (unit === 'degrees') return { tangent: Math.tan((value * Math.PI) / 180), text: `${text}°` }
    return unit === 'percent' ? { tangent: value / 100, text: `${text}\u202f%` } : { tangent: 1 / value, text: `1:${text}` }
  })
}

/** The window in which the whole figure lies, its middle on the level panel. */
export function chartFit(answer: Answer, width: number, height: number, unit: SlopeUnit = 'degrees'): ChartWindow {
  const outer = outerRing(answer, unit)
  return { scale: roseRadius(width, height) / outer.tangent, middleX: width / 2, middleY: (height - 16) / 2 }
}

const roseRadius = (width: number, height: number): number => Math.max(20, Math.min(width - 74, height - 84) / 2)

function outerRing(answer: Answer, unit: SlopeUnit): Ring {
  const steepest = (steepestSlope(answer) * 1.02 * Math.PI) / 180
  const rings = ringsOf(unit)
  return rings.find(({ tangent }) => Math.atan(tangent) >= steepest) ?? rings[rings.length - 1]
}

function steepestSlope(answer: Answer): number {
  let most = 0
  const gradient = answer.roof?.gradient ?? new Float64Array()
  for (let i = 0; i < gradient.length; i += 2) most = Math.max(most, Math.hypot(gradient[i], gradient[i + 1]))
  return (Math.atan(most) * 180) / Math.PI
}

export function slopeChart(answer: Answer, options: SlopeChartOptions): DisplayList {
  const { plan, roof } = answer
  const { width, height } = options
  const window = options.window ?? chartFit(answer, width, height, options.unit)
  const { under: items, over } = rose(window, options)
  const title = 'Slope chart'
  if (roof === null) return { width, height, title, description: 'No roof yet.', items: [...items, ...over] }

  const points = new Float64Array(2 * plan.panelCount)
  for (let p = 0; p < plan.panelCount; p += 1) {
    const [x, y] = fallPoint(roof.gradient, p)
    points[2 * p] = window.middleX + window.scale * x
    points[2 * p + 1] = window.middleY - window.scale * y
  }
  const slopes = options.tones ?? slopeReading(answer, options.leastSlope)
  items.push(...edges(answer, points, options))
  if (options.before !== null) items.push(...moves(answer, points, options.before, window))
  items.push(...panelPoints(answer, points, slopes))
  items.push(...over, ...callouts(points, slopes, options, window))
  if (options.handle === true) items.push(...centreHandle(window))
  return {
    width, height, title, items,
    description: `Slopes from ${slopeFigure(slopes.smallest, options.unit)} to ${slopeFigure(slopes.largest, options.unit)}; a point a panel, where it falls to.`,
  }
}

/** Circles, compass and least slope go under the figure, the words on them over it. */
function rose(window: ChartWindow, { leastSlope, unit, width, height }: SlopeChartOptions): { under: Item[]; over: Item[] } {
  // The largest that lies on the sheet: the window may be that of an earlier roof.
  const fitting = ringsOf(unit).filter(({ tangent }) => window.scale * tangent <= roseRadius(width, height) * 1.001)
  const outer = fitting[fitting.length - 1] ?? ringsOf(unit)[0]
  const radius = (degrees: number): number => window.scale * Math.tan((degrees * Math.PI) / 180)
  const { middleX: x, middleY: y } = window
  const most = window.scale * outer.tangent
  const items: Item[] = []
  const over: Item[] = []
  if (leastSlope !== null && leastSlope > 0) {
    const r = radius(leastSlope)
    items.push(dots([x, y], r, 'faultWash', 'fault', 1))
    const dashes = new Batch()
    for (let row = -Math.floor(r / 5); row * 5 < r; row += 1) {
      const half = Math.sqrt(Math.max(0, r * r - 25 * row * row))
      for (let at = -half + (row % 2 === 0 ? 1 : 5); at + 5 < half; at += 9) dashes.segment(x + at, y + 5 * row, x + at + 5, y + 5 * row)
    }
    if (!dashes.empty) items.push(dashes.strokes('water', 0.9))
    if (r > 10) over.push(label(x, y + r + 12, `least ${slopeFigure(leastSlope, unit)}`, { size: 11, tone: 'fault', anchor: 'middle', plate: true }))
  }
  // From the outermost inwards, none nearer to the one before than its words need.
  let free = Infinity
  for (const ring of ringsOf(unit).reverse()) {
    const r = window.scale * ring.tangent
    if (ring.tangent > outer.tangent || r < 16 || r > free) continue
    const isOuter = ring.tangent === outer.tangent
    free = r - 22
    items.push(dots([x, y], r, null, isOuter ? 'rule' : 'hair', isOuter ? 1 : 0.9))
    over.push(label(x + r * Math.SQRT1_2 + 3, y - r * Math.SQRT1_2 - 2, ring.text, { size: 11, plate: true }))
  }
  for (let k = 0; k < 8; k += 1) {
    const c = Math.cos((k * Math.PI) / 4)
    const s = Math.sin((k * Math.PI) / 4)
    items.push(polyline('rule', [x + c * (most - 4), y + s * (most - 4), x + c * (most + 4), y + s * (most + 4)]))
  }
  items.push(
    label(x, y - most - 8, 'N', { tone: 'ink', anchor: 'middle' }), label(x, y + most + 16, 'S', { tone: 'ink', anchor: 'middle' }),
    label(x + most + 8, y + 4, 'E', { tone: 'ink' }), label(x - most - 8, y + 4, 'W', { tone: 'ink', anchor: 'end' }),
    polyline('rule', [x - 4, y, x + 4, y]), polyline('rule', [x, y - 4, x, y + 4]),
  )
  return { under: items, over }
}

/** A diamond on the level point. */
function centreHandle({ middleX: x, middleY: y }: ChartWindow): Item[] {
  const corners = [x, y - 6, x + 6, y, x, y + 6, x - 6, y]
  const fill = new Batch()
  for (let i = 0; i < 8; i += 2) fill.point(corners[i], corners[i + 1])
  fill.end()
  return [fill.fills('paper'), polyline('thin', corners, 1.3, true)]
}

/** Over 2,000 panels only the edges of the selected panel's neighbours: the rest would be a blot. */
const manyPanels = 2000

function edges(answer: Answer, points: Float64Array, { joints, selection }: SlopeChartOptions): Item[] {
  const { plan, roof } = answer
  const ridges = new Batch()
  const valleys = new Batch()
  const flush = new Batch()
  const chosen = new Batch()
  const many = plan.panelCount > manyPanels
  for (let j = 0; j < plan.jointCount; j += 1) {
    const p = plan.panelOf[2 * j]
    const q = plan.panelOf[2 * j + 1]
    const isChosen = selection !== null && selection.kind === 'joint' && selection.index === j
    const near = selection !== null && selection.kind === 'panel' && (selection.index === p || selection.index === q)
    if (many && !isChosen && !near) continue
    const batch = isChosen ? chosen : roof?.isNear === true ? flush : joints.kind[j] === 1 ? valleys : ridges
    batch.segment(points[2 * p], points[2 * p + 1], points[2 * q], points[2 * q + 1])
  }
  const items: Item[] = []
  // A near roof closes only nearly: its figure is drawn broken so that it is not taken for an exact one.
  if (!flush.empty) items.push(flush.strokes('before'))
  if (!ridges.empty) items.push(ridges.strokes('thin'))
  if (!valleys.empty) items.push(valleys.strokes('valley', 1.05))
  if (!chosen.empty) items.push(chosen.strokes('selected'))
  return items
}

function moves(answer: Answer, points: Float64Array, before: Float64Array, window: ChartWindow): Item[] {
  const batch = new Batch()
  for (let p = 0; p < answer.plan.panelCount; p += 1) {
    const [x, y] = fallPoint(before, p)
    const px = window.middleX + window.scale * x
    const py = window.middleY - window.scale * y
    if (Math.hypot(px - points[2 * p], py - points[2 * p + 1]) > 1) batch.segment(px, py, points[2 * p], points[2 * p + 1])
  }
  return batch.empty ? [] : [batch.strokes('moved')]
}

function panelPoints(answer: Answer, points: Float64Array, reading: Reading): Item[] {
  const { plan } = answer
  const many = plan.panelCount > manyPanels
  const byClass = reading.panelClasses.map(() => [] as number[])
  const paper: number[] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    const k = reading.panelClass === null ? -1 : reading.panelClass[p]
    const into = k < 0 ? paper : byClass[k]
    into.push(points[2 * p], points[2 * p + 1])
  }
  const items: Item[] = []
  if (paper.length > 0) items.push(dots(paper, many ? 1.5 : 2.8, 'paper', 'ink', many ? 0 : 1))
  for (const [k, list] of byClass.entries()) {
    if (list.length === 0) continue
    const { tone, flagged } = reading.panelClasses[k]
    items.push(many ? dots(list, 1.5, flagged ? 'fault' : 'ink', null, 0) : dots(list, 2.8, tone, flagged ? 'fault' : 'ink', 1))
  }
  return items
}

/** The selected panel and the steepest one, named on plates outside the figure. */
function callouts(points: Float64Array, slopes: Reading, { selection, unit }: SlopeChartOptions, window: ChartWindow): Item[] {
  const items: Item[] = []
  let steepest = 0
  for (let p = 1; p < slopes.value.length; p += 1) if (slopes.value[p] > slopes.value[steepest]) steepest = p
  const chosen = selection !== null && selection.kind === 'panel' ? selection.index : -1
  if (slopes.value.length > 0 && steepest !== chosen) {
    const x = points[2 * steepest]
    const y = points[2 * steepest + 1]
    const right = x < window.middleX
    items.push(label(x + (right ? -8 : 8), y + 4, `${panelName(steepest)} ${slopeFigure(slopes.value[steepest], unit)}`, { tone: 'ink', plate: true, anchor: right ? 'end' : 'start' }))
  }
  if (chosen >= 0 && chosen < slopes.value.length) {
    const x = points[2 * chosen]
    const y = points[2 * chosen + 1]
    const tx = window.middleX - 0.52 * (window.middleX - 8)
    const ty = 2 * window.middleY - 34
    items.push(polyline('held', [x, y, tx, ty - 12]), dots([x, y], 5, null, 'hand', 2))
    items.push(label(tx, ty, `${panelName(chosen)} ${slopeFigure(slopes.value[chosen], unit)}`, { tone: 'hand', bold: true, anchor: 'middle', plate: true }))
  }
  return items
}

/** The panel whose point is nearest to a sheet pixel within `reach` px, -1 when there is none. */
export function panelAtChartPoint(answer: Answer, window: ChartWindow, px: number, py: number, reach: number): number {
  if (answer.roof === null) return -1
  let best = -1
  let least = reach * reach
  for (let p = 0; p < answer.plan.panelCount; p += 1) {
    const [x, y] = fallPoint(answer.roof.gradient, p)
    const dx = window.middleX + window.scale * x - px
    const dy = window.middleY - window.scale * y - py
    if (dx * dx + dy * dy <= least) {
      least = dx * dx + dy * dy
      best = p
    }
  }
  return best
}

/** One line under the chart: how many panels lie in each ring, for plans whose points merge. */
export function ringCounts(answer: Answer): string {
  const reading = slopeReading(answer, null)
  return reading.panelClasses.filter((entry) => entry.count > 0)
    .map((entry) => `${Number.isFinite(entry.upTo) ? `to ${entry.upTo}°` : 'above'} ${figure(entry.count)}`).join(', ')
}
