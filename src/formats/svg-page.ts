/**
 * The page: its size on paper, and how view boxes fit into it (SVG 2, chapter 8; CSS Values 4, section 6.2: 96 px to an
 * inch).
 */
import { millimetresPerPixel, numberList, paperLength, svgLength } from './svg-numbers.ts'
import type { Viewport } from './svg-shapes.ts'
import { composed, translation, type Affine } from './svg-transform.ts'
import { quoted } from './text-quote.ts'
import { attribute, type XmlElement } from './xml.ts'

export interface Page {
  /** User units of the root to mm on paper, y up from the lower edge of the page (from its upper edge when it has no size). */
  readonly map: Affine
  /** In user units; null when the file gives no size. */
  readonly viewport: Viewport | null
  /** What is seen of the drawing, in mm: left, low, right, high; null when the file gives no size. */
  readonly seen: readonly [left: number, low: number, right: number, high: number] | null
  /** Whether the size is in physical units. */
  readonly physical: boolean
}

export interface ViewBox {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
}

/** The view box of an element; null when it has none, a string when it cannot be read. */
export function viewBox(element: XmlElement): ViewBox | null | string {
  const text = attribute(element, 'viewBox')
  if (text === null) return null
  const numbers = numberList(text)
  if (numbers === null || numbers.length !== 4) return `viewBox is not four numbers: ${quoted(text)}`
  const [x, y, width, height] = numbers
  if (!(width > 0 && height > 0)) return `viewBox has no size: ${quoted(text)}`
  return { x, y, width, height }
}

/** The map of a view box into a rectangle of this size at 0, 0 (SVG 2, section 8.6), a string when it cannot be read. */
export function fitted(box: ViewBox, width: number, height: number, preserve: string | null): Affine | string {
  const words = (preserve ?? '').trim().split(/\s+/).filter((word) => word !== '' && word !== 'defer')
  const [align = 'xMidYMid', meetOrSlice = 'meet'] = words
  const alignment = /^x(Min|Mid|Max)Y(Min|Mid|Max)$/.exec(align)
  if ((alignment === null && align !== 'none') || !/^(meet|slice)$/.test(meetOrSlice) || words.length > 2) {
    return `preserveAspectRatio cannot be read: ${quoted(preserve ?? '')}`
  }
  let sx = width / box.width
  let sy = height / box.height
  if (alignment !== null) {
    const both = meetOrSlice === 'slice' ? Math.max(sx, sy) : Math.min(sx, sy)
    sx = both
    sy = both
  }
  const share: Readonly<Record<string, number>> = { Min: 0, Mid: 0.5, Max: 1 }
  const spareX = (width - box.width * sx) * (share[alignment?.[1] ?? 'Min'] ?? 0)
  const spareY = (height - box.height * sy) * (share[alignment?.[2] ?? 'Min'] ?? 0)
  return [sx, 0, 0, sy, spareX - box.x * sx, spareY - box.y * sy]
}

/** The page of a root element, a string when it cannot be read. */
export function page(root: XmlElement): Page | string {
  const box = viewBox(root)
  if (typeof box === 'string') return box
  const width = paperSize(root, 'width')
  const height = paperSize(root, 'height')
  if (typeof width === 'string') return width
  if (typeof height === 'string') return height
  const physical = width?.physical === true || height?.physical === true
  // A side that is not given follows from the view box: by the other side, or at 96 user units to an inch.
  let perUnit = millimetresPerPixel
  if (box !== null && width !== null) perUnit = width.mm / box.width
  else if (box !== null && height !== null) perUnit = height.mm / box.height
  const wide = width?.mm ?? (box === null ? null : box.width * perUnit)
  const high = height?.mm ?? (box === null ? null : box.height * perUnit)

  const known = wide !== null && high !== null
  const inner: Affine | string = box === null || !known
    ? [millimetresPerPixel, 0, 0, millimetresPerPixel, 0, 0]
    : fitted(box, wide, high, attribute(root, 'preserveAspectRatio'))
  if (typeof inner === 'string') return inner
  const map = composed([1, 0, 0, -1, 0, high ?? 0], inner)
  if (!known) return { map, viewport: null, seen: null, physical }
  const viewport = box ?? { width: wide / millimetresPerPixel, height: high / millimetresPerPixel }
  const { x, y } = box ?? { x: 0, y: 0 }
  const [left, right] = [map[0] * x + map[4], map[0] * (x + viewport.width) + map[4]]
  const [top, low] = [map[3] * y + map[5], map[3] * (y + viewport.height) + map[5]]
  return { map, viewport, seen: [Math.max(0, left), Math.max(0, low), Math.min(wide, right), Math.min(high, top)], physical }
}

/** A side of the page; null when it is not given or a share of the window. */
function paperSize(root: XmlElement, name: string): { readonly mm: number; readonly physical: boolean } | null | string {
  const text = attribute(root, name)?.trim() ?? ''
  if (text === '' || text === 'auto') return null
  const length = svgLength(text)
  if (length === null) return `${name} is no length that can be read: ${quoted(text)}`
  const size = paperLength(length)
  return size === null || size.mm > 0 ? size : `${name} of the page must be more than 0: ${quoted(text)}`
}

/** The map of a view box, if there is one, into a rectangle at x, y; a string when it cannot be read. */
export function placedBox(
  element: XmlElement, x: number, y: number, size: Viewport | null,
): { readonly map: Affine; readonly viewport: Viewport | null } | string {
  const box = viewBox(element)
  if (typeof box === 'string') return box
  if (box === null) return { map: translation(x, y), viewport: size }
  const fit = fitted(box, size?.width ?? box.width, size?.height ?? box.height, attribute(element, 'preserveAspectRatio'))
  return typeof fit === 'string' ? fit : { map: composed(translation(x, y), fit), viewport: box }
}
