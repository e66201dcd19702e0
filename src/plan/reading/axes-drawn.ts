/**
 * Building axes as drawn: long straight lines that end in a circle with a short word inside, their name (common practice in
 * building drawings). They are kept by name and bound no panels. Other lines of the same layer and line type that are as
 * long and run alike are axes too, whose name is not drawn, and go with them.
 *
 * A line may end on its circle or at the middle of it, come in pieces, and have a circle at one end or at both.
 */
import { axisOff, axisRadii } from '../../base/geometry/tolerance.ts'
import type { Axis } from '../axes.ts'
import type { Drawing, DrawnCircle, DrawnText } from '../drawing.ts'
import { counted } from '../lines/words.ts'
import { all, type Kept } from './which-part.ts'

export interface DrawnAxes {
  /** In the drawing's coordinates: numbers first, then letters, then other names. */
  readonly axes: readonly Axis[]
  /** What stays when lines and circles of axes are taken out. */
  readonly kept: Kept
  /** Texts that are names of axes. */
  readonly names: readonly DrawnText[]
  /** "12 building axes: 1 to 8, A to D". */
  readonly words: string
}

/** Longest name of an axis. */
const longestName = 5

interface Bubble {
  readonly circle: DrawnCircle
  readonly name: string
  /** Its words, several where the axis is drawn twice. */
  readonly words: readonly DrawnText[]
}

interface Stretch {
  readonly a: readonly [number, number]
  readonly b: readonly [number, number]
  readonly pieces: readonly number[]
}

/** The axes of a drawing; null where it has none. */
export function drawnAxes(drawing: Drawing): DrawnAxes | null {
  const bubbles = bubblesOf(drawing)
  if (bubbles.length === 0) return null
  const found = new Map<string, { axis: Axis; isNamedAtStart: boolean }>()
  const kept = all(drawing)
  const names: DrawnText[] = []
  const used = new Set<number>()
  const looks = new Set<string>()
  let shortest = Infinity
  const lookOf = (i: number): string => `${drawing.segmentLayer[i]} ${lineTypeOf(drawing, i)}`
  const pointLoop = new Map<number, number>()
  drawing.outlines.start.forEach((k, l) => { if (l < drawing.outlines.layer.length) pointLoop.set(drawing.outlines.point[k], l) })
  const ends = endsOf(drawing)
  for (const { circle, name, words } of bubbles) {
    const [stretch, ...again] = linesFrom(drawing, circle, ends)
    if (stretch === undefined) continue
    const loop = pointLoop.get(circle.point)
    if (loop !== undefined) kept.outlines[loop] = 0
    for (const word of words) if (!names.includes(word)) names.push(word)
    for (const i of [stretch, ...again].flatMap(({ pieces }) => pieces)) {
      used.add(i)
      looks.add(lookOf(i))
    }
    shortest = Math.min(shortest, distance(stretch.a, stretch.b))
    const axis = upperOrLeftFirst(name, stretch.a, stretch.b)
    // Drawn twice it is one axis; with a circle at both ends too.
    const key = [axis.from, axis.to].map((end) => end.map((value) => Math.round(value / (axisOff * circle.radius))).join(' ')).join(' ')
    const known = found.get(key)
    // With a circle at both ends the one at the upper or left end names it.
    const isNamedAtStart = axis.from === stretch.a
    if (known === undefined || (!known.isNamedAtStart && isNamedAtStart)) found.set(key, { axis, isNamedAtStart })
  }
  if (found.size === 0) return null
  for (const i of used) kept.segments[i] = 0
  for (let i = 0; i < drawing.segmentLayer.length; i += 1) {
    if (kept.segments[i] === 0 || !looks.has(lookOf(i)) || isPlain(drawing, i)) continue
    const [p, q] = endPoints(drawing, i)
    if (distance(p, q) >= 0.5 * shortest) kept.segments[i] = 0
  }
  const axes = inOrder([...found.values()].map(({ axis }) => axis))
  return { axes, kept, names, words: `${counted(axes.length, 'building axis', 'building axes')}: ${rangeWords(axes.map(({ name }) => name))}` }
}

/** Circles with one short word inside. */
function bubblesOf({ circles = [], texts = [] }: Drawing): Bubble[] {
  const short = texts.filter(({ text }) => text.length > 0 && text.length <= longestName && /^[\p{L}\p{N}][\p{L}\p{N}'.*/-]*$/u.test(text))
  const order = [...short].sort((s, t) => s.middle[0] - t.middle[0])
  const found: Bubble[] = []
  for (const circle of circles) {
    let low = 0, high = order.length
    while (low < high) {
      const half = (low + high) >> 1
      if (order[half].middle[0] < circle.at[0] - circle.radius) low = half + 1
      else high = half
    }
    const inside: DrawnText[] = []
    for (let k = low; k < order.length && order[k].middle[0] <= circle.at[0] + circle.radius; k += 1) {
      if (distance(order[k].middle, circle.at) <= circle.radius || distance(order[k].at, circle.at) <= circle.radius * 1e-3) inside.push(order[k])
    }
    if (inside.length > 0 && inside.every(({ text }) => text === inside[0].text)) found.push({ circle, name: inside[0].text, words: inside })
  }
  return found
}

/** Ends of all segments, sorted by x. */
interface Ends {
  readonly x: Float64Array
  /** 2 i for the start of segment i, 2 i + 1 for its end. */
  readonly end: Int32Array
}

function endsOf({ points, segments }: Drawing): Ends {
  const end = Int32Array.from(segments.keys())
  end.sort((p, q) => points[3 * segments[p]] - points[3 * segments[q]] || p - q)
  return { x: Float64Array.from(end, (e) => points[3 * segments[e]]), end }
}

/** The lines that a circle ends, the longest first (drawn twice there are two): from the circle outwards, with all their pieces. */
function linesFrom(drawing: Drawing, { at, radius }: DrawnCircle, ends: Ends): Stretch[] {
  const off = axisOff * radius
  const found: Stretch[] = []
  for (const e of endsNear(drawing, ends, at, radius + off)) {
    const near = endPoint(drawing, e), far = endPoint(drawing, e ^ 1)
    const gap = distance(near, at)
    if (Math.abs(gap - radius) > off && gap > off) continue
    const length = distance(near, far)
    if (length === 0) continue
    const u: [number, number] = [(far[0] - near[0]) / length, (far[1] - near[1]) / length]
    // It points at the middle of the circle, away from it.
    if (Math.abs((at[0] - near[0]) * u[1] - (at[1] - near[1]) * u[0]) > off || (near[0] - at[0]) * u[0] + (near[1] - at[1]) * u[1] < -off) continue
    const stretch = withPieces(drawing, ends, e, u, off)
    if (distance(stretch.a, stretch.b) < axisRadii * radius) continue
    found.push(stretch)
  }
  return found.sort((s, t) => distance(t.a, t.b) - distance(s.a, s.b))
}

/** A line with the pieces that go on behind it, on its layer, each within a gap of twice the piece before. */
function withPieces(drawing: Drawing, ends: Ends, first: number, u: readonly [number, number], off: number): Stretch {
  const { segmentLayer } = drawing
  const a = endPoint(drawing, first)
  const pieces = [first >> 1]
  let b = endPoint(drawing, first ^ 1)
  for (;;) {
    let next = -1, nearest = Infinity
    for (const e of endsNear(drawing, ends, b, 2 * off)) {
      if (pieces.includes(e >> 1) || segmentLayer[e >> 1] !== segmentLayer[first >> 1]) continue
      const p = endPoint(drawing, e), q = endPoint(drawing, e ^ 1)
      const ahead = (q[0] - b[0]) * u[0] + (q[1] - b[1]) * u[1]
      const aside = Math.max(...[p, q].map((each) => Math.abs((each[0] - a[0]) * u[1] - (each[1] - a[1]) * u[0])))
      if (ahead <= 0 || aside > off || distance(p, b) >= nearest) continue
      next = e
      nearest = distance(p, b)
    }
    if (next < 0) return { a, b, pieces }
    pieces.push(next >> 1)
    b = endPoint(drawing, next ^ 1)
  }
}

function endsNear(drawing: Drawing, { x, end }: Ends, at: readonly [number, number], within: number): number[] {
  let low = 0, high = x.length
  while (low < high) {
    const half = (low + high) >> 1
    if (x[half] < at[0] - within) low = half + 1
    else high = half
  }
  const found: number[] = []
  for (let k = low; k < x.length && x[k] <= at[0] + within; k += 1) if (distance(endPoint(drawing, end[k]), at) <= within) found.push(end[k])
  return found
}

/** The point of end e: 2 i is the start of segment i, 2 i + 1 its end. */
function endPoint({ points, segments }: Drawing, e: number): [number, number] {
  return [points[3 * segments[e]], points[3 * segments[e] + 1]]
}

const endPoints = (drawing: Drawing, i: number): [[number, number], [number, number]] => [endPoint(drawing, 2 * i), endPoint(drawing, 2 * i + 1)]

const lineTypeOf = ({ looks, segmentLook }: Drawing, i: number): string => (segmentLook === undefined ? '' : (looks?.[segmentLook[i]]?.lineType ?? ''))

/** Drawn in no line type of its own: nothing tells it from the lines of panels but its circle. */
const isPlain = (drawing: Drawing, i: number): boolean => ['', 'CONTINUOUS'].includes(lineTypeOf(drawing, i))

const distance = (p: readonly [number, number], q: readonly [number, number]): number => Math.hypot(q[0] - p[0], q[1] - p[1])

function upperOrLeftFirst(name: string, a: readonly [number, number], b: readonly [number, number]): Axis {
  const isUpright = Math.abs(b[1] - a[1]) > Math.abs(b[0] - a[0])
  const aFirst = isUpright ? a[1] >= b[1] : a[0] <= b[0]
  return aFirst ? { name, from: a, to: b } : { name, from: b, to: a }
}

/** Numbers, then letters in the order of axes (A .. Z, AA ..), then the rest. */
function inOrder(axes: readonly Axis[]): Axis[] {
  const kind = ({ name }: Axis): number => (/^\d+$/.test(name) ? 0 : /^\p{L}+$/u.test(name) ? 1 : 2)
  const number = ({ name }: Axis): number => Number(name)
  return [...axes].sort((p, q) => kind(p) - kind(q)
    || (kind(p) === 0 ? number(p) - number(q) : p.name.length - q.name.length || (p.name < q.name ? -1 : p.name > q.name ? 1 : 0))
    || p.from[0] - q.from[0] || q.from[1] - p.from[1])
}

/** "1 to 8, A to D, S1 and S2". */
function rangeWords(names: readonly string[]): string {
  const parts: string[] = []
  let from = 0
  for (let k = 1; k <= names.length; k += 1) {
    if (k < names.length && follows(names[k - 1], names[k])) continue
    if (k - from >= 3) parts.push(`${names[from]} to ${names[k - 1]}`)
    else parts.push(...names.slice(from, k))
    from = k
  }
  return parts.length < 2 ? parts.join('') : `${parts.slice(0, -1).join(', ')}${parts.length === 2 && parts.every((p) => p.includes(' to ')) ? ', ' : ' and '}${parts[parts.length - 1]}`
}

/** Whether one name comes right after another; I and O may be left out, since they read as 1 and 0. */
function follows(one: string, next: string): boolean {
  if (/^\d+$/.test(one) && /^\d+$/.test(next)) return Number(next) === Number(one) + 1
  if (!/^[A-Z]$/.test(one) || !/^[A-Z]$/.test(next)) return false
  const step = next.charCodeAt(0) - one.charCodeAt(0)
  return step === 1 || (step === 2 && (one === 'H' || one === 'N'))
}
