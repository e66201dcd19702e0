/**
 * The project: a plan as it was accepted and what is asked of its roof, as one readonly record. The page's steps are older
 * records, so undo is a look at one of them; edits (`edits.ts`) make new ones.
 */
import { conversion } from '../../base/length.ts'
import { ok, type Result } from '../../base/result.ts'
import { barWidthsOf, drawnFaces, faceAt, nodePoints, planOfFaces, type DrawnFaces } from '../drawn-faces.ts'
import type { ReadPlan } from '../read-plan.ts'
import type { Brief } from './brief.ts'
import { withDrawnLevels } from './drawn-level-conditions.ts'

export interface Project {
  /** The drawing that the plan was read from, by its file name, and the SHA-256 of its bytes; null: not known. */
  readonly name: string
  readonly sha256: string | null
  /** Panels and voids; the plan below is made of those that are panels. */
  readonly faces: DrawnFaces
  /** Plan, heights that the drawing gave, and what reading it did. */
  readonly read: ReadPlan
  /** Its `voids` are those that the faces do not have yet; null: none. */
  readonly brief: Brief
  /**
   * Heights that the roof comes near to, set by hand (length nodeCount, NaN: none), in the place of shape and drawing.
   *
   * A way left that is moved by an amount is kept as this: the roof's heights plus amount times way. Those heights are a
   * roof that meets the conditions, so the roof nearest to them is those very heights, whatever is computed later; "way 3 by
   * 40 mm" would change its meaning with every condition, and a level at the way's peak would leave the rest to the wish.
   */
  readonly target: Float64Array | null
  /** Degrees below which panels are marked; null: none. */
  readonly leastSlope: number | null
}

/** What a project adds to a plan that was read. */
export type Asked = Pick<Project, 'name' | 'sha256' | 'brief' | 'target' | 'leastSlope'>

/**
 * The project of a plan as it was read; proposals that were not taken are left behind with the drawing, and so are voids of
 * the brief that the plan has.
 */
export function projectOf(read: ReadPlan, { name, sha256, brief, target, leastSlope }: Asked): Project {
  const { levels = [], ...rest } = read
  const kept: ReadPlan = { ...rest, repairs: read.repairs.filter(({ state }) => state !== 'proposed'), questions: [] }
  const faces = drawnFaces(read.plan, read.heights, read.barWidth)
  const factor = conversion(brief.unit ?? faces.unit, faces.unit)
  const voids = (brief.voids ?? []).filter(([x, y]) => faces.isVoid[faceAt(faces, x * factor, y * factor)] === 0)
  return { name, sha256, faces, read: kept, brief: { ...withDrawnLevels(withoutLines(brief), levels, read.plan.unit), voids: voids.length === 0 ? null : voids }, target, leastSlope }
}

/** A plan that was accepted needs no choice of lines. */
function withoutLines(brief: Brief): Brief {
  return brief.lines === undefined ? brief : { ...brief, lines: null }
}

/** The plan of faces, read as a drawing of which reading had this to say. */
export function readFaces(faces: DrawnFaces, said: Pick<ReadPlan, 'repairs' | 'leftOut' | 'notices' | 'axes'>): Result<ReadPlan> {
  const plan = planOfFaces(faces)
  if (!plan.ok) return plan
  const { repairs, leftOut, notices, axes } = said
  const marks = { points: new Float64Array(), layer: new Int32Array(), layers: [] }
  const points = nodePoints(faces)
  const barWidth = barWidthsOf(faces, plan.value, points)
  return ok({ plan: plan.value, heights: atNodes(faces.heights, points), marks, ...(barWidth === undefined ? {} : { barWidth }), ...(axes === undefined ? {} : { axes }), repairs, questions: [], leftOut, notices })
}

/** Values of points, taken to the nodes of a plan. */
export function atNodes(values: Float64Array | null, pointOfNode: Int32Array): Float64Array | null {
  return values === null ? null : Float64Array.from(pointOfNode, (point) => values[point])
}

/** Values of nodes, taken to the points; NaN where a point is no node. */
export function atPoints(values: Float64Array | null, pointOfNode: Int32Array, points: number): Float64Array | null {
  if (values === null) return null
  const out = new Float64Array(points).fill(NaN)
  pointOfNode.forEach((point, node) => (out[point] = values[node]))
  return out
}
