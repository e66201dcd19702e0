/**
 * The painter without WebGL: an object with `render(scene, camera)` that @react-three/fiber takes in the place of a
 * WebGLRenderer. It projects whole polygons, sorts them from far to near and fills them on a 2D canvas with the same baked
 * colours, each followed by its hatch and edges. Orbiting and picking are three's own and do not notice.
 *
 * Sorting is by the mean depth of a panel's corners; two very unequal panels that overlap on the screen may come in the
 * wrong order (a thin part of one may show through). The roof is a height field, so this needs a view from below or
 * almost level. Panels with a corner behind the eye are left out.
 */
import { Matrix4, Vector3, type Camera, type Scene } from 'three'
import { lineStyles } from '../../paper/drawing/theme.ts'
import type { PaintedRoof } from './roof-scene.ts'

export class PaperRenderer {
  readonly domElement: HTMLCanvasElement
  private readonly context: CanvasRenderingContext2D
  private width = 300
  private height = 150
  private ratio = 1
  /** Fields that callers of a WebGLRenderer set. */
  readonly xr = { enabled: false, isPresenting: false, addEventListener(): void {}, removeEventListener(): void {}, setAnimationLoop(): void {} }
  readonly shadowMap = { enabled: false, type: 0, needsUpdate: false }
  outputColorSpace = 'srgb'
  toneMapping = 0

  constructor(canvas: HTMLCanvasElement) {
    const context = canvas.getContext('2d')
    if (context === null) throw new Error('no canvas')
    this.domElement = canvas
    this.context = context
  }

  setSize(width: number, height: number): void {
    this.width = width
    this.height = height
    this.fit()
  }

  setPixelRatio(ratio: number): void {
    this.ratio = ratio
    this.fit()
  }

  getPixelRatio(): number {
    return this.ratio
  }

  dispose(): void {}
  forceContextLoss(): void {}

  private fit(): void {
    this.domElement.width = Math.round(this.width * this.ratio)
    this.domElement.height = Math.round(this.height * this.ratio)
  }

  render(scene: Scene, camera: Camera): void {
    scene.updateMatrixWorld()
    camera.updateMatrixWorld()
    const { context } = this
    context.setTransform(this.ratio, 0, 0, this.ratio, 0, 0)
    context.clearRect(0, 0, this.width, this.height)
    scene.traverse((object) => {
      const roof = object.userData.roof as PaintedRoof | undefined
      if (roof !== undefined && object.visible) this.paint(roof, new Matrix4().multiplyMatrices(camera.projectionMatrix, camera.matrixWorldInverse).multiply(object.matrixWorld))
    })
  }

  /** x y depth of each point; depth grows away from the viewer, NaN behind the eye. */
  private project(points: Float32Array, matrix: Matrix4): Float32Array {
    const m = matrix.elements
    const out = new Float32Array(points.length)
    for (let i = 0; i < points.length; i += 3) {
      const x = points[i]
      const y = points[i + 1]
      const z = points[i + 2]
      const w = m[3] * x + m[7] * y + m[11] * z + m[15]
      out[i] = ((m[0] * x + m[4] * y + m[8] * z + m[12]) / w * 0.5 + 0.5) * this.width
      out[i + 1] = (0.5 - ((m[1] * x + m[5] * y + m[9] * z + m[13]) / w) * 0.5) * this.height
      out[i + 2] = w > 0 ? (m[2] * x + m[6] * y + m[10] * z + m[14]) / w : Number.NaN
    }
    return out
  }

  private paint(roof: PaintedRoof, matrix: Matrix4): void {
    const { context } = this
    const { plan, nodes, colours } = roof.surface
    const at = this.project(nodes, matrix)
    this.curtain(roof, matrix)

    const depth = new Float32Array(plan.panelCount)
    for (let p = 0; p < plan.panelCount; p += 1) {
      let sum = 0
      for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) sum += at[3 * plan.corner[c] + 2]
      depth[p] = sum / (plan.panelStart[p + 1] - plan.panelStart[p])
    }
    const order = Uint32Array.from(depth.keys()).filter((p) => !Number.isNaN(depth[p])).sort((a, b) => depth[b] - depth[a])
    const hatch = roof.hatch.map((set) => ({ ...set, at: this.project(set.ends, matrix) }))
    const edges = this.edgeStrokes(roof, matrix)
    const seams = plan.panelCount > 400
    const tones = new Map<number, string>()
    for (const p of order) {
      context.beginPath()
      const first = plan.panelStart[p]
      for (let c = first; c < plan.panelStart[p + 1]; c += 1) {
        const i = 3 * plan.corner[c]
        if (c === first) context.moveTo(at[i], at[i + 1])
        else context.lineTo(at[i], at[i + 1])
      }
      context.closePath()
      // Of the same words each time: a browser reads a colour once.
      const tone = (colours[3 * p] << 16) | (colours[3 * p + 1] << 8) | colours[3 * p + 2]
      const fill = tones.get(tone) ?? `#${tone.toString(16).padStart(6, '0')}`
      tones.set(tone, fill)
      context.fillStyle = fill
      context.fill()
      if (seams && edges.sparse) {
        // Where few joints are drawn, antialiasing would leave light seams between neighbours.
        context.strokeStyle = fill
        context.lineWidth = 0.7
        context.stroke()
      }
      for (const set of hatch) {
        if (set.start[p] === set.start[p + 1]) continue
        context.strokeStyle = set.water ? roof.theme.fault : roof.theme.ink2
        context.globalAlpha = set.water ? 1 : 0.55
        context.lineWidth = set.water ? 1.1 : 0.7
        context.beginPath()
        for (let s = set.start[p]; s < set.start[p + 1]; s += 1) {
          context.moveTo(set.at[6 * s], set.at[6 * s + 1])
          context.lineTo(set.at[6 * s + 3], set.at[6 * s + 4])
        }
        context.stroke()
        context.globalAlpha = 1
      }
      for (let c = first; c < plan.panelStart[p + 1]; c += 1) edges.draw(plan.cornerHalf[c] >> 1)
    }
    this.outline(roof, at)
    this.before(roof, matrix)
  }

  private curtain({ curtain, theme }: PaintedRoof, matrix: Matrix4): void {
    const { context } = this
    const at = this.project(curtain, matrix)
    context.fillStyle = theme.light
    context.strokeStyle = theme.rule
    context.lineWidth = 0.8
    for (let q = 0; q < at.length; q += 12) {
      if (Number.isNaN(at[q + 2] + at[q + 5] + at[q + 8] + at[q + 11])) continue
      context.beginPath()
      for (let v = 0; v < 4; v += 1) context[v === 0 ? 'moveTo' : 'lineTo'](at[q + 3 * v], at[q + 3 * v + 1])
      context.fill()
      context.beginPath()
      context.moveTo(at[q + 6], at[q + 7])
      context.lineTo(at[q + 9], at[q + 10])
      context.stroke()
    }
  }

  /** Strokes by the edge they lie on, for drawing them right after a panel. */
  private edgeStrokes({ surface, strokes, theme }: PaintedRoof, matrix: Matrix4): { sparse: boolean; draw: (edge: number) => void } {
    const { context } = this
    const at = this.project(strokes.ends, matrix)
    const first = new Int32Array(surface.plan.edgeCount + 1).fill(-1)
    for (let s = strokes.count - 1; s >= 0; s -= 1) first[strokes.edge[s]] = s
    const tones = strokes.lines.map((line) => theme[lineStyles[line].tone])
    return {
      sparse: strokes.count < surface.plan.jointCount,
      draw: (edge) => {
        for (let s = first[edge]; s >= 0 && s < strokes.count && strokes.edge[s] === edge; s += 1) {
          const x0 = at[6 * s]
          const y0 = at[6 * s + 1]
          const x1 = at[6 * s + 3]
          const y1 = at[6 * s + 4]
          if (Number.isNaN(at[6 * s + 2] + at[6 * s + 5])) continue
          const length = Math.hypot(x1 - x0, y1 - y0) || 1
          const nx = (-(y1 - y0) / length) * strokes.offset[s]
          const ny = ((x1 - x0) / length) * strokes.offset[s]
          context.strokeStyle = tones[strokes.style[s]]
          context.lineWidth = strokes.width[s]
          context.lineCap = strokes.lines[strokes.style[s]] === 'ridge' ? 'round' : 'butt'
          context.beginPath()
          context.moveTo(x0 + nx, y0 + ny)
          context.lineTo(x1 + nx, y1 + ny)
          context.stroke()
        }
      },
    }
  }

  private before({ before, theme }: PaintedRoof, matrix: Matrix4): void {
    if (before === null) return
    const { context } = this
    const at = this.project(before, matrix)
    context.strokeStyle = theme.ink2
    context.lineWidth = 0.9
    context.lineCap = 'butt'
    context.beginPath()
    for (let i = 0; i < at.length; i += 6) {
      if (Number.isNaN(at[i + 2] + at[i + 5])) continue
      context.moveTo(at[i], at[i + 1])
      context.lineTo(at[i + 3], at[i + 4])
    }
    context.stroke()
  }

  private outline({ surface: { plan }, selected, theme }: PaintedRoof, at: Float32Array): void {
    if (selected < 0 || selected >= plan.panelCount) return
    const { context } = this
    context.beginPath()
    for (let c = plan.panelStart[selected]; c < plan.panelStart[selected + 1]; c += 1) {
      const i = 3 * plan.corner[c]
      context[c === plan.panelStart[selected] ? 'moveTo' : 'lineTo'](at[i], at[i + 1])
    }
    context.closePath()
    context.strokeStyle = theme.hand
    context.lineWidth = 3
    context.stroke()
  }
}

/** A point of the world on the screen, in px. */
export function onScreen(point: Vector3, camera: Camera, width: number, height: number): readonly [number, number] {
  const p = point.clone().project(camera)
  return [(p.x * 0.5 + 0.5) * width, (0.5 - p.y * 0.5) * height]
}
