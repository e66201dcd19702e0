/** What a cure would change, over the plan that it changes: moves with their exaggeration, diagonals, packing, joints left out. */
import { significant } from '../../base/decimal.ts'
import { metres } from '../../base/length.ts'
import { indexOfName, nodeName } from '../../plan/names.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Cure } from '../../roof/answer/cure.ts'
import { Batch, dots, label, type DisplayList, type Item } from './display-list.ts'
import { medianPanelWidth } from './level-of-detail.ts'
import { nodesOnSheet } from './plan-drawing.ts'
import { fitted, type PlanWindow } from './plan-window.ts'
import { exaggerated, exaggeration } from './shift-drawing.ts'

export interface DrawnCure {
  readonly plan: Plan
  readonly cure: Pick<Cure, 'code' | 'where' | 'diagonals' | 'packing'>
  /** The plan with its nodes moved (move-nodes); null: not known, or another kind. */
  readonly moved: Plan | null
  /** Nodes that the condition holds (release). */
  readonly nodes: ArrayLike<number>
}

/** What lies over the plan, and what has to be said of it. */
export interface Overlay {
  readonly items: readonly Item[]
  readonly note: string
}

/** Longest bar of packing, px. */
const longestBar = 16

export function cureOverlay({ plan, cure, moved, nodes }: DrawnCure, window: PlanWindow): Overlay {
  const px = nodesOnSheet(plan, window)
  const lines = new Batch()
  switch (cure.code) {
    case 'move-nodes': return moved === null ? { items: [], note: '' } : movesOverlay(plan, moved, window)
    case 'add-diagonals':
      for (const { from, to } of cure.diagonals ?? []) segment(lines, px, indexOfName(from, 'N'), indexOfName(to, 'N'))
      return { items: [lines.strokes('selected', 1.8)], note: 'Diagonals in violet.' }
    case 'remove-joints':
      for (const name of cure.where) {
        const joint = indexOfName(name, 'J')
        segment(lines, px, plan.origin[2 * joint], plan.origin[2 * joint + 1])
      }
      return { items: [lines.strokes('heldSoft', 2.6)], note: 'Joints left out in violet dashes.' }
    case 'pack-rim': return packingOverlay(px, cure.packing ?? [])
    case 'release': return { items: [dots(Array.from(nodes, (node) => [px[2 * node], px[2 * node + 1]]).flat(), 3, null, 'hand', 1.4)], note: 'Rings: what it holds.' }
    case 'accept-deviation':
      for (const name of cure.where) {
        const panel = indexOfName(name, 'P')
        for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) lines.point(px[2 * plan.corner[c]], px[2 * plan.corner[c] + 1])
        lines.end()
      }
      return { items: [lines.strokes('held', 1.4, true)], note: 'Panels that bend most are outlined.' }
  }
}

/** Moves from one plan to another of the same panels. */
export function movesOverlay(before: Plan, after: Plan, window: PlanWindow): Overlay {
  const shifts = before.x.map((x, n) => Math.hypot(after.x[n] - x, after.y[n] - before.y[n]))
  const factor = exaggeration(shifts, medianPanelWidth(before))
  if (factor === null) return { items: [], note: 'No node moved.' }
  const worst = shifts.reduce((most, shift, n) => (shift > shifts[most] ? n : most), 0)
  return {
    items: exaggerated(nodesOnSheet(before, window), nodesOnSheet(after, window), factor),
    note: `Moves drawn ${factor === 1 ? 'as long as they are' : `${factor} times as long as they are`}; the largest: ${nodeName(worst)}, ${significant(shifts[worst] * metres[before.unit] * 1000, 2)} mm.`,
  }
}

/** A bar at each node, as long as its packing beside the largest: up the sheet for up. */
function packingOverlay(px: Float64Array, packing: NonNullable<Cure['packing']>): Overlay {
  const bars = new Batch()
  const feet: number[] = []
  const most = packing.reduce((largest, { by_mm }) => Math.max(largest, Math.abs(by_mm)), 0)
  for (const { node, by_mm } of packing) {
    const n = indexOfName(node, 'N')
    const [x, y] = [px[2 * n], px[2 * n + 1]]
    bars.segment(x, y, x, y - (longestBar * by_mm) / (most || 1))
    feet.push(x, y)
  }
  return { items: [bars.strokes('held', 2.2), dots(feet, 1.8, 'hand', null)], note: `Bars: packing, up or down; the longest is ${significant(most, 2)} mm.` }
}

/** The cure in a small box: the plan's lines under it. */
export function curePicture(drawn: DrawnCure, width: number, height: number): DisplayList {
  const { plan } = drawn
  const window = fitted(plan, { left: 6, top: longestBar / 2 + 4, right: width - 6, bottom: height - 6 })
  const px = nodesOnSheet(plan, window)
  const joints = new Batch()
  const rim = new Batch()
  for (let e = 0; e < plan.edgeCount; e += 1) segment(e < plan.jointCount ? joints : rim, px, plan.origin[2 * e], plan.origin[2 * e + 1])
  const { items, note } = cureOverlay(drawn, window)
  return { width, height, items: [joints.strokes('drop', 0.6), rim.strokes('thin', 0.9), ...items], title: 'What it changes', description: note }
}

/** The note at the foot of the plan, on a plate of paper. */
export function overlayItems({ items, note }: Overlay, height: number): Item[] {
  return [...items, ...(note === '' ? [] : [label(14, height - 78, note, { tone: 'hand', size: 12, plate: true })])]
}

function segment(batch: Batch, px: Float64Array, a: number, b: number): void {
  if (a >= 0 && b >= 0) batch.segment(px[2 * a], px[2 * a + 1], px[2 * b], px[2 * b + 1])
}
