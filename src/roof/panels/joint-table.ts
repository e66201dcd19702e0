/** The list of joints: one row a joint, in the plan's order. */
import { metres } from '../../base/length.ts'
import type { Steps } from '../../base/steps.ts'
import type { Table } from '../../base/table.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Roof } from '../answer/answer.ts'
import { ascending } from './ascending.ts'
import { norm } from './norm.ts'
import { foldWords, jointFolds } from './joint-folds.ts'
import type { PanelPlanes } from './panel-planes.ts'

/**
 * Columns: joint · from, to (nodes, the lower first) · length_m (true) · fold (ridge, valley, flush) · fold_deg (angle
 * between the normals of its panels) · dihedral_deg (angle of the two panels measured underneath, inside the building:
 * 180 - fold at a ridge, 180 + fold at a valley) · form_density_no_load (form force per plan length, 1 / plan unit;
 * positive at a valley) · form_force_no_load (the same times the plan length; a number without a unit, as large as the
 * jump of the slope). Form forces shape the roof and carry no load: they are no member forces. Where the drawing has bars
 * (`barWidth` per edge, in the plan's unit, NaN: none) bar_width_mm follows.
 */
export function* jointTable(plan: Plan, roof: Roof, planes: PanelPlanes, barWidth: Float64Array | null = null): Steps<Table> {
  const { jointCount, origin, x, y } = plan
  const { word, fold } = yield* jointFolds(plan, planes)
  const metre = metres[plan.unit]
  const from = new Int32Array(jointCount)
  const to = new Int32Array(jointCount)
  const length = new Float64Array(jointCount)
  const dihedral = new Float64Array(jointCount)
  const density = new Float64Array(jointCount)
  const force = new Float64Array(jointCount)
  for (let joint = 0; joint < jointCount; joint += 1) {
    const a = origin[2 * joint]
    const b = origin[2 * joint + 1]
    from[joint] = a
    to[joint] = b
    const planLength = norm(x[b] - x[a], y[b] - y[a])
    length[joint] = norm(x[b] - x[a], y[b] - y[a], roof.heights[b] - roof.heights[a]) * metre
    const angle = fold[joint]
    dihedral[joint] = word[joint] === 1 ? 180 - angle : 180 + angle
    // What is left at a flush joint is rounding, not a figure.
    const s = word[joint] === 0 ? 0 : roof.stress[joint]
    density[joint] = s
    force[joint] = s * planLength
  }
  const widths = barWidth === null ? null : barWidth.subarray(0, jointCount).map((w) => w * metre * 1000)
  const width = widths === null || widths.every(Number.isNaN) ? null : widths
  yield { stage: 'Listing joints', done: 1 }
  return {
    rows: jointCount,
    columns: [
      { kind: 'name', title: 'joint', letter: 'J', index: ascending(jointCount) },
      { kind: 'name', title: 'from', letter: 'N', index: from },
      { kind: 'name', title: 'to', letter: 'N', index: to },
      { kind: 'number', title: 'length_m', values: length, digits: { decimals: 6 } },
      { kind: 'word', title: 'fold', words: foldWords, index: word },
      { kind: 'number', title: 'fold_deg', values: fold, digits: { decimals: 7 } },
      { kind: 'number', title: 'dihedral_deg', values: dihedral, digits: { decimals: 7 } },
      { kind: 'number', title: 'form_density_no_load', values: density, digits: { significant: 9 } },
      { kind: 'number', title: 'form_force_no_load', values: force, digits: { significant: 9 } },
      ...(width === null ? [] : [{ kind: 'number', title: 'bar_width_mm', values: width, digits: { significant: 6 } } as const]),
    ],
  }
}
