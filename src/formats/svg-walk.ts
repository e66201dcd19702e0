/** The walk over the elements of an SVG document: what is inherited, what is drawn, what is left out. */
import { coversWithin } from '../base/geometry/tolerance.ts'
import { fail, type Problem } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { FormatOptions } from './format.ts'
import { LayerChoice } from './layer-choice.ts'
import { Sketch } from './sketch.ts'
import { fills, initialLook, isSeen, lookOf, strokes, type Look } from './svg-look.ts'
import { page, placedBox, type Page } from './svg-page.ts'
import { deepestRings, holes } from './svg-rings.ts'
import { drawnShape, Lengths, shapeNames, type Viewport } from './svg-shapes.ts'
import { declared, type StyleSheet } from './svg-style.ts'
import { Tracer } from './svg-tracer.ts'
import { composed, transformList, translation, type Affine } from './svg-transform.ts'
import { quoted } from './text-quote.ts'
import { attribute, type XmlElement } from './xml.ts'

export const svgSpace = 'http://www.w3.org/2000/svg'

/** The unit of the drawing is the mm on paper; it stands for itself unless the user has said what it stands for. */
const metresPerMillimetre = 0.001

/** Elements that draw nothing where they stand: definitions, descriptions, scripts' and editors' data. */
const silent = new Set([
  'defs', 'symbol', 'clipPath', 'mask', 'pattern', 'marker', 'linearGradient', 'radialGradient', 'filter', 'style', 'title', 'desc',
  'metadata', 'view', 'cursor', 'font', 'font-face', 'color-profile', 'solidcolor', 'hatch', 'meshgradient',
])

/** Elements drawn, each as often as it is used: a use inside a use multiplies them. */
const mostDrawn = 600_000
/** Elements inside one another, uses counted. */
const deepest = 600
/** Elements, or subpaths of one element, between two turns: about a millisecond. */
const slice = 512
const reading = { stage: 'Reading', done: 0.5 }

/** What an element inherits from what it stands in. */
interface Inside {
  readonly map: Affine
  readonly look: Look
  readonly layer: string
  /** Whether the user's choice of layers takes it. */
  readonly chosen: boolean
  readonly viewport: Viewport | null
  readonly depth: number
  /** Elements that a use round it refers to. */
  readonly used: readonly XmlElement[]
  /** What the cascade declares for the element itself. */
  readonly style: ReadonlyMap<string, string>
}

interface Background {
  readonly xy: Float64Array
  readonly layer: string
  readonly line: number
}

export class SvgWalk {
  readonly sketch = new Sketch()
  private readonly root: XmlElement
  private readonly byId: ReadonlyMap<string, XmlElement>
  private readonly sheet: StyleSheet
  private readonly choice: LayerChoice
  private readonly tracer: Tracer
  private readonly options: FormatOptions
  private readonly layers = new Set<string>()
  private readonly backgrounds: Background[] = []
  private page: Page | null = null
  private drawn = 0

  constructor(root: XmlElement, byId: ReadonlyMap<string, XmlElement>, sheet: StyleSheet, options: FormatOptions) {
    this.root = root
    this.byId = byId
    this.sheet = sheet
    this.options = options
    this.choice = new LayerChoice(options.layers)
    this.tracer = new Tracer(options.sagitta / (options.metresPerUnit ?? metresPerMillimetre))
  }

  /** Draws all into the sketch; the first problem met, or null. */
  *document(): Steps<Problem | null> {
    const { root, sketch } = this
    const sheetOfPaper = page(root)
    if (typeof sheetOfPaper === 'string') return unreadable(root, sheetOfPaper)
    this.page = sheetOfPaper
    const { map, viewport } = sheetOfPaper
    const chosen = this.choice.takes('')
    const outside: Inside = { map, look: initialLook, layer: '', chosen, viewport, depth: 0, used: [], style: new Map() }
    const inside = this.inside(root, outside)
    if ('code' in inside) return inside
    const problem = yield* this.children(root, inside)
    if (problem !== null) return problem
    const missing = this.choice.missing(this.layers)
    if (missing !== null) return missing

    // A page that holds nothing else but its background is a plan of one panel.
    const alone = sketch.outlines.length + sketch.segmentCount === 0
    for (const { xy, layer, line } of this.backgrounds) {
      if (alone) {
        const points = [0, 2, 4, 6].map((i) => sketch.point(xy[i], xy[i + 1], 0, false))
        sketch.outlines.add(points, sketch.layer(layer), line)
      } else sketch.leaveOut('page background', layer)
    }
    if (this.sheet.unread > 0) sketch.leaveOut('style rule', '', this.sheet.unread)
    this.noteRepairs(sheetOfPaper)
    return null
  }

  private noteRepairs({ physical }: Page): void {
    const { curveCount, chordCount, curveStart } = this.tracer
    if (!physical) {
      const message = 'The page has no size in mm, cm, in or pt; 96 of its units are taken as an inch on paper'
      this.sketch.repair({ code: 'unit-assumed', state: 'applied', count: 1, message, where: [] })
    }
    if (curveCount > 0) {
      const where = Array.from({ length: curveCount }, (_, i) => [curveStart.at(2 * i), curveStart.at(2 * i + 1)] as const)
      const millimetres = Number((1000 * this.options.sagitta).toPrecision(6))
      const curves = curveCount === 1 ? '1 curve' : `${curveCount} curves`
      const message = `${curves} became ${chordCount} chords; no curve leaves its chord by more than ${millimetres} mm`
      this.sketch.repair({ code: 'chords', state: 'applied', count: curveCount, message, where })
    }
  }

  /** What holds inside an element: its style, transform and layer. */
  private inside(element: XmlElement, outer: Inside): Inside | Problem {
    const style = declared(this.sheet, element)
    const look = lookOf(style, outer.look)
    const map = mapOf(style, outer.map)
    if (typeof map === 'string') return unreadable(element, map)
    const depth = outer.depth + 1
    if (depth > deepest) {
      return fail('too-deep', `elements are used more than ${deepest} deep`, place(element), 'ungroup the drawing').problem
    }
    let { layer, chosen } = outer
    const id = element.name === 'g' && outer.used.length === 0 ? (attribute(element, 'id') ?? '') : ''
    if (id !== '') {
      this.layers.add(id)
      layer = id
      // A layer that is chosen brings the groups inside it.
      chosen ||= this.choice.takes(id)
    }
    return { map, look, layer, chosen, viewport: outer.viewport, depth, used: outer.used, style }
  }

  /** A document that declares no namespace is taken as if it declared SVG's. */
  private isSvg(element: XmlElement): boolean {
    return element.space === svgSpace || element.space === this.root.space
  }

  private *children(element: XmlElement, inside: Inside): Steps<Problem | null> {
    for (const child of element.children) {
      const problem = yield* this.element(child, inside)
      if (problem !== null) return problem
    }
    return null
  }

  private *element(element: XmlElement, outer: Inside): Steps<Problem | null> {
    if (!this.isSvg(element)) return null
    this.drawn += 1
    if (this.drawn > mostDrawn) {
      return fail('too-large', `more than ${mostDrawn} elements are drawn`, place(element), 'split the drawing').problem
    }
    if (this.drawn % slice === 0) yield reading
    const { name } = element
    if (silent.has(name)) return null
    if (!shapeNames.has(name) && !containers.has(name)) {
      this.sketch.leaveOut(name, outer.layer)
      return null
    }
    const inside = this.inside(element, outer)
    if ('code' in inside) return inside
    switch (name) {
      case 'g':
      case 'a':
        return yield* this.children(element, inside)
      case 'switch': {
        const first = element.children.find((child) => this.isSvg(child) && applies(child))
        return first === undefined ? null : yield* this.element(first, inside)
      }
      case 'svg':
        return yield* this.nested(element, element, inside)
      case 'use':
        return yield* this.use(element, inside)
      default:
        return yield* this.shape(element, inside)
    }
  }

  /** An svg or symbol element; its size is that of `sized` where that has one. */
  private *nested(element: XmlElement, sized: XmlElement, inside: Inside): Steps<Problem | null> {
    const { viewport } = inside
    const own = new Lengths(element, inside.style, viewport)
    const given = sized === element ? own : new Lengths(sized, declared(this.sheet, sized), viewport)
    const isSvg = element.name === 'svg'
    const width = given.optional('width', 'x') ?? (isSvg ? own.optional('width', 'x') : null) ?? viewport?.width ?? null
    const height = given.optional('height', 'y') ?? (isSvg ? own.optional('height', 'y') : null) ?? viewport?.height ?? null
    const [x, y] = isSvg ? [own.coordinate('x', 'x'), own.coordinate('y', 'y')] : [0, 0]
    const fault = given.fault ?? own.fault ?? ((width ?? 0) < 0 || (height ?? 0) < 0 ? 'the size is negative' : null)
    if (fault !== null) return unreadable(sized, fault)
    if (width === 0 || height === 0) return null
    const placed = placedBox(element, x, y, width === null || height === null ? null : { width, height })
    if (typeof placed === 'string') return unreadable(element, placed)
    return yield* this.children(element, { ...inside, map: composed(inside.map, placed.map), viewport: placed.viewport })
  }

  private *use(element: XmlElement, inside: Inside): Steps<Problem | null> {
    const reference = (attribute(element, 'href') ?? attribute(element, 'xlink:href') ?? '').trim()
    const target = reference.startsWith('#') ? this.byId.get(reference.slice(1)) : undefined
    if (target === undefined) {
      this.sketch.leaveOut(reference.startsWith('#') || reference === '' ? 'use of nothing' : 'use of another file', inside.layer)
      return null
    }
    if (inside.used.includes(target) || target === element) {
      return fail('use-cycle', `${quoted(reference)} is used inside itself`, place(element), 'take the reference out').problem
    }
    const lengths = new Lengths(element, inside.style, inside.viewport)
    const moved = composed(inside.map, translation(lengths.coordinate('x', 'x'), lengths.coordinate('y', 'y')))
    if (lengths.fault !== null) return unreadable(element, lengths.fault)
    const at: Inside = { ...inside, map: moved, used: [...inside.used, target] }
    if (target.name !== 'symbol' && target.name !== 'svg') return yield* this.element(target, at)
    this.drawn += 1
    const within = this.inside(target, at)
    return 'code' in within ? within : yield* this.nested(target, element, within)
  }

  private *shape(element: XmlElement, inside: Inside): Steps<Problem | null> {
    const { look, layer, chosen } = inside
    const { name } = element
    const { sketch, tracer } = this
    for (const child of element.children) {
      if (this.isSvg(child) && !silent.has(child.name)) sketch.leaveOut(child.name, layer)
    }
    const painted = strokes(look) || (fills(look) && name !== 'line')
    const why = !chosen ? 'layer not chosen' : !isSeen(look) ? 'hidden' : !painted ? 'not painted' : null
    if (why !== null) {
      sketch.leaveOut(`${name}, ${why}`, layer)
      return null
    }
    tracer.begin(inside.map)
    const fault = yield* drawnShape(element, new Lengths(element, inside.style, inside.viewport), tracer)
    const count = tracer.end()
    if (fault !== null || tracer.fault !== null) return unreadable(element, fault ?? tracer.fault ?? '')
    return yield* this.taken(element, count, inside)
  }

  /** Puts the subpaths of an element into the sketch, as what they are by their paint. */
  private *taken(element: XmlElement, count: number, { look, layer }: Inside): Steps<Problem | null> {
    const { sketch, tracer } = this
    const filled = fills(look)
    const stroked = strokes(look)
    const { line } = element
    if (filled && !stroked && count === 1 && this.coversPage()) {
      this.backgrounds.push({ xy: tracer.xy.array(), layer, line })
      return null
    }
    const index = sketch.layer(layer)
    const from: number[] = []
    const to: number[] = []
    let lines = 0
    for (let i = 0; i < count; i += 1) {
      const start = tracer.start(i)
      const end = tracer.start(i + 1)
      if (i % slice === slice - 1) yield reading
      if (end - start >= 6 && (tracer.isRing(i) || !stroked)) {
        from.push(start / 2)
        to.push(end / 2)
      } else if (stroked) {
        const points = this.points(start, end)
        for (let k = 1; k < points.length; k += 1) sketch.segment(points[k - 1], points[k], index, line)
        lines += 1
      }
    }
    if (lines + from.length === 0) sketch.leaveOut(`${element.name}, of no size`, layer)
    // Without a fill, rings inside one another are lines inside lines: what is a panel is for the plan to say.
    const hole = filled && from.length > 1 ? yield* holes({ ...tracer.columns(), from, to }, look.evenOdd) : new Uint8Array(from.length)
    if (hole === null) return unreadable(element, `rings lie inside one another more than ${deepestRings} deep`)
    for (let i = 0; i < from.length; i += 1) {
      const list = hole[i] === 1 ? sketch.holes : sketch.outlines
      list.add(this.points(2 * from[i], 2 * to[i]), index, line)
      if (i % slice === slice - 1) yield reading
    }
    return null
  }

  /** New points of the sketch for xy[start, end) of the tracer. */
  private points(start: number, end: number): number[] {
    const { xy } = this.tracer
    const out: number[] = []
    for (let i = start; i < end; i += 2) out.push(this.sketch.point(xy.at(i), xy.at(i + 1), 0, false))
    return out
  }

  /** Whether the element is a rectangle along the page's edges that covers all that is seen of the page. */
  private coversPage(): boolean {
    const seen = this.page?.seen ?? null
    if (seen === null || this.tracer.xy.length !== 8 || !this.tracer.isRing(0)) return false
    const xy = this.tracer.xy.array()
    const [left, low, right, high] = seen
    const slack = coversWithin * Math.max(right - left, high - low)
    const x = [xy[0], xy[2], xy[4], xy[6]]
    const y = [xy[1], xy[3], xy[5], xy[7]]
    const [minX, maxX, minY, maxY] = [Math.min(...x), Math.max(...x), Math.min(...y), Math.max(...y)]
    const atCorner = (i: number): boolean => Math.min(x[i] - minX, maxX - x[i]) <= slack && Math.min(y[i] - minY, maxY - y[i]) <= slack
    return minX <= left + slack && maxX >= right - slack && minY <= low + slack && maxY >= high - slack && [0, 1, 2, 3].every(atCorner)
  }
}

const containers = new Set(['g', 'a', 'switch', 'svg', 'use'])

/** Whether a child of a switch is the one to be drawn: it asks for nothing that a reader of lines does not have. */
function applies(child: XmlElement): boolean {
  if (silent.has(child.name) || child.name === 'foreignObject') return false
  return (attribute(child, 'requiredExtensions') ?? '') === '' && /\ben\b/.test(attribute(child, 'systemLanguage') ?? 'en')
}

/** The element as a place: its line, name and id. */
function place(element: XmlElement): { line: number; entity: string } {
  const id = attribute(element, 'id')
  return { line: element.line, entity: id === null ? `<${element.name}>` : `<${element.name}> ${quoted(id)}` }
}

function unreadable(element: XmlElement, message: string): Problem {
  return fail('bad-value', message, place(element), 'correct it, or export the drawing again').problem
}

/** The map of an element with these declarations inside `outer`, a string when it cannot be read. */
function mapOf(style: ReadonlyMap<string, string>, outer: Affine): Affine | string {
  const text = style.get('transform')
  if (text === undefined) return outer
  const own = transformList(text)
  if (own === null) return `transform cannot be read: ${quoted(text)}`
  const origin = style.get('transform-origin')
  if (origin !== undefined && !/^(0(px)?\s*){1,3}$/.test(origin)) return `transform-origin cannot be read: ${quoted(origin)}`
  return composed(outer, own)
}
