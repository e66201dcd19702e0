/** Whether hard conditions leave the scale of the roof free. */
import { clashHeight } from '../../base/geometry/tolerance.ts'
import type { Rows } from './rows.ts'

/** True when the rows stay true as all heights are multiplied about the datum: every right-hand side is 0. */
export function homogeneous(rows: Rows): boolean {
  return rows.value.every((value) => Math.abs(value) <= clashHeight)
}
