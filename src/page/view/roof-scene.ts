/** The roof as three.js objects of stock materials: faces with baked light, ribbons for lines, hatching as thin lines. */
import {
  BufferAttribute, BufferGeometry, Color, Group, LineSegments, Mesh, OrthographicCamera, PerspectiveCamera, Vector3, type Camera, type MeshBasicMaterial,
} from 'three'
import type { Answer } from '../../roof/answer/answer.ts'
import { joints as jointsOf, type Joints } from '../../paper/drawing/joint-kinds.ts'
import { medianPanelWidth, planDetail, roofDetail } from '../../paper/drawing/level-of-detail.ts'
import { panelHatch } from '../../paper/drawing/plan-drawing.ts'
import type { Reading } from '../../paper/drawing/reading.ts'
import { lineStyles, type Theme } from '../../paper/drawing/theme.ts'
import type { RoofMaterials } from './roof-materials.ts'
import { roofStrokes, type Strokes } from './strokes.ts'
import { surface, type Surface } from './surface.ts'

/** What the painter without WebGL needs to know of a roof: it finds this as `userData.roof` of the group. */
export interface PaintedRoof {
  readonly surface: Surface
  readonly strokes: Strokes
  readonly hatch: { readonly start: Int32Array; readonly ends: Float32Array; readonly water: boolean }[]
  readonly curtain: Float32Array
  readonly theme: Theme
  /** Selected panel, -1: none. Changes without a new scene. */
  selected: number
  /** Ends x y z of the edges of the roof before the edit in hand; null: none. Changes without a new scene. */
  before: Float32Array | null
}

export interface RoofScene {
  readonly group: Group
  readonly faces: Mesh
  readonly panelOfTriangle: Int32Array
  readonly top: number
  /** Turns the ribbons towards the camera; call before every frame. `height`: of the picture in px. */
  face(camera: Camera, height: number): void
  /** Outlines a panel, -1: none. */
  select(panel: number): void
  /** Draws the edges of the roof before the edit in hand as thin lines; null: none. */
  showBefore(heights: Float64Array | null): void
  dispose(): void
}

export interface RoofSceneOptions {
  readonly reading: Reading
  readonly joints: Joints | null
  readonly theme: Theme
  /** Of the same theme; they outlive the scene. */
  readonly materials: RoofMaterials
  readonly exaggeration: number
  /** px to the plan unit at the fitted scale: decides on detail and dashes. */
  readonly scale: number
}

/** The scene of an answer's roof, null when it has none. */
export function roofScene(answer: Answer, options: RoofSceneOptions): RoofScene | null {
  const { plan, roof } = answer
  if (roof === null) return null
  const { reading, theme, materials, exaggeration, scale } = options
  const shape = surface(plan, roof, reading, theme, exaggeration)
  const width = medianPanelWidth(plan) * scale
  const strokes = roofStrokes(shape, reading, options.joints ?? jointsOf(answer), planDetail(width), 1 / scale)
  const hatch = roofDetail(width).hatch ? liftedHatch(answer, reading, shape, exaggeration, 1 / scale) : []
  const curtain = curtainQuads(shape)

  const group = new Group()
  const faces = faceMesh(shape, materials)
  group.add(curtainMesh(curtain, materials), faces)
  for (const set of hatch) group.add(hatchLines(set, materials, plan.frame.span))
  const ribbons = ribbonMesh(strokes, theme, materials.ribbons, plan.frame.span)
  group.add(ribbons.mesh)
  let outline: Ribbons | null = null
  let ghost: LineSegments | null = null
  const painted: PaintedRoof = { surface: shape, strokes, hatch, curtain, theme, selected: -1, before: null }
  group.userData.roof = painted
  return {
    group, faces, panelOfTriangle: shape.panelOfTriangle, top: shape.top,
    face(camera, height) {
      ribbons.face(camera, height)
      outline?.face(camera, height)
    },
    select(panel) {
      painted.selected = panel
      if (outline !== null) {
        group.remove(outline.mesh)
        outline.mesh.geometry.dispose()
      }
      outline = selectedRibbons(shape, panel, theme, materials.ribbons)
      if (outline !== null) group.add(outline.mesh)
    },
    showBefore(heights) {
      if (ghost !== null) {
        group.remove(ghost)
        ghost.geometry.dispose()
        ghost = null
      }
      painted.before = heights === null ? null : edgesBefore(answer, heights, exaggeration)
      if (painted.before === null) return
      const geometry = new BufferGeometry()
      geometry.setAttribute('position', new BufferAttribute(painted.before, 3))
      ghost = unculled(new LineSegments(geometry, materials.before))
      ghost.renderOrder = 2
      group.add(ghost)
    },
    dispose() {
      group.traverse((object) => {
        if (object instanceof Mesh || object instanceof LineSegments) (object.geometry as BufferGeometry).dispose()
      })
    },
  }
}

/** Above this many panels only the rims before the edit are drawn: the rest would be a blot. */
const manyPanels = 400

/** Edges of a roof of other heights on the same plan, dashed by halves: x y z of both ends of each dash. */
function edgesBefore({ plan, roof }: Answer, heights: Float64Array, exaggeration: number): Float32Array {
  let datum = Infinity
  for (const z of roof?.heights ?? []) if (z < datum) datum = z
  const out: number[] = []
  for (let e = plan.panelCount > manyPanels ? plan.jointCount : 0; e < plan.edgeCount; e += 1) {
    const [a, b] = [plan.origin[2 * e], plan.origin[2 * e + 1]]
    // Five dashes an edge: a full line would pass for a joint.
    for (let k = 0; k < 10; k += 1) {
      const t = k / 9
      out.push(
        plan.x[a] + t * (plan.x[b] - plan.x[a]) - plan.frame.centreX, plan.y[a] + t * (plan.y[b] - plan.y[a]) - plan.frame.centreY,
        (heights[a] + t * (heights[b] - heights[a]) - datum) * exaggeration,
      )
    }
  }
  return Float32Array.from(out)
}

/** The roof is in the picture: looking whether it is takes a bounding sphere an answer. */
function unculled<T extends Mesh | LineSegments>(object: T): T {
  object.frustumCulled = false
  return object
}

function faceMesh({ nodes, triangles, panelOfTriangle, colours }: Surface, { faces }: RoofMaterials): Mesh {
  const positions = new Float32Array(3 * triangles.length)
  const baked = new Float32Array(3 * triangles.length)
  const colour = new Color()
  for (let i = 0; i < triangles.length; i += 1) {
    const p = panelOfTriangle[Math.floor(i / 3)]
    for (let c = 0; c < 3; c += 1) positions[3 * i + c] = nodes[3 * triangles[i] + c]
    if (i % 3 === 0) colour.setRGB(colours[3 * p] / 255, colours[3 * p + 1] / 255, colours[3 * p + 2] / 255, 'srgb')
    baked.set([colour.r, colour.g, colour.b], 3 * i)
  }
  const geometry = new BufferGeometry()
  geometry.setAttribute('position', new BufferAttribute(positions, 3))
  geometry.setAttribute('color', new BufferAttribute(baked, 3))
  return unculled(new Mesh(geometry, faces))
}

/** Quads from the outer rims down to the lowest node, 4 x 3 numbers each. */
function curtainQuads({ plan, nodes }: Surface): Float32Array {
  const out: number[] = []
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 1) continue
    for (let k = plan.rimStart[l]; k < plan.rimStart[l + 1]; k += 1) {
      const a = 3 * plan.origin[plan.rimHalf[k]]
      const b = 3 * plan.origin[plan.rimHalf[k] ^ 1]
      out.push(nodes[a], nodes[a + 1], nodes[a + 2], nodes[b], nodes[b + 1], nodes[b + 2], nodes[b], nodes[b + 1], 0, nodes[a], nodes[a + 1], 0)
    }
  }
  return Float32Array.from(out)
}

function curtainMesh(quads: Float32Array, { curtain }: RoofMaterials): Mesh {
  const index: number[] = []
  for (let q = 0; q < quads.length / 12; q += 1) index.push(4 * q, 4 * q + 1, 4 * q + 2, 4 * q, 4 * q + 2, 4 * q + 3)
  const geometry = new BufferGeometry()
  geometry.setAttribute('position', new BufferAttribute(quads, 3))
  geometry.setIndex(index)
  return unculled(new Mesh(geometry, curtain))
}

type HatchSet = PaintedRoof['hatch'][number]

/** The plan's hatch strokes lifted into their panels' planes: one set for ordinary strokes, one for water dashes. */
function liftedHatch(answer: Answer, reading: Reading, { plan, nodes }: Surface, exaggeration: number, px: number): HatchSet[] {
  const gradient = answer.roof?.gradient ?? new Float64Array()
  const sets = [false, true].map((water) => ({ water, ends: [] as number[], start: [0] }))
  const strokes: number[] = []
  for (let p = 0; p < plan.panelCount; p += 1) {
    strokes.length = 0
    const line = panelHatch(answer, reading, p, px, strokes)
    const into = sets[line === 'water' ? 1 : 0]
    const node = 3 * plan.corner[plan.panelStart[p]]
    for (let i = 0; i < strokes.length && line !== null; i += 2) {
      const z = nodes[node + 2] + exaggeration * (gradient[2 * p] * (strokes[i] - nodes[node]) + gradient[2 * p + 1] * (strokes[i + 1] - nodes[node + 1]))
      // A dot is a stroke of no length, which nothing would draw.
      into.ends.push(strokes[i] + (line === 'flush' && i % 4 === 2 ? 1.2 * px : 0), strokes[i + 1], z)
    }
    for (const set of sets) set.start.push(set.ends.length / 6)
  }
  return sets.filter((set) => set.ends.length > 0).map((set) => ({ water: set.water, ends: Float32Array.from(set.ends), start: Int32Array.from(set.start) }))
}

function hatchLines(set: HatchSet, { hatch, water }: RoofMaterials, span: number): LineSegments {
  const geometry = new BufferGeometry()
  geometry.setAttribute('position', new BufferAttribute(set.ends, 3))
  const lines = unculled(new LineSegments(geometry, set.water ? water : hatch))
  lines.position.z = span * 2e-4
  return lines
}

interface Ribbons {
  readonly mesh: Mesh
  face(camera: Camera, height: number): void
}

function ribbonMesh(strokes: Strokes, theme: Theme, material: MeshBasicMaterial, span: number): Ribbons {
  const { count, ends, width, offset, style, lines } = strokes
  const positions = new Float32Array(12 * count)
  const colours = new Float32Array(12 * count)
  const index = new Uint32Array(6 * count)
  const colour = new Color()
  const tones = lines.map((line) => colour.clone().set(theme[lineStyles[line].tone]))
  for (let i = 0; i < count; i += 1) {
    const tone = tones[style[i]]
    for (let v = 0; v < 4; v += 1) colours.set([tone.r, tone.g, tone.b], 12 * i + 3 * v)
    index.set([4 * i, 4 * i + 1, 4 * i + 2, 4 * i, 4 * i + 2, 4 * i + 3], 6 * i)
  }
  const geometry = new BufferGeometry()
  const position = new BufferAttribute(positions, 3)
  geometry.setAttribute('position', position)
  geometry.setAttribute('color', new BufferAttribute(colours, 3))
  geometry.setIndex(new BufferAttribute(index, 1))
  const mesh = unculled(new Mesh(geometry, material))
  const view = new Vector3()
  const eye = new Vector3()
  return {
    mesh,
    face(camera, height) {
      camera.updateMatrixWorld()
      camera.getWorldDirection(view)
      eye.setFromMatrixPosition(camera.matrixWorld)
      const parallel = camera instanceof OrthographicCamera
      const zoom = parallel ? camera.zoom : 1
      const angle = camera instanceof PerspectiveCamera ? 2 * Math.tan((camera.fov * Math.PI) / 360) : 0
      for (let i = 0; i < count; i += 1) {
        const e = 6 * i
        const dx = ends[e + 3] - ends[e]
        const dy = ends[e + 4] - ends[e + 1]
        const dz = ends[e + 5] - ends[e + 2]
        // Sideways on the screen: direction x view, of unit length.
        let sx = dy * view.z - dz * view.y
        let sy = dz * view.x - dx * view.z
        let sz = dx * view.y - dy * view.x
        const length = Math.hypot(sx, sy, sz) || 1
        sx /= length
        sy /= length
        sz /= length
        // A casing lies under its valley, both before the face.
        const forward = (lines[style[i]] === 'casing' ? 1.2e-3 : 2e-3) * span
        for (let end = 0; end < 2; end += 1) {
          const x = ends[e + 3 * end]
          const y = ends[e + 3 * end + 1]
          const z = ends[e + 3 * end + 2]
          const distance = parallel ? 0 : (x - eye.x) * view.x + (y - eye.y) * view.y + (z - eye.z) * view.z
          const px = parallel ? 1 / zoom : (Math.max(distance, 0.01 * span) * angle) / height
          const near = (offset[i] - width[i] / 2) * px
          const far = (offset[i] + width[i] / 2) * px
          const v = 12 * i + (end === 0 ? 0 : 6)
          const first = end === 0 ? near : far
          const second = end === 0 ? far : near
          positions[v] = x + sx * first - view.x * forward
          positions[v + 1] = y + sy * first - view.y * forward
          positions[v + 2] = z + sz * first - view.z * forward
          positions[v + 3] = x + sx * second - view.x * forward
          positions[v + 4] = y + sy * second - view.y * forward
          positions[v + 5] = z + sz * second - view.z * forward
        }
      }
      position.needsUpdate = true
    },
  }
}

function selectedRibbons({ plan, nodes }: Surface, panel: number, theme: Theme, material: MeshBasicMaterial): Ribbons | null {
  if (panel < 0 || panel >= plan.panelCount) return null
  const start = plan.panelStart[panel]
  const count = plan.panelStart[panel + 1] - start
  const ends = new Float32Array(6 * count)
  for (let k = 0; k < count; k += 1) {
    for (let c = 0; c < 3; c += 1) {
      ends[6 * k + c] = nodes[3 * plan.corner[start + k] + c]
      ends[6 * k + 3 + c] = nodes[3 * plan.corner[start + ((k + 1) % count)] + c]
    }
  }
  const strokes: Strokes = {
    count, ends, width: new Float32Array(count).fill(3), offset: new Float32Array(count), style: new Uint8Array(count), lines: ['selected'],
    edge: new Int32Array(count).fill(-1),
  }
  // Nearer than the joints, so that it lies over them.
  return ribbonMesh(strokes, theme, material, 1.6 * plan.frame.span)
}
