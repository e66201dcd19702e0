/**
 * Storeys drawn over each other on one layer, each at its own height: read together, the lines of one would cut the panels
 * of the other. Lines whose heights lie in separate bands, each with faces that look like panels, over one another in plan,
 * are storeys; the same lines again at another height are a repeat and no question; a roof in space has lines that slope.
 */
import { cleanShare, leastStorey_m, sameExtent } from '../../base/geometry/tolerance.ts'
import { significant } from '../../base/decimal.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing } from '../drawing.ts'
import { counted } from '../lines/words.ts'
import { likelyMetres, measure, type Guess, type Measuring } from './which-guess.ts'
import { score, type Box, type Measure } from './which-measure.ts'
import { compact, part, type Kept } from './which-part.ts'

/** More bands than these are a model, not storeys. */
const mostBands = 24

interface Band {
  readonly low: number
  readonly high: number
}

/** The storey to read; null where there are not several. */
export function* storeysGuess(drawing: Drawing, how: Measuring): Steps<Guess | null> {
  const heights = heightsOfLines(drawing, leastStorey_m / (how.metres * how.unit.factor))
  if (heights === null) return null
  const { bands, bandOf } = heights
  const only = (band: number): Kept => keptBy(bandOf, (own) => own === band)
  for (const metres of likelyMetres(how)) {
    const found: { band: number; own: Measure }[] = []
    for (let band = 0; band < bands.length; band += 1) {
      const own = yield* measure(compact(part(drawing, only(band))), { ...how, metres }, Infinity)
      if (own !== null && own !== 'snaps farther' && own.groups.length > 0) found.push({ band, own })
    }
    if (found.length < 2) continue
    found.sort((p, q) => score(q.own) - score(p.own) || p.band - q.band)
    const [first] = found
    const next = found.slice(1).find(({ own }) => overlap(first.own.groups[0].box, own.groups[0].box) > 0.5)
    if (next === undefined) return null
    const both = yield* measure(compact(part(drawing, keptBy(bandOf, (band) => band === first.band || band === next.band))), { ...how, metres }, Infinity)
    const isRepeat = both !== null && both !== 'snaps farther' && both.panels === first.own.panels && Math.abs(both.area - first.own.area) <= cleanShare * first.own.area
    if (isRepeat) return null
    const { factor } = how.unit
    const at = (band: number): string => `at ${significant(bands[band].low * factor, 6)}${bands[band].high - bands[band].low <= sameExtent * bands[band].high ? '' : ` to ${significant(bands[band].high * factor, 6)}`}`
    const panels = first.own.groups[0].panels
    return {
      kept: only(first.band), isOpen: 2 * score(next.own) >= score(first.own), why: 'storey not read',
      words: `the storey ${at(first.band)} is read: ${counted(panels, 'face', 'faces')} that look like panels; the next best, ${at(next.band)}, has ${next.own.groups[0].panels}`,
      options: [first, next].map(({ band }) => `--between ${significant(bands[band].low * factor, 12)},${significant(bands[band].high * factor, 12)}`),
      where: [centre(first.own.groups[0].box)],
    }
  }
  return null
}

interface Bands {
  readonly bands: readonly Band[]
  readonly bandOf: { readonly segments: Int32Array; readonly outlines: Int32Array; readonly holes: Int32Array }
}

/** Heights of lines in bands at least `gap` apart, in the drawing's numbers; null where there is one, or where lines rise from one to another. */
function heightsOfLines({ points, segments, outlines, holes }: Drawing, gap: number): Bands | null {
  const levels = new Set<number>()
  for (const list of [segments, outlines.point, holes.point]) {
    for (const p of list) levels.add(points[3 * p + 2])
    // A model in space has as many heights as nodes.
    if (levels.size > 10_000) return null
  }
  const sorted = Float64Array.from(levels).sort()
  const bands: { low: number; high: number }[] = []
  for (const z of sorted) {
    const last = bands.at(-1)
    if (last === undefined || z - last.high >= gap) bands.push({ low: z, high: z })
    else last.high = z
  }
  if (bands.length < 2 || bands.length > mostBands) return null
  const bandAt = (p: number): number => bands.findIndex(({ high }) => points[3 * p + 2] <= high)
  let rising = 0
  const ofSegments = new Int32Array(segments.length / 2)
  for (let i = 0; i < ofSegments.length; i += 1) {
    ofSegments[i] = bandAt(segments[2 * i])
    if (ofSegments[i] !== bandAt(segments[2 * i + 1])) rising += 1
  }
  const ofLoops = ({ start, point }: Drawing['outlines']): Int32Array => Int32Array.from({ length: start.length - 1 }, (_, l) => {
    const own = bandAt(point[start[l]])
    for (let k = start[l] + 1; k < start[l + 1]; k += 1) {
      if (bandAt(point[k]) === own) continue
      rising += 1
      return own
    }
    return own
  })
  const bandOf = { segments: ofSegments, outlines: ofLoops(outlines), holes: ofLoops(holes) }
  return rising > 0 ? null : { bands, bandOf }
}

function keptBy({ segments, outlines, holes }: Bands['bandOf'], takes: (band: number) => boolean): Kept {
  const of = (list: Int32Array): Uint8Array => Uint8Array.from(list, (band) => (takes(band) ? 1 : 0))
  return { segments: of(segments), outlines: of(outlines), holes: of(holes) }
}

/** Area that two boxes share, over that of the smaller. */
function overlap(p: Box, q: Box): number {
  const width = Math.min(p.right, q.right) - Math.max(p.left, q.left), depth = Math.min(p.high, q.high) - Math.max(p.low, q.low)
  const area = ({ left, low, right, high }: Box): number => (right - left) * (high - low)
  return width > 0 && depth > 0 ? (width * depth) / Math.min(area(p), area(q)) : 0
}

const centre = ({ left, low, right, high }: Box): [number, number] => [(left + right) / 2, (low + high) / 2]
