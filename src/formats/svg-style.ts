/**
 * Style sheets of a drawing: rules with simple selectors (*, element, .class, #id and their compounds, in lists), the
 * style attribute and presentation attributes, in the order of the cascade (CSS Cascade 4, section 6; Selectors 4).
 * Rules with combinators, pseudo-classes or conditions (@media) are not followed; they are counted.
 */
import { attribute, type XmlElement } from './xml.ts'

interface Rule {
  readonly tag: string | null
  readonly id: string | null
  readonly classes: readonly string[]
  readonly specificity: number
  readonly order: number
  readonly declarations: readonly Declaration[]
}

interface Declaration {
  readonly property: string
  readonly value: string
  readonly important: boolean
}

export interface StyleSheet {
  /** By the part of the selector that the fewest elements have: "#id", ".class", else "element" or "*". */
  readonly rules: ReadonlyMap<string, readonly Rule[]>
  readonly ruleCount: number
  /** Rules that are not followed. */
  readonly unread: number
}

/** More rules than any drawing has; keeps the work per element within bounds. */
export const mostRules = 5000

/** The rules of all <style> elements, in the order of the file. */
export function styleSheet(texts: readonly string[]): StyleSheet {
  const rules = new Map<string, Rule[]>()
  let ruleCount = 0
  let unread = 0
  for (const text of texts) {
    for (const { selectors, body } of blocks(text.replace(/\/\*[\s\S]*?(\*\/|$)/g, ' '))) {
      if (body === null) {
        unread += 1
        continue
      }
      const declarations = declarationList(body)
      for (const selector of selectors.split(',')) {
        if (ruleCount === mostRules) return { rules, ruleCount: ruleCount + 1, unread }
        const rule = simpleRule(selector.trim(), ruleCount, declarations)
        if (rule === null) {
          unread += 1
          continue
        }
        ruleCount += 1
        const key = rule.id !== null ? `#${rule.id}` : rule.classes.length > 0 ? `.${rule.classes[0]}` : (rule.tag ?? '*')
        const others = rules.get(key)
        if (others === undefined) rules.set(key, [rule])
        else others.push(rule)
      }
    }
  }
  return { rules, ruleCount, unread }
}

/** At-rules that say nothing about how an element is painted. */
const silentAtRule = /^@(charset|namespace|font-face|keyframes|page)\b/i

/** Pairs of selector list and body; body null for an at-rule that is not followed. */
function* blocks(text: string): Generator<{ selectors: string; body: string | null }> {
  let at = 0
  while (at < text.length) {
    const open = indexOutside(text, at, '{;')
    if (open === -1) return
    const head = text.slice(at, open).replace(/<!--|-->/g, ' ').trim()
    if (text[open] === ';') {
      if (head.startsWith('@') && !silentAtRule.test(head)) yield { selectors: head, body: null }
      at = open + 1
      continue
    }
    let depth = 1
    let close = open
    while (depth > 0) {
      close = indexOutside(text, close + 1, '{}')
      if (close === -1) close = text.length
      depth += text[close] === '{' ? 1 : -1
      if (close === text.length) break
    }
    if (!head.startsWith('@')) yield { selectors: head, body: text.slice(open + 1, close) }
    else if (!silentAtRule.test(head)) yield { selectors: head, body: null }
    at = close + 1
  }
}

/** Index of the first of the characters outside of quotes and brackets, -1 when there is none. */
function indexOutside(text: string, from: number, characters: string): number {
  let quote = ''
  let brackets = 0
  for (let i = from; i < text.length; i += 1) {
    const c = text[i]
    if (quote !== '') {
      if (c === '\\') i += 1
      else if (c === quote) quote = ''
    } else if (c === '"' || c === "'") quote = c
    else if (c === '(') brackets += 1
    else if (c === ')') brackets = Math.max(0, brackets - 1)
    else if (brackets === 0 && characters.includes(c)) return i
  }
  return -1
}

const name = String.raw`-?[A-Za-z_\u0080-\uffff][\w\u0080-\uffff-]*`
const compound = new RegExp(String.raw`^(\*|${name})?((?:[.#]${name})*)$`)

function simpleRule(selector: string, order: number, declarations: readonly Declaration[]): Rule | null {
  const match = compound.exec(selector)
  if (match === null || selector === '') return null
  const tag = match[1] === undefined || match[1] === '*' ? null : match[1]
  const parts = match[2].match(/[.#][^.#]+/g) ?? []
  const classes = parts.filter((part) => part.startsWith('.')).map((part) => part.slice(1))
  const ids = parts.filter((part) => part.startsWith('#')).map((part) => part.slice(1))
  if (ids.length > 1) return null
  const specificity = 1e6 * ids.length + 1e3 * classes.length + (tag === null ? 0 : 1)
  return { tag, id: ids[0] ?? null, classes, specificity, order, declarations }
}

/** The declarations of a block or of a style attribute. */
function declarationList(text: string): Declaration[] {
  const out: Declaration[] = []
  let at = 0
  while (at < text.length) {
    const next = indexOutside(text, at, ';')
    const end = next === -1 ? text.length : next
    const piece = text.slice(at, end)
    const colon = piece.indexOf(':')
    if (colon > 0) {
      const important = /!\s*important\s*$/i.exec(piece)
      const value = piece.slice(colon + 1, important?.index ?? piece.length).trim()
      out.push({ property: piece.slice(0, colon).trim().toLowerCase(), value, important: important !== null })
    }
    at = end + 1
  }
  return out
}

/** The properties that say what of an element is drawn, and where. All may stand as attributes too. */
export const readProperties: ReadonlySet<string> = new Set([
  'fill', 'stroke', 'fill-rule', 'fill-opacity', 'stroke-opacity', 'stroke-width', 'opacity', 'display', 'visibility',
  'transform', 'transform-origin', 'x', 'y', 'width', 'height', 'cx', 'cy', 'r', 'rx', 'ry',
])

/** What the cascade declares for an element: property to value, without what it inherits. */
export function declared(sheet: StyleSheet, element: XmlElement): ReadonlyMap<string, string> {
  const out = new Map<string, string>()
  const { attributes } = element
  for (let i = 0; i < attributes.length; i += 2) if (readProperties.has(attributes[i])) out.set(attributes[i], attributes[i + 1].trim())
  const matching = sheet.ruleCount === 0 ? [] : matches(sheet, element)
  const own = declarationList((attribute(element, 'style') ?? '').replace(/\/\*[\s\S]*?(\*\/|$)/g, ' '))
  for (const important of [false, true]) {
    for (const { declarations } of matching) apply(out, declarations, important)
    apply(out, own, important)
  }
  return out
}

function apply(out: Map<string, string>, declarations: readonly Declaration[], important: boolean): void {
  for (const declaration of declarations) {
    if (declaration.important === important && readProperties.has(declaration.property)) out.set(declaration.property, declaration.value)
  }
}

/** Rules that select the element, weakest first. */
function matches(sheet: StyleSheet, element: XmlElement): Rule[] {
  const id = attribute(element, 'id')
  const classes = new Set((attribute(element, 'class') ?? '').split(/\s+/).filter((word) => word !== ''))
  const out: Rule[] = []
  const from = (key: string): void => {
    for (const rule of sheet.rules.get(key) ?? []) {
      const named = (rule.tag === null || rule.tag === element.name) && (rule.id === null || rule.id === id)
      if (named && rule.classes.every((word) => classes.has(word))) out.push(rule)
    }
  }
  from('*')
  from(element.name)
  if (id !== null) from(`#${id}`)
  for (const word of classes) from(`.${word}`)
  return out.sort((a, b) => a.specificity - b.specificity || a.order - b.order)
}
