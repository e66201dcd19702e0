/** In which unit the plan is, and how the drawing's numbers become the plan's. */
import { significant } from '../base/decimal.ts'
import { conversion, metres, parseLength, units, type Unit } from '../base/length.ts'
import type { Repair } from '../base/repair.ts'
import { fail, ok, placed, type Result } from '../base/result.ts'
import type { Drawing } from './drawing.ts'
import type { ReadOptions } from './read-plan.ts'

export interface DrawingUnit {
  /** The plan's unit: the file's for models, metres for drawings on paper. */
  readonly unit: Unit
  /** Plan coordinates = drawing coordinates * factor; 1 for models, so that their numbers stay as they are. */
  readonly factor: number
  /** Who states the unit: a file's header is often wrong, and without any statement metres are a guess. */
  readonly statedBy: 'user' | 'file' | 'nobody'
  readonly repairs: readonly Repair[]
  readonly notices: readonly string[]
}

/**
 * The user's unit beats the file's; with neither, a model is taken to be in metres. Lengths on paper are in mm (or the
 * unit stated) and are multiplied by N of the scale 1:N. Fails when a scale is not positive or is given for a model.
 */
export function unitOfDrawing(drawing: Drawing, options: ReadOptions): Result<DrawingUnit> {
  const { scale, scaleFrom = null } = options
  if (scaleFrom !== null) return unitFromDistance(drawing, options, scaleFrom)
  if (scale !== null && !(scale > 0 && Number.isFinite(scale))) {
    return fail('bad-scale', `a scale of 1:${scale} cannot be`, null, 'write it like --scale 1:100')
  }
  if (drawing.onPaper) {
    const from = options.unit ?? drawing.unit ?? 'mm'
    const factor = conversion(from, 'm') * (scale ?? 1)
    // A unit that the user states is the unit of the thing drawn, so no scale is missing then.
    const notices = scale === null && options.unit === null ? ['No scale is given, so the sizes on paper are taken as they are (1:1).'] : []
    return ok({ unit: 'm', factor: from === 'mm' && scale !== null && scale % 1000 === 0 ? scale / 1000 : factor, statedBy: 'user', repairs: [], notices })
  }
  if (scale !== null && scale !== 1) {
    return fail('scale-of-model', `a ${drawing.format} file holds true sizes, so a scale of 1:${scale} has no meaning`, null, 'leave --scale out, or state its unit with --unit')
  }
  const unit = options.unit ?? drawing.unit
  if (unit !== null) return ok({ unit, factor: 1, statedBy: options.unit === null ? 'file' : 'user', repairs: [], notices: [] })
  const assumed: Repair = {
    code: 'unit-assumed', state: 'applied', count: 1, where: [],
    message: 'The file states no unit: metres are assumed (--unit says otherwise).',
  }
  return ok({ unit: 'm', factor: 1, statedBy: 'nobody', repairs: [assumed], notices: [] })
}

/** A length that agrees with a unit of the drawing to this share is that unit: four digits, more than a distance off a drawing has. */
const unitShare = 1e-4

/**
 * The unit from a true distance: factor = length / distance as drawn. Where that is a unit of length the numbers stay as
 * they are and only the unit changes; else they are multiplied.
 */
function unitFromDistance(drawing: Drawing, options: ReadOptions, { from, to, length }: NonNullable<ReadOptions['scaleFrom']>): Result<DrawingUnit> {
  if (options.scale !== null) return fail('two-scales', 'a scale and a true distance say the same twice', { field: '--scale-from' }, 'give one of --scale and --scale-from')
  const unit = drawing.onPaper ? 'm' : (options.unit ?? drawing.unit ?? 'm')
  const typed = typeof length === 'number' ? ok(length) : parseLength(length, unit, unit)
  if (!typed.ok) return { ok: false, problem: placed(typed.problem, { field: '--scale-from' }) }
  const drawn = Math.hypot(to[0] - from[0], to[1] - from[1])
  const factor = typed.value / drawn
  if (!(factor > 0 && Number.isFinite(factor))) {
    return fail('bad-scale', 'two points at one place, or a distance of nothing, give no scale', { field: '--scale-from' }, 'name two points apart and a length above 0')
  }
  const inMetres = factor * metres[unit]
  const same = drawing.onPaper ? undefined : units.find((other) => Math.abs(inMetres / metres[other] - 1) <= unitShare)
  const one = `By the two points, ${significant(drawn, 6)} as drawn are ${significant(typed.value, 6)} ${unit}`
  if (same !== undefined) return ok({ unit: same, factor: 1, statedBy: 'user', repairs: [], notices: [`${one}: the drawing is in ${same}.`] })
  return ok({ unit, factor, statedBy: 'user', repairs: [], notices: [`${one}: every coordinate is multiplied by ${significant(factor, 6)}.`] })
}

/** Millimetres in one unit of the plan. */
export function millimetresPer(unit: Unit): number {
  return metres[unit] * 1000
}
