/**
 * The raised roof as a drawing: the same readings and hatches as on the plan, lifted, with light laid over the tones so
 * that folds read. Where every panel faces the viewer nothing can hide anything but the curtain under the rim, and panels
 * of one tone go into one batch; otherwise panels are laid one by one from far to near.
 */
import { panelName } from '../../plan/names.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { Batch, label, type DisplayList, type Item, type LineName, type Tone } from './display-list.ts'
import { jointKinds, weight, type Joints } from './joint-kinds.ts'
import { medianPanelWidth, roofDetail } from './level-of-detail.ts'
import { centres, doubled, jointLines, panelHatch, rims, type Selection } from './plan-drawing.ts'
import { projector, type RoofView } from './projection.ts'
import type { Reading } from './reading.ts'

export interface RoofDrawingOptions {
  readonly width: number
  readonly height: number
  readonly reading: Reading
  readonly joints: Joints
  readonly view: RoofView
  /** Factor on heights; said in words wherever it is not 1. */
  readonly exaggeration: number
  /** px to the plan unit; null: the whole roof fits. */
  readonly scale: number | null
  readonly selection: Selection | null
}

/** Direction to the light (east, north, up): from the north-west and above, as drawings are lit. */
const light = unit([-0.45, 0.5, 0.74])
/** Steps of light, and the strongest shade. */
const shades = 12
const strongest = 0.42

export function roofDrawing(answer: Answer, options: RoofDrawingOptions): DisplayList {
  const { plan, roof } = answer
  const { width, height, reading, joints, view, exaggeration } = options
  if (roof === null) return { width, height, title: 'Roof', description: 'Not raised.', items: [] }
  const datum = lowest(roof.heights)
  const project = projector(view, plan.frame.span)
  const flat = new Float64Array(2 * plan.nodeCount)
  const foot = new Float64Array(2 * plan.nodeCount)
  const depth = new Float64Array(plan.nodeCount)
  for (let i = 0; i < plan.nodeCount; i += 1) {
    const x = plan.x[i] - plan.frame.centreX
    const y = plan.y[i] - plan.frame.centreY
    const top = project(x, y, (roof.heights[i] - datum) * exaggeration)
    const bottom = project(x, y, 0)
    flat.set([top[0], -top[1]], 2 * i)
    foot.set([bottom[0], -bottom[1]], 2 * i)
    depth[i] = top[2]
  }
  const { scale, dx, dy } = fit([flat, foot], options)
  const place = (points: Float64Array): Float64Array => points.map((value, i) => value * scale + (i % 2 === 0 ? dx : dy))
  const px = place(flat)
  const feet = place(foot)
  const detail = roofDetail(medianPanelWidth(plan) * scale * 0.8)
  const shade = panelShades(plan, roof.gradient, exaggeration)

  const items: Item[] = [...curtain(plan, px, feet)]
  const lifted = (p: number): Item[] => {
    if (!detail.hatch) return []
    const strokes: number[] = []
    const line = panelHatch(answer, reading, p, 1 / scale, strokes)
    if (line === null) return []
    const batch = new Batch()
    const centre = plan.corner[plan.panelStart[p]]
    const gx = roof.gradient[2 * p]
    const gy = roof.gradient[2 * p + 1]
    const x0 = plan.x[centre] - plan.frame.centreX
    const y0 = plan.y[centre] - plan.frame.centreY
    const z0 = roof.heights[centre] - datum
    for (let i = 0; i < strokes.length; i += 4) {
      const ends = [0, 2].map((k) => {
        const x = strokes[i + k]
        const y = strokes[i + k + 1]
        const [right, up] = project(x, y, (z0 + gx * (x - x0) + gy * (y - y0)) * exaggeration)
        return [right * scale + dx, -up * scale + dy] as const
      })
      batch.segment(ends[0][0], ends[0][1], ends[1][0], ends[1][1])
    }
    return batch.empty ? [] : [batch.strokes(line, line === 'flush' ? 1.4 : null)]
  }
  const toneOf = (p: number): Tone => (reading.panelClass === null || reading.panelClass[p] < 0 ? 'paper' : reading.panelClasses[reading.panelClass[p]].tone)

  if (everyPanelFaces(plan, px)) {
    items.push(...batchedFills(plan, px, toneOf, shade))
    for (let p = 0; p < plan.panelCount; p += 1) items.push(...lifted(p))
    items.push(...jointLines(plan, px, reading, joints, detail), ...rims(plan, px))
  } else {
    items.push(...layered(plan, px, depth, toneOf, shade, joints, lifted, detail.joints !== 'none'))
  }
  items.push(...chosen(plan, px, options.selection))
  if (exaggeration !== 1) items.push(label(14, height - 10, `Heights drawn \u00d7${exaggeration}.`, { tone: 'fault', bold: true }))
  return {
    width, height, items, title: answer.summary.near === true ? 'Nearest roof' : 'Roof',
    description: `The raised roof${exaggeration === 1 ? '' : `, heights drawn \u00d7${exaggeration}`}. ${reading.note}`,
  }
}

function unit([x, y, z]: readonly [number, number, number]): readonly [number, number, number] {
  const length = Math.hypot(x, y, z)
  return [x / length, y / length, z / length]
}

function lowest(heights: Float64Array): number {
  let least = Infinity
  for (const z of heights) if (z < least) least = z
  return Number.isFinite(least) ? least : 0
}

function fit(sets: readonly Float64Array[], options: RoofDrawingOptions): { scale: number; dx: number; dy: number } {
  let x0 = Infinity
  let x1 = -Infinity
  let y0 = Infinity
  let y1 = -Infinity
  for (const points of sets) {
    for (let i = 0; i < points.length; i += 2) {
      x0 = Math.min(x0, points[i])
      x1 = Math.max(x1, points[i])
      y0 = Math.min(y0, points[i + 1])
      y1 = Math.max(y1, points[i + 1])
    }
  }
  const scale = options.scale ?? Math.min((options.width - 28) / Math.max(x1 - x0, 1e-12), (options.height - 44) / Math.max(y1 - y0, 1e-12))
  return { scale, dx: options.width / 2 - (scale * (x0 + x1)) / 2, dy: (options.height - 14) / 2 - (scale * (y0 + y1)) / 2 }
}

/** How dark each panel is, 0 to 1: 1 - n . l, spread over the roof's own range so that low roofs read as well as steep ones. */
export function panelShades(plan: Plan, gradient: Float64Array, exaggeration: number): Float64Array {
  const dark = new Float64Array(plan.panelCount)
  let least = Infinity
  let most = -Infinity
  for (let p = 0; p < plan.panelCount; p += 1) {
    const gx = gradient[2 * p] * exaggeration
    const gy = gradient[2 * p + 1] * exaggeration
    dark[p] = 1 - (light[2] - gx * light[0] - gy * light[1]) / Math.sqrt(1 + gx * gx + gy * gy)
    if (dark[p] < least) least = dark[p]
    if (dark[p] > most) most = dark[p]
  }
  const spread = Math.max(most - least, 0.02)
  return dark.map((value) => (value - least) / spread)
}

function everyPanelFaces(plan: Plan, px: Float64Array): boolean {
  for (let p = 0; p < plan.panelCount; p += 1) {
    let twice = 0
    for (let c = plan.panelStart[p], last = plan.panelStart[p + 1] - 1, before = last; c <= last; before = c, c += 1) {
      const a = 2 * plan.corner[before]
      const b = 2 * plan.corner[c]
      twice += px[a] * px[b + 1] - px[a + 1] * px[b]
    }
    // y runs down on the sheet: counter-clockwise panels that face the viewer have a negative area here.
    if (twice >= 0) return false
  }
  return true
}

function outline(batch: Batch, plan: Plan, px: Float64Array, p: number): void {
  for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) batch.point(px[2 * plan.corner[c]], px[2 * plan.corner[c] + 1])
  batch.end(p)
}

function batchedFills(plan: Plan, px: Float64Array, toneOf: (p: number) => Tone, shade: Float64Array): Item[] {
  const tones = new Map<Tone, Batch>()
  const overlays = Array.from({ length: shades + 1 }, () => new Batch())
  for (let p = 0; p < plan.panelCount; p += 1) {
    const tone = toneOf(p)
    const batch = tones.get(tone) ?? new Batch()
    tones.set(tone, batch)
    outline(batch, plan, px, p)
    outline(overlays[Math.round(shade[p] * shades)], plan, px, p)
  }
  const items: Item[] = [...tones].map(([tone, batch]) => batch.fills(tone))
  for (const [k, batch] of overlays.entries()) if (k > 0 && !batch.empty) items.push(batch.fills('shade', (strongest * k) / shades))
  return items
}

/** Panels from far to near, each with its light, hatch and edges: the nearer covers the farther. */
function layered(
  plan: Plan, px: Float64Array, depth: Float64Array, toneOf: (p: number) => Tone, shade: Float64Array, joints: Joints,
  lifted: (p: number) => Item[], edges: boolean,
): Item[] {
  const far = Float64Array.from({ length: plan.panelCount }, (_, p) => {
    let sum = 0
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) sum += depth[plan.corner[c]]
    return sum / (plan.panelStart[p + 1] - plan.panelStart[p])
  })
  const order = Array.from(far.keys()).sort((a, b) => far[b] - far[a] || a - b)
  const items: Item[] = []
  for (const p of order) {
    const face = new Batch()
    outline(face, plan, px, p)
    items.push(face.fills(toneOf(p)), face.fills('shade', (strongest * Math.round(shade[p] * shades)) / shades), ...lifted(p))
    if (!edges) continue
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const e = plan.cornerHalf[c] >> 1
      const a = 2 * plan.origin[2 * e]
      const b = 2 * plan.origin[2 * e + 1]
      const line = new Batch()
      if (e < plan.jointCount && jointKinds[joints.kind[e]] === 'frozen') doubled(line, px[a], px[a + 1], px[b], px[b + 1], 1.7)
      else line.segment(px[a], px[a + 1], px[b], px[b + 1])
      if (line.empty) continue
      const name: LineName = e >= plan.jointCount ? 'rim' : jointKinds[joints.kind[e]]
      items.push(line.strokes(name, name === 'ridge' || name === 'valley' ? weight(joints.force[e], joints.force95) : null))
    }
  }
  return items
}

/** What hangs from the outer rims down to the lowest node: shows how the rim runs. */
function curtain(plan: Plan, px: Float64Array, feet: Float64Array): Item[] {
  const sheets = new Batch()
  const drops = new Batch()
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 1) continue
    let before = -1
    for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) {
      const a = 2 * plan.origin[plan.rimHalf[k]]
      const b = 2 * plan.origin[plan.rimHalf[k] ^ 1]
      for (const [set, i] of [[px, a], [px, b], [feet, b], [feet, a]] as const) sheets.point(set[i], set[i + 1])
      sheets.end()
      drops.segment(feet[a], feet[a + 1], feet[b], feet[b + 1])
      const direction = Math.atan2(plan.y[b / 2] - plan.y[a / 2], plan.x[b / 2] - plan.x[a / 2])
      // Only corners drop a line; along a straight or gently bent rim they would read as posts.
      if (before !== -1 && Math.abs(Math.sin(direction - before)) > 0.5) drops.segment(px[a], px[a + 1], feet[a], feet[a + 1])
      before = direction
    }
  }
  return sheets.empty ? [] : [sheets.fills('light'), drops.strokes('drop')]
}

function chosen(plan: Plan, px: Float64Array, selection: Selection | null): Item[] {
  if (selection === null || selection.kind !== 'panel' || selection.index >= plan.panelCount) return []
  const batch = new Batch()
  outline(batch, plan, px, selection.index)
  const [x, y] = centres(plan, px, selection.index)
  return [batch.strokes('selected', null, true), label(x, y + 4, panelName(selection.index), { tone: 'hand', bold: true, plate: true, anchor: 'middle', size: 11 })]
}
