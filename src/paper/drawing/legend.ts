/** Legends: a scale is a row of drawn boxes, limits below them and counts above; the limit that matters splits the row. */
import { Batch, label, polyline, type Item } from './display-list.ts'
import { figure } from './figures.ts'
import { hatchPolygon } from './hatch.ts'
import { lineStyles } from './theme.ts'
import { jointKinds, type Joints } from './joint-kinds.ts'
import type { PanelClass, Reading } from './reading.ts'

export interface Block {
  readonly items: readonly Item[]
  readonly width: number
  readonly height: number
}

const boxHeight = 14
const gap = 16

/** The scale of a reading, its top left corner at (0, 0), at most `room` px wide. */
export function legend(reading: Reading, room: number): Block {
  return reading.panelClass === null ? jointLegend(reading, room) : reading.name === 'group' ? groupLegend(reading) : panelLegend(reading, room)
}

function panelLegend(reading: Reading, room: number): Block {
  const classes = reading.panelClasses
  const split = reading.limit === null ? -1 : reading.limit.after
  const box = Math.min(42, (room - (split > 0 ? gap : 0) - 24) / classes.length)
  const items: Item[] = []
  const top = 16
  let x = 6
  for (const [k, entry] of classes.entries()) {
    if (k === split) {
      const middle = x + gap / 2
      items.push(polyline('tolerance', [middle, top - 13, middle, top + boxHeight + 3]))
      items.push(label(middle, top + boxHeight + 14, limitText(reading, reading.limit?.at ?? 0), { size: 11, tone: 'fault', anchor: 'middle', bold: true }))
      x += gap
    }
    items.push(...swatch(entry, x, top, box))
    items.push(label(x + box / 2, top - 4, figure(entry.count), { size: 11, tone: 'ink', anchor: 'middle' }))
    if (k === 0 && entry.name === undefined) items.push(label(x, top + boxHeight + 14, '0', { size: 11, anchor: 'middle' }))
    if (entry.name !== undefined) items.push(label(x + box / 2, top + boxHeight + 14, entry.name, { size: 11, anchor: 'middle' }))
    else if (k !== split - 1) items.push(label(x + box, top + boxHeight + 14, upperText(reading, k), { size: 11, anchor: 'middle' }))
    x += box
  }
  return { items, width: x + 20, height: top + boxHeight + 18 }
}

/** The last class is open above: its end is the largest value that there is, rounded up. */
function upperText(reading: Reading, k: number): string {
  const entry = reading.panelClasses[k]
  const lower = k === 0 ? 0 : reading.panelClasses[k - 1].upTo
  const last = k === reading.panelClasses.length - 1
  const digits = 10 ** reading.decimals
  const value = last && !Number.isFinite(entry.upTo) ? Math.max(lower, Math.ceil(reading.largest * digits) / digits) : entry.upTo
  const open = last && value === lower
  return `${open ? '> ' : ''}${figure(value, decimalsOf(value, reading))}${last ? reading.unit : ''}`
}

function decimalsOf(value: number, reading: Reading): number {
  const scaled = value * 10 ** reading.decimals
  return Math.abs(scaled - Math.round(scaled)) < 1e-6 ? (Number.isInteger(value) ? 0 : reading.decimals) : reading.decimals + 1
}

const limitText = (reading: Reading, value: number): string => `${figure(value, decimalsOf(value, reading))}${reading.unit}`

function swatch(entry: PanelClass, x: number, y: number, width: number): Item[] {
  const corners = [x, y, x + width, y, x + width, y + boxHeight, x, y + boxHeight]
  const fill = new Batch()
  for (let i = 0; i < 8; i += 2) fill.point(corners[i], corners[i + 1])
  fill.end()
  const items: Item[] = [fill.fills(entry.tone)]
  if (entry.hatch !== null) {
    const strokes: number[] = []
    // A swatch falls straight down the sheet, and y runs down here: hence the gradient's sign.
    hatchPolygon(strokes, Float64Array.from(corners), entry.hatch, 1, 0, -1)
    const lines = new Batch()
    for (let i = 0; i < strokes.length; i += 4) lines.segment(strokes[i], strokes[i + 1], strokes[i + 2], strokes[i + 3])
    if (!lines.empty) items.push(entry.hatch.kind === 'dots' ? lines.strokes('flush', 1.4) : lines.strokes(entry.hatch.kind === 'water' ? 'water' : 'hatch'))
  }
  items.push(polyline('thin', corners, 0.8, true))
  return items
}

function jointLegend(reading: Reading, room: number): Block {
  const items: Item[] = []
  const step = Math.min(58, (room - 24) / Math.max(1, reading.jointClasses.length))
  let x = 6
  for (const [k, entry] of reading.jointClasses.entries()) {
    items.push(label(x + step / 2, 12, figure(entry.count), { size: 11, tone: 'ink', anchor: 'middle' }))
    items.push(polyline(entry.ridge, [x + 4, 20, x + step - 4, 20], entry.width))
    items.push(polyline(entry.valley, [x + 4, 27, x + step - 4, 27], entry.width))
    if (k === 0) items.push(label(x, 44, '0', { size: 11, anchor: 'middle' }))
    const value = Number.isFinite(entry.upTo) ? entry.upTo : reading.largest
    items.push(label(x + step, 44, `${figure(value, reading.name === 'fold' && Number.isInteger(value) ? 0 : reading.decimals)}${Number.isFinite(entry.upTo) ? '' : reading.unit}`, { size: 11, anchor: 'middle' }))
    x += step
  }
  if (reading.name === 'force') items.push(label(x + 22, 24, 'no load', { size: 11 }))
  return { items, width: x + (reading.name === 'force' ? 70 : 20), height: 48 }
}

function groupLegend(reading: Reading): Block {
  const items: Item[] = []
  let x = 6
  for (const entry of reading.panelClasses) {
    if (entry.count === 0) continue
    items.push(...swatch(entry, x, 16, 34))
    items.push(label(x + 17, 12, figure(entry.count), { size: 11, tone: 'ink', anchor: 'middle' }))
    x += 34
  }
  const single = (reading.panelClass ?? new Int8Array()).reduce((sum, k) => sum + (k < 0 ? 1 : 0), 0)
  items.push(...swatch({ tone: 'paper', hatch: null, upTo: 0, count: single, flagged: false }, x + 10, 16, 34))
  items.push(label(x + 27, 12, figure(single), { size: 11, tone: 'ink', anchor: 'middle' }))
  if (x > 6) items.push(label(6, 44, 'in flat groups', { size: 11 }))
  items.push(label(x + 10, 44, 'on their own', { size: 11 }))
  return { items, width: x + 90, height: 48 }
}

/** The key of lines: one row each with how many joints are so; stacked, or in one row where `inRow`. */
export function lineKey(joints: Joints, held: boolean, inRow = false): Block {
  const rows: { name: string; draw: (x: number, y: number) => Item[] }[] = []
  for (const [k, kind] of jointKinds.entries()) {
    if (joints.counts[k] === 0) continue
    rows.push({
      name: `${kind} ${figure(joints.counts[k])}`,
      draw: (x, y) => kind === 'frozen'
        ? [polyline('frozen', [x, y - 1.7, x + 26, y - 1.7]), polyline('frozen', [x, y + 1.7, x + 26, y + 1.7])]
        : [polyline(kind, [x, y, x + 26, y], kind === 'flush' ? lineStyles.flush.width : 2)],
    })
  }
  rows.push({ name: 'rim', draw: (x, y) => [polyline('rim', [x, y, x + 26, y])] })
  if (held) rows.push({ name: 'held', draw: (x, y) => [heldRing(x + 13, y), { kind: 'dots', radius: 1.6, fill: 'hand', line: null, lineWidth: 0, points: Float64Array.of(x + 13, y) }] })
  const items: Item[] = []
  const stepY = 19
  let along = 0
  for (const [i, row] of rows.entries()) {
    const x = inRow ? along : 0
    along += 46 + 5.8 * row.name.length
    const y = inRow ? 8 : 8 + i * stepY
    items.push(...row.draw(x, y), label(x + 33, y + 4, row.name, { size: 12, tone: 'ink' }))
  }
  return inRow ? { items, width: along, height: 18 } : { items, width: 104, height: rows.length * stepY }
}

/** The ring of a held node as a circle of 24 corners: dots are filled or lined, and this one is neither's width. */
function heldRing(x: number, y: number): Item {
  return { kind: 'dots', radius: 5.5, fill: 'paper', line: 'hand', lineWidth: 1.4, points: Float64Array.of(x, y) }
}
