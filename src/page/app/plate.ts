/** Where a plate stands on the plan. */
import type { CSSProperties } from 'react'
import { toSheet, type PlanWindow } from '../../paper/drawing/plan-window.ts'
import type { Answer } from '../../roof/answer/answer.ts'

export interface Placed {
  readonly answer: Answer
  readonly window: PlanWindow
  readonly size: { readonly width: number; readonly height: number }
}

/** About what a plate takes, px. */
const plateWidth = 198
const plateHeight = 150
/** The band of the scale, and how far out the bubbles of axes stand. */
const band = 66
const bubbles = 26
/** Past this many nodes a share of them tells as well. */
const mostLooked = 600

/**
 * In the corner of the plan where it covers least: nodes, the bubbles of axes above and at the left of the plan, and never
 * what is selected at (x, y), which moves with the hand.
 */
export function plateAt(x: number, y: number, { answer: { plan }, window, size: { width, height } }: Placed): CSSProperties {
  const corners = [
    { style: { right: 6, bottom: band + 4 }, left: width - plateWidth - 6, top: height - band - 4 - plateHeight },
    { style: { left: 8, bottom: band + 4 }, left: 8, top: height - band - 4 - plateHeight },
    { style: { right: 46, top: 6 }, left: width - plateWidth - 46, top: 6 },
    { style: { left: 8, top: 6 }, left: 8, top: 6 },
  ]
  const step = Math.max(1, Math.floor(plan.nodeCount / mostLooked))
  const spots: (readonly [number, number])[] = []
  for (let i = 0; i < plan.nodeCount; i += step) spots.push(toSheet(window, plan.x[i], plan.y[i]))
  const left = spots.reduce((least, [px]) => Math.min(least, px), Infinity) - bubbles
  const top = spots.reduce((least, [, py]) => Math.min(least, py), Infinity) - bubbles
  const cost = corners.map((corner) => {
    const within = (px: number, py: number, by = 0): number =>
      px > corner.left - by && px < corner.left + plateWidth + by && py > corner.top - by && py < corner.top + plateHeight + by ? 1 : 0
    return spots.reduce((sum, [px, py]) => sum + within(px, py) + 0.5 * within(px, top) + 0.5 * within(left, py), within(x, y, 24) * 4 * spots.length)
  })
  return corners[cost.indexOf(Math.min(...cost))].style
}
