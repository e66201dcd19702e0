/**
 * Slope: no panel flatter than `least_deg`, none steeper than `most_deg`. With the gradient a of a panel,
 *
 *   most    |a| <= tan(most)     a convex cone: the roofs that keep it keep u . a <= tan(most) for every direction u;
 *   least   |a| >= tan(least)    not convex: kept on the side to which the panel falls now, u . a >= tan(least) with u = a / |a|.
 *
 * So the rows depend on the roof at hand, and whoever raises asks again at each roof until nothing changes. A panel that is
 * level has no fall line; it then takes that of the hint, a roof that the panel is meant to resemble, and failing that
 * outwards from the middle of the plan.
 */
import { levelSlope } from '../../base/geometry/tolerance.ts'
import { fail, ok, type Result } from '../../base/result.ts'
import type { Plan } from '../../plan/plan.ts'
import type { SlopeCondition } from '../../plan/project/condition.ts'
import { anchors, doubleArea } from './anchors.ts'
import { nodesOfPanels, panelsAt } from './places.ts'
import type { BentRows } from './bent.ts'
import type { Site } from './site.ts'

const tangent = (degrees: number): number => Math.tan((degrees * Math.PI) / 180)

/** Slopes within this of their limit keep it: 1e-7 is a tenth of a micrometre on a metre. */
export const slopeMiss = 1e-7

/** The nodes of the panels, and the rows at a roof. */
export function slopeRows(site: Site, condition: SlopeCondition): Result<{ nodes: Int32Array; bent: BentRows }> {
  const panels = panelsAt(site.plan, condition.at)
  if (!panels.ok) return panels
  const { least_deg = null, most_deg = null } = condition
  if (least_deg === null && most_deg === null) return fail('no-bound', 'a slope condition needs a least or a largest slope', null, 'give "least_deg", "most_deg" or both')
  if (least_deg !== null && most_deg !== null && least_deg > most_deg) return fail('bounds-crossed', `the least slope ${least_deg} is above the largest ${most_deg}`)
  const planes = Array.from(panels.value, (panel) => planeOf(site.plan, panel))
  const least = least_deg === null ? null : tangent(least_deg)
  const most = most_deg === null ? null : tangent(most_deg)
  const bent: BentRows = {
    at(heights, hint, keep, gather) {
      for (const plane of planes) {
        const { x, y } = gradientOf(plane, heights)
        const slope = Math.hypot(x, y)
        if (least !== null) {
          const u = slope > levelSlope ? { x: x / slope, y: y / slope } : downhill(site.plan, plane, hint)
          row(plane, u, -1, -least, keep)
        }
        if (most !== null && slope > most) row(plane, { x: x / slope, y: y / slope }, 1, most, gather)
      }
    },
    misses(heights) {
      let worst = 0
      let panel = -1
      for (const plane of planes) {
        const { x, y } = gradientOf(plane, heights)
        const slope = Math.hypot(x, y)
        const miss = Math.max(least === null ? 0 : least - slope, most === null ? 0 : slope - most)
        if (miss > Math.max(worst, slopeMiss)) {
          worst = miss
          panel = plane.panel
        }
      }
      return panel < 0 ? null : { panel, node: -1, by: worst }
    },
  }
  return ok({ nodes: nodesOfPanels(site.plan, panels.value), bent })
}

/** The gradient of a panel in the heights of three of its corners: a = sum h_k (x_k, y_k). */
interface Plane {
  readonly panel: number
  readonly nodes: readonly [number, number, number]
  readonly x: readonly number[]
  readonly y: readonly number[]
}

function planeOf(plan: Plan, panel: number): Plane {
  const nodes = anchors(plan, plan.corner.subarray(plan.panelStart[panel], plan.panelStart[panel + 1]))
  const [a, b, c] = nodes
  const whole = doubleArea(plan, a, b, c)
  const { work } = plan
  const across = (p: number, q: number, axis: 0 | 1): number => (work[2 * q + axis] - work[2 * p + axis]) / whole
  return { panel, nodes, x: [-across(b, c, 1), -across(c, a, 1), -across(a, b, 1)], y: [across(b, c, 0), across(c, a, 0), across(a, b, 0)] }
}

function gradientOf({ nodes, x, y }: Plane, heights: Float64Array): { x: number; y: number } {
  const along = (weights: readonly number[]): number => nodes.reduce<number>((sum, node, k) => sum + weights[k] * heights[node], 0)
  return { x: along(x), y: along(y) }
}

/** The direction in which the panel is to climb, where it is level now. */
function downhill(plan: Plan, plane: Plane, hint: Float64Array): { x: number; y: number } {
  const meant = gradientOf(plane, hint)
  const size = Math.hypot(meant.x, meant.y)
  if (size > levelSlope) return { x: meant.x / size, y: meant.y / size }
  const [x, y] = [0, 1].map((axis) => -plane.nodes.reduce((sum, node) => sum + plan.work[2 * node + axis] / 3, 0))
  const out = Math.hypot(x, y)
  return out > levelSlope ? { x: x / out, y: y / out } : { x: 0, y: 1 }
}

/** sign * u . a <= value, scaled so that the largest weight is 1. */
function row({ nodes, x, y }: Plane, u: { x: number; y: number }, sign: number, value: number, emit: (nodes: readonly number[], weights: readonly number[], value: number) => void): void {
  const weights = nodes.map((_, k) => sign * (u.x * x[k] + u.y * y[k]))
  const largest = Math.max(...weights.map(Math.abs))
  emit(nodes, weights.map((weight) => weight / largest), value / largest)
}
