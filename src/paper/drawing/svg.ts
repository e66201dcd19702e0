/**
 * A display list as SVG text: the same bytes for the same list, all words escaped, no script and nothing fetched. Panels
 * carry their names as ids, so that a drawing can be worked on elsewhere.
 */
import { panelName } from '../../plan/names.ts'
import type { DisplayList, Item, Label } from './display-list.ts'
import { faces, lineStyles, type Theme } from './theme.ts'

export interface SvgOptions {
  /** Millimetres of paper to a sheet pixel; null: the size is left to whoever shows it (px). */
  readonly mmPerPx: number | null
  /** The paper itself: drawn, or left clear. */
  readonly background: boolean
}

export function toSvg(list: DisplayList, theme: Theme, options: SvgOptions = { mmPerPx: null, background: true }): string {
  const { width, height } = list
  const size = options.mmPerPx === null
    ? `width="${n(width)}" height="${n(height)}"`
    : `width="${n(width * options.mmPerPx)}mm" height="${n(height * options.mmPerPx)}mm"`
  const out = [
    `<svg xmlns="http://www.w3.org/2000/svg" ${size} viewBox="0 0 ${n(width)} ${n(height)}" role="img">`,
    `<title>${escaped(list.title)}</title>`,
    `<desc>${escaped(list.description)}</desc>`,
  ]
  if (options.background) out.push(`<rect width="${n(width)}" height="${n(height)}" fill="${theme.paper}"/>`)
  const named = new Set<number>()
  for (const item of list.items) out.push(element(item, theme, named))
  out.push('</svg>')
  return `${out.filter((line) => line !== '').join('\n')}\n`
}

function element(item: Item, theme: Theme, named: Set<number>): string {
  switch (item.kind) {
    case 'fills': {
      const opacity = item.opacity === 1 ? '' : ` fill-opacity="${n(item.opacity)}"`
      const paths: string[] = []
      for (let i = 0; i + 1 < item.start.length; i += 1) {
        const panel = item.panels === null ? -1 : item.panels[i]
        // An id may stand once in a document; the light over a panel repeats its outline without it.
        const id = panel < 0 || named.has(panel) ? '' : ` id="${panelName(panel)}"`
        named.add(panel)
        paths.push(`<path${id} d="${path(item.points, item.start[i], item.start[i + 1], true)}"/>`)
      }
      return paths.length === 0 ? '' : `<g fill="${theme[item.tone]}"${opacity}>${paths.join('')}</g>`
    }
    case 'strokes': {
      const style = lineStyles[item.line]
      const dash = style.dash.length === 0 ? '' : ` stroke-dasharray="${style.dash.map(n).join(' ')}"`
      const d: string[] = []
      for (let i = 0; i + 1 < item.start.length; i += 1) d.push(path(item.points, item.start[i], item.start[i + 1], item.closed))
      if (d.length === 0) return ''
      return `<path fill="none" stroke="${theme[style.tone]}" stroke-width="${n(item.width ?? style.width)}" stroke-linecap="${style.cap}" stroke-linejoin="round"${dash} d="${d.join('')}"/>`
    }
    case 'dots': {
      const circles: string[] = []
      for (let i = 0; i < item.points.length; i += 2) circles.push(`<circle cx="${n(item.points[i])}" cy="${n(item.points[i + 1])}" r="${n(item.radius)}"/>`)
      const line = item.line === null ? '' : ` stroke="${theme[item.line]}" stroke-width="${n(item.lineWidth)}"`
      return circles.length === 0 ? '' : `<g fill="${item.fill === null ? 'none' : theme[item.fill]}"${line}>${circles.join('')}</g>`
    }
    case 'label': return words(item, theme)
  }
}

function words(item: Label, theme: Theme): string {
  // A plate in SVG is a halo of paper round the letters: it needs no measuring of text, which would depend on the reader's fonts.
  const halo = item.plate ? ` stroke="${theme.paper}" stroke-width="4" stroke-linejoin="round" paint-order="stroke"` : ''
  const anchor = item.anchor === 'start' ? '' : ` text-anchor="${item.anchor}"`
  const weight = item.bold ? ' font-weight="600"' : ''
  return `<text x="${n(item.x)}" y="${n(item.y)}" font-family="${escaped(faces[item.face])}" font-size="${n(item.size)}"${weight} fill="${theme[item.tone]}"${anchor}${halo}>${escaped(item.text)}</text>`
}

function path(points: Float64Array, from: number, to: number, closed: boolean): string {
  let d = ''
  for (let i = from; i < to; i += 1) d += `${i === from ? 'M' : 'L'}${n(points[2 * i])} ${n(points[2 * i + 1])}`
  return closed ? `${d}Z` : d
}

/** At most two decimals, no trailing noughts, no "-0". */
function n(value: number): string {
  const rounded = Math.round(value * 100) / 100
  return String(rounded === 0 ? 0 : rounded)
}

/** Text for XML: the five characters that mean something to it, and none that it forbids. */
export function escaped(text: string): string {
  return text
    .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g, '')
    .replace(/[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g, '')
    .replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;').replace(/'/g, '&#39;')
}
