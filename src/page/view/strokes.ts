/**
 * Lines of the roof as ribbons: WebGL draws lines one pixel wide, and the widths here mean something. Each segment is a
 * quad turned towards the viewer, written anew when the camera moves (stock material, no shader of our own); the painter
 * without WebGL draws the same segments as plain strokes.
 */
import type { LineName } from '../../paper/drawing/display-list.ts'
import { jointKinds, weight, type Joints } from '../../paper/drawing/joint-kinds.ts'
import type { Detail } from '../../paper/drawing/level-of-detail.ts'
import type { Reading } from '../../paper/drawing/reading.ts'
import type { Surface } from './surface.ts'

/** Segments in world coordinates, x y z x y z each, with a width and a sideways offset in px, a line style, and an edge. */
export interface Strokes {
  readonly count: number
  readonly ends: Float32Array
  readonly width: Float32Array
  readonly offset: Float32Array
  /** Index into `lines`. */
  readonly style: Uint8Array
  readonly lines: readonly LineName[]
  /** Edge of the plan that the segment lies on. */
  readonly edge: Int32Array
}

const lines: readonly LineName[] = ['ridge', 'valley', 'flush', 'frozen', 'rim', 'casing', 'weak1', 'weak2', 'weakValley']

/** `px`: length of a screen pixel in world units at the fitted scale, for dashes. */
export function roofStrokes(surface: Surface, reading: Reading, joints: Joints, detail: Detail, px: number): Strokes {
  const { plan, nodes } = surface
  const ends: number[] = []
  const width: number[] = []
  const offset: number[] = []
  const style: number[] = []
  const edge: number[] = []
  const add = (e: number, from: number, to: number, line: LineName, w: number, o: number): void => {
    const a = 3 * plan.origin[2 * e]
    const b = 3 * plan.origin[2 * e + 1]
    for (const t of [from, to]) for (let c = 0; c < 3; c += 1) ends.push(nodes[a + c] + t * (nodes[b + c] - nodes[a + c]))
    width.push(w)
    offset.push(o)
    style.push(lines.indexOf(line))
    edge.push(e)
  }
  const dashed = (e: number, line: LineName, w: number, dash: number, gap: number): void => {
    const a = 3 * plan.origin[2 * e]
    const b = 3 * plan.origin[2 * e + 1]
    const length = Math.hypot(nodes[b] - nodes[a], nodes[b + 1] - nodes[a + 1], nodes[b + 2] - nodes[a + 2])
    const period = Math.max((dash + gap) * px, length / 40)
    for (let at = 0; at < length; at += period) add(e, at / length, Math.min(1, (at + (period * dash) / (dash + gap)) / length), line, w, 0)
  }
  const median = detail.joints === 'some' ? joints.force.slice().sort()[joints.force.length >> 1] : -1
  for (let j = 0; j < plan.jointCount && detail.joints !== 'none'; j += 1) {
    const kind = jointKinds[joints.kind[j]]
    if (kind === 'frozen') {
      add(j, 0, 1, 'frozen', 0.8, 1.7)
      add(j, 0, 1, 'frozen', 0.8, -1.7)
    } else if (kind === 'flush') {
      if (detail.joints === 'all') dashed(j, 'flush', 1.4, 1.4, 2.6)
    } else {
      const valley = kind === 'valley'
      if (detail.joints === 'some' && !valley && joints.force[j] < median) continue
      const entry = reading.jointClass === null ? undefined : reading.jointClasses[reading.jointClass[j]]
      const full = entry === undefined ? weight(joints.force[j], joints.force95) : entry.width
      const w = detail.joints === 'all' ? full : Math.min(1.25, full / 2)
      if (!valley) add(j, 0, 1, entry?.ridge ?? 'ridge', w, 0)
      else {
        add(j, 0, 1, 'casing', w + 1.8, 0)
        dashed(j, entry?.valley ?? 'valley', w, 8, 3.5)
      }
    }
  }
  for (let e = plan.jointCount; e < plan.edgeCount; e += 1) add(e, 0, 1, 'rim', detail.joints === 'none' ? 1.6 : 2.4, 0)
  return {
    count: width.length, ends: Float32Array.from(ends), width: Float32Array.from(width), offset: Float32Array.from(offset),
    style: Uint8Array.from(style), lines, edge: Int32Array.from(edge),
  }
}
