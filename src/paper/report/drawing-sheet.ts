/** The drawing of a report on what was read: the plan, and every repair that has a place as a number in a balloon. */
import { Batch, dots, label, type DisplayList, type Item } from '../drawing/display-list.ts'
import { readDrawing, readWindow } from '../drawing/read-drawing.ts'
import { toSheet, type PlanWindow } from '../drawing/plan-window.ts'
import { toSvg } from '../drawing/svg.ts'
import { themes } from '../drawing/theme.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'

/** Width on an A4 page between margins of 14 mm, in px of 1/96 inch, and the least and most height. */
const width = 688
const heights = [230, 430] as const

/** Places marked for one repair: more would cover the plan. */
const mostMarks = 80

const balloonRadius = 10

export interface DrawingSheet {
  readonly svg: string
  /** Numbers that stand in balloons. */
  readonly numbers: ReadonlySet<number>
}

/** The drawing for an A4 page. */
export function drawingSheet(read: ReadPlan): DrawingSheet {
  const { plan } = read
  const across = extent(plan.x), up = extent(plan.y)
  const height = Math.round(Math.max(heights[0], Math.min(heights[1], ((width - 96) * up) / Math.max(across, 1e-9 * up) + 106)))
  const window = windowWithPlaces(read, readWindow(read, width, height), height)
  const base = readDrawing({ ...read, repairs: [] }, { width, height, window, panel: -1, repair: -1 })
  const { items, numbers } = balloons(read, (x, y) => toSheet(window, x, y), height)
  const list: DisplayList = { ...base, items: [...base.items, ...items] }
  return { svg: toSvg(list, { ...themes.day, paper: '#FFFFFF' }), numbers }
}

/** The window, wider where repairs lie beside the plan, but never so wide that the plan is less than half of what it was. */
function windowWithPlaces({ repairs }: ReadPlan, window: PlanWindow, height: number): PlanWindow {
  let share = 1
  for (const { where } of repairs) {
    for (const [x, y] of where) {
      const [px, py] = toSheet(window, x, y)
      const needs = Math.max(Math.abs(px - window.middleX) / (width / 2 - 40), Math.abs(py - window.middleY) / (height / 2 - 56))
      if (needs <= 2) share = Math.max(share, needs)
    }
  }
  return { ...window, scale: window.scale / share }
}

function extent(values: Float64Array): number {
  let least = Infinity, most = -Infinity
  for (const value of values) {
    least = Math.min(least, value)
    most = Math.max(most, value)
  }
  return most - least
}

/** A place, or for one far off the sheet the edge on the way to it. */
function onSheet([x, y]: readonly [number, number], height: number): readonly [number, number] {
  const dx = x - width / 2, dy = y - height / 2
  const share = Math.min(1, (width / 2 - 6) / Math.max(1e-9, Math.abs(dx)), (height / 2 - 6) / Math.max(1e-9, Math.abs(dy)))
  return [width / 2 + share * dx, height / 2 + share * dy]
}

/**
 * A balloon for each repair with places, at the one of its places round which there is most room; small rings mark the
 * others. Balloons keep clear of one another, of the rings as well as can be, and inside the sheet.
 */
function balloons(read: ReadPlan, sheet: (x: number, y: number) => readonly [number, number], height: number): { items: Item[]; numbers: Set<number> } {
  const repairs = read.repairs.map(({ where }, i) => ({ number: i + 1, spots: where.slice(0, mostMarks).map(([x, y]) => onSheet(sheet(x, y), height)) }))
  const marks = repairs.flatMap(({ spots }) => spots)
  const placed: (readonly [number, number])[] = []
  const pointed: (readonly [number, number])[] = []
  const leaders = new Batch()
  const words: Item[] = []
  const numbers = new Set<number>()
  const centres: number[] = []
  for (const { number, spots } of repairs) {
    let best: { at: readonly [number, number]; spot: readonly [number, number] } | null = null, least = Infinity
    const stride = Math.max(1, Math.floor(spots.length / 12))
    for (let s = 0; s < spots.length; s += stride) {
      // Balloons of repairs that have places in common point at different ones.
      const crowd = pointed.reduce((sum, [x, y]) => sum + Math.max(0, 90 - Math.hypot(spots[s][0] - x, spots[s][1] - y)), 0)
      for (const reach of [24, 36, 52, 80]) {
        for (let k = 0; k < 16; k += 1) {
          const at = [spots[s][0] + reach * Math.cos((k * Math.PI) / 8), spots[s][1] + reach * Math.sin((k * Math.PI) / 8)] as const
          if (at[0] < 14 || at[1] < 14 || at[0] > width - 14 || at[1] > height - 44) continue
          const near = (list: readonly (readonly [number, number])[], within: number): number => list.reduce((sum, [x, y]) => sum + Math.max(0, within - Math.hypot(at[0] - x, at[1] - y)), 0)
          const cost = 1000 * near(placed, 2 * balloonRadius + 4) + 4 * near(marks, balloonRadius + 5) + reach + crowd
          if (cost < least) [best, least] = [{ at, spot: spots[s] }, cost]
        }
      }
    }
    if (best === null) continue
    const { at, spot } = best
    placed.push(at)
    pointed.push(spot)
    numbers.add(number)
    const away = Math.hypot(at[0] - spot[0], at[1] - spot[1])
    leaders.segment(spot[0], spot[1], at[0] + ((spot[0] - at[0]) * balloonRadius) / away, at[1] + ((spot[1] - at[1]) * balloonRadius) / away)
    centres.push(...at)
    words.push(label(at[0], at[1] + 4, String(number), { size: 11, bold: true, anchor: 'middle', tone: 'fault' }))
  }
  if (marks.length === 0) return { items: [], numbers }
  return { numbers, items: [
    dots(marks.flatMap(([x, y]) => [x, y]), 2.4, null, 'fault', 0.9),
    ...(leaders.empty ? [] : [leaders.strokes('water', 0.9), dots(centres, balloonRadius, 'paper', 'fault', 1.2)]),
    ...words,
  ] }
}
