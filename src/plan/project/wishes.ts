/** Brief and options made one: what is wished of this plan's roof, with every length in the plan's unit. */
import { conversion, parseLength, type Unit } from '../../base/length.ts'
import { fail, ok, placed, type Result } from '../../base/result.ts'
import type { ReadOptions } from '../read-plan.ts'
import type { Brief, Shape } from './brief.ts'
import { linesOf } from './lines-chosen.ts'
import { inUnit, type Condition, type LevelCondition, type Point } from './condition.ts'
import type { TypedLength } from './keep-options.ts'
import type { NamedFile, Options } from './options.ts'

export interface Wishes {
  /** The plan's unit, in which all lengths here are. */
  readonly unit: Unit
  /** null: conditions without a level stand at 0, and the rise counts from the lowest node of the outer rim. */
  readonly datum: number | null
  /** > 0; null: the default rise. */
  readonly rise: number | null
  readonly down: boolean
  readonly shape: Shape | null
  readonly target: 'input' | 'none' | NamedFile | null
  /** Set by --pitch, whose condition is among the conditions too. */
  readonly pitch: { readonly pitch_deg: number; readonly bearing_deg: number } | null
  readonly conditions: readonly Condition[]
  readonly flat_mm: number
  /** null: the default. */
  readonly decimals: number | null
  readonly near: boolean
  readonly csv: 'comma' | 'semicolon'
  readonly full: boolean
}

/** Corner out of plane that a panel may have when nobody says otherwise, in mm: our own choice. */
export const defaultFlat_mm = 1

/** Downhill direction of --pitch without --bearing: south. Our own choice. */
export const defaultBearing_deg = 180

/**
 * The wishes of brief and options for a plan in `unit`. Options win: a --rim takes the place of the brief's level
 * conditions on the outer rim (free: of them and nothing else). Fails with the option's name where a value is no use.
 */
export function wishesOf(brief: Brief, options: Options, unit: Unit): Result<Wishes> {
  const fromBrief = conversion(brief.unit ?? unit, unit)
  const typed = (value: TypedLength, option: string): Result<number> => parsedLength(value, option, unit)

  const datum = options.datum === null ? ok(scaled(brief.datum, fromBrief)) : typed(options.datum, '--datum')
  if (!datum.ok) return datum
  const rise = options.rise === null ? ok(scaled(brief.rise, fromBrief)) : typed(options.rise, '--rise')
  if (!rise.ok) return rise
  if (rise.value !== null && !(rise.value > 0)) {
    return fail('negative-rise', 'the rise must be more than 0', { field: '--rise' }, 'use --down for a roof that hangs from its rim')
  }
  const pitch = pitchOf(options)
  if (!pitch.ok) return pitch

  const conditions: Condition[] = []
  for (const condition of brief.conditions) {
    if (condition.off === true || (options.rim !== null && levelsOuterRim(condition))) continue
    conditions.push(inUnit(condition, fromBrief))
  }
  const rim = rimCondition(options.rim, typed)
  if (!rim.ok) return rim
  if (rim.value !== null) conditions.push(rim.value)
  const levels = levelConditions(options, unit)
  if (!levels.ok) return levels
  for (const condition of levels.value) conditions.push(condition)
  if (pitch.value !== null) conditions.push({ name: 'pitch', soft: null, kind: 'plane', at: { panels: 'all' }, ...pitch.value })

  return ok({
    unit,
    datum: datum.value,
    rise: rise.value,
    down: options.down || (options.rise === null && brief.down),
    shape: options.shape ?? brief.shape,
    target: options.target,
    pitch: pitch.value,
    conditions,
    flat_mm: options.flat_mm ?? brief.flat_mm ?? defaultFlat_mm,
    decimals: options.decimals,
    near: options.near,
    csv: options.csv,
    full: options.full,
  })
}

/** How the drawing is to be read; `fileUnit` is the unit that the file states. Voids of the options take the brief's place. */
export function readOptionsOf(brief: Brief, options: Options, fileUnit: Unit | null): ReadOptions {
  const unit = options.unit ?? fileUnit ?? 'm'
  const factor = conversion(brief.unit ?? unit, unit)
  const within = options.levelsWithin === null ? null : parsedLength(options.levelsWithin, '--levels-within', unit)
  const levelsWithin = within !== null && within.ok ? within.value : null
  const voids = options.voids ?? (brief.voids ?? []).map(([x, y]): Point => [x * factor, y * factor])
  return {
    unit: options.unit, scale: options.scale, snap_mm: options.snap_mm, voids, accept: options.accept, leave: options.leave, scaleFrom: options.scaleFrom,
    planTolerance_mm: options.planTolerance_mm, levelsWithin_mm: typeof levelsWithin === 'number' && levelsWithin > 0 ? levelsWithin * conversion(unit, 'mm') : null, ...linesOf(brief, options, factor),
  }
}

const scaled = (value: number | null, factor: number): number | null => (value === null ? null : value * factor)

/** A typed length in the plan's unit; the problem's place is the option. */
export function parsedLength(value: TypedLength, option: string, unit: Unit): Result<number> {
  if (typeof value === 'number') return ok(value)
  const length = parseLength(value, unit, unit)
  return length.ok ? length : { ok: false, problem: placed(length.problem, { field: option }) }
}

function pitchOf({ pitch_deg, bearing_deg }: Options): Result<Wishes['pitch']> {
  if (pitch_deg === null) {
    if (bearing_deg === null) return ok(null)
    return fail('bearing-alone', 'a bearing needs a pitch', { field: '--bearing' }, 'give --pitch too')
  }
  if (!(pitch_deg >= 0 && pitch_deg < 90)) return fail('out-of-range', `a pitch is between 0 and 90 degrees, not ${pitch_deg}`, { field: '--pitch' })
  const bearing = bearing_deg ?? defaultBearing_deg
  if (!Number.isFinite(bearing)) return fail('out-of-range', 'a bearing is an angle in degrees', { field: '--bearing' })
  return ok({ pitch_deg, bearing_deg: bearing })
}

function levelsOuterRim(condition: Condition): boolean {
  return condition.kind === 'level' && 'rim' in condition.at && condition.at.rim === 'outer'
}

function rimCondition(rim: Options['rim'], typed: (value: TypedLength, option: string) => Result<number>): Result<LevelCondition | null> {
  if (rim === null || rim === 'free') return ok(null)
  const at = { name: 'rim level', soft: null, kind: 'level', at: { rim: 'outer' } } as const
  if (rim === 'level') return ok({ ...at, level: null })
  const level = typed(rim.level, '--rim')
  return level.ok ? ok({ ...at, level: level.value }) : level
}

/** A level condition for each row, called by file and row. */
function levelConditions({ levels, levelsWithin }: Options, unit: Unit): Result<readonly LevelCondition[]> {
  if (levels === null) return ok([])
  const within = levelsWithin === null ? ok(null) : parsedLength(levelsWithin, '--levels-within', unit)
  if (!within.ok) return within
  if (within.value !== null && !(within.value > 0)) return fail('out-of-range', 'this distance must be more than 0', { field: '--levels-within' })
  const factor = conversion(levels.unit ?? unit, unit)
  const reach = within.value === null ? {} : { within_mm: within.value * conversion(unit, 'mm') }
  return ok(levels.rows.map((row, i): LevelCondition => ({
    name: `levels ${levels.source} row ${row.name ?? i + 1}`,
    soft: null,
    kind: 'level',
    at: { nodes: [[row.at[0] * factor, row.at[1] * factor]], ...reach },
    level: row.level * factor,
  })))
}
