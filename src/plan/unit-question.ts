/**
 * Whether the lengths of a drawing look as if it were in another unit or scale. Panels of glazed roofs have edges of
 * about a metre and a half; the bounds are common practice, no source.
 */
import { significant } from '../base/decimal.ts'
import { conversion, units, type Unit } from '../base/length.ts'
import type { Question } from '../base/repair.ts'

/** Shortest and longest edge, and the usual one, in metres. */
export const shortest_m = 0.1
export const longest_m = 20
const usual_m = 1.5

/** Scales that plans of roofs are drawn to. */
const scales = [5, 10, 20, 25, 50, 100, 200, 250, 500, 1000]

/**
 * The factor that makes the lengths likely: null when the middle half of them does not lie wholly outside 0.1 to 20 m, or
 * when no factor offered brings it inside; else that which brings the median nearest to 1.5 m. `lengths` in metres, sorted.
 */
function likelyFactor(lengths: Float64Array, factors: readonly number[]): number | null {
  const quantile = (share: number): number => lengths[Math.min(lengths.length - 1, Math.floor(share * lengths.length))]
  const [low, median, high] = [quantile(0.25), quantile(0.5), quantile(0.75)]
  if (lengths.length === 0 || !(high < shortest_m || low > longest_m)) return null
  const inside = factors.filter((factor) => low * factor >= shortest_m && high * factor <= longest_m)
  const miss = (factor: number): number => Math.abs(Math.log((median * factor) / usual_m))
  return inside.reduce<number | null>((best, factor) => (best === null || miss(factor) < miss(best) ? factor : best), null)
}

/** The unit that a model's numbers are likely in when `unit` cannot be right; null when it can. `lengths` in `unit`, sorted. */
export function likelyUnit(lengths: Float64Array, unit: Unit): Unit | null {
  const others = units.filter((other) => other !== unit)
  const factor = likelyFactor(lengths.map((length) => length * conversion(unit, 'm')), others.map((other) => conversion(other, unit)))
  return factor === null ? null : (others.find((other) => conversion(other, unit) === factor) ?? null)
}

/** A question about unit or scale, and what reading would be told when its first option is taken. */
export interface UnitDoubt {
  readonly question: Question
  readonly answer: { readonly unit: Unit } | { readonly scale: number }
  /** What taking it says. */
  readonly taken: string
}

/** The doubt about a model's unit, if there is one. `lengths`: the edges of the plan in its unit, sorted. */
export function unitQuestion(lengths: Float64Array, unit: Unit): UnitDoubt | null {
  const likely = likelyUnit(lengths, unit)
  if (likely === null) return null
  const as = range(lengths, conversion(likely, 'm'))
  return {
    question: {
      code: 'unit',
      message: `With the numbers in ${unit} half of the edges would be ${range(lengths, conversion(unit, 'm'))} long, which is not plausible; in ${likely} they are ${as}. Which is it?`,
      options: [`--unit ${likely}`, `--unit ${unit}`],
    },
    answer: { unit: likely },
    taken: `The numbers are taken to be in ${likely}, not in ${unit}, so that half of the edges are ${as} long.`,
  }
}

/** The doubt about the scale of a drawing on paper that was read at 1:1. `lengths` in metres, sorted. */
export function scaleQuestion(lengths: Float64Array): UnitDoubt | null {
  const likely = likelyFactor(lengths, scales)
  if (likely === null) return null
  const as = range(lengths, likely)
  return {
    question: {
      code: 'unit',
      message: `On paper half of the edges are ${range(lengths, 1)} long, which is not plausible for the panels themselves; drawn at 1:${likely} they are ${as}. Which is it?`,
      options: [`--scale 1:${likely}`, '--scale 1:1'],
    },
    answer: { scale: likely },
    taken: `The drawing is taken to be at 1:${likely}, so that half of the edges are ${as} long.`,
  }
}

/** The middle half of the lengths: "1.2 to 3.4 m". */
function range(lengths: Float64Array, toMetres: number): string {
  const at = (share: number): string => significant(lengths[Math.min(lengths.length - 1, Math.floor(share * lengths.length))] * toMetres, 3)
  return at(0.25) === at(0.75) ? `${at(0.5)} m` : `${at(0.25)} to ${at(0.75)} m`
}
