/**
 * An XML document (XML 1.0, fifth edition, and Namespaces in XML 1.0) as a tree of plain records. saxes checks that the
 * document is well formed; it knows no entities but the five of XML and numeric ones, and a document type that declares
 * entities of its own is refused, so that nothing is ever expanded or fetched.
 *
 * Tried and dropped: one call of the parser for the whole text (no turn for a cancel in between), and stopping at an
 * error by an exception thrown from the handler.
 */
import { SaxesParser } from 'saxes'
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'

export interface XmlElement {
  /** Local name, without prefix. */
  readonly name: string
  /** Namespace, "" when it has none. */
  readonly space: string
  /** Name, value, name, value ..: attributes without a namespace, and those of `keptSpace` as "prefix:name". */
  readonly attributes: readonly string[]
  readonly children: readonly XmlElement[]
  /** Character data directly inside, for the elements that `keepsText` names; else "". */
  readonly text: string
  /** 1-based line of the start tag. */
  readonly line: number
}

export interface XmlOptions {
  /** Local names of the elements whose character data is kept. */
  readonly keepsText: readonly string[]
  /** A namespace whose attributes are kept, under this prefix whatever the file's own prefix is. */
  readonly keptSpace: { readonly prefix: string; readonly uri: string }
}

interface Growing {
  readonly name: string
  readonly space: string
  readonly attributes: readonly string[]
  children: readonly XmlElement[]
  text: string
  readonly line: number
}

/** Deeper nesting than any drawing has; keeps every walk over the tree from running out of stack. */
const deepest = 256
/** An element takes about 500 bytes with all that is made of it, so that this many stay well below half a gigabyte. */
const mostElements = 600_000
/** Characters between two turns: about a millisecond. */
const slice = 1 << 14

const none: readonly never[] = []

/** The root element, or a Problem with code "not-xml", "xml-entities", "cut-off" or "too-large" and its line. */
export function* xmlTree(text: string, options: XmlOptions): Steps<Result<XmlElement>> {
  const parser = new SaxesParser({ xmlns: true, additionalNamespaces: { [options.keptSpace.prefix]: options.keptSpace.uri } })
  const keepsText = new Set(options.keepsText)
  const open: Growing[] = []
  let root: XmlElement | null = null
  let problem: Problem | null = null
  let count = 0
  let startLine = 1
  let ended = false
  let closed: Growing | undefined

  const refuse = (code: string, message: string, cure: string | null, line = parser.line): void => {
    problem ??= fail(code, message, { line }, cure).problem
  }

  parser.on('error', (error) => {
    if (problem !== null) return
    const inner = open.at(-1)
    const said = error.message.replace(/^\d+:\d+: /, '').replace(/\.$/, '')
    if (ended && inner !== undefined) {
      refuse('cut-off', `the file ends inside <${inner.name}>, which line ${inner.line} opens`, 'it may be cut off: export it again')
    } else if (ended) {
      refuse('cut-off', said === 'unexpected end' ? 'the file ends too early' : 'there is no element in the file', 'export it again')
    } else {
      refuse(...told(said, closed))
    }
  })
  parser.on('doctype', (doctype) => {
    if (/<!ENTITY/i.test(doctype)) {
      const cure = 'export it as plain SVG, without <!ENTITY ...>'
      refuse('xml-entities', 'the document type declares entities, which are never expanded', cure)
    }
  })
  parser.on('opentagstart', () => {
    startLine = parser.line
  })
  parser.on('opentag', (tag) => {
    if (problem !== null) return
    count += 1
    if (count > mostElements) refuse('too-large', `more than ${mostElements} elements`, 'split the drawing')
    if (open.length >= deepest) refuse('too-deep', `elements are nested more than ${deepest} deep`, 'ungroup the drawing')
    const attributes: string[] = []
    for (const attribute of Object.values(tag.attributes)) {
      if (attribute.uri === '') attributes.push(attribute.local, attribute.value)
      else if (attribute.uri === options.keptSpace.uri) attributes.push(`${options.keptSpace.prefix}:${attribute.local}`, attribute.value)
    }
    const element: Growing = { name: tag.local, space: tag.uri, attributes, children: none, text: '', line: startLine }
    const parent = open.at(-1)
    if (parent === undefined) root ??= element
    else if (parent.children === none) parent.children = [element]
    else (parent.children as XmlElement[]).push(element)
    open.push(element)
  })
  parser.on('closetag', () => {
    if (problem === null) closed = open.pop()
  })
  const keepText = (data: string): void => {
    const inner = open.at(-1)
    if (inner !== undefined && keepsText.has(inner.name)) inner.text += data
  }
  parser.on('text', keepText)
  parser.on('cdata', keepText)

  const start = text.charCodeAt(0) === 0xfeff ? 1 : 0
  for (let at = start; at < text.length && problem === null; at += slice) {
    parser.write(text.slice(at, at + slice))
    yield { stage: 'Reading', done: at / text.length }
  }
  ended = true
  if (problem === null) parser.close()
  if (problem !== null) return { ok: false, problem }
  return root === null ? fail('cut-off', 'there is no element in the file', null, 'export it again') : ok(root)
}

/** Code, message and cure for what the parser says; `closed` is the element that it closed last. */
function told(said: string, closed: Growing | undefined): [code: string, message: string, cure: string | null] {
  if (/^undefined entity|entity name/.test(said)) {
    return ['xml-entities', 'an entity is used that XML does not define by itself', 'write the character in its place']
  }
  if (said === 'unexpected close tag' && closed !== undefined) {
    return ['not-xml', `a closing tag does not fit <${closed.name}>, which line ${closed.line} opens`, 'export the file again']
  }
  const prefix = /^unbound namespace prefix: "?([^"]*)"?/.exec(said)?.[1]
  if (prefix !== undefined) {
    return ['not-xml', `the prefix "${prefix}:" is not declared`, `add xmlns:${prefix}="..." to the root element`]
  }
  return ['not-xml', `this is not well-formed XML: ${said}`, 'export the file again']
}

/** The value of an attribute, null where the element has none. */
export function attribute(element: XmlElement, name: string): string | null {
  const { attributes } = element
  for (let i = 0; i < attributes.length; i += 2) if (attributes[i] === name) return attributes[i + 1] ?? ''
  return null
}
