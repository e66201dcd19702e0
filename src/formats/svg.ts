/**
 * SVG 1.1 and 2 as a drawing on paper: mm, y up from the lower edge of the page. Shapes and paths are taken as they are
 * painted: closed ones are outlines, open lines are segments, and an area that is filled without a line round it is
 * closed. What is not seen, not painted or no line work is counted as left out. The id of the innermost <g> round an
 * element is its layer. Clip paths and masks are not applied; what they cut off is read whole.
 *
 * Source: W3C, Scalable Vector Graphics (SVG) 2, Candidate Recommendation of 4 October 2018; SVG 1.1 (Second Edition).
 */
import { fail, ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Drawing } from '../plan/drawing.ts'
import type { Format, FormatOptions, Source } from './format.ts'
import { mostRules, styleSheet } from './svg-style.ts'
import { svgSpace, SvgWalk } from './svg-walk.ts'
import { printable, quoted } from './text-quote.ts'
import { attribute, xmlTree, type XmlElement } from './xml.ts'

export const svg: Format = { title: 'SVG', extensions: ['svg'], recognises, read }

const prologue = /^\ufeff?(?:\s+|<\?[^]*?\?>|<!--[^]*?-->|<!DOCTYPE(?:[^[>]|\[[^\]]*\])*>)*/

/** Whether the first element, after declarations and comments, is <svg> with any prefix. */
function recognises(head: string): boolean {
  const first = head.slice(prologue.exec(head)?.[0].length ?? 0, 200 + (prologue.exec(head)?.[0].length ?? 0))
  return /^<([\w.-]+:)?svg[\s/>]/.test(first)
}

function* read(text: string, _source: Source, options: FormatOptions): Steps<Result<Drawing>> {
  const tree = yield* xmlTree(text, { keepsText: ['style'], keptSpace: { prefix: 'xlink', uri: 'http://www.w3.org/1999/xlink' } })
  if (!tree.ok) return tree
  const root = tree.value
  if (root.name !== 'svg' || (root.space !== svgSpace && root.space !== '')) {
    const what = root.name !== 'svg' ? `<${printable(root.name)}>, not <svg>` : `of ${quoted(root.space, 60)}, not of SVG`
    return fail('not-svg', `the first element is ${what}`, { line: root.line }, 'export the drawing as SVG')
  }

  const byId = new Map<string, XmlElement>()
  const styles: string[] = []
  index(root, byId, styles)
  const sheet = styleSheet(styles)
  if (sheet.ruleCount > mostRules) {
    return fail('too-large', `the style sheets have more than ${mostRules} rules`, null, 'export the drawing with presentation attributes')
  }
  const walk = new SvgWalk(root, byId, sheet, options)
  const problem = yield* walk.document()
  if (problem !== null) return { ok: false, problem }
  const { sketch } = walk
  if (sketch.outlines.length + sketch.segmentCount === 0) {
    const other = sketch.leftOut.map(({ kind, count }) => `${count} x ${kind}`)
    const message = `the file has no shapes and no lines that are seen${other.length > 0 ? `, only ${other.slice(0, 6).join(', ')}` : ''}`
    return fail('nothing-drawn', message, null, 'export the panels as closed paths or their edges as lines')
  }
  return ok(sketch.drawing('SVG', 'mm', true))
}

/** Elements by id, the first of each, and the texts of all style sheets. Not deeper than the reader of XML lets in. */
function index(element: XmlElement, byId: Map<string, XmlElement>, styles: string[]): void {
  const id = attribute(element, 'id')
  if (id !== null && !byId.has(id)) byId.set(id, element)
  if (element.name === 'style') styles.push(element.text)
  for (const child of element.children) index(child, byId, styles)
}
