/**
 * The plan as a drawing: panels filled and hatched by the reading, joints by how they fold, rims, voids, what is held,
 * the selection, and around it scale bar, north point, legend and key.
 */
import type { Axis } from '../../plan/axes.ts'
import { jointName, nodeName, panelName } from '../../plan/names.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { axisItems } from './axis-drawing.ts'
import { Batch, dots, label, moved, polyline, type DisplayList, type Item, type LineName, type Tone } from './display-list.ts'
import { figure } from './figures.ts'
import { northPoint, scaleBar } from './furniture.ts'
import { hatchPolygon } from './hatch.ts'
import { sharpest } from './joint-readings.ts'
import { jointKinds, weight, type Joints } from './joint-kinds.ts'
import { legend, lineKey } from './legend.ts'
import { medianPanelWidth, planDetail, type Detail } from './level-of-detail.ts'
import { groupLetter } from './panel-readings.ts'
import { fitted, type Area, type PlanWindow } from './plan-window.ts'
import type { Reading, ReadingName } from './reading.ts'

export interface Selection {
  readonly kind: 'panel' | 'joint' | 'node'
  readonly index: number
}

export interface PlanDrawingOptions {
  readonly width: number
  readonly height: number
  readonly reading: Reading
  readonly joints: Joints
  /** What is shown; the whole plan when null. */
  readonly window: PlanWindow | null
  readonly selection: Selection | null
  /** Legend, key, bar and north point; false for small pictures. */
  readonly furniture: boolean
  /** The key of lines stands elsewhere. */
  readonly key?: boolean
  /** Building axes to be named beside the plan. */
  readonly axes?: readonly Axis[]
  /** A chain line drops from the selected panel to the foot of the sheet, where the roof stands. */
  readonly chain?: boolean
}

/** Where on the sheet the plan itself goes, between its furniture. */
export function planArea(width: number, height: number, furniture: boolean): Area {
  if (!furniture) return { left: 4, top: 4, right: width - 4, bottom: height - 4 }
  // Room at the left and above for the bubbles of axes, above and below for the names of what is held along the rim.
  return { left: 44, top: 46, right: width - (width > 480 ? 100 : 44), bottom: height - 92 }
}

export function planWindow(answer: Answer, options: Pick<PlanDrawingOptions, 'width' | 'height' | 'furniture' | 'window'>): PlanWindow {
  return options.window ?? fitted(answer.plan, planArea(options.width, options.height, options.furniture))
}

export function planDrawing(answer: Answer, options: PlanDrawingOptions): DisplayList {
  const { plan } = answer
  const { width, height, reading, joints } = options
  const window = planWindow(answer, options)
  const detail = planDetail(medianPanelWidth(plan) * window.scale)
  const px = nodesOnSheet(plan, window)
  const seen = panelsInSight(plan, px, width, height)
  const items: Item[] = [
    ...panelFills(plan, px, seen, reading),
    ...(detail.hatch ? hatches(answer, window, seen, reading, detail) : []),
    ...voidCrosses(plan, px),
    ...jointLines(plan, px, reading, joints, detail),
    ...rims(plan, px),
    ...(detail.flagDots ? flagDots(plan, px, seen, reading) : []),
    ...(detail.nodes ? nodes(plan, px, width, height) : []),
    ...words(answer, px, seen, reading, detail, joints),
    ...held(answer, px, detail, width),
    ...selected(plan, px, options.selection),
  ]
  if (options.chain === true) items.push(...chain(plan, px, options.selection, height))
  if (options.axes !== undefined) items.push(...axisItems(options.axes, window, { width, height: height - (options.furniture ? 64 : 0) }))
  if (options.furniture) items.push(...furniture(answer, options, window))
  const { summary } = answer
  return {
    width, height, items, title: 'Plan',
    description: `${figure(summary.plan.panels)} panels, ${figure(summary.plan.joints)} joints, ${figure(summary.plan.voids)} voids. ${reading.note}`,
  }
}

export function nodesOnSheet(plan: Plan, window: PlanWindow): Float64Array {
  const px = new Float64Array(2 * plan.nodeCount)
  for (let i = 0; i < plan.nodeCount; i += 1) {
    px[2 * i] = window.middleX + window.scale * (plan.x[i] - window.centreX)
    px[2 * i + 1] = window.middleY - window.scale * (plan.y[i] - window.centreY)
  }
  return px
}

function panelsInSight(plan: Plan, px: Float64Array, width: number, height: number): Uint8Array {
  const seen = new Uint8Array(plan.panelCount)
  for (let p = 0; p < plan.panelCount; p += 1) {
    let left = Infinity
    let right = -Infinity
    let top = Infinity
    let bottom = -Infinity
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const x = px[2 * plan.corner[c]]
      const y = px[2 * plan.corner[c] + 1]
      if (x < left) left = x
      if (x > right) right = x
      if (y < top) top = y
      if (y > bottom) bottom = y
    }
    seen[p] = right >= 0 && left <= width && bottom >= 0 && top <= height ? 1 : 0
  }
  return seen
}

export function panelFills(plan: Plan, px: Float64Array, seen: Uint8Array, reading: Reading): Item[] {
  const { panelClass, panelClasses } = reading
  const items: Item[] = []
  // The commonest tone under everything hides the seams that antialiasing leaves between neighbours.
  const common = panelClasses.reduce((best, entry, k) => (entry.count > (panelClasses[best]?.count ?? -1) ? k : best), 0)
  const under = new Batch()
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 1) continue
    for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) point(under, px, plan.origin[plan.rimHalf[k]])
    under.end()
  }
  if (panelClass === null) {
    const all = new Batch()
    for (let p = 0; p < plan.panelCount; p += 1) if (seen[p] === 1) outline(all, plan, px, p)
    return [all.fills('paper')]
  }
  items.push(under.fills(panelClasses[common]?.tone ?? 'paper'))
  const holes = new Batch()
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 0) continue
    for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) point(holes, px, plan.origin[plan.rimHalf[k]])
    holes.end()
  }
  if (!holes.empty) items.push(holes.fills('paper'))
  for (let k = -1; k < panelClasses.length; k += 1) {
    const batch = new Batch()
    for (let p = 0; p < plan.panelCount; p += 1) if (seen[p] === 1 && panelClass[p] === k) outline(batch, plan, px, p)
    if (!batch.empty) items.push(batch.fills(k < 0 ? 'paper' : panelClasses[k].tone))
  }
  return items
}

function outline(batch: Batch, plan: Plan, px: Float64Array, p: number): void {
  for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) point(batch, px, plan.corner[c])
  batch.end(p)
}

function point(batch: Batch, px: Float64Array, node: number): void {
  batch.point(px[2 * node], px[2 * node + 1])
}

/** Strokes of each panel's hatch in plan coordinates about the plan's centre, with the class they belong to. */
export function panelHatch(answer: Answer, reading: Reading, p: number, pxLength: number, into: number[]): LineName | null {
  const { plan, roof } = answer
  const entry = reading.panelClass === null ? undefined : reading.panelClasses[reading.panelClass[p]]
  if (entry === undefined || entry.hatch === null) return null
  const count = plan.panelStart[p + 1] - plan.panelStart[p]
  const polygon = new Float64Array(2 * count)
  for (let k = 0; k < count; k += 1) {
    const node = plan.corner[plan.panelStart[p] + k]
    polygon[2 * k] = plan.x[node] - plan.frame.centreX
    polygon[2 * k + 1] = plan.y[node] - plan.frame.centreY
  }
  hatchPolygon(into, polygon, entry.hatch, pxLength, roof === null ? 0 : roof.gradient[2 * p], roof === null ? 0 : roof.gradient[2 * p + 1])
  return entry.hatch.kind === 'water' ? 'water' : entry.hatch.kind === 'dots' ? 'flush' : 'hatch'
}

function hatches(answer: Answer, window: PlanWindow, seen: Uint8Array, reading: Reading, detail: Detail): Item[] {
  const { plan } = answer
  const batches: Partial<Record<LineName, Batch>> = {}
  const dx = window.middleX + window.scale * (plan.frame.centreX - window.centreX)
  const dy = window.middleY - window.scale * (plan.frame.centreY - window.centreY)
  const strokes: number[] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    if (seen[p] === 0) continue
    strokes.length = 0
    const line = panelHatch(answer, reading, p, detail.hatchSpacing / window.scale, strokes)
    if (line === null) continue
    const batch = (batches[line] ??= new Batch())
    for (let i = 0; i < strokes.length; i += 4) {
      batch.segment(dx + window.scale * strokes[i], dy - window.scale * strokes[i + 1], dx + window.scale * strokes[i + 2], dy - window.scale * strokes[i + 3])
    }
  }
  return Object.entries(batches).map(([line, batch]) => batch.strokes(line as LineName, line === 'flush' ? 1.4 : null))
}

/**
 * Joints in the order weak to strong: frozen as two lines, flush as dots, then ridges and valleys by weight, each valley on
 * a casing of paper so that it holds on dark tones. A reading of joints takes over their widths.
 */
export function jointLines(plan: Plan, px: Float64Array, reading: Reading, joints: Joints, detail: Detail): Item[] {
  if (detail.joints === 'none') return []
  const median = detail.joints === 'some' ? joints.force.slice().sort()[joints.force.length >> 1] : -1
  const frozen = new Batch()
  const flush = new Batch()
  const byStyle = new Map<string, { line: LineName; width: number; valley: boolean; batch: Batch }>()
  for (let j = 0; j < plan.jointCount; j += 1) {
    const a = 2 * plan.origin[2 * j]
    const b = 2 * plan.origin[2 * j + 1]
    const kind = jointKinds[joints.kind[j]]
    if (kind === 'frozen') {
      doubled(frozen, px[a], px[a + 1], px[b], px[b + 1], detail.joints === 'all' ? 1.7 : 1)
      continue
    }
    if (kind === 'flush') {
      if (detail.joints === 'all') flush.segment(px[a], px[a + 1], px[b], px[b + 1])
      continue
    }
    const valley = kind === 'valley'
    if (detail.joints === 'some' && !valley && joints.force[j] < median) continue
    const entry = reading.jointClass === null ? undefined : reading.jointClasses[reading.jointClass[j]]
    const line: LineName = entry === undefined ? kind : valley ? entry.valley : entry.ridge
    const full = entry === undefined ? weight(joints.force[j], joints.force95) : entry.width
    const width = detail.joints === 'all' ? full : Math.min(1.25, full / 2)
    const key = `${line} ${width}`
    const found = byStyle.get(key) ?? { line, width, valley, batch: new Batch() }
    byStyle.set(key, found)
    found.batch.segment(px[a], px[a + 1], px[b], px[b + 1])
  }
  const items: Item[] = []
  if (!flush.empty) items.push(flush.strokes('flush'))
  if (!frozen.empty) items.push(frozen.strokes('frozen', detail.joints === 'all' ? null : 0.6))
  const styles = [...byStyle.values()].sort((s, t) => Number(s.valley) - Number(t.valley) || s.width - t.width || (s.line < t.line ? -1 : 1))
  for (const { line, width, valley, batch } of styles) {
    if (valley) items.push(batch.strokes('casing', width + 1.8))
    items.push(batch.strokes(line, width))
  }
  return items
}

/** Two lines beside the segment, each `half` px off it. */
export function doubled(batch: Batch, x0: number, y0: number, x1: number, y1: number, half: number): void {
  const length = Math.hypot(x1 - x0, y1 - y0)
  if (length === 0) return
  const nx = (-(y1 - y0) / length) * half
  const ny = ((x1 - x0) / length) * half
  batch.segment(x0 + nx, y0 + ny, x1 + nx, y1 + ny)
  batch.segment(x0 - nx, y0 - ny, x1 - nx, y1 - ny)
}

export function rims(plan: Plan, px: Float64Array): Item[] {
  const batch = new Batch()
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) point(batch, px, plan.origin[plan.rimHalf[k]])
    batch.end()
  }
  return [batch.strokes('rim', null, true)]
}

/** Two thin diagonals a void, between the nodes nearest to the corners of its box. */
function voidCrosses(plan: Plan, px: Float64Array): Item[] {
  const batch = new Batch()
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 0) continue
    for (const [sx, sy] of [[1, 1], [1, -1]] as const) {
      let least = -1
      let most = -1
      for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) {
        const node = plan.origin[plan.rimHalf[k]]
        const along = sx * px[2 * node] + sy * px[2 * node + 1]
        if (least < 0 || along < sx * px[2 * least] + sy * px[2 * least + 1]) least = node
        if (most < 0 || along > sx * px[2 * most] + sy * px[2 * most + 1]) most = node
      }
      if (least !== most) batch.segment(px[2 * least], px[2 * least + 1], px[2 * most], px[2 * most + 1])
    }
  }
  return batch.empty ? [] : [batch.strokes('voidCross')]
}

export function centres(plan: Plan, px: Float64Array, p: number): readonly [number, number] {
  let x = 0
  let y = 0
  const count = plan.panelStart[p + 1] - plan.panelStart[p]
  for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
    x += px[2 * plan.corner[c]]
    y += px[2 * plan.corner[c] + 1]
  }
  return [x / count, y / count]
}

function flagDots(plan: Plan, px: Float64Array, seen: Uint8Array, reading: Reading): Item[] {
  const points: number[] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    const k = reading.panelClass === null ? -1 : reading.panelClass[p]
    if (seen[p] === 1 && k >= 0 && reading.panelClasses[k].flagged) points.push(...centres(plan, px, p))
  }
  return points.length === 0 ? [] : [dots(points, 1, 'fault', null, 0)]
}

function nodes(plan: Plan, px: Float64Array, width: number, height: number): Item[] {
  const points: number[] = []
  for (let i = 0; i < px.length; i += 2) {
    if (px[i] >= 0 && px[i] <= width && px[i + 1] >= 0 && px[i + 1] <= height) points.push(px[i], px[i + 1])
  }
  return plan.nodeCount === 0 ? [] : [dots(points, 1.8, 'paper', 'ink', 0.9)]
}

function words(answer: Answer, px: Float64Array, seen: Uint8Array, reading: Reading, detail: Detail, joints: Joints): Item[] {
  const { plan } = answer
  const items: Item[] = []
  if (detail.numbers && reading.jointClass === null && reading.name !== 'group') {
    for (let p = 0; p < plan.panelCount; p += 1) {
      if (seen[p] === 0) continue
      const [x, y] = centres(plan, px, p)
      items.push(label(x, y + 3.5, String(p + 1), { size: 10, face: 'pen', bold: true, tone: 'ink', anchor: 'middle' }))
    }
  }
  if (reading.name === 'group') {
    const lettered = new Set<number>()
    for (let p = 0; p < plan.panelCount && lettered.size < 52; p += 1) {
      const rank = reading.value[p]
      if (rank === 0 || seen[p] === 0 || lettered.has(rank)) continue
      lettered.add(rank)
      const [x, y] = centres(plan, px, p)
      items.push(label(x, y + 4, groupLetter(rank), { size: 13, face: 'pen', bold: true, tone: 'ink', anchor: 'middle', plate: true }))
    }
  }
  if (reading.jointClass !== null && detail.joints === 'all') {
    for (const j of sharpest(reading.value, 12)) {
      const a = 2 * plan.origin[2 * j]
      const b = 2 * plan.origin[2 * j + 1]
      const text = `${figure(reading.value[j], reading.decimals)}${reading.unit}`
      items.push(label((px[a] + px[b]) / 2, (px[a + 1] + px[b + 1]) / 2 + 3.5, text, { size: 10, tone: joints.kind[j] === 1 ? 'valley' : 'ink', anchor: 'middle', plate: true }))
    }
  }
  return items
}

/** Held runs along their edges, held nodes ringed, the condition's name once, on the side away from the middle. */
function held(answer: Answer, px: Float64Array, detail: Detail, width: number): Item[] {
  const { plan, conditions } = answer
  const items: Item[] = []
  for (const condition of conditions) {
    const bound = new Uint8Array(plan.nodeCount)
    for (const node of condition.nodes) bound[node] = 1
    const runs = new Batch()
    if (condition.nodes.length > 1) {
      for (let e = 0; e < plan.edgeCount; e += 1) {
        const a = plan.origin[2 * e]
        const b = plan.origin[2 * e + 1]
        if (bound[a] === 1 && bound[b] === 1 && (e >= plan.jointCount || onRun(plan, condition.nodes, a, b))) {
          runs.segment(px[2 * a], px[2 * a + 1], px[2 * b], px[2 * b + 1])
        }
      }
    }
    if (!runs.empty) items.push(runs.strokes(condition.soft ? 'heldSoft' : 'held', 2.4))
    const points: number[] = []
    for (const node of condition.nodes) points.push(px[2 * node], px[2 * node + 1])
    if (points.length > 0 && (detail.nodes || condition.nodes.length <= 12)) {
      const small = condition.nodes.length > 12
      items.push(dots(points, small ? 3 : 5.5, condition.soft ? null : 'paper', 'hand', condition.soft ? 1 : 1.4))
      if (!small) items.push(dots(points, 1.6, 'hand', null, 0))
    }
    const middle = condition.nodes[condition.nodes.length >> 1]
    if (middle !== undefined) {
      const x = px[2 * middle]
      const anchor = x < 70 ? 'start' : x > width - 70 ? 'end' : 'middle'
      // On the side away from the plan's middle, where there is paper.
      const below = plan.y[middle] <= plan.frame.centreY
      items.push(label(x, px[2 * middle + 1] + (below ? 19 : -11), condition.soft ? `${condition.name}, soft` : condition.name, { tone: 'hand', anchor, plate: true, bold: true }))
    }
  }
  return items
}

/** Whether a and b follow one another in the list of nodes: joints on a run, not joints that merely connect two of its nodes. */
function onRun(_plan: Plan, nodes: Int32Array, a: number, b: number): boolean {
  for (let k = 0; k + 1 < nodes.length; k += 1) {
    if ((nodes[k] === a && nodes[k + 1] === b) || (nodes[k] === b && nodes[k + 1] === a)) return true
  }
  return false
}

function selected(plan: Plan, px: Float64Array, selection: Selection | null): Item[] {
  if (selection === null) return []
  const { kind, index } = selection
  const tone: Tone = 'hand'
  if (kind === 'panel' && index < plan.panelCount) {
    const batch = new Batch()
    outline(batch, plan, px, index)
    const [x, y] = centres(plan, px, index)
    return [batch.strokes('selected', null, true), label(x, y + 4, panelName(index), { tone, anchor: 'middle', plate: true, bold: true, face: 'pen', size: 11 })]
  }
  if (kind === 'joint' && index < plan.jointCount) {
    const a = 2 * plan.origin[2 * index]
    const b = 2 * plan.origin[2 * index + 1]
    const batch = new Batch()
    batch.segment(px[a], px[a + 1], px[b], px[b + 1])
    return [batch.strokes('selected', 3.4), label((px[a] + px[b]) / 2 + 8, (px[a + 1] + px[b + 1]) / 2 - 6, jointName(index), { tone, plate: true, bold: true })]
  }
  if (kind === 'node' && index < plan.nodeCount) {
    const x = px[2 * index]
    const y = px[2 * index + 1]
    return [dots([x, y], 5.5, 'paper', tone, 2), dots([x, y], 1.6, tone, null, 0), label(x + 10, y - 8, nodeName(index), { tone, plate: true, bold: true })]
  }
  return []
}

function chain(plan: Plan, px: Float64Array, selection: Selection | null, height: number): Item[] {
  if (selection === null || selection.kind !== 'panel' || selection.index >= plan.panelCount) return []
  const [x, y] = centres(plan, px, selection.index)
  return [polyline('chain', [x, y + 9, x, height])]
}

/** What the counts of the legend count. */
const captions: Readonly<Record<ReadingName, readonly [string, string]>> = {
  slope: ['panels by slope', ''], flatness: ['panels by flatness,', 'as written'], fold: ['joints by fold angle', ''], force: ['joints by form force;', 'no load'],
  group: ['panels in flat groups', ''], freedom: ['panels by share of joints', 'that can fold'],
}

/** On a band of paper, so that a zoomed plan does not run under the figures. */
function furniture(answer: Answer, options: PlanDrawingOptions, window: PlanWindow): Item[] {
  const { width, height, reading, joints } = options
  const band = new Batch()
  for (const [x, y] of [[0, height - 64], [width, height - 64], [width, height], [0, height]] as const) band.point(x, y)
  band.end()
  const bar = scaleBar(answer.plan.unit, window.scale)
  const room = width - 24 - Math.max(130, bar.width + 24) - (width > 480 ? 104 : 0)
  const scale = legend(reading, Math.max(room, 180))
  const narrow = room < 180
  const items: Item[] = [band.fills('paper')]
  if (!narrow) {
    items.push(...moved(bar.items, 20, height - 30))
    for (const [k, line] of captions[reading.name].entries()) items.push(label(13, height - 50 + 13 * k, line, { size: 12 }))
  }
  items.push(...moved(scale.items, narrow ? 8 : Math.max(130, bar.width + 24) + 14, height - 58))
  items.push(...moved(northPoint().items, width - 36, 14))
  if (options.key !== false && width > 480) {
    const key = lineKey(joints, answer.conditions.length > 0)
    const plate = new Batch()
    const left = width - key.width - 2
    const top = height - key.height - 14
    for (const [x, y] of [[left - 6, top - 4], [width, top - 4], [width, height], [left - 6, height]] as const) plate.point(x, y)
    plate.end()
    items.push(plate.fills('paper', 0.86), ...moved(key.items, left, top))
  }
  return items
}
