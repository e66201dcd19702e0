/** Drawings for tests, made in code. */
import type { Unit } from '../../src/base/length.ts'
import { finish } from '../../src/base/steps.ts'
import type { Result } from '../../src/base/result.ts'
import type { Drawing, DrawnCircle, DrawnText, Loops } from '../../src/plan/drawing.ts'
import type { ReadOptions, ReadPlan } from '../../src/plan/read-plan.ts'
import { planOfLines } from '../../src/plan/reading/which-lines.ts'

export type Point = readonly [number, number]
export type Point3 = readonly [number, number, number]
export type Segment = readonly [Point, Point]

export interface Sketch {
  readonly outlines?: readonly (readonly (Point | Point3)[])[]
  readonly holes?: readonly (readonly Point[])[]
  readonly lines?: readonly Segment[]
  readonly marks?: readonly Point3[]
  readonly unit?: Unit | null
  readonly onPaper?: boolean
  readonly format?: string
  /** What stands beside the lines above, each on a layer ("": theirs). */
  readonly beside?: readonly Beside[]
}

export interface Beside {
  readonly layer: string
  readonly lines?: readonly Segment[]
  readonly outlines?: readonly (readonly Point[])[]
  /** Circles, chorded in sixteen. */
  readonly circles?: readonly { readonly at: Point; readonly radius: number }[]
  /** Anchored at their middles. */
  readonly texts?: readonly { readonly text: string; readonly at: Point; readonly height: number }[]
}

/** Every corner is a point of its own, as line drawings have it; outline i is on line 10 + i of the file, segment i on 1000 + i. */
export function drawing(sketch: Sketch): Drawing {
  const points: number[] = []
  const hasHeight: number[] = []
  const point = (p: Point | Point3): number => {
    points.push(p[0], p[1], p[2] ?? 0)
    hasHeight.push(p.length > 2 ? 1 : 0)
    return hasHeight.length - 1
  }
  const loops = (list: readonly (readonly (Point | Point3)[])[]): Loops => {
    const start = [0]
    const corner: number[] = []
    for (const loop of list) {
      for (const p of loop) corner.push(point(p))
      start.push(corner.length)
    }
    return {
      start: Int32Array.from(start), point: Int32Array.from(corner),
      layer: new Int32Array(list.length), line: Int32Array.from(list, (_, i) => 10 + i),
    }
  }
  const beside = sketch.beside ?? []
  const layers = ['', ...new Set(beside.map(({ layer }) => layer).filter((layer) => layer !== ''))]
  const layerOf = ({ layer }: Beside): number => layers.indexOf(layer)
  const circles: DrawnCircle[] = []
  const texts = beside.flatMap(({ layer, texts: own = [] }) => own.map(({ text, at, height }): DrawnText => ({ text, at, middle: at, height, layer, kind: 'TEXT', tag: null, block: null })))
  const ring = ({ at: [x, y], radius }: { at: Point; radius: number }): Point[] => Array.from({ length: 16 }, (_, k) => [x + radius * Math.cos((k * Math.PI) / 8), y + radius * Math.sin((k * Math.PI) / 8)])
  const ownOutlines = sketch.outlines ?? []
  const besideOutlines = beside.flatMap((each) => [...(each.outlines ?? []).map((outline) => ({ outline, circle: null, layer: layerOf(each) })), ...(each.circles ?? []).map((circle) => ({ outline: ring(circle), circle, layer: layerOf(each) }))])
  const made = loops([...ownOutlines, ...besideOutlines.map(({ outline }) => outline)])
  const outlines: Loops = { ...made, layer: Int32Array.from([...ownOutlines.map(() => 0), ...besideOutlines.map(({ layer }) => layer)]) }
  besideOutlines.forEach(({ circle }, k) => { if (circle !== null) circles.push({ ...circle, point: made.point[made.start[ownOutlines.length + k]!]! }) })
  const holes = loops(sketch.holes ?? [])
  const ownLines = sketch.lines ?? []
  const lines = [...ownLines, ...beside.flatMap((each) => each.lines ?? [])]
  const segmentLayer = Int32Array.from([...ownLines.map(() => 0), ...beside.flatMap((each) => (each.lines ?? []).map(() => layerOf(each)))])
  const segments = Int32Array.from(lines.flatMap(([p, q]) => [point(p), point(q)]))
  const marks = Int32Array.from((sketch.marks ?? []).map(point))
  return {
    format: sketch.format ?? 'DXF', unit: sketch.unit === undefined ? 'm' : sketch.unit, onPaper: sketch.onPaper ?? false,
    points: Float64Array.from(points), hasHeight: Uint8Array.from(hasHeight), layers, outlines, holes,
    segments, segmentLayer, segmentLine: Int32Array.from(lines, (_, i) => 1000 + i),
    marks, markLayer: new Int32Array(marks.length), leftOut: [], repairs: [], ...(texts.length === 0 ? {} : { texts }), ...(circles.length === 0 ? {} : { circles }),
  }
}

export const plainly: ReadOptions = { unit: null, scale: null, snap_mm: null, voids: [], accept: [] }

export function reading(sketch: Sketch, options: Partial<ReadOptions> = {}): Result<ReadPlan> {
  return finish(planOfLines(drawing(sketch), { ...plainly, ...options }))
}

/** The plan read; throws with the problem's message when there is none. */
export function read(sketch: Sketch, options: Partial<ReadOptions> = {}): ReadPlan {
  const result = reading(sketch, options)
  if (!result.ok) throw new Error(`${result.problem.code}: ${result.problem.message} ${JSON.stringify(result.problem.where)}`)
  return result.value
}

/** The code of the problem, or "read" when there is none. */
export function problemOf(sketch: Sketch, options: Partial<ReadOptions> = {}): string {
  const result = reading(sketch, options)
  return result.ok ? 'read' : result.problem.code
}

/** Lines of a grid of m x n bays, each line drawn through from rim to rim. */
export function throughLines(m: number, n: number, bay = 1): Segment[] {
  const lines: Segment[] = []
  for (let i = 0; i <= m; i += 1) lines.push([[i * bay, 0], [i * bay, n * bay]])
  for (let j = 0; j <= n; j += 1) lines.push([[0, j * bay], [m * bay, j * bay]])
  return lines
}

/** The same grid as closed quads, rows from the bottom left. */
export function quads(m: number, n: number, bay = 1): Point[][] {
  const faces: Point[][] = []
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      faces.push([[i * bay, j * bay], [(i + 1) * bay, j * bay], [(i + 1) * bay, (j + 1) * bay], [i * bay, (j + 1) * bay]])
    }
  }
  return faces
}
