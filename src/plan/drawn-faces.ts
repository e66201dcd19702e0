/**
 * The bounded faces of a plan, panels and voids alike: what a plan is made of when its drawing is no longer at hand, and
 * what turns a panel into a void and back.
 */
import { pointInPolygon } from '../base/geometry/point-in-polygon.ts'
import { signedArea } from '../base/geometry/polygon-area.ts'
import type { Unit } from '../base/length.ts'
import { fail, ok, type Result } from '../base/result.ts'
import type { Plan } from './plan.ts'
import { planFromFaces } from './subdivision.ts'

export interface DrawnFaces {
  readonly unit: Unit
  /** Points in the plan's unit and place; those that some panel uses are the nodes of the plan, in this order. */
  readonly x: Float64Array
  readonly y: Float64Array
  /** Heights that the drawing gave its points; NaN: none; null: none at all. */
  readonly heights: Float64Array | null
  /** Face f has the points corner[start[f] .. start[f + 1]). Those that are no voids are the panels, in this order. */
  readonly start: Int32Array
  readonly corner: Int32Array
  readonly isVoid: Uint8Array
  /** Width of the bar along each side, from corner k to the next of its face (as long as `corner`, NaN: none); absent: no bars. */
  readonly barWidth?: Float64Array
}

/** The panels of a plan as its first faces, then the regions that its void loops bound; `heights` as `ReadPlan` has them. */
export function drawnFaces(plan: Plan, heights: Float64Array | null, barWidth?: Float64Array): DrawnFaces {
  const loops = Array.from(plan.rimIsVoid.keys()).filter((loop) => plan.rimIsVoid[loop] === 1)
  const voids = loops.map((loop) => plan.rimHalf.subarray(plan.rimStart[loop], plan.rimStart[loop + 1]))
  const start = new Int32Array(plan.panelCount + voids.length + 1)
  start.set(plan.panelStart)
  voids.forEach((halves, k) => (start[plan.panelCount + k + 1] = start[plan.panelCount + k] + halves.length))
  const corner = new Int32Array(start[start.length - 1])
  corner.set(plan.corner)
  // A void lies on the left of its loop, so the loop's own order is counter-clockwise round it.
  voids.forEach((halves, k) => corner.set(halves.map((half) => plan.origin[half]), start[plan.panelCount + k]))
  const isVoid = new Uint8Array(start.length - 1).fill(1, plan.panelCount)
  const widths = barWidth === undefined ? {} : { barWidth: Float64Array.from([...plan.cornerHalf, ...voids.flatMap((halves) => [...halves])], (half) => barWidth[half >> 1]) }
  return { unit: plan.unit, x: plan.x, y: plan.y, heights, start, corner, isVoid, ...widths }
}

/** The plan of the faces that are no voids. Fails as `planFromFaces` does. */
export function planOfFaces({ unit, x, y, start, corner, isVoid }: DrawnFaces): Result<Plan> {
  const panelStart = [0]
  const panelCorner: number[] = []
  for (let f = 0; f < isVoid.length; f += 1) {
    if (isVoid[f] === 1) continue
    for (let k = start[f]; k < start[f + 1]; k += 1) panelCorner.push(corner[k])
    panelStart.push(panelCorner.length)
  }
  const made = planFromFaces({ unit, x, y, start: Int32Array.from(panelStart), corner: Int32Array.from(panelCorner), ordered: true })
  return made.ok ? ok(made.value.plan) : made
}

/** Widths of bars by edge of that plan, NaN: none; undefined where the faces have none. */
export function barWidthsOf({ start, corner, isVoid, barWidth }: DrawnFaces, plan: Plan, pointOfNode: Int32Array): Float64Array | undefined {
  if (barWidth === undefined) return undefined
  const bySide = new Map<string, number>()
  const key = (p: number, q: number): string => (p < q ? `${p} ${q}` : `${q} ${p}`)
  for (let f = 0; f < isVoid.length; f += 1) {
    for (let k = start[f]; k < start[f + 1]; k += 1) if (!Number.isNaN(barWidth[k])) bySide.set(key(corner[k], corner[k + 1 < start[f + 1] ? k + 1 : start[f]]), barWidth[k])
  }
  return Float64Array.from({ length: plan.edgeCount }, (_, e) => bySide.get(key(pointOfNode[plan.origin[2 * e]], pointOfNode[plan.origin[2 * e + 1]])) ?? NaN)
}

/** The point behind each node of that plan. */
export function nodePoints({ x, start, corner, isVoid }: DrawnFaces): Int32Array {
  const used = new Uint8Array(x.length)
  for (let f = 0; f < isVoid.length; f += 1) if (isVoid[f] === 0) for (let k = start[f]; k < start[f + 1]; k += 1) used[corner[k]] = 1
  return Int32Array.from(used.keys()).filter((point) => used[point] === 1)
}

/** Whether a point lies in a face or on its border. */
export function isInFace({ x, y, start, corner }: DrawnFaces, face: number, px: number, py: number): boolean {
  return pointInPolygon(px, py, x, y, corner, start[face], start[face + 1]) >= 0
}

/** The face that a point lies in, a panel before a void and the smaller before the larger; -1: none. */
export function faceAt(faces: DrawnFaces, px: number, py: number): number {
  const { x, y, start, corner, isVoid } = faces
  let found = -1
  let least = Infinity
  for (let f = 0; f < isVoid.length; f += 1) {
    if (!isInFace(faces, f, px, py)) continue
    // Voids may hold parts of their own: whatever lies deeper is smaller.
    const area = Math.abs(signedArea(x, y, corner, start[f], start[f + 1]))
    const isFirst = found < 0 || isVoid[f] < isVoid[found] || (isVoid[f] === isVoid[found] && area < least)
    if (!isFirst) continue
    found = f
    least = area
  }
  return found
}

/**
 * The faces with one of them turned from panel to void or back. Fails with "panels-inside" for a void round other panels,
 * and with "no-panels" for the last panel.
 */
export function turned(faces: DrawnFaces, face: number): Result<DrawnFaces> {
  const { x, y, start, corner, isVoid } = faces
  const next = isVoid.slice()
  next[face] = isVoid[face] === 1 ? 0 : 1
  if (!next.includes(0)) return fail('no-panels', 'this is the only panel', placeOf(faces, face), 'a roof needs one')
  if (isVoid[face] === 1) {
    const own = new Set(corner.subarray(start[face], start[face + 1]))
    for (let f = 0; f < isVoid.length; f += 1) {
      if (isVoid[f] === 1) continue
      for (let k = start[f]; k < start[f + 1]; k += 1) {
        const point = corner[k]
        if (own.has(point) || !isInFace(faces, face, x[point], y[point])) continue
        return fail('panels-inside', 'other panels lie in this void, so it cannot be one panel', { at: [x[point], y[point]] }, 'draw joints from them to its rim')
      }
    }
  }
  return ok({ ...faces, isVoid: next })
}

function placeOf({ x, y, start, corner }: DrawnFaces, face: number): { at: readonly [number, number] } {
  const point = corner[start[face]]
  return { at: [x[point], y[point]] }
}
