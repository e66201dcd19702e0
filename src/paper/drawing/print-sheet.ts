/**
 * Sheets of paper: the plan at a true scale, the largest usual one at which it fits, on A4 where that shows it at 1:100 or
 * larger, else on A3. Sizes in mm; a sheet pixel is 1/96 inch, so that a drawing in pixels has a size on paper.
 */
import { metres } from '../../base/length.ts'
import type { Plan } from '../../plan/plan.ts'
import { planArea } from './plan-drawing.ts'
import { fitted, type PlanWindow } from './plan-window.ts'

export const mmPerPx = 25.4 / 96

/** Usual scales 1:N of building drawings. */
export const usualScales: readonly number[] = [10, 20, 50, 100, 200, 500, 1000, 2000, 5000, 10_000]

export interface Paper {
  readonly name: 'A4' | 'A3'
  /** Printable area of the landscape sheet within margins of 8 mm. */
  readonly width: number
  readonly height: number
  /** The plan's own drawing, and the column of the others beside it. */
  readonly plan: { readonly width: number; readonly height: number }
  readonly beside: { readonly width: number; readonly height: number }
  /** Tables of the list side by side, and rows in each. */
  readonly tables: number
  readonly rows: number
}

const papers: readonly Paper[] = [
  { name: 'A4', width: 281, height: 194, plan: { width: 190, height: 158 }, beside: { width: 88, height: 76 }, tables: 2, rows: 36 },
  { name: 'A3', width: 404, height: 281, plan: { width: 284, height: 240 }, beside: { width: 116, height: 116 }, tables: 3, rows: 56 },
]

export interface PlanSheet {
  readonly paper: Paper
  /** N of 1:N. */
  readonly scale: number
  /** Size of the plan's drawing in sheet pixels, and the window that shows the plan in it at the scale. */
  readonly width: number
  readonly height: number
  readonly window: PlanWindow
}

/** The sheet for a plan: px to the plan unit = metres / N * 1000 mm * px / mm. */
export function planSheet(plan: Plan): PlanSheet {
  const small = onPaper(plan, papers[0])
  return small.scale <= 100 ? small : onPaper(plan, papers[1])
}

function onPaper(plan: Plan, paper: Paper): PlanSheet {
  const width = paper.plan.width / mmPerPx
  const height = paper.plan.height / mmPerPx
  const fit = fitted(plan, planArea(width, height, true))
  const pxAt = (n: number): number => ((metres[plan.unit] / n) * 1000) / mmPerPx
  // Beyond the usual ones, tens: a plan of kilometres is still shown, and its scale still said.
  let scale = usualScales.find((n) => pxAt(n) <= fit.scale)
  for (let n = 20_000; scale === undefined; n *= 10) if (pxAt(n) <= fit.scale) scale = n
  return { paper, scale, width, height, window: { ...fit, scale: pxAt(scale) } }
}

/** Rows 0 .. count - 1 as sheets of tables: [sheet][table] = [from, to). */
export function listSheets(count: number, { tables, rows }: Paper): (readonly [from: number, to: number])[][] {
  const sheets: (readonly [number, number])[][] = []
  for (let at = 0; at < count; at += tables * rows) {
    const sheet: (readonly [number, number])[] = []
    for (let t = 0; t < tables && at + t * rows < count; t += 1) sheet.push([at + t * rows, Math.min(count, at + (t + 1) * rows)])
    sheets.push(sheet)
  }
  return sheets
}
