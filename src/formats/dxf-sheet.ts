/**
 * The drawing that a DXF becomes: placed points come in, entity by entity, and are judged as outlines, segments and
 * marks; layers that are not taken, curves and levels are kept account of.
 */
import type { Unit } from '../base/length.ts'
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import { epsilon } from '../base/geometry/tolerance.ts'
import type { Drawing } from '../plan/drawing.ts'
import type { Layer } from './dxf-file.ts'
import { joinedFaces } from './dxf-merge.ts'
import type { Common, Mesh } from './dxf-shapes.ts'
import { Integers } from '../base/growing.ts'
import type { LayerChoice } from './layer-choice.ts'
import { Sketch } from './sketch.ts'
import { farthest } from './text-number.ts'
import { quoted } from './text-quote.ts'

/** Points that one drawing may have: about ten times the largest roofs. */
export const mostPoints = 5_000_000

/** Share of an entity's size within which its two ends are the same point: an outline closed by its last point only. */
const sameEnd = 1e-9

/** A flat figure off the sheet's level. */
interface Level {
  readonly z: number
  readonly at: readonly [x: number, y: number]
}

export class DxfSheet {
  readonly sketch = new Sketch()
  /** Look of the entity that is being put in place. */
  look = 0
  private readonly met = new Map<string, string>()
  private curves = 0
  private chords = 0
  private readonly curvesAt: [number, number][] = []
  private readonly levels: Level[] = []
  /** Loops with edges marked invisible; see dxf-merge.ts. */
  private readonly hidden = new Map<number, number[]>()
  /** Points of LINEs that lie at z = 0, and how many LINEs have heights and how many have none. */
  private readonly groundPoints = new Integers()
  private linesWithHeights = 0
  private linesWithout = 0

  /** `sagitta` is in the file's unit; `stated` is what the user asked for, in metres. */
  constructor(
    private readonly layers: ReadonlyMap<string, Layer>, private readonly choice: LayerChoice,
    readonly sagitta: number, private readonly stated: number,
  ) {}

  /** Why entities of the layer are not taken, or null. A layer that the user names is taken even when it is off. */
  hides(layer: string): 'layer frozen' | 'layer off' | 'layer not chosen' | null {
    const key = layer.toLowerCase()
    if (!this.met.has(key)) this.met.set(key, layer)
    if (this.choice.stated) return this.choice.takes(layer) ? null : 'layer not chosen'
    const known = this.layers.get(key)
    return known === undefined ? null : known.frozen ? 'layer frozen' : known.off ? 'layer off' : null
  }

  mark([x, y, z]: readonly [number, number, number], layer: string, entity: Common): Problem | null {
    if (!near(x, y, z)) return tooFar(entity)
    this.sketch.mark(this.sketch.point(x, y, z, true), this.sketch.layer(layer))
    return this.full(entity)
  }

  /** An outline where it is closed or ends where it began, else segments. `points` x y z .. */
  path(points: readonly number[], closed: boolean, heights: boolean, layer: string, entity: Common): Problem | null {
    const kept = distinct(points)
    if (kept === null) return tooFar(entity)
    const loop = closed || endsWhereItBegan(kept)
    if (loop) while (kept.length > 3 && samePlace(kept, 0, kept.length - 3, loop && !closed)) kept.length -= 3
    const count = kept.length / 3
    if (count < 2) {
      this.sketch.leaveOut(`${entity.kind}, ${points.length > 3 && isUpright(points) ? 'upright' : 'no length'}`, layer)
      return null
    }
    const first = this.sketch.pointCount
    for (let i = 0; i < kept.length; i += 3) this.sketch.point(kept[i], kept[i + 1], kept[i + 2], heights)
    const index = this.sketch.layer(layer)
    if (loop && count > 2) this.sketch.outlines.add(Array.from({ length: count }, (_, i) => first + i), index, entity.line, this.look)
    else for (let i = 1; i < count; i += 1) this.sketch.segment(first + i - 1, first + i, index, entity.line, this.look)
    if (entity.kind === 'LINE') this.lineMet(first, heights)
    else if (!heights) this.levels.push({ z: kept[2], at: [kept[0], kept[1]] })
    return this.full(entity)
  }

  mesh(points: readonly number[], { start, corner, hidden, ...entity }: Mesh, layer: string): Problem | null {
    const index = this.sketch.layer(layer)
    const first = this.sketch.pointCount
    for (let i = 0; i < points.length; i += 3) {
      if (!near(points[i], points[i + 1], points[i + 2])) return tooFar(entity)
      this.sketch.point(points[i], points[i + 1], points[i + 2], true)
    }
    const same = (a: number, b: number): boolean => points[3 * a] === points[3 * b] && points[3 * a + 1] === points[3 * b + 1]
    for (let f = 0; f + 1 < start.length; f += 1) {
      const face: number[] = []
      const marks: number[] = []
      for (let i = start[f]; i < start[f + 1]; i += 1) {
        const repeated = face.length > 0 && same(face[face.length - 1], corner[i])
        if (repeated) marks.pop()
        else face.push(corner[i])
        marks.push(hidden === null ? 0 : hidden[i])
      }
      while (face.length > 1 && same(face[0], face[face.length - 1])) {
        face.pop()
        marks.pop()
      }
      if (face.length < 3) {
        this.sketch.leaveOut(`${entity.kind} face, upright or without area`, layer)
        continue
      }
      if (marks.includes(1)) this.hidden.set(this.sketch.outlines.length, marks)
      this.sketch.outlines.add(face.map((point) => first + point), index, entity.line, this.look)
    }
    return this.full(entity)
  }

  /** Notes an entity whose curves became chords; `along` is it as chorded. */
  chorded(along: readonly number[], chords: number): void {
    const middle = 3 * Math.floor(along.length / 6)
    this.curves += 1
    this.chords += chords
    this.curvesAt.push([along[middle], along[middle + 1]])
  }

  drawing(unit: Unit | null): Result<Drawing> {
    const { sketch } = this
    const missing = this.choice.missing([...[...this.layers.values()].map(({ name }) => name), ...this.met.values()])
    if (missing !== null) return { ok: false, problem: missing }
    if (sketch.outlines.length + sketch.segmentCount + sketch.markCount === 0) return this.nothing()
    this.settleLines()
    this.noteChords()
    this.noteLevels()
    if (this.hidden.size === 0) return ok(sketch.drawing('DXF', unit, false))
    return ok(sketch.drawing('DXF', unit, false, joinedFaces(sketch.outlines.loops(), this.hidden, this.places())))
  }

  /** Numbers for points, the same for the same coordinates. */
  private places(): (point: number) => number {
    const known = new Map<string, number>()
    return (point) => {
      const key = `${this.sketch.x(point)} ${this.sketch.y(point)} ${this.sketch.z(point)}`
      const number = known.get(key) ?? known.size
      known.set(key, number)
      return number
    }
  }

  private lineMet(first: number, heights: boolean): void {
    if (heights) {
      this.linesWithHeights += 1
      return
    }
    this.linesWithout += 1
    this.groundPoints.push(first)
    this.groundPoints.push(first + 1)
  }

  /**
   * A wire model has lines at z = 0 too, and there 0 is a height; a plan with a stray line in space has none. So z = 0
   * counts where at least half of the lines leave the ground.
   */
  private settleLines(): void {
    if (this.linesWithHeights < this.linesWithout) return
    for (let i = 0; i < this.groundPoints.length; i += 1) this.sketch.stateHeight(this.groundPoints.at(i), true)
  }

  private noteChords(): void {
    if (this.curves === 0) return
    const millimetres = Number((1000 * this.stated).toPrecision(6))
    const entities = this.curves === 1 ? '1 entity' : `${this.curves} entities`
    this.sketch.repair({
      code: 'chords', state: 'applied', count: this.curves, where: this.curvesAt,
      message: `Curves of ${entities} became ${this.chords} chords; no curve leaves its chord by more than ${millimetres} mm`,
    })
  }

  /** Flat figures at several levels: the plan takes where they are, not how high, and says so. */
  private noteLevels(): void {
    const counts = new Map<number, number>()
    for (const { z } of this.levels) counts.set(z, (counts.get(z) ?? 0) + 1)
    if (counts.size < 2) return
    let common = 0
    let most = 0
    for (const [z, count] of counts) if (count > most) [common, most] = [z, count]
    const others = this.levels.filter(({ z }) => z !== common)
    const figures = others.length === 1 ? '1 flat figure lies' : `${others.length} flat figures lie`
    this.sketch.repair({
      code: 'flattened', state: 'applied', count: others.length, where: others.map(({ at }) => at),
      message: `${figures} at another level than the rest; the plan takes x and y only`,
    })
  }

  private nothing(): Result<never> {
    const other = this.sketch.leftOut.map(({ kind, layer, count }) => `${count} x ${kind} on layer ${quoted(layer, 40)}`)
    const more = other.length > 6 ? ` and ${other.length - 6} other kinds` : ''
    const only = other.length === 0 ? '' : `, only ${other.slice(0, 6).join(', ')}${more}`
    const cure = 'export the edges of the panels as lines or closed polylines'
    return fail('nothing-drawn', `the file has no faces, outlines or lines to read${only}`, null, cure)
  }

  private full({ line, entity }: Common): Problem | null {
    if (this.sketch.pointCount <= mostPoints) return null
    return fail('too-many', `the drawing has more than ${mostPoints} points`, { line, entity }, 'export only the panels').problem
  }
}

const near = (x: number, y: number, z: number): boolean => Math.abs(x) <= farthest && Math.abs(y) <= farthest && Math.abs(z) <= farthest

function tooFar({ line, entity }: Common): Problem {
  return fail('too-far', 'a coordinate comes out beyond 1e12', { line, entity }, 'check the scale of its block').problem
}

/** The points without those that repeat the one before in plan; null where one is too far out. */
function distinct(points: readonly number[]): number[] | null {
  const out: number[] = []
  for (let i = 0; i < points.length; i += 3) {
    if (!near(points[i], points[i + 1], points[i + 2])) return null
    const n = out.length
    if (n === 0 || points[i] !== out[n - 3] || points[i + 1] !== out[n - 2]) out.push(points[i], points[i + 1], points[i + 2])
  }
  return out
}

const isUpright = (points: readonly number[]): boolean => points.some((value, i) => i % 3 === 2 && value !== points[2])

function endsWhereItBegan(points: readonly number[]): boolean {
  return points.length > 9 && samePlace(points, 0, points.length - 3, true)
}

/** Whether the points at i and j are one in plan: exactly, or (`roughly`) as nearly as the entity's own size can tell. */
function samePlace(points: readonly number[], i: number, j: number, roughly: boolean): boolean {
  if (points[i] === points[j] && points[i + 1] === points[j + 1]) return true
  if (!roughly) return false
  let size = 0
  for (let k = 0; k < points.length; k += 3) size = Math.max(size, Math.abs(points[k] - points[0]), Math.abs(points[k + 1] - points[1]))
  const within = sameEnd * size + 8 * epsilon * Math.max(Math.abs(points[i]), Math.abs(points[i + 1]))
  return Math.abs(points[i] - points[j]) <= within && Math.abs(points[i + 1] - points[j + 1]) <= within
}
