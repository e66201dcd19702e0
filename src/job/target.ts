/**
 * The target: heights that the roof should come near to, from the drawing itself or from a second file. Heights in the
 * drawing are one when nine nodes of ten have them, they differ by more than 10 mm and by more than a thousandth of the span.
 */
import { conversion } from '../base/length.ts'
import { fail, ok, placed, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { readDrawing } from '../formats/all.ts'
import type { Plan } from '../plan/plan.ts'
import type { NamedFile } from '../plan/project/options.ts'
import type { Wishes } from '../plan/project/wishes.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import { surfaceHeights } from '../plan/surface-heights.ts'
import { formatOptions } from './reading.ts'
import type { Request } from './request.ts'

export interface Target {
  /** Height of every node in the plan's unit; null: there is no target. */
  readonly heights: Float64Array | null
  readonly notices: readonly string[]
}

const leastShare = 0.9
const leastRange_mm = 10
const leastRangeOfSpan = 1e-3

/** The target that request, wishes and drawing agree on; heights set by hand give way only to what the options ask. */
export function* targetOf(request: Request, wishes: Wishes, read: ReadPlan, byHand: Float64Array | null): Steps<Result<Target>> {
  const { plan, heights } = read
  if (byHand !== null && !byHand.every(Number.isNaN) && request.options.target === null && request.options.shape === null && wishes.pitch === null) {
    return ok({ heights: filled(plan, byHand), notices: ['The heights set by hand are taken as the target.'] })
  }
  if (wishes.target !== null && typeof wishes.target === 'object') return yield* fromFile(request, wishes.target, plan)
  if (wishes.target === 'none' || wishes.pitch !== null) return ok({ heights: null, notices: [] })
  const refusal = heights === null ? 'the drawing has no heights' : whyNot(plan, heights)
  if (wishes.target === 'input') {
    if (heights === null || refusal !== null) return fail('no-target', `${refusal ?? 'the drawing has no heights'}, so they are no target`, { file: request.source.name, field: '--target' }, 'leave --target out, or name a file')
    return ok({ heights: filled(plan, heights), notices: [] })
  }
  if (heights === null) return ok({ heights: null, notices: [] })
  if (refusal === flat) return ok({ heights: null, notices: ['The drawing is flat, so its heights are no target.'] })
  if (refusal !== null) return ok({ heights: null, notices: [`The heights in the drawing are not taken as a target: ${refusal}.`] })
  if (wishes.shape !== null) return ok({ heights: null, notices: [`The heights in the drawing are not taken as a target, since the shape "${wishes.shape}" was asked for.`] })
  return ok({ heights: filled(plan, heights), notices: ['The heights in the drawing are taken as the target.'] })
}

const flat = 'all nodes have the same'

/** Why these heights are no target, as a clause; null: they are one. */
function whyNot(plan: Plan, heights: Float64Array): string | null {
  let known = 0, low = Infinity, high = -Infinity
  for (let i = 0; i < heights.length; i += 1) {
    if (Number.isNaN(heights[i])) continue
    known += 1
    if (heights[i] < low) low = heights[i]
    if (heights[i] > high) high = heights[i]
  }
  if (known < leastShare * plan.nodeCount) return `only ${known} of ${plan.nodeCount} nodes have one`
  const range_mm = (high - low) * conversion(plan.unit, 'mm')
  if (range_mm <= leastRange_mm) return range_mm === 0 ? flat : `they differ by ${range_mm.toPrecision(2)} mm only`
  if (high - low <= leastRangeOfSpan * plan.frame.span) return `they differ by ${range_mm.toPrecision(3)} mm, less than a thousandth of the span`
  return null
}

function* fromFile(request: Request, file: NamedFile, plan: Plan): Steps<Result<Target>> {
  const drawing = yield* readDrawing(file, { ...formatOptions(request.options), layers: null })
  if (!drawing.ok) return drawing
  const heights = surfaceHeights(plan, drawing.value, conversion(drawing.value.unit ?? plan.unit, plan.unit))
  const reached = heights.filter((height) => !Number.isNaN(height)).length
  if (reached < leastShare * plan.nodeCount) {
    const problem = fail('no-target', `the target surface lies over ${reached} of ${plan.nodeCount} nodes`, { field: '--target' }, 'give a surface of faces over the whole plan, in the same place and unit')
    return { ok: false, problem: placed(problem.problem, { file: file.name }) }
  }
  const notices = reached < plan.nodeCount ? [`${plan.nodeCount - reached} nodes lie outside the target surface; they follow their neighbours.`] : []
  return ok({ heights: filled(plan, heights), notices })
}

/** Nodes without a height take the mean of their neighbours', ring by ring. */
function filled(plan: Plan, heights: Float64Array): Float64Array {
  let known = heights.slice()
  for (;;) {
    if (!known.some((height) => Number.isNaN(height))) return known
    const sum = new Float64Array(plan.nodeCount)
    const count = new Int32Array(plan.nodeCount)
    for (let half = 0; half < plan.origin.length; half += 1) {
      const from = plan.origin[half], to = plan.origin[half ^ 1]
      if (Number.isNaN(known[from])) continue
      sum[to] += known[from]
      count[to] += 1
    }
    const next = known.map((height, node) => (Number.isNaN(height) && count[node] > 0 ? sum[node] / count[node] : height))
    // A part without any height keeps out of reach of its neighbours: it lies at the mean of all.
    if (next.every((height, node) => Object.is(height, known[node]))) {
      const all = known.filter((height) => !Number.isNaN(height))
      const mean = all.reduce((total, height) => total + height, 0) / all.length
      return known.map((height) => (Number.isNaN(height) ? mean : height))
    }
    known = next
  }
}
