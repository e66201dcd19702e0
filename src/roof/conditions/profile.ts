/** Profile: the nodes of a run held to a section: an arc, two equal slopes, or a polyline. */
import { clashHeight } from '../../base/geometry/tolerance.ts'
import { fail, ok, type Result } from '../../base/result.ts'
import { nodeName } from '../../plan/names.ts'
import type { ProfileCondition } from '../../plan/project/condition.ts'
import { runAt } from './places.ts'
import type { Run } from './run.ts'
import { tooFew } from './too-few.ts'
import type { Emit } from './rows.ts'
import { heightOf, type Site } from './site.ts'

/** A row h_n = section(s_n) per node, s_n the distance from the run's first point. */
export function profileRows(site: Site, condition: ProfileCondition, emit: Emit): Result<Int32Array> {
  const run = runAt(site, condition.at)
  if (!run.ok) return run
  const { nodes } = run.value
  if (nodes.length < 2) return tooFew(site.plan, nodes, 2)
  const heights = sectionHeights(site, condition, run.value)
  if (!heights.ok) return heights
  for (let i = 0; i < nodes.length; i += 1) emit([nodes[i]], [1], heights.value[i])
  return ok(nodes)
}

/** Heights in spans above the datum, one per node of the run. */
function sectionHeights(site: Site, { section, level }: ProfileCondition, run: Run): Result<Float64Array> {
  const { along, length } = run
  const base = heightOf(site, level)
  if ('arc' in section) {
    const rise = section.arc.rise / site.plan.frame.span
    if (Math.abs(rise) > length / 2) {
      return fail('steep-arc', `an arc that rises ${section.arc.rise} over a chord of ${plain(length * site.plan.frame.span)} is more than half a circle`,
        null, 'give a rise of at most half the chord')
    }
    return ok(along.map((s) => base + arc(s - length / 2, length, rise)))
  }
  if ('pitch_deg' in section) {
    const slope = Math.tan(section.pitch_deg * Math.PI / 180)
    return ok(along.map((s) => base + slope * Math.min(s, length - s)))
  }
  return polyline(site, section.points, run)
}

/**
 * Height over its chord c of a circular arc of rise r, at distance u from the middle: with the curvature
 * k = 2 r / (c^2 / 4 + r^2) it is r - k u^2 / (1 + sqrt(1 - k^2 u^2)), which holds for flat and sagging arcs too.
 */
function arc(u: number, chord: number, rise: number): number {
  const k = 2 * rise / (chord * chord / 4 + rise * rise)
  return rise - k * u * u / (1 + Math.sqrt(Math.max(0, 1 - k * k * u * u)))
}

function polyline(site: Site, points: readonly (readonly [number, number])[], run: Run): Result<Float64Array> {
  const { span } = site.plan.frame
  const heights = new Float64Array(run.nodes.length)
  const last = points.length - 1
  for (let i = 0; i < heights.length; i += 1) {
    const s = run.along[i] * span
    let k = 1
    while (k < last && points[k][0] < s) k += 1
    const [s0, z0] = points[k - 1]
    const [s1, z1] = points[k]
    if (s < s0 - clashHeight * span || s > s1 + clashHeight * span) {
      const node = run.nodes[i]
      return fail('short-section', `the section goes from ${plain(points[0][0])} to ${plain(points[last][0])}, and ${nodeName(node)} lies ${plain(s)} along`,
        { names: [nodeName(node)], at: [site.plan.x[node], site.plan.y[node]] }, 'give points over the whole run, or a shorter run')
    }
    heights[i] = heightOf(site, z0 + (z1 - z0) * (s - s0) / (s1 - s0))
  }
  return ok(heights)
}

const plain = (length: number): string => String(Number(length.toFixed(4)))
