/**
 * Levels of a list set against the plan: which order of its columns, and which unit, brings its places to the plan's nodes,
 * and which of the places that a level may mean is at one.
 */
import { NearPoints } from '../base/geometry/near-points.ts'
import { pointWithin_mm } from '../base/geometry/tolerance.ts'
import { conversion, type Unit } from '../base/length.ts'
import type { Levels, LevelRow, Options } from '../plan/project/options.ts'
import { parsedLength } from '../plan/project/wishes.ts'
import type { Plan } from '../plan/plan.ts'
import type { Point } from '../plan/project/condition.ts'

export interface LevelsOnPlan {
  readonly options: Options
  /** What was taken otherwise than it is written. */
  readonly notices: readonly string[]
}

interface Way {
  readonly rows: readonly LevelRow[]
  readonly unit: Unit
  /** null: as written. */
  readonly order: string | null
}

/** The options with their levels as they fit the plan best; as they are where another reading fits no better. */
export function levelsOnPlan(options: Options, plan: Plan): LevelsOnPlan {
  const { levels } = options
  if (levels === null || levels.rows.length === 0) return { options, notices: [] }
  const own = levels.unit ?? plan.unit
  const typed = options.levelsWithin === null ? null : parsedLength(options.levelsWithin, '--levels-within', plan.unit)
  const reach = typed !== null && typed.ok && typed.value > 0 ? typed.value : pointWithin_mm * conversion('mm', plan.unit)
  const near = new NearPoints(reach, plan.nodeCount)
  for (let n = 0; n < plan.nodeCount; n += 1) near.add(plan.x[n], plan.y[n])

  // Surveys are in metres whatever the plan is drawn in.
  const units: readonly Unit[] = levels.unit === null && plan.unit !== 'm' ? [own, 'm'] : [own]
  const ways = units.flatMap((unit): Way[] => [{ rows: levels.rows, unit, order: null }, ...(levels.otherwise ?? []).map(({ order, rows }) => ({ rows, unit, order }))])
  const count = ({ rows, unit }: Way): number => rows.reduce((sum, row) => sum + (placeOf(row, near, conversion(unit, plan.unit)) === null ? 0 : 1), 0)
  let best = ways[0], most = count(ways[0])
  for (const way of ways.slice(1)) {
    if (most === levels.rows.length) break
    const found = count(way)
    if (found > most) [best, most] = [way, found]
  }
  const factor = conversion(best.unit, plan.unit)
  const rows = best.rows.map((row) => ({ name: row.name, at: placeOf(row, near, factor) ?? row.at, level: row.level }))
  const said = [
    ...(best.order === null ? [] : [`its columns are read as ${best.order}`]),
    ...(best.unit === own ? [] : [`it is read in ${best.unit}`]),
  ]
  const notices = said.length === 0 ? [] : [`Levels of ${levels.source}: ${said.join(' and ')}, since ${most} of its ${rows.length} places then lie at nodes.`]
  return { options: { ...options, levels: { source: levels.source, unit: best.unit === plan.unit && levels.unit === null ? null : best.unit, rows } satisfies Levels }, notices }
}

/** The first of its places that is at a node, in the list's own unit. */
function placeOf({ at, elsewhere = [] }: LevelRow, near: NearPoints, factor: number): Point | null {
  return [at, ...elsewhere].find(([x, y]) => near.nearest(x * factor, y * factor) >= 0) ?? null
}
