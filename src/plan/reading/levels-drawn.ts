/**
 * Levels that a drawing states: points with a height, blocks that stand at one or have one as an attribute, and words like
 * "+112.350" beside a cross or a tick.
 *
 * Heights of points are in the drawing's unit; levels in words and attributes are in metres, as on every section and site
 * plan (common practice, no source), in feet or inches where the drawing is.
 */
import { conversion, type Unit } from '../../base/length.ts'
import type { Drawing, DrawnText } from '../drawing.ts'
import { all, type Kept } from './which-part.ts'

export interface DrawnLevel {
  /** What the drawing calls it: the words, a point's number; null: nothing. */
  readonly name: string | null
  /** Where it may mean, in plan coordinates: the first of these that is at a node. */
  readonly at: readonly (readonly [x: number, y: number])[]
  /** In the plan's unit. */
  readonly level: number
}

export interface DrawnLevels {
  /** Of points and blocks. */
  readonly marks: readonly DrawnLevel[]
  /** In words; `isSure`: with a sign, so that it can be no dimension. */
  readonly words: readonly (DrawnLevel & { readonly isSure: boolean; readonly text: DrawnText })[]
  /** What stays when the crosses and ticks of levels are taken out. */
  readonly kept: Kept
}

/** A sign, a number with decimals, perhaps a unit; before it a short word like FFL or OK. */
const levelWords = /^(?:\p{L}{1,4}[.:=]?\s*)?([±+\-\u2212])?\s?(\d{1,5}[.,]\d{1,3})\s?m?$/u

/** How far its figure may be from a level's words, and how large it may be, in heights of the words. */
const figureReach = 3
const figureSize = 4

/** `factor`: from the drawing's numbers to the plan's. */
export function drawnLevels(drawing: Drawing, factor: number, unit: Unit): DrawnLevels {
  const inWords = unit === 'in' || unit === 'ft' ? 1 : conversion('m', unit)
  const kept = all(drawing)
  const { points, marks } = drawing
  const at = (point: number): [number, number] => [points[3 * point] * factor, points[3 * point + 1] * factor]
  const found: DrawnLevel[] = []
  // A file with points all at 0 has points, not levels.
  if (marks.some((point) => points[3 * point + 2] !== 0)) {
    for (const point of marks) found.push({ name: null, at: [at(point)], level: points[3 * point + 2] * factor })
  }
  for (const level of blockLevels(drawing, factor, inWords)) found.push(level)
  const words: (DrawnLevel & { isSure: boolean; text: DrawnText })[] = []
  const figures = figuresOf(drawing)
  const takeOut = ({ crosses, outline, isSymbol }: Figure): void => {
    for (const i of crosses) kept.segments[i] = 0
    if (outline >= 0 && isSymbol) kept.outlines[outline] = 0
  }
  for (const { at: [[x, y]] } of found) for (const figure of figuresAt(figures, [x / factor, y / factor])) takeOut(figure)
  for (const text of drawing.texts ?? []) {
    const match = text.tag === null ? levelWords.exec(text.text) : null
    if (match === null) continue
    const own = figuresNear(figures, text)
    const isSure = match[1] !== undefined
    if (own.length === 0 && !isSure) continue
    const value = Number(match[2].replace(',', '.')) * (match[1] === '-' || match[1] === '\u2212' ? -1 : 1)
    // A circle or triangle on the layer of the words is their symbol; bars and panes may be as small.
    if (isSure) own.filter(({ outline }) => outline < 0 || drawing.layers[drawing.outlines.layer[outline]] === text.layer).forEach(takeOut)
    const places = [...own.flatMap((figure) => figure.at), text.at].map(([x, y]): [number, number] => [x * factor, y * factor])
    words.push({ name: text.text, at: places, level: value * inWords, isSure, text })
  }
  return { marks: found, words, kept }
}

const levelTag = /^(?:level|elev|height|h\u00f6he|hoehe|kote|z$|h$)/i
const nameTag = /^(?:name|no|nr|number|point|pnr|id)/i

/** Blocks with attributes at a height or with a level among them; blocks of one name that stand at several heights. */
function blockLevels({ texts = [], blocks = [] }: Drawing, factor: number, inWords: number): DrawnLevel[] {
  const found: DrawnLevel[] = []
  const attributes = new Map<string, DrawnText[]>()
  const key = (at: readonly number[]): string => at.join(' ')
  for (const text of texts) {
    if (text.block === null) continue
    const known = attributes.get(key(text.block))
    if (known === undefined) attributes.set(key(text.block), [text])
    else known.push(text)
  }
  for (const own of attributes.values()) {
    const { block } = own[0]
    if (block === null) continue
    const stated = own.map(({ tag, text }) => (tag !== null && levelTag.test(tag) ? numberIn(text) : NaN)).find((value) => Number.isFinite(value))
    const level = stated === undefined ? block[2] * factor : stated * inWords
    if (stated === undefined && block[2] === 0) continue
    found.push({ name: own.find(({ tag }) => tag !== null && nameTag.test(tag))?.text ?? null, at: [[block[0] * factor, block[1] * factor]], level })
  }
  const byName = new Map<string, (typeof blocks)[number][]>()
  for (const block of blocks) {
    if (attributes.has(key(block.at))) continue
    const known = byName.get(block.name)
    if (known === undefined) byName.set(block.name, [block])
    else known.push(block)
  }
  for (const own of byName.values()) {
    // One height for all is where the sheet lies.
    if (own.length < 3 || own.every(({ at }) => at[2] === own[0].at[2])) continue
    for (const { at } of own) found.push({ name: null, at: [[at[0] * factor, at[1] * factor]], level: at[2] * factor })
  }
  return found
}

function numberIn(text: string): number {
  const match = levelWords.exec(text) ?? /^()([+-]?\d+)$/.exec(text)
  return match === null ? NaN : Number(match[2].replace(',', '.')) * (match[1] === '-' || match[1] === '\u2212' ? -1 : 1)
}

/** A small figure: places that it may mean, and what it is drawn with. */
interface Figure {
  readonly at: readonly (readonly [number, number])[]
  readonly size: number
  /** Segments, when two of one middle make a cross; none for ticks, which may be parts of a joint. */
  readonly crosses: readonly number[]
  /** -1: none. */
  readonly outline: number
  /** Whether the outline is a circle or a triangle. */
  readonly isSymbol: boolean
}

/** Everything small in the drawing, sorted by x. */
function figuresOf({ points, segments, outlines, marks, circles = [], texts = [] }: Drawing): Figure[] {
  const highest = texts.reduce((most, { height }) => Math.max(most, height), 0)
  const at = (p: number): [number, number] => [points[3 * p], points[3 * p + 1]]
  const found: Figure[] = []
  const middles = new Map<string, number[]>()
  for (let i = 0; 2 * i < segments.length; i += 1) {
    const p = at(segments[2 * i]), q = at(segments[2 * i + 1])
    const size = Math.hypot(q[0] - p[0], q[1] - p[1])
    if (size > figureSize * highest || size === 0) continue
    const middle: [number, number] = [(p[0] + q[0]) / 2, (p[1] + q[1]) / 2]
    // Middles to a hundredth of the largest words.
    const key = middle.map((value) => Math.round(value / (0.05 * highest))).join(' ')
    const known = middles.get(key)
    if (known === undefined) middles.set(key, [i])
    else known.push(i)
    found.push({ at: [middle, p, q], size, crosses: [], outline: -1, isSymbol: false })
  }
  for (const own of middles.values()) {
    if (own.length < 2) continue
    const [i] = own
    const p = at(segments[2 * i]), q = at(segments[2 * i + 1])
    found.push({ at: [[(p[0] + q[0]) / 2, (p[1] + q[1]) / 2]], size: Math.hypot(q[0] - p[0], q[1] - p[1]), crosses: own, outline: -1, isSymbol: false })
  }
  const round = new Map(circles.map((circle) => [circle.point, circle]))
  for (let l = 0; l < outlines.layer.length; l += 1) {
    const corners = Array.from(outlines.point.subarray(outlines.start[l], Math.min(outlines.start[l + 1], outlines.start[l] + 64)), at)
    const circle = round.get(outlines.point[outlines.start[l]])
    const size = circle === undefined ? Math.max(...corners.map(([x, y]) => Math.max(Math.abs(x - corners[0][0]), Math.abs(y - corners[0][1])))) : 2 * circle.radius
    if (size > figureSize * highest) continue
    found.push({ at: circle === undefined ? corners : [circle.at], size, crosses: [], outline: l, isSymbol: circle !== undefined || corners.length === 3 })
  }
  for (const point of marks) found.push({ at: [at(point)], size: 0, crosses: [], outline: -1, isSymbol: false })
  return found.sort((f, g) => f.at[0][0] - g.at[0][0] || f.at[0][1] - g.at[0][1])
}

/** Figures beside the words, the nearest first. */
function figuresNear(figures: readonly Figure[], { at, middle, height }: DrawnText): Figure[] {
  const end: [number, number] = [2 * middle[0] - at[0], 2 * middle[1] - at[1]]
  const reach = (figureReach + figureSize) * height
  const left = Math.min(at[0], end[0]) - reach, right = Math.max(at[0], end[0]) + reach
  let low = 0, high = figures.length
  while (low < high) {
    const half = (low + high) >> 1
    if (figures[half].at[0][0] < left) low = half + 1
    else high = half
  }
  const near: { figure: Figure; off: number }[] = []
  for (let k = low; k < figures.length && figures[k].at[0][0] <= right; k += 1) {
    const figure = figures[k]
    if (figure.size > figureSize * height) continue
    const off = Math.min(...figure.at.map((p) => fromLine(p, at, end)))
    if (off <= figureReach * height) near.push({ figure, off })
  }
  return near.sort((f, g) => g.figure.crosses.length - f.figure.crosses.length || f.off - g.off).map(({ figure }) => figure)
}

/** Crosses and circles round a point. */
function figuresAt(figures: readonly Figure[], [px, py]: readonly [number, number]): Figure[] {
  const off = (figure: Figure): number => sameMiddle * figure.size
  let low = 0, high = figures.length
  const widest = figures.reduce((most, figure) => Math.max(most, off(figure)), 0)
  while (low < high) {
    const half = (low + high) >> 1
    if (figures[half].at[0][0] < px - widest) low = half + 1
    else high = half
  }
  const found: Figure[] = []
  for (let k = low; k < figures.length && figures[k].at[0][0] <= px + widest; k += 1) {
    const [[x, y]] = figures[k].at
    if (figures[k].at.length === 1 && Math.hypot(x - px, y - py) <= off(figures[k])) found.push(figures[k])
  }
  return found
}

/** Share of its size by which the middle of a figure may miss its point. */
const sameMiddle = 0.05

function fromLine([x, y]: readonly [number, number], a: readonly [number, number], b: readonly [number, number]): number {
  const ux = b[0] - a[0], uy = b[1] - a[1]
  const size = ux * ux + uy * uy
  const share = size === 0 ? 0 : Math.max(0, Math.min(1, ((x - a[0]) * ux + (y - a[1]) * uy) / size))
  return Math.hypot(x - a[0] - share * ux, y - a[1] - share * uy)
}
