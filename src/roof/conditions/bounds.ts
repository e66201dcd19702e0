/** Bounds: every node of the place between two levels, or on one side of one: bracket play, planning envelope, headroom. */
import { fail, type Result } from '../../base/result.ts'
import type { BoundsCondition } from '../../plan/project/condition.ts'
import { nodesAt } from './places.ts'
import type { Emit } from './rows.ts'
import { heightOf, type Site } from './site.ts'

/** Emits to `signed` "h <= most" and "-h <= -least" per node, to `emit` one equality where both are one level; returns the nodes. */
export function boundsRows(site: Site, { at, least = null, most = null }: BoundsCondition, emit: Emit, signed: Emit): Result<Int32Array> {
  if (least === null && most === null) return fail('no-bound', 'bounds need a lowest or a highest level', null, 'give "least", "most" or both')
  if (least !== null && most !== null && least > most) return fail('bounds-crossed', `the lowest level ${least} is above the highest ${most}`)
  const nodes = nodesAt(site, at)
  if (!nodes.ok) return nodes
  for (const n of nodes.value) {
    if (least !== null && least === most) emit([n], [1], heightOf(site, least))
    else {
      if (most !== null) signed([n], [1], heightOf(site, most))
      if (least !== null) signed([n], [-1], -heightOf(site, least))
    }
  }
  return nodes
}
