/**
 * A first guess at which lines of a drawing are the panels: which of its layers, and which of the figures on them.
 *
 * Of the layers the one with the most faces that look like panels is taken, with others that complete it: lines that divide
 * its panels, close its loose ends or carry more panels of the kind beside them. Where all lines together are one clean
 * figure nothing is guessed. Each layer is measured alone, so that a hatch spoils nothing but its own.
 *
 * Tried and dropped: all lines cut once and every layer traced out of that. One exploded hatch stops the cutting of all, and
 * the snap distance of furniture joins what is no roof's.
 */
import { alikeSizes, cleanShare, sameExtent } from '../base/geometry/tolerance.ts'
import type { Steps } from '../base/steps.ts'
import type { Drawing } from './drawing.ts'
import { lineFrame } from './line-work-frame.ts'
import { counted } from './line-work-words.ts'
import type { DrawingUnit } from './unit-of-drawing.ts'
import { onLayers, part, type Kept } from './which-lines-part.ts'
import { linesMeasured, score, type Box, type Group, type Measure } from './which-lines-measure.ts'

export interface Guess {
  readonly kept: Kept
  /** Whether the next best scores so high that people must say. */
  readonly isOpen: boolean
  /** "layer GLAZING is read: 96 faces that look like panels". */
  readonly words: string
  /** The options that take one or the other, as typed, without --leave. */
  readonly options: readonly string[]
  /** What is left out is so for this reason. */
  readonly why: string
  /** Where the faces that look like panels lie: the middle of each group read, in plan coordinates. */
  readonly where: readonly (readonly [number, number])[]
}

export interface Measuring {
  readonly unit: DrawingUnit
  readonly snap_mm: number | null
  readonly tolerance_mm: number
  /** Metres in one unit of the plan. */
  readonly metres: number
}

/** More layers than these without a panel on any of them are not tried together. */
const mostTogether = 12

/** The layers to read; null where there is nothing to choose. */
export function* layersGuess(drawing: Drawing, how: Measuring): Steps<Guess | null> {
  const used = layersWithLines(drawing)
  if (used.length < 2) return null
  const measured = function* (takes: (layer: number) => boolean): Steps<Measure | null> {
    return yield* measure(part(drawing, onLayers(drawing, takes)), how)
  }
  const alone = new Map<number, Measure>()
  for (const layer of used) {
    const own = yield* measured((l) => l === layer)
    if (own !== null) alone.set(layer, own)
  }
  const whole = alone.size === used.length ? yield* measured(() => true) : null
  const sum = [...alone.values()].reduce((total, { panels }) => total + panels, 0)
  if (whole !== null && isClean(whole) && whole.groups.length === 1 && whole.panels >= sum) return null

  const scores = new Map([...alone].map(([layer, own]) => [layer, score(own)]))
  const byScore = (p: number, q: number): number => (scores.get(q) ?? 0) - (scores.get(p) ?? 0) || p - q
  const order = [...alone.keys()].sort(byScore)
  let taken: Set<number>
  let own: Measure
  const [first] = order
  const best = first === undefined ? undefined : alone.get(first)
  if (best === undefined) return null
  if (best.groups.length === 0) {
    const together = yield* lessLayers(used, whole, measured)
    if (together === null) return null
    ;({ taken, own } = together)
  } else {
    taken = new Set([first])
    own = best
    for (const layer of order.slice(1)) {
      const other = alone.get(layer)
      if (other === undefined || (other.panels > 0 && !areAlike(own.size, other.size))) continue
      const both = yield* measured((l) => taken.has(l) || l === layer)
      if (both === null || !completes(own, other, both)) continue
      taken.add(layer)
      own = both
    }
  }
  const rest = used.filter((layer) => !taken.has(layer))
  if (rest.length === 0) return null
  const name = (layer: number): string => drawing.layers[layer]
  const [next] = rest.filter((layer) => (scores.get(layer) ?? 0) > 0).sort(byScore)
  const nextPanels = next === undefined ? 0 : (alone.get(next)?.groups[0]?.panels ?? 0)
  const nextScore = next === undefined ? 0 : (scores.get(next) ?? 0)
  const isOpen = next !== undefined && 2 * nextScore >= score(own)
  const names = listed([...taken].sort((p, q) => p - q).map(name))
  const what = `${taken.size === 1 ? 'layer' : 'layers'} ${names} ${taken.size === 1 ? 'is' : 'are'} read: ${counted(own.panels, 'face', 'faces')} that look like panels`
  const then = next === undefined ? 'no other layer has any' : `the next best, ${name(next)}, has ${nextPanels}`
  const layer = (l: number): string => `--layer ${quotedOption(name(l))}`
  return {
    kept: onLayers(drawing, (l) => taken.has(l)), isOpen, words: `${what}; ${then}`,
    options: next === undefined ? [] : [[...taken].map(layer).join(' '), layer(next)], why: 'layer not read', where: own.groups.map(({ box }) => centre(box)),
  }
}

/** The figures to read among those of one choice of layers; null where all are. */
export function* figuresGuess(drawing: Drawing, how: Measuring): Steps<Guess | null> {
  const found = yield* measure(drawing, how)
  if (found === null || found.panels === 0) return null
  const { groups, groupOfSegment, groupOfOutline, groupOfHole } = found
  const [first] = groups
  // Figures of the roof's own kind are further parts of it; copies of it in a row are other storeys, or other states.
  const copies = groups.slice(1).filter((group) => isCopy(first, group))
  const parts = new Set(groups.flatMap((group, k) => (k === 0 || (isPart(first, group) && !copies.includes(group)) ? [k] : [])))
  const [rival] = groups.filter((_, k) => !parts.has(k))
  const takes = (group: number): 0 | 1 => (group >= 0 ? parts.has(group) : group !== -2) ? 1 : 0
  const kept: Kept = { segments: Uint8Array.from(groupOfSegment, takes), outlines: Uint8Array.from(groupOfOutline, takes), holes: Uint8Array.from(groupOfHole, takes) }
  const isAside = groupOfSegment.includes(-2) || groupOfOutline.includes(-2)
  if (rival === undefined && !isAside) return null
  const main = groups.filter((_, k) => parts.has(k))
  const panels = main.reduce((sum, group) => sum + group.panels, 0)
  const isOpen = rival !== undefined && 2 * rival.panels * (1 - rival.loose) >= first.panels * (1 - first.loose)
  const what = `the figure ${placed(first.box)} is read: ${counted(panels, 'face', 'faces')} that look like panels`
  const then = rival === undefined ? 'no other has any' : `the next best, ${placed(rival.box)}, has ${rival.panels}`
  return {
    kept, isOpen, words: `${what}; ${then}`, why: 'figure not read',
    options: rival === undefined ? [] : [first, rival].map(({ box }) => `--window ${windowRound(box)}`), where: main.map(({ box }) => centre(box)),
  }
}

function* measure(drawing: Drawing, { unit, snap_mm, tolerance_mm, metres }: Measuring): Steps<Measure | null> {
  if (drawing.segments.length === 0 && drawing.outlines.layer.length === 0) return null
  const frame = lineFrame(drawing, unit, snap_mm, tolerance_mm)
  return frame.ok ? yield* linesMeasured(drawing, frame.value, metres) : null
}

function layersWithLines({ segmentLayer, outlines, holes }: Drawing): number[] {
  return [...new Set([...segmentLayer, ...outlines.layer, ...holes.layer])].sort((p, q) => p - q)
}

/** All layers less those that spoil the whole, one after another, for plans whose lines share out over several layers. */
function* lessLayers(
  used: readonly number[], whole: Measure | null, measured: (takes: (layer: number) => boolean) => Steps<Measure | null>,
): Steps<{ taken: Set<number>; own: Measure } | null> {
  if (used.length > mostTogether) return null
  let taken = new Set(used)
  let own = whole
  for (;;) {
    let best: { layer: number; own: Measure } | null = null
    for (const layer of taken) {
      const less = yield* measured((l) => taken.has(l) && l !== layer)
      if (less !== null && score(less) > (best === null ? (own === null ? 0 : score(own) * (1 + 1e-9)) : score(best.own))) best = { layer, own: less }
    }
    if (best === null) break
    const { layer } = best
    taken = new Set([...taken].filter((l) => l !== layer))
    own = best.own
  }
  return own === null || own.panels === 0 ? null : { taken, own }
}

const isClean = ({ length, loose, panels, faces }: Measure): boolean => loose <= cleanShare * length && panels >= (1 - cleanShare) * faces

/**
 * Whether a layer completes another: it bounds more panels with it, few of its lines stay loose, it hangs together with it
 * and, where the other was whole, divides its panels or adds panels of its own.
 */
function completes(own: Measure, other: Measure, both: Measure): boolean {
  const added = both.panels - own.panels
  if (added <= 0 || both.loose - own.loose > cleanShare * other.length || both.groups.length >= own.groups.length + other.groups.length + (other.panels > 0 ? 0 : 1)) return false
  if (other.panels > 0) return added >= other.panels
  return own.loose > cleanShare * own.length || both.area <= own.area * (1 + cleanShare)
}

const areAlike = (p: number, q: number): boolean => Math.max(p, q) <= alikeSizes * Math.min(p, q)

/** Whether a figure is as large as the first and stands beside it in a row. */
function isCopy(first: Group, group: Group): boolean {
  const [width, depth] = [first.box.right - first.box.left, first.box.high - first.box.low]
  const off = sameExtent * Math.max(width, depth)
  const same = Math.abs(group.box.right - group.box.left - width) <= off && Math.abs(group.box.high - group.box.low - depth) <= off
  return same && (Math.abs(group.box.left - first.box.left) <= off || Math.abs(group.box.low - first.box.low) <= off)
}

/** Whether a figure is of the first one's kind: clean, and its panels of about the same size. */
function isPart(first: Group, group: Group): boolean {
  return group.loose <= cleanShare && group.panels >= (1 - cleanShare) * group.faces && group.panels >= 4 && areAlike(first.size, group.size)
}

const centre = ({ left, low, right, high }: Box): [number, number] => [(left + right) / 2, (low + high) / 2]

const round = (value: number, up: number, step: number): number => Number(((up > 0 ? Math.ceil : Math.floor)(value / step + up * 0.02) * step).toPrecision(12))

const stepOf = ({ left, low, right, high }: Box): number => 10 ** Math.floor(Math.log10(Math.max(right - left, high - low)) - 1.5)

function windowRound(box: Box): string {
  const step = stepOf(box)
  return [round(box.left, -1, step), round(box.low, -1, step), round(box.right, 1, step), round(box.high, 1, step)].join(',')
}

function placed(box: Box): string {
  const step = stepOf(box)
  const at = (value: number): string => String(Number((Math.round(value / step) * step).toPrecision(12)))
  return `from ${at(box.left)},${at(box.low)} to ${at(box.right)},${at(box.high)}`
}

function listed(names: readonly string[]): string {
  return names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} and ${names[names.length - 1]}`
}

const quotedOption = (name: string): string => (/^[\w.+-]+$/.test(name) ? name : `"${name}"`)
