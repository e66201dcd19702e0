/** From options to what a plan keeps while its nodes move. */
import { conversion } from '../base/length.ts'
import { fail, ok, type Result } from '../base/result.ts'
import { indexOfName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import type { Brief } from '../plan/project/brief.ts'
import { keepsWith } from '../plan/project/keeps-wish.ts'
import type { Options } from '../plan/project/options.ts'
import { parsedLength } from '../plan/project/wishes.ts'
import type { PlanKeeps } from '../roof/cures/adjust/adjust.ts'

/** What the plan keeps by its brief and the options, in spans. Fails where a node is not on the plan. */
export function keepsOf(plan: Plan, options: Options, brief: Brief): Result<PlanKeeps> {
  const keeps = keepsWith(options.keeps, brief.keeps, conversion(brief.unit ?? plan.unit, plan.unit))
  const fixed: number[] = []
  for (const name of keeps.stay) {
    const node = indexOfName(name, 'N')
    if (node < 0 || node >= plan.nodeCount) return fail('no-such-node', `the plan has no node ${name}`, { field: '--stay' }, `its nodes are N1 to N${plan.nodeCount}`)
    fixed.push(node)
  }
  const shapes: number[] = []
  for (const name of keeps.keepShape) {
    const panel = indexOfName(name, 'P')
    if (panel < 0 || panel >= plan.panelCount) return fail('no-such-panel', `the plan has no panel ${name}`, { field: '--keep-shape' }, `its panels are P1 to P${plan.panelCount}`)
    shapes.push(panel)
  }
  const { span } = plan.frame
  const lengths: (number | null)[] = []
  for (const [option, typed] of [['--largest-shift', keeps.largestShift], ['--least-edge', keeps.leastEdge]] as const) {
    const length = typed === null ? ok(null) : parsedLength(typed, option, plan.unit)
    if (!length.ok) return length
    if (length.value !== null && !(length.value > 0)) return fail('out-of-range', 'this length must be more than 0', { field: option })
    lengths.push(length.value === null ? null : length.value / span)
  }
  const corner = keeps.leastCorner_deg
  if (corner !== null && !(corner > 0 && corner < 60)) return fail('out-of-range', `a least corner is between 0 and 60 degrees, not ${corner}`, { field: '--least-corner' })
  return ok({
    rim: keeps.rimNodes, fixed, shapes, bays: keeps.keep.includes('bays'), symmetry: keeps.keep.includes('symmetry'), axes: keeps.keep.includes('axes'),
    straight: !keeps.bend, largestShift: lengths[0], leastEdge: lengths[1],
    leastAngle: corner === null ? null : (corner * Math.PI) / 180,
  })
}
