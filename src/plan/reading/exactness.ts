/** How exactly a drawing seems to be drawn, from how its line ends meet, how straight its runs are and how round its numbers are. */
import { significant } from '../../base/decimal.ts'
import { inMillimetres } from '../lines/words.ts'
import type { Exactness } from '../read-plan.ts'

/** Coordinates looked at, evenly through the drawing. */
const sampleSize = 4000

/** Share of the coordinates that must be multiples: ends of chords and crossings are not. */
const mostOf = 0.95

/** Steps tried, in mm. */
const steps = [100, 10, 1, 0.1, 0.01, 0.001]

/** `x`, `y` in the plan's unit. */
export function digitOf(x: Float64Array, y: Float64Array, mmPerUnit: number): number | null {
  const stride = Math.ceil(x.length / sampleSize)
  for (const step of steps) {
    let multiples = 0, looked = 0
    for (let i = 0; i < x.length; i += stride) {
      for (const value of [x[i], y[i]]) {
        const times = (value * mmPerUnit) / step
        looked += 1
        // Doubles of survey coordinates in metres leave a billionth of a metre.
        if (Math.abs(times - Math.round(times)) <= Math.max(1e-6, Math.abs(times) * 1e-14)) multiples += 1
      }
    }
    if (looked > 0 && multiples >= mostOf * looked) return step
  }
  return null
}

/**
 * What is said of it: where the drawing is less exact than the plan tolerance, and where the user states a tolerance, so
 * that the two can be compared. `snaps`: the user has said how far ends may miss, so that they say nothing more.
 */
export function exactnessNotices({ meets_mm, straight_mm, digit_mm }: Exactness, tolerance_mm: number, { isStated, snaps }: { isStated: boolean; snaps: boolean }): string[] {
  const seems = Math.max(snaps ? 0 : meets_mm, straight_mm)
  if (!isStated && seems <= tolerance_mm) return []
  const parts = [
    meets_mm > 0 ? `line ends meet within ${inMillimetres(meets_mm)}` : 'all line ends meet',
    straight_mm > 0 ? `nodes of straight runs lie within ${inMillimetres(straight_mm)} of them` : 'runs are straight as written',
    digit_mm === null ? 'coordinates are no round numbers' : `coordinates are multiples of ${significant(digit_mm, 1)} mm`,
  ]
  const verdict = seems > tolerance_mm
    ? `more than the plan tolerance of ${inMillimetres(tolerance_mm)}; --plan-tolerance ${significant(Math.ceil(seems * 10 - 1e-6) / 10, 3)} would cover it`
    : `within the plan tolerance of ${inMillimetres(tolerance_mm)}`
  return [`How exactly the drawing is drawn: ${parts.join(', ')}: ${verdict}.`]
}
