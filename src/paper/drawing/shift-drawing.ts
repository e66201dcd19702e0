/**
 * How far nodes moved: the plan as it was in dashes, the plan as it is in lines, and every move drawn longer than it is by a
 * factor that stands beside it, so that the largest can be seen and the pattern read.
 */
import { significant } from '../../base/decimal.ts'
import { metres } from '../../base/length.ts'
import type { Plan } from '../../plan/plan.ts'
import { nodeName } from '../../plan/names.ts'
import { Batch, dots, label, moved, type DisplayList, type Item } from './display-list.ts'
import { scaleBar, northPoint } from './furniture.ts'
import { nodesOnSheet, planArea } from './plan-drawing.ts'
import { medianPanelWidth } from './level-of-detail.ts'
import { fitted } from './plan-window.ts'

export interface Shifts {
  /** The plan before and after; the same panels. */
  readonly before: Plan
  readonly after: Plan
}

const width = 1000
const height = 760

/** The drawing of the shifts on a sheet of 1000 x 760 px. */
export function shiftDrawing({ before, after }: Shifts): DisplayList {
  const window = fitted(before, planArea(width, height, true))
  const from = nodesOnSheet(before, window)
  const to = nodesOnSheet(after, window)
  const mm = metres[before.unit] * 1000
  const shifts = before.x.map((x, n) => Math.hypot(after.x[n] - x, after.y[n] - before.y[n]))
  const worst = shifts.reduce((most, shift, n) => (shift > shifts[most] ? n : most), 0)
  const largest = shifts[worst]
  const factor = exaggeration(shifts, medianPanelWidth(before))
  const items: Item[] = [
    edges(before, from, 'before'), ...(factor === null ? [] : exaggerated(from, to, factor)),
    rimEdges(before, from),
  ]
  if (factor !== null) items.push(label(from[2 * worst] + 5, from[2 * worst + 1] - 5, nodeName(worst), { tone: 'ink', size: 11 }))
  const words = factor === null
    ? 'No node moved.'
    : `Moves drawn ${factor} times as long as they are. The largest: ${nodeName(worst)}, ${significant(largest * mm, 2)} mm.`
  items.push(label(14, height - 52, words, { tone: 'ink', size: 13 }))
  items.push(label(14, height - 34, 'Dashes: the plan as drawn. Lines from each node: where it went.', { size: 12 }))
  const bar = scaleBar(before.unit, window.scale)
  const north = northPoint()
  items.push(...moved(bar.items, width - 140, height - 58), ...moved(north.items, width - 40, 16))
  return { width, height, items, title: 'Moved nodes', description: words }
}

/**
 * 1, 2 or 5 times a power of ten, so that all but the longest moves are up to about half a panel wide: one node that goes far
 * must not make dots of all others, and may cross three panels. null: nothing moved.
 */
export function exaggeration(shifts: Float64Array, panel: number): number | null {
  const moves = shifts.filter((shift) => shift > 0).sort()
  if (moves.length === 0) return null
  const wanted = Math.min((0.6 * panel) / moves[Math.floor(nearlyAll * (moves.length - 1))], (3 * panel) / moves[moves.length - 1])
  if (wanted <= 1) return 1
  const decade = 10 ** Math.floor(Math.log10(wanted))
  const step = wanted / decade
  return decade * (step >= 5 ? 5 : step >= 2 ? 2 : 1)
}

const nearlyAll = 0.95

/** Moves below this, drawn, are dots. */
const shortest = 0.7

export function exaggerated(from: Float64Array, to: Float64Array, factor: number): Item[] {
  const lines = new Batch()
  const ends: number[] = []
  for (let i = 0; i < from.length; i += 2) {
    const dx = (to[i] - from[i]) * factor, dy = (to[i + 1] - from[i + 1]) * factor
    if (Math.hypot(dx, dy) < shortest) continue
    lines.segment(from[i], from[i + 1], from[i] + dx, from[i + 1] + dy)
    ends.push(from[i] + dx, from[i + 1] + dy)
  }
  return [lines.strokes('held', 1.6), dots(ends, 1.8, 'hand', null)]
}

function edges(plan: Plan, px: Float64Array, line: 'before'): Item {
  const batch = new Batch()
  for (let e = 0; e < plan.jointCount; e += 1) segment(batch, plan, px, e)
  return batch.strokes(line)
}

function rimEdges(plan: Plan, px: Float64Array): Item {
  const batch = new Batch()
  for (let e = plan.jointCount; e < plan.edgeCount; e += 1) segment(batch, plan, px, e)
  return batch.strokes('thin')
}

function segment(batch: Batch, plan: Plan, px: Float64Array, edge: number): void {
  const a = plan.origin[2 * edge], b = plan.origin[2 * edge + 1]
  batch.segment(px[2 * a], px[2 * a + 1], px[2 * b], px[2 * b + 1])
}
