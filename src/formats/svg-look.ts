/** What of an element is painted: fill, stroke and visibility as they are inherited (SVG 2, chapter 13; CSS 2, 11.2). */

export interface Look {
  /** Whether the inside is painted, and whether the line is. */
  readonly fill: boolean
  readonly stroke: boolean
  readonly evenOdd: boolean
  /** False for display: none and opacity 0, which what is inside cannot undo. */
  readonly shown: boolean
  /** visibility, which what is inside may set again. */
  readonly visible: boolean
  readonly fillSeen: boolean
  readonly strokeSeen: boolean
  readonly strokeWide: boolean
}

/** SVG's initial values: filled black, no stroke. */
export const initialLook: Look = {
  fill: true,
  stroke: false,
  evenOdd: false,
  shown: true,
  visible: true,
  fillSeen: true,
  strokeSeen: true,
  strokeWide: true,
}

export const fills = (look: Look): boolean => look.fill && look.fillSeen
export const strokes = (look: Look): boolean => look.stroke && look.strokeSeen && look.strokeWide
export const isSeen = (look: Look): boolean => look.shown && look.visible

const zero = String.raw`\s*(?:0+|0*\.0+|0+\.)0*%?\s*\)`
const colourWithZero = String.raw`(?:rgb|hsl)a?\((?:[^,)]*,){3}${zero}|[a-z]+\([^/)]*/${zero}`
const transparent = new RegExp(String.raw`^(?:transparent|#[0-9a-f]{3}0|#[0-9a-f]{6}00|${colourWithZero})$`, 'i')
const inherits = /^(inherit|unset|revert|revert-layer)$/i

/** The look of an element with these declarations inside an element with the look `outer`. */
export function lookOf(declared: ReadonlyMap<string, string>, outer: Look): Look {
  if (declared.size === 0) return outer
  const read = <T>(property: string, inherited: T, initial: T, value: (text: string) => T): T => {
    const text = declared.get(property)
    if (text === undefined || text === '' || inherits.test(text)) return inherited
    return /^initial$/i.test(text) ? initial : value(text)
  }
  const paints = (text: string): boolean => !/^none\b/i.test(text) && !transparent.test(text)
  const notZero = (text: string): boolean => !(Number.parseFloat(text) === 0)
  return {
    fill: read('fill', outer.fill, true, paints),
    stroke: read('stroke', outer.stroke, false, paints),
    evenOdd: read('fill-rule', outer.evenOdd, false, (text) => /^evenodd$/i.test(text)),
    shown: outer.shown && read('display', true, true, (text) => !/^none$/i.test(text)) && read('opacity', true, true, notZero),
    visible: read('visibility', outer.visible, true, (text) => !/^(hidden|collapse)$/i.test(text)),
    fillSeen: read('fill-opacity', outer.fillSeen, true, notZero),
    strokeSeen: read('stroke-opacity', outer.strokeSeen, true, notZero),
    strokeWide: read('stroke-width', outer.strokeWide, true, notZero),
  }
}
