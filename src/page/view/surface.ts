/**
 * A roof as typed arrays for the screen: panels as whole polygons for the painter and as triangles for WebGL, each with
 * its tone and light baked into one colour. World axes: x east, y north, z up, about the plan's middle and the lowest node.
 */
import earcut from 'earcut'
import type { Tone } from '../../paper/drawing/display-list.ts'
import type { Reading } from '../../paper/drawing/reading.ts'
import { panelShades } from '../../paper/drawing/roof-drawing.ts'
import type { Theme } from '../../paper/drawing/theme.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Roof } from '../../roof/answer/answer.ts'

export interface Surface {
  readonly plan: Plan
  /** Node positions x y z .., heights times the exaggeration (length 3 nodeCount). */
  readonly nodes: Float32Array
  /** Triangles as nodes, three each, and the panel of each triangle. */
  readonly triangles: Int32Array
  readonly panelOfTriangle: Int32Array
  /** Colour of each panel, r g b 0 to 255 in sRGB (length 3 panelCount). */
  readonly colours: Uint8Array
  readonly top: number
}

/** Share of the light that goes to ink (day) or chalk (night) on the darkest panel. */
const strongest = 0.42

export function surface(plan: Plan, roof: Roof, reading: Reading, theme: Theme, exaggeration: number): Surface {
  let datum = Infinity
  for (const z of roof.heights) if (z < datum) datum = z
  const nodes = new Float32Array(3 * plan.nodeCount)
  let top = 0
  for (let i = 0; i < plan.nodeCount; i += 1) {
    nodes[3 * i] = plan.x[i] - plan.frame.centreX
    nodes[3 * i + 1] = plan.y[i] - plan.frame.centreY
    nodes[3 * i + 2] = (roof.heights[i] - datum) * exaggeration
    top = Math.max(top, nodes[3 * i + 2])
  }
  return { plan, nodes, ...triangles(plan), colours: panelColours(plan, roof, reading, theme, exaggeration), top }
}

const kept = new WeakMap<Plan, { triangles: Int32Array; panelOfTriangle: Int32Array }>()

/** Whole polygons cut by ears in plan; the same for every roof on a plan, so cut once. */
function triangles(plan: Plan): { triangles: Int32Array; panelOfTriangle: Int32Array } {
  const known = kept.get(plan)
  if (known !== undefined) return known
  const corners: number[] = []
  const owners: number[] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    const start = plan.panelStart[p]
    const count = plan.panelStart[p + 1] - start
    const flat: number[] = []
    for (let k = 0; k < count; k += 1) flat.push(plan.work[2 * plan.corner[start + k]], plan.work[2 * plan.corner[start + k] + 1])
    const cut = earcut(flat)
    for (const k of cut) corners.push(plan.corner[start + k])
    for (let t = 0; t < cut.length; t += 3) owners.push(p)
  }
  const made = { triangles: Int32Array.from(corners), panelOfTriangle: Int32Array.from(owners) }
  kept.set(plan, made)
  return made
}

function panelColours(plan: Plan, roof: Roof, reading: Reading, theme: Theme, exaggeration: number): Uint8Array {
  const shade = panelShades(plan, roof.gradient, exaggeration)
  const over = rgb(theme.shade)
  const tones = new Map<Tone, readonly [number, number, number]>()
  const out = new Uint8Array(3 * plan.panelCount)
  for (let p = 0; p < plan.panelCount; p += 1) {
    const k = reading.panelClass === null ? -1 : reading.panelClass[p]
    const tone: Tone = k < 0 ? 'paper' : reading.panelClasses[k].tone
    const colour = tones.get(tone) ?? rgb(theme[tone])
    tones.set(tone, colour)
    const dark = strongest * shade[p]
    for (let c = 0; c < 3; c += 1) out[3 * p + c] = Math.round(colour[c] + dark * (over[c] - colour[c]))
  }
  return out
}

export function rgb(hex: string): readonly [number, number, number] {
  const value = Number.parseInt(hex.slice(1), 16)
  return [value >> 16, (value >> 8) & 255, value & 255]
}
