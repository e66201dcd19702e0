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
import { alikeSizes, cleanShare, sameExtent } from '../../base/geometry/tolerance.ts'
import { metres, units } from '../../base/length.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing } from '../drawing.ts'
import { lineFrame } from '../lines/frame.ts'
import { counted } from '../lines/words.ts'
import type { DrawingUnit } from '../unit-of-drawing.ts'
import { compact, isEmpty, part, type Kept } from './which-part.ts'
import { bitOf, touchedClasses } from './which-touch.ts'
import { lineEnds, linesMeasured, nothingBound, score, type Box, type Group, type Measure } from './which-measure.ts'

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

/** More layers than these that bound no panel each are not tried together: every one of them is tried without. */
const mostTogether = 6

/** The layers to read; null where there is nothing to choose. */
export function* layersGuess(drawing: Drawing, how: Measuring): Steps<Guess | null> {
  for (const metres of likelyMetres(how)) {
    const found = yield* layersOf(drawing, { ...how, metres })
    if (found !== 'no panels') return found
  }
  return null
}

/** The unit stated, then the others: a file's word is often wrong, and in a wrong unit nothing looks like a panel. */
export function likelyMetres({ unit, metres: stated }: Measuring): number[] {
  return unit.statedBy === 'user' ? [stated] : [stated, ...units.map((each) => metres[each]).filter((each) => each !== stated)]
}

function* layersOf(drawing: Drawing, how: Measuring): Steps<Guess | null | 'no panels'> {
  const classes = classesOf(drawing)
  const used = classes.list.map((_, c) => c)
  if (used.length < 2) return null
  const kept = (takes: (c: number) => boolean): Kept => {
    const wanted = Uint8Array.from(classes.list, (_, c) => (takes(c) ? 1 : 0))
    const by = (list: Int32Array): Uint8Array => {
      const own = new Uint8Array(list.length)
      for (let i = 0; i < list.length; i += 1) own[i] = wanted[list[i]]
      return own
    }
    return { segments: by(classes.segments), outlines: by(classes.outlines), holes: by(classes.holes) }
  }
  const strokes = yield* strokesOf(drawing, classes, how)
  const measured = function* (takes: (c: number) => boolean): Steps<Measure | null> {
    yield { stage: 'Looking for the panels', done: 0 }
    const own = kept(takes)
    const lone = strokes === null ? 0 : strokes.leaveOut(own.segments, takes)
    if (lone > 0 && isEmpty(own)) return nothingBound(lone)
    const chosen = part(drawing, own)
    yield { stage: 'Looking for the panels', done: 0 }
    const small = compact(chosen)
    yield { stage: 'Looking for the panels', done: 0 }
    const found = yield* measure(small, how, strokes === null ? Infinity : strokes.reach)
    if (found === 'snaps farther') return yield* measure(compact(part(drawing, kept(takes))), how, Infinity) as Steps<Measure | null>
    return found === null ? null : { ...found, length: found.length + lone, loose: found.loose + lone }
  }
  const alone = new Map<number, Measure>()
  for (const c of used) {
    const own = yield* measured((k) => k === c)
    if (own !== null) alone.set(c, own)
  }
  const sumOf = (of: (own: Measure) => number): number => [...alone.values()].reduce((total, own) => total + of(own), 0)
  // Loose ends of a small layer are few among all: they count against that layer.
  const shortest = Math.min(...[...alone.values()].map(({ length }) => length))
  const isLone = strokes !== null && strokes.loneLength(() => true) > cleanShare * shortest
  const whole = alone.size === used.length && !isLone ? yield* measured(() => true) : null
  if (whole !== null && isClean(whole) && whole.loose <= cleanShare * shortest && whole.groups.length === 1 && whole.bends <= sumOf(({ bends }) => bends) && whole.panels >= sumOf(({ panels }) => panels) && whole.area >= (1 - cleanShare) * sumOf(({ area }) => area)) return null

  const scores = new Map([...alone].map(([c, own]) => [c, score(own)]))
  const byScore = (p: number, q: number): number => (scores.get(q) ?? 0) - (scores.get(p) ?? 0) || p - q
  const order = [...alone.keys()].sort(byScore)
  const [first] = order
  const best = first === undefined ? undefined : alone.get(first)
  if (first === undefined || best === undefined) return 'no panels'
  let choice: Choice | null = best.groups.length === 0 ? null : { taken: new Set([first]), own: best }
  if (choice !== null) choice = yield* completed(choice, order, alone, measured, strokes)
  // Joints may share out over layers of which none bounds a face.
  const open = used.filter((c) => (alone.get(c)?.groups.length ?? 0) === 0)
  const together = yield* lessClasses(open, measured)
  let rival = 0
  if (together !== null && (choice === null || score(together.own) > score(choice.own))) {
    rival = choice === null ? 0 : score(choice.own)
    choice = yield* completed(together, order, alone, measured, strokes)
  }
  if (choice === null) return 'no panels'
  const { taken, own } = choice
  const rest = used.filter((c) => !taken.has(c))
  if (rest.length === 0) return null
  const [next] = rest.filter((c) => (scores.get(c) ?? 0) > 0).sort(byScore)
  const nextScore = Math.max(rival, next === undefined ? 0 : (scores.get(next) ?? 0))
  const chosen = used.filter((c) => taken.has(c))
  const names = listed(chosen.map((c) => classes.list[c].name))
  const what = `${chosen.length === 1 ? 'layer' : 'layers'} ${names} ${chosen.length === 1 ? 'is' : 'are'} read: ${counted(own.panels, 'face', 'faces')} that look like panels`
  const then = next === undefined ? 'no other layer has any' : `the next best, ${classes.list[next].name}, has ${alone.get(next)?.groups[0]?.panels ?? 0}`
  return {
    kept: kept((c) => taken.has(c)), isOpen: 2 * nextScore >= score(own), words: `${what}; ${then}`,
    options: next === undefined ? [] : [optionsFor(chosen.map((c) => classes.list[c])), optionsFor([classes.list[next]])],
    why: 'layer not read', where: own.groups.map(({ box }) => centre(box)),
  }
}

interface Choice {
  readonly taken: Set<number>
  readonly own: Measure
}

type Measures = (takes: (c: number) => boolean) => Steps<Measure | null>

/** A choice with all that completes it. */
function* completed({ taken, own }: Choice, order: readonly number[], alone: ReadonlyMap<number, Measure>, measured: Measures, strokes: Strokes | null): Steps<Choice> {
  let at: Choice = { taken, own }
  for (const c of order) {
    const other = alone.get(c)
    if (at.taken.has(c) || other === undefined || (other.panels > 0 && !areAlike(at.own.size, other.size))) continue
    const before = at.taken
    // Strokes that would stay alone are loose whatever else comes of it (see `completes`).
    if (strokes !== null && strokes.loneLength((k) => k === c, (k) => before.has(k) || k === c) > at.own.loose + cleanShare * other.length) continue
    const both = yield* measured((k) => before.has(k) || k === c)
    if (both !== null && completes(at.own, other, both)) at = { taken: new Set([...before, c]), own: both }
  }
  return at
}

/** Open lines that touch none of the layers at hand: loose, whatever they are measured with. */
interface Strokes {
  /** Within what they were looked for, in the plan's unit. */
  readonly reach: number
  /** Takes them out of what is kept, and returns their length. */
  leaveOut(segments: Uint8Array, takes: (c: number) => boolean): number
  /** Length of those of some classes that touch no line of the classes beside them (absent: of the same). */
  loneLength(of: (c: number) => boolean, beside?: (c: number) => boolean): number
}

/** null where the lines have no place (see `lineFrame`). */
function* strokesOf(drawing: Drawing, classes: Classes, { unit, snap_mm, tolerance_mm }: Measuring): Steps<Strokes | null> {
  const frame = lineFrame(drawing, unit, snap_mm, tolerance_mm)
  if (!frame.ok) return null
  const { x, y, snap, rounding } = frame.value
  yield { stage: 'Sorting the lines', done: 0 }
  const ends = lineEnds(drawing)
  const { segments, outlines, holes } = drawing
  const loops = (own: Int32Array, start: Int32Array): number[] => Array.from(own).flatMap((c, l) => new Array<number>(start[l + 1] - start[l]).fill(c))
  const rings = [...loops(classes.outlines, outlines.start), ...loops(classes.holes, holes.start)]
  const classOf = new Int32Array(ends.a.length)
  classOf.set(rings)
  classOf.set(classes.segments, rings.length)
  yield { stage: 'Sorting the lines', done: 0 }
  const reach = 2 * snap + 8 * rounding
  const touched = (yield* touchedClasses(x, y, ends.a, ends.b, classOf, reach)).subarray(ends.a.length - segments.length / 2)
  const length = new Float64Array(touched.length)
  for (let i = 0; i < length.length; i += 1) length[i] = Math.hypot(x[segments[2 * i + 1]] - x[segments[2 * i]], y[segments[2 * i + 1]] - y[segments[2 * i]])
  const bitsOf = (takes: (c: number) => boolean): number => classes.list.reduce((bits, _, c) => (takes(c) ? bits | bitOf(c) : bits), 0)
  return {
    reach: snap,
    leaveOut: (kept, takes) => {
      const bits = bitsOf(takes)
      let sum = 0
      for (let i = 0; i < touched.length; i += 1) {
        if (kept[i] === 0 || (touched[i] & bits) !== 0) continue
        kept[i] = 0
        sum += length[i]
      }
      return sum
    },
    loneLength: (of, beside = of) => {
      const bits = bitsOf(beside)
      const own = classes.list.map((_, c) => of(c))
      let sum = 0
      for (let i = 0; i < touched.length; i += 1) if (own[classes.segments[i]] && (touched[i] & bits) === 0) sum += length[i]
      return sum
    },
  }
}

/** Lines of one layer; of one look on it, where a layer has a few. */
interface LineClass {
  /** "GLAZING", "0 in colour 5". */
  readonly name: string
  readonly layer: string
  readonly colour: string | null
  readonly lineType: string | null
}

interface Classes {
  readonly list: readonly LineClass[]
  /** Class of each segment, outline and hole. */
  readonly segments: Int32Array
  readonly outlines: Int32Array
  readonly holes: Int32Array
}

/** A layer with more looks than these is drawn by hand and means nothing by them. */
const mostLooks = 4

function classesOf({ layers, looks = [], segmentLayer, segmentLook, outlines, holes }: Drawing): Classes {
  const lookOf = (look: number | undefined): string => {
    const known = looks[look ?? 0]
    return known === undefined ? '' : `${known.colour}\n${known.lineType}`
  }
  const met = new Map<number, Map<string, number>>()
  const noted = new Set<number>()
  const note = (layer: number, look: number | undefined): void => {
    const key = layer * (looks.length + 1) + (look ?? 0)
    if (noted.has(key)) return
    noted.add(key)
    const own = met.get(layer) ?? new Map<string, number>()
    met.set(layer, own)
    if (!own.has(lookOf(look))) own.set(lookOf(look), -1)
  }
  segmentLayer.forEach((layer, i) => { note(layer, segmentLook?.[i]) })
  for (const { layer, look } of [outlines, holes]) layer.forEach((l, i) => { note(l, look?.[i]) })
  const list: LineClass[] = []
  for (const [layer, own] of [...met].sort(([p], [q]) => p - q)) {
    const isSplit = own.size > 1 && own.size <= mostLooks
    for (const look of own.keys()) {
      if (!isSplit && [...own.values()].some((c) => c >= 0)) {
        own.set(look, list.length - 1)
        continue
      }
      const [colour = '', lineType = ''] = look.split('\n')
      const sameColour = [...own.keys()].every((each) => each.split('\n')[0] === colour)
      const said = sameColour ? `in line type ${lineType}` : `in colour ${colour}`
      own.set(look, list.push({ name: isSplit ? `${layers[layer]} ${said}` : layers[layer], layer: layers[layer], colour: isSplit && !sameColour ? colour : null, lineType: isSplit && sameColour ? lineType : null }) - 1)
    }
  }
  const known = new Map<number, number>()
  const classOf = (layer: number, look: number | undefined): number => {
    const key = layer * (looks.length + 1) + (look ?? 0)
    const own = known.get(key) ?? met.get(layer)?.get(lookOf(look)) ?? 0
    known.set(key, own)
    return own
  }
  return {
    list, segments: Int32Array.from(segmentLayer, (layer, i) => classOf(layer, segmentLook?.[i])),
    outlines: Int32Array.from(outlines.layer, (layer, i) => classOf(layer, outlines.look?.[i])), holes: Int32Array.from(holes.layer, (layer, i) => classOf(layer, holes.look?.[i])),
  }
}

/** The options that choose these lines. */
function optionsFor(list: readonly LineClass[]): string {
  const distinct = (of: (each: LineClass) => string | null): string[] => [...new Set(list.map(of).filter((value) => value !== null))]
  return [
    ...distinct(({ layer }) => (layer === '' ? null : layer)).map((layer) => `--layer ${quotedOption(layer)}`),
    ...distinct(({ colour }) => colour).map((colour) => `--colour ${colour}`), ...distinct(({ lineType }) => lineType).map((name) => `--line-type ${quotedOption(name)}`),
  ].join(' ')
}

/** The figures to read among those of one choice of layers; null where all are. */
export function* figuresGuess(drawing: Drawing, how: Measuring): Steps<Guess | null> {
  let found: Measure | null = null
  for (const metres of likelyMetres(how)) if (found === null || found.panels === 0) found = yield* measure(drawing, { ...how, metres }, Infinity) as Steps<Measure | null>
  if (found === null || found.panels === 0) return null
  const { groups, groupOfSegment, groupOfOutline, groupOfHole } = found
  const [first] = groups
  // What lies inside the roof belongs to it. Figures of its own kind are further parts of it; copies of it in a row are other storeys, or other states.
  const copies = groups.slice(1).filter((group) => isCopy(first, group))
  const parts = new Set(groups.flatMap((group, k) => (k === 0 || (!group.isSheet && ( isInside(first, group) || (isPart(first, group) && !copies.includes(group)))) ? [k] : [])))
  const [rival] = groups.filter((_, k) => !parts.has(k))
  const takes = (group: number): 0 | 1 => (group >= 0 ? parts.has(group) : group !== -2) ? 1 : 0
  const kept: Kept = { segments: Uint8Array.from(groupOfSegment, takes), outlines: Uint8Array.from(groupOfOutline, takes), holes: Uint8Array.from(groupOfHole, takes) }
  const isAside = groupOfSegment.includes(-2) || groupOfOutline.includes(-2)
  if (rival === undefined && !isAside) return null
  const main = groups.filter((_, k) => parts.has(k))
  const panels = main.reduce((sum, group) => sum + group.panels, 0)
  const isOpen = rival !== undefined && !rival.isSheet && 2 * rival.panels * (1 - rival.loose) >= first.panels * (1 - first.loose)
  const what = `the figure ${placed(first.box)} is read: ${counted(panels, 'face', 'faces')} that look like panels`
  const then = rival === undefined ? 'no other has any' : `the next best, ${placed(rival.box)}, has ${rival.panels}`
  return {
    kept, isOpen, words: `${what}; ${then}`, why: 'figure not read',
    options: rival === undefined ? [] : [first, rival].map(({ box }) => `--window ${windowRound(box)}`), where: main.map(({ box }) => centre(box)),
  }
}

/** "snaps farther": these lines alone are joined within more than `most`. */
export function* measure(drawing: Drawing, { unit, snap_mm, tolerance_mm, metres }: Measuring, most: number): Steps<Measure | null | 'snaps farther'> {
  if (drawing.segments.length === 0 && drawing.outlines.layer.length === 0) return null
  const frame = lineFrame(drawing, unit, snap_mm, tolerance_mm)
  if (frame.ok && frame.value.snap > most) return 'snaps farther'
  return frame.ok ? yield* linesMeasured(drawing, frame.value, metres) : null
}

/** Classes without a face of their own, less those that spoil what they bound together, one after another; null where that is nothing. */
function* lessClasses(open: readonly number[], measured: Measures): Steps<Choice | null> {
  if (open.length < 2 || open.length > mostTogether) return null
  let taken = new Set(open)
  let own = yield* measured((c) => taken.has(c))
  while (taken.size > 2) {
    let best: Choice | null = null
    for (const out of taken) {
      const before = taken
      const less = yield* measured((c) => before.has(c) && c !== out)
      // Of equals the one with fewer lines, and what is clean before what is more.
      if (less !== null && less.panels > 0 && (best === null ? own === null || rank(less) >= rank(own) : rank(less) > rank(best.own))) {
        best = { taken: new Set([...before].filter((c) => c !== out)), own: less }
      }
    }
    if (best === null) break
    ;({ taken, own } = best)
  }
  return own === null || own.panels === 0 ? null : { taken, own }
}

const rank = (own: Measure): number => score(own) * (own.loose <= cleanShare * own.length && own.bends === 0 ? cleanerCounts : 1)

/** Clean lines count as this many times what bounds more panels with ends left over. */
const cleanerCounts = 2

const isClean = ({ length, loose, panels, faces }: Measure): boolean => loose <= cleanShare * length && panels >= (1 - cleanShare) * faces

/**
 * Whether a layer completes another: it bounds more panels with it, few of its lines stay loose, it hangs together with it
 * and, where the other was whole, divides its panels or adds panels of its own.
 */
function completes(own: Measure, other: Measure, both: Measure): boolean {
  const added = both.panels - own.panels
  if (added <= 0 || both.bends > own.bends + other.bends || both.loose - own.loose > cleanShare * other.length || both.groups.length >= own.groups.length + other.groups.length + (other.panels > 0 ? 0 : 1)) return false
  if (other.panels > 0) return added >= other.panels && both.area >= (own.area + other.area) * (1 - cleanShare)
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

const isInside = ({ box }: Group, group: Group): boolean =>
  group.box.left >= box.left && group.box.right <= box.right && group.box.low >= box.low && group.box.high <= box.high

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
