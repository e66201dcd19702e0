/**
 * What a drawing is before it is painted: batches of polygons, lines, dots and words in sheet pixels (1/96 inch, y down),
 * each with a style token instead of a colour. The page's canvas, the SVG writer and the print sheet paint the same list,
 * so a figure cannot look different in two places. Batches, not one record a panel: 10,000 panels are a dozen records,
 * rebuilt for every frame of a pan.
 */

/** What a surface or a line is for; `theme.ts` gives it a colour by day and by night. */
export type Tone =
  | 'paper' | 'ink' | 'ink2' | 'rule' | 'hair' | 'hand' | 'handWash' | 'fault' | 'faultWash' | 'valley'
  | 'cool1' | 'cool2' | 'cool3' | 'cool4' | 'cool5' | 'cool6' | 'warm1' | 'warm2' | 'warm3'
  | 'group1' | 'group2' | 'group3' | 'group4' | 'light' | 'shade'
  | 'fold1' | 'fold2' | 'fold3' | 'valley1' | 'valley2'

export const lineNames = [
  'ridge', 'valley', 'flush', 'frozen', 'rim', 'casing', 'selected', 'held', 'heldSoft', 'before', 'hatch', 'water', 'hair', 'rule',
  'thin', 'chain', 'tolerance', 'drop', 'weak1', 'weak2', 'weakValley', 'voidCross', 'moved', 'axis',
] as const
export type LineName = (typeof lineNames)[number]

/** Polygons of one tone: polygon i has the points points[2 start[i] .. 2 start[i + 1]). */
export interface Fills {
  readonly kind: 'fills'
  readonly tone: Tone
  readonly start: Int32Array
  readonly points: Float64Array
  /** Panel behind each polygon (length start.length - 1), null where the polygons stand for no panel. */
  readonly panels: Int32Array | null
  /** 1: covers; less for the light laid over tones. */
  readonly opacity: number
}

/** Open lines of one style, as `Fills`; `closed` joins each last point to its first. */
export interface Strokes {
  readonly kind: 'strokes'
  readonly line: LineName
  /** Width in px; what the style says when null. */
  readonly width: number | null
  readonly start: Int32Array
  readonly points: Float64Array
  readonly closed: boolean
}

/** Circles of one kind. */
export interface Dots {
  readonly kind: 'dots'
  readonly radius: number
  readonly fill: Tone | null
  readonly line: Tone | null
  readonly lineWidth: number
  /** x y x y .. */
  readonly points: Float64Array
}

export interface Label {
  readonly kind: 'label'
  readonly x: number
  /** Baseline. */
  readonly y: number
  readonly text: string
  readonly size: number
  readonly bold: boolean
  /** pen: titles and panel numbers; text: everything else. */
  readonly face: 'pen' | 'text'
  readonly tone: Tone
  readonly anchor: 'start' | 'middle' | 'end'
  /** A paper plate behind the words, so that they can stand on lines and hatching. */
  readonly plate: boolean
}

export type Item = Fills | Strokes | Dots | Label

export interface DisplayList {
  readonly width: number
  readonly height: number
  /** For people who do not see it, and for the SVG's title. */
  readonly title: string
  readonly description: string
  readonly items: readonly Item[]
}

/** Collects polygons or lines of varying length into one batch. */
export class Batch {
  private readonly starts: number[] = [0]
  private readonly coordinates: number[] = []
  private readonly owners: number[] = []

  /** Adds a point to the shape in hand. */
  point(x: number, y: number): void {
    this.coordinates.push(x, y)
  }

  /** Ends the shape in hand; a shape without points is dropped. */
  end(panel = -1): void {
    const count = this.coordinates.length / 2
    if (count === this.starts[this.starts.length - 1]) return
    this.starts.push(count)
    this.owners.push(panel)
  }

  segment(x0: number, y0: number, x1: number, y1: number): void {
    this.coordinates.push(x0, y0, x1, y1)
    this.end()
  }

  get empty(): boolean {
    return this.coordinates.length === 0
  }

  fills(tone: Tone, opacity = 1): Fills {
    const owned = this.owners.some((panel) => panel >= 0)
    return {
      kind: 'fills', tone, opacity, start: Int32Array.from(this.starts), points: Float64Array.from(this.coordinates),
      panels: owned ? Int32Array.from(this.owners) : null,
    }
  }

  strokes(line: LineName, width: number | null = null, closed = false): Strokes {
    return { kind: 'strokes', line, width, closed, start: Int32Array.from(this.starts), points: Float64Array.from(this.coordinates) }
  }
}

export function label(x: number, y: number, text: string, style: Partial<Omit<Label, 'kind' | 'x' | 'y' | 'text'>> = {}): Label {
  return { kind: 'label', x, y, text, size: 12, bold: false, face: 'text', tone: 'ink2', anchor: 'start', plate: false, ...style }
}

/** One line through the points x y x y ... */
export function polyline(line: LineName, points: readonly number[], width: number | null = null, closed = false): Strokes {
  return { kind: 'strokes', line, width, closed, start: Int32Array.of(0, points.length / 2), points: Float64Array.from(points) }
}

export function dots(points: readonly number[], radius: number, fill: Tone | null, line: Tone | null, lineWidth = 1): Dots {
  return { kind: 'dots', radius, fill, line, lineWidth, points: Float64Array.from(points) }
}

/** The same items moved by (dx, dy): for putting a legend or a bar into its place on a sheet. */
export function moved(items: readonly Item[], dx: number, dy: number): Item[] {
  const shift = (points: Float64Array): Float64Array => points.map((value, i) => value + (i % 2 === 0 ? dx : dy))
  return items.map((item) => (item.kind === 'label' ? { ...item, x: item.x + dx, y: item.y + dy } : { ...item, points: shift(item.points) }))
}
