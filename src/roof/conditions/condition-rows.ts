/** All conditions of a plan as rows: the hard ones, the soft ones with their weights, and those that bound one side only. */
import { never } from '../../base/assert.ts'
import { ok, placed, type Result } from '../../base/result.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Condition } from '../../plan/project/condition.ts'
import type { BentCondition, BentRows } from './bent.ts'
import { boundsRows } from './bounds.ts'
import { coplanarRows } from './coplanar.ts'
import { equalRows } from './equal.ts'
import { fallRows } from './fall.ts'
import { flushRows } from './flush.ts'
import { formForceRows } from './form-force.ts'
import { levelRows } from './level.ts'
import { noPondingRows } from './no-ponding.ts'
import { oneWayJoints, oneWayRows } from './one-way.ts'
import { jointsAt } from './places.ts'
import { planeRows } from './plane.ts'
import { profileRows } from './profile.ts'
import { rowList, type Emit, type Rows } from './rows.ts'
import { siteOf, type Site } from './site.ts'
import { slopeRows } from './slope.ts'
import { straightRows } from './straight.ts'

export interface SoftRows extends Rows {
  /** Weight of each row's condition; infinite where a hard one stands among them. */
  readonly softWeight: Float64Array
}

/** What a condition touches, for lists and pictures. */
export interface Held {
  readonly name: string
  readonly kind: string
  readonly soft: boolean
  readonly nodes: Int32Array
  /** Joints that it names; null: its kind holds no joints. */
  readonly joints: Int32Array | null
}

export interface ConditionRows {
  readonly hard: Rows
  readonly soft: SoftRows
  /** Rows that read "sum of weight * h <= value": bounds, folds of which the way alone is asked; hard and soft. */
  readonly signed: SoftRows
  /** Conditions whose rows depend on the roof at hand. */
  readonly bent: readonly BentCondition[]
  /** One per condition, in the order given: the `condition` of the rows counts in it. */
  readonly held: readonly Held[]
}

/**
 * Rows of the conditions, whose lengths and points are in the plan's unit, as is `datum`. Fails where a place does not
 * exist on the plan; the problem's place has the condition's name.
 */
export function conditionRows(plan: Plan, conditions: readonly Condition[], datum: number): Result<ConditionRows> {
  const site = siteOf(plan, datum)
  const hard = rowList()
  const soft = rowList()
  const signed = rowList()
  const held: Held[] = []
  const bent: BentCondition[] = []
  for (const [index, condition] of conditions.entries()) {
    const nodes = rowsOf(site, condition, (condition.soft === null ? hard : soft).emit(index), signed.emit(index), (rows) => bent.push({ condition: index, softWeight: condition.soft ?? Infinity, rows }))
    if (!nodes.ok) return { ok: false, problem: placed(nodes.problem, { entity: `condition "${condition.name}"` }) }
    const joints = condition.kind === 'one-way' ? oneWayJoints(plan, condition.at) : 'joints' in condition.at ? jointsAt(plan, condition.at) : null
    held.push({
      name: condition.name, kind: condition.kind, soft: condition.soft !== null, nodes: nodes.value, joints: joints?.ok === true ? joints.value : null,
    })
  }
  const weighted = (rows: Rows): SoftRows => ({ ...rows, softWeight: Float64Array.from(rows.condition, (index) => conditions[index].soft ?? Infinity) })
  return ok({ hard: hard.rows(), soft: weighted(soft.rows()), signed: weighted(signed.rows()), bent, held })
}

function rowsOf(site: Site, condition: Condition, emit: Emit, signed: Emit, bend: (rows: BentRows) => void): Result<Int32Array> {
  const bending = (made: Result<{ nodes: Int32Array; bent: BentRows }>): Result<Int32Array> => {
    if (!made.ok) return made
    bend(made.value.bent)
    return ok(made.value.nodes)
  }
  switch (condition.kind) {
    case 'level': return levelRows(site, condition, emit)
    case 'fall': return fallRows(site, condition, emit)
    case 'straight': return straightRows(site, condition, emit)
    case 'equal': return equalRows(site, condition, emit)
    case 'coplanar': return coplanarRows(site, condition, emit)
    case 'plane': return planeRows(site, condition, emit)
    case 'flush': return flushRows(site, condition, emit)
    case 'profile': return profileRows(site, condition, emit)
    case 'form-force': return formForceRows(site, condition, emit, signed)
    case 'bounds': return boundsRows(site, condition, emit, signed)
    case 'one-way': return oneWayRows(site, condition, signed)
    case 'slope': return bending(slopeRows(site, condition))
    case 'no-ponding': return bending(noPondingRows(site, condition))
    default: return never(condition)
  }
}
