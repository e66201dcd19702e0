/**
 * A drawing made into a plan: units, nodes from points, edges that meet only at nodes, then panels, either the closed
 * outlines themselves or every region that the lines bound.
 *
 * Coordinates are used less a centre (see `centreOf`), so that survey coordinates lose no digits, and nodes that were
 * drawn are written back exactly as they were drawn.
 */
import { gap_mm, snap_mm } from '../../base/geometry/tolerance.ts'
import type { Repair } from '../../base/repair.ts'
import { ok, placed, type Result } from '../../base/result.ts'
import type { Steps } from '../../base/steps.ts'
import { cleanMesh } from '../lines/clean-mesh.ts'
import type { Drawing } from '../drawing.ts'
import { heightsOfNodes } from './height-of-nodes.ts'
import { lineFrame, type LineFrame } from '../lines/frame.ts'
import { panelFaces, type PanelFaces } from '../lines/panels-of-lines.ts'
import { counted, inMillimetres } from '../lines/words.ts'
import { digitOf, exactnessNotices } from './exactness.ts'
import { regular } from './regular.ts'
import { barWidths, centreLineFaces, doubleLineWords, leaves, takes } from './reduced.ts'
import type { Plan } from '../plan.ts'
import type { Exactness, ReadOptions, ReadPlan } from '../read-plan.ts'
import { planFromFaces, type Subdivision } from '../subdivision.ts'
import { millimetresPer, unitOfDrawing } from '../unit-of-drawing.ts'
import { scaleQuestion, unitQuestion, type UnitDoubt } from '../unit-question.ts'

/**
 * The plan of a drawing, in the drawing's unit and coordinates (drawings on paper: in metres). Void points are given in
 * the plan's coordinates. Fails with the place when the drawing is no plan; see the codes in `lines/frame.ts`,
 * `lines/outlines-faces.ts`, `lines/panels-of-lines.ts` and `subdivision.ts`.
 */
export function* planFromDrawing(drawing: Drawing, options: ReadOptions): Steps<Result<ReadPlan>> {
  const read = unitOfDrawing(drawing, options)
  if (!read.ok) return read
  const { unit, factor } = read.value
  const mmPerUnit = millimetresPer(unit)
  const tolerance_mm = planTolerance(options)
  const frame = lineFrame(drawing, read.value, options.snap_mm, tolerance_mm)
  if (!frame.ok) return frame

  const mesh = options.voids.length > 0 ? null : yield* cleanMesh(drawing, frame.value, unit)
  const drawn = mesh === null ? yield* panelFaces(drawing, frame.value, mmPerUnit, options.voids) : ok(facesOfMesh(mesh, drawing, frame.value))
  if (!drawn.ok) return drawn
  const { doubles, problem } = drawn.value
  const onCentres = doubles === null ? null : yield* centreLineFaces(doubles, drawing, frame.value, mmPerUnit)
  if (problem !== null && onCentres === null) return { ok: false, problem }
  yield { stage: 'Building the plan', done: 0 }
  const onCentrePlan = onCentres === null ? null : planFromFaces({ unit, ...onCentres })
  const reduces = onCentrePlan !== null && onCentrePlan.ok
  if (problem !== null && !reduces) return { ok: false, problem }
  const state = problem !== null ? 'applied' : reduces && takes(options, 'double-lines') ? 'accepted' : 'proposed'
  const isReduced = onCentres !== null && state !== 'proposed'
  const faces = isReduced ? onCentres : drawn.value
  const { start, corner, x, y, lineOfPanel } = faces
  const nodeOfPoint = isReduced ? new Int32Array(0) : drawn.value.nodeOfPoint
  const made = mesh !== null ? ok(mesh) : isReduced && onCentrePlan !== null ? onCentrePlan : planFromFaces({ unit, x, y, start, corner })
  if (!made.ok) {
    const name = /^P(\d+)$/.exec(made.problem.where?.names?.[0] ?? '')
    const line = name === null ? 0 : (lineOfPanel[Number(name[1]) - 1] ?? 0)
    return line > 0 ? { ok: false, problem: placed(made.problem, { line }) } : made
  }
  const { plan: asDrawn, pointOfNode } = made.value
  const bars = doubles === null ? null
    : doubleLineWords(doubles, state, drawn.value.start.length - 1, reduces, options, { mmPerUnit, centreX: frame.value.centreX, centreY: frame.value.centreY })

  const doubt = unitDoubt(onCentrePlan !== null && onCentrePlan.ok ? onCentrePlan.value.plan : asDrawn, drawing, options)
  if (doubt !== null && takes(options, 'unit')) {
    const again = yield* planFromDrawing(drawing, { ...options, ...doubt.answer })
    const taken: Repair = { code: 'unit', state: 'accepted', count: 1, message: doubt.taken, where: [] }
    return again.ok ? ok({ ...again.value, repairs: [taken, ...again.value.repairs] }) : again
  }

  // Only a plan that is settled is worth making regular.
  const isSettled = doubt === null && (bars === null || bars.question === null)
  const { plan, repairs: offers, straight_mm } = isSettled ? yield* regular(asDrawn, tolerance_mm, mmPerUnit, options) : { plan: asDrawn, repairs: [], straight_mm: 0 }
  const exactness: Exactness = { meets_mm: drawn.value.meets * mmPerUnit, straight_mm, digit_mm: digitOf(frame.value.planX, frame.value.planY, mmPerUnit) }
  const isStated = options.planTolerance_mm !== undefined && options.planTolerance_mm !== null && options.planTolerance_mm > 0
  const planNode = new Int32Array(x.length).fill(-1)
  for (let index = 0; index < pointOfNode.length; index += 1) planNode[pointOfNode[index]] = index
  const planNodes = new Int32Array(nodeOfPoint.length)
  for (let i = 0; i < planNodes.length; i += 1) planNodes[i] = nodeOfPoint[i] < 0 ? -1 : planNode[nodeOfPoint[i]]
  const { points } = drawing
  const { heights, notices } = heightsOfNodes(
    plan.nodeCount, planNodes, (point) => points[3 * point + 2] * factor, drawing.hasHeight, mmPerUnit,
  )
  const marks = new Float64Array(3 * drawing.marks.length)
  drawing.marks.forEach((point, k) => {
    for (let axis = 0; axis < 3; axis += 1) marks[3 * k + axis] = points[3 * point + axis] * factor
  })
  const repairs: Repair[] = [...drawing.repairs, ...read.value.repairs, ...drawn.value.repairs, ...(bars === null ? [] : [bars.repair]), ...offers]
  if (doubt !== null) repairs.push({ code: 'unit', state: 'proposed', count: 1, message: doubt.question.message.replace(' Which is it?', ''), where: [] })
  return ok({
    plan,
    heights,
    marks: { points: marks, layer: drawing.markLayer, layers: drawing.layers },
    ...(isReduced && doubles !== null ? { barWidth: barWidths(plan, doubles, frame.value) } : {}),
    repairs,
    questions: [...(bars === null || bars.question === null ? [] : [bars.question]), ...(doubt === null || leaves(options, 'unit') ? [] : [doubt.question])],
    leftOut: drawing.leftOut,
    exactness,
    notices: [...read.value.notices, ...exactnessNotices(exactness, tolerance_mm, { isStated, snaps: options.snap_mm !== null }), ...drawn.value.notices, ...notices, ...(bars === null ? openGaps(plan, mmPerUnit) : [])],
  })
}

/** The faces of a clean mesh: as drawn, with nothing to say about them. */
function facesOfMesh({ plan }: Subdivision, { outlines }: Drawing, { planX, planY }: LineFrame): PanelFaces {
  return {
    x: planX, y: planY, start: plan.panelStart, corner: outlines.point, nodeOfPoint: Int32Array.from(planX.keys()), meets: 0,
    lineOfPanel: outlines.line, repairs: [], notices: [], doubles: null, problem: null,
  }
}

/** Says when voids are so narrow that they can only be gaps between outlines. */
function openGaps({ work, frame, origin, rimStart, rimHalf, rimIsVoid }: Plan, mmPerUnit: number): string[] {
  let count = 0
  let widest = 0
  for (let l = 0; l < rimIsVoid.length; l += 1) {
    if (rimIsVoid[l] === 0) continue
    let twice = 0, perimeter = 0
    const first = origin[rimHalf[rimStart[l]]]
    for (let k = rimStart[l]; k < rimStart[l + 1]; k += 1) {
      const a = origin[rimHalf[k]], b = origin[rimHalf[k] ^ 1]
      const ax = work[2 * a] - work[2 * first], ay = work[2 * a + 1] - work[2 * first + 1]
      const bx = work[2 * b] - work[2 * first], by = work[2 * b + 1] - work[2 * first + 1]
      twice += ax * by - ay * bx
      perimeter += Math.hypot(bx - ax, by - ay)
    }
    const width = (twice / perimeter) * frame.span * mmPerUnit
    if (width >= gap_mm) continue
    count += 1
    widest = Math.max(widest, width)
  }
  if (count === 0) return []
  return [`${counted(count, 'gap', 'gaps')} between panels, up to ${inMillimetres(widest)} wide, ${count === 1 ? 'counts as a void' : 'count as voids'}; --snap closes gaps up to the distance it states.`]
}

/** What the drawing is exact to, in mm. 0 says nothing about how it was drawn, so that the default holds. */
function planTolerance({ planTolerance_mm = null }: ReadOptions): number {
  return planTolerance_mm !== null && planTolerance_mm > 0 ? planTolerance_mm : snap_mm
}

/** Whether the lengths make the unit or scale taken unlikely; null where the user has said which it is. */
function unitDoubt(plan: Plan, drawing: Drawing, options: ReadOptions): UnitDoubt | null {
  if (options.unit !== null || options.scale !== null || (options.scaleFrom ?? null) !== null) return null
  // Quantiles are wanted: of a large plan every so many edges will do.
  const stride = Math.ceil(plan.edgeCount / 10_000)
  const lengths = new Float64Array(Math.ceil(plan.edgeCount / stride))
  for (let k = 0; k < lengths.length; k += 1) {
    const a = plan.origin[2 * k * stride], b = plan.origin[2 * k * stride + 1]
    lengths[k] = Math.hypot(plan.x[b] - plan.x[a], plan.y[b] - plan.y[a])
  }
  lengths.sort()
  return drawing.onPaper ? scaleQuestion(lengths) : unitQuestion(lengths, plan.unit)
}
