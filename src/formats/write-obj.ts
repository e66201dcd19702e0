/**
 * A raised roof as Wavefront OBJ: nodes in the plan's order, unit and place, one group per panel, counter-clockwise from
 * above. x and y have the shortest digits that read back exactly, so that the plan is the plan; z has the decimals asked.
 */
import { micrometreDecimals } from '../base/decimal.ts'
import type { Steps } from '../base/steps.ts'
import { panelName } from '../plan/names.ts'
import type { Plan } from '../plan/plan.ts'
import { ByteSink } from './byte-sink.ts'

export interface ObjRoof {
  readonly plan: Plan
  /** Coordinates of the nodes as they are to be written (length nodeCount each). */
  readonly x: Float64Array
  readonly y: Float64Array
  readonly z: Float64Array
  /** Decimals of all three when the user asked for them; null: x and y exact, z to a micrometre. */
  readonly decimals: number | null
  /** Lines put on top as comments. */
  readonly comments: readonly string[]
}

const space = 32
const lineEnd = 10
/** Lines between two looks at the clock: about a millisecond. */
const slice = 4096

export function* writeObj({ plan, x, y, z, decimals, comments }: ObjRoof): Steps<Uint8Array> {
  const sink = new ByteSink()
  // A line break in a comment would start a line that is none.
  for (const comment of comments) sink.text(`# ${comment.replace(/[\r\n]+/g, ' ')}\n`)
  sink.text(`# unit: ${plan.unit}\n`)
  const heightDecimals = decimals ?? micrometreDecimals[plan.unit]
  for (let node = 0; node < plan.nodeCount; node += 1) {
    sink.text('v ')
    if (decimals === null) sink.shortest(x[node])
    else sink.decimal(x[node], decimals, false)
    sink.code(space)
    if (decimals === null) sink.shortest(y[node])
    else sink.decimal(y[node], decimals, false)
    sink.code(space)
    sink.decimal(z[node], heightDecimals, false)
    sink.code(lineEnd)
    if (node % slice === 0) yield { stage: 'Writing the roof', done: (0.5 * node) / plan.nodeCount }
  }
  const { panelStart, corner } = plan
  for (let panel = 0; panel < plan.panelCount; panel += 1) {
    sink.text('g ')
    sink.text(panelName(panel))
    sink.text('\nf')
    for (let at = panelStart[panel]; at < panelStart[panel + 1]; at += 1) {
      sink.code(space)
      sink.integer(corner[at] + 1)
    }
    sink.code(lineEnd)
    if (panel % slice === 0) yield { stage: 'Writing the roof', done: 0.5 + (0.5 * panel) / plan.panelCount }
  }
  return sink.done()
}
