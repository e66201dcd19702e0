/**
 * Conditions and heights kept symmetric about a mirror line of the plan. A condition comes with its image; one that is its own
 * image is made symmetric. Roofs that meet symmetric conditions are mirrored into one another, so the one nearest to a
 * symmetric wish is symmetric: there is only one.
 */
import { fail, ok, type Result } from '../../base/result.ts'
import { indexOfName, jointName, nodeName, panelName } from '../names.ts'
import type { Plan } from '../plan.ts'
import type { MirrorLine } from '../symmetry.ts'
import type { At, Condition, Point, Spot } from './condition.ts'

type Line = Pick<MirrorLine, 'x' | 'y' | 'angle' | 'node' | 'edge' | 'panel'>

/**
 * The condition and what must be asked beside it for symmetry: nothing where it is its own image. Lengths and points are in
 * the plan's unit. Fails with "not-symmetric" where a run that is its own image is asked to fall.
 */
export function symmetricConditions(plan: Plan, line: Line, condition: Condition): Result<readonly Condition[]> {
  const at = imagePlace(plan, line, condition.at)
  if (!sameSpots(plan, condition.at, at)) return ok([condition, { ...imageOf(line, condition), at, name: imageName(plan, line, condition.name) } as Condition])
  const alongLine = 'run' in condition.at && sameOrder(condition.at.run, (at as typeof condition.at).run)
  if (condition.kind === 'plane') return ok([{ ...condition, ...alongPlane(line, condition) }])
  if (alongLine) return ok([condition])
  if (condition.kind === 'fall' && condition.per_mille !== 0) {
    return fail('not-symmetric', `"${condition.name}" falls from one half of the roof to the other`, null, 'let go of the symmetry, or hold a run of one half')
  }
  if (condition.kind === 'profile' && 'points' in condition.section) return ok([{ ...condition, section: { points: evenLevels(condition.section.points) } }])
  return ok([condition])
}

/** Name of the condition that goes with one of this name: its names replaced by their images. */
export function imageName(plan: Plan, line: Line, name: string): string {
  const image = name.replace(/\b([NPJ])[1-9]\d*\b/g, (word) => imageSpot(plan, line, word) as string)
  if (image !== name) return image
  return name.endsWith(mirroredEnd) ? name.slice(0, -mirroredEnd.length) : name + mirroredEnd
}

const mirroredEnd = ', mirrored'

/** Heights (length nodeCount, NaN: none) and their image, half and half. */
export function symmetricHeights(line: Line, heights: Float64Array): Float64Array {
  return heights.map((height, node) => (height + heights[line.node[node]]) / 2)
}

/** Largest difference of a height from its image's. */
export function asymmetry(line: Line, heights: Float64Array): number {
  let most = 0
  for (let node = 0; node < heights.length; node += 1) most = Math.max(most, Math.abs(heights[node] - heights[line.node[node]]))
  return most
}

function imagePoint({ x, y, angle }: Line, [px, py]: Point): Point {
  const [c, s] = [Math.cos(2 * angle), Math.sin(2 * angle)]
  return [x + c * (px - x) + s * (py - y), y + s * (px - x) - c * (py - y)]
}

/** A name of nothing stays one, to be refused where it is used. */
function imageSpot(plan: Plan, line: Line, spot: Spot): Spot {
  if (typeof spot !== 'string') return imagePoint(line, spot)
  for (const [letter, images, name, count] of [
    ['N', line.node, nodeName, plan.nodeCount], ['P', line.panel, panelName, plan.panelCount], ['J', line.edge, jointName, plan.jointCount],
  ] as const) {
    const index = indexOfName(spot, letter)
    if (index >= 0 && index < count) return name(images[index])
  }
  return spot
}

function imagePlace(plan: Plan, line: Line, at: At): At {
  const image = (spots: readonly Spot[]): Spot[] => spots.map((spot) => imageSpot(plan, line, spot))
  if ('nodes' in at) return { ...at, nodes: image(at.nodes) }
  if ('run' in at) return { run: image(at.run) }
  if ('rim' in at) return { rim: at.rim === 'outer' ? 'outer' : imagePoint(line, at.rim) }
  if ('panels' in at) return { panels: at.panels === 'all' ? 'all' : image(at.panels) }
  return { joints: image(at.joints) }
}

const spotsOf = (at: At): readonly Spot[] => ('nodes' in at ? at.nodes : 'run' in at ? at.run : 'joints' in at ? at.joints : 'rim' in at ? (at.rim === 'outer' ? [] : [at.rim]) : at.panels === 'all' ? [] : at.panels)

/** Points are one where they are nearer than this share of the span: they are nearer than nodes are. */
const pointShare = 1e-4

function sameSpots(plan: Plan, a: At, b: At): boolean {
  const near = (p: Spot, q: Spot): boolean =>
    typeof p === 'string' || typeof q === 'string' ? p === q : Math.hypot(p[0] - q[0], p[1] - q[1]) < pointShare * plan.frame.span
  const others = spotsOf(b)
  return spotsOf(a).every((spot) => others.some((other) => near(spot, other)))
}

const sameOrder = (a: readonly Spot[], b: readonly Spot[]): boolean => a.every((spot, k) => typeof spot === 'string' && spot === b[k])

/** What changes besides the place and the name: bearings turn about the line, whose own bearing is 90 degrees less its angle. */
function imageOf(line: Line, condition: Condition): Condition {
  if (condition.kind !== 'plane') return condition
  const bearing = 2 * lineBearing(line) - condition.bearing_deg
  return { ...condition, bearing_deg: ((bearing % 360) + 360) % 360 }
}

const lineBearing = ({ angle }: Line): number => 90 - (angle * 180) / Math.PI

/** The share of a slope that falls along the line: a panel across it can fall no other way. */
function alongPlane(line: Line, { pitch_deg, bearing_deg }: { pitch_deg: number; bearing_deg: number }): { pitch_deg: number; bearing_deg: number } {
  const off = ((bearing_deg - lineBearing(line)) * Math.PI) / 180
  const along = Math.tan((pitch_deg * Math.PI) / 180) * Math.cos(off)
  const bearing = lineBearing(line) + (along < 0 ? 180 : 0)
  return { pitch_deg: (Math.atan(Math.abs(along)) * 180) / Math.PI, bearing_deg: ((bearing % 360) + 360) % 360 }
}

/** Levels along a run that is its own image, the same from both ends. */
function evenLevels(points: readonly (readonly [number, number])[]): [number, number][] {
  const [from, to] = [points[0][0], points[points.length - 1][0]]
  const levelAt = (along: number): number => {
    let k = 1
    while (k < points.length - 1 && along > points[k][0]) k += 1
    const [[a, low], [b, high]] = [points[k - 1], points[k]]
    return low + ((along - a) / (b - a)) * (high - low)
  }
  return points.map(([along, level]) => [along, (level + levelAt(from + to - along)) / 2])
}
