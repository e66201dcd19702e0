/**
 * JSON (RFC 8259) as a tape: one entry a value in the order of the text, so that millions of coordinates cost eight bytes
 * each and every value knows where it stands. The kind of a value is its first character.
 *
 * Tried and dropped: JSON.parse, which gives no turn for a cancel, about 100 bytes a position, and no line for a value
 * that is well formed but wrong.
 */
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { Integers } from '../base/growing.ts'
import { decimalIn } from './text-number.ts'
import { printable, quoted } from './text-quote.ts'

/** Deeper nesting than any drawing has. */
const deepest = 128
/** Eight bytes each, and as much again while they grow. */
const mostValues = 16_000_000
/** Values between two turns: about a millisecond. */
const slice = 1 << 14

export type JsonKind = 'object' | 'array' | 'string' | 'number' | 'true' | 'false' | 'null'

export class JsonTape {
  readonly text: string
  /** Offset in the text of the first character of value i. The members of an object are key, value, key, value .. */
  readonly start = new Integers()
  /** Index of the value that follows value i with all that is inside it; the children of i are i + 1 .. next(i) - 1. */
  readonly next = new Integers()
  private lineOffset = 0
  private lineNumber = 1

  constructor(text: string) {
    this.text = text
  }

  kind(value: number): JsonKind {
    switch (this.text[this.start.at(value)]) {
      case '{': return 'object'
      case '[': return 'array'
      case '"': return 'string'
      case 't': return 'true'
      case 'f': return 'false'
      case 'n': return 'null'
      default: return 'number'
    }
  }

  isArray(value: number): boolean {
    return this.text.charCodeAt(this.start.at(value)) === 91
  }

  /** NaN where it is no number or beyond the range of doubles. */
  number(value: number): number {
    const start = this.start.at(value)
    return decimalIn(this.text, start, numberEnd(this.text, start))
  }

  /** The characters of a string; null where it is none. */
  string(value: number): string | null {
    const start = this.start.at(value)
    if (this.text[start] !== '"') return null
    const end = stringEnd(this.text, start)
    const inner = this.text.slice(start + 1, end - 1)
    return inner.includes('\\') ? (JSON.parse(this.text.slice(start, end)) as string) : inner
  }

  /** What a value is, for sentences: a text in quotes, a number or word as it stands, else "a list" or "an object". */
  shown(value: number): string {
    const kind = this.kind(value)
    if (kind === 'array') return 'a list'
    if (kind === 'object') return 'an object'
    if (kind === 'string') return quoted(this.string(value) ?? '')
    const start = this.start.at(value)
    return kind === 'number' ? printable(this.text.slice(start, numberEnd(this.text, start)), 24) : kind
  }

  /** The value of an object's member of this name, the last one if there are several; -1 when there is none. */
  member(object: number, name: string): number {
    let found = -1
    for (let key = object + 1; key < this.next.at(object); key = this.next.at(key + 1)) if (this.string(key) === name) found = key + 1
    return found
  }

  /** 1-based line of a value. Fast when asked in the order of the text. */
  line(value: number): number {
    const offset = this.start.at(value)
    if (offset < this.lineOffset) {
      this.lineOffset = 0
      this.lineNumber = 1
    }
    for (;;) {
      const feed = this.text.indexOf('\n', this.lineOffset)
      if (feed === -1 || feed >= offset) return this.lineNumber
      this.lineOffset = feed + 1
      this.lineNumber += 1
    }
  }

  /** Where a value is, as "features[3].geometry.coordinates[0][2]"; "" for the outermost. */
  path(value: number): string {
    let out = ''
    let inside = 0
    while (inside !== value) {
      let child = inside + 1
      if (this.isArray(inside)) {
        let index = 0
        while (this.next.at(child) <= value) {
          child = this.next.at(child)
          index += 1
        }
        out += `[${index}]`
      } else {
        while (this.next.at(child + 1) <= value) child = this.next.at(child + 1)
        const key = this.string(child) ?? ''
        out += /^[A-Za-z_$][\w$]{0,40}$/.test(key) ? `${out === '' ? '' : '.'}${key}` : `[${quoted(key)}]`
        if (child === value) return out
        child += 1
      }
      inside = child
    }
    return out
  }
}

/** The tape of a text; fails with "not-json", "cut-off", "too-deep" or "too-large" and the line. */
export function* jsonTape(text: string): Steps<Result<JsonTape>> {
  const tape = new JsonTape(text)
  const { start, next } = tape
  // The open objects and arrays, outermost first.
  const open: number[] = []
  let inObject = false
  let at = text.charCodeAt(0) === 0xfeff ? 1 : 0
  /** What may come: a value, a value or "]", a key, a key or "}", or a comma or the end of what is open. */
  let expected: 'value' | 'first' | 'key' | 'firstKey' | 'more' = 'value'

  const refuse = (code: string, message: string, cure: string, offset = at): { ok: false; problem: Problem } => {
    let line = 1
    for (let feed = text.indexOf('\n'); feed !== -1 && feed < offset; feed = text.indexOf('\n', feed + 1)) line += 1
    return fail(code, message, { line }, cure)
  }
  const unexpected = (what: string): { ok: false; problem: Problem } => {
    if (at < text.length) {
      const word = /^(-?(NaN|Infinity|nan|inf)\b|undefined\b|None\b)/.exec(text.slice(at, at + 12))?.[0]
      if (word !== undefined) return refuse('not-json', `${word} is no number and no value of JSON`, 'export the file again')
      return refuse('not-json', `${what} is expected in place of ${quoted(text.slice(at, at + 12))}`, 'export the file again')
    }
    const inside = open.at(-1)
    if (inside === undefined) return refuse('cut-off', 'the file ends too early', 'it may be cut off: export it again')
    const message = `the file ends inside ${inObject ? 'an object' : 'a list'} that line ${tape.line(inside)} opens`
    return refuse('cut-off', message, 'it may be cut off: export it again')
  }

  for (let count = 1; ; count += 1) {
    if (count % slice === 0) yield { stage: 'Reading', done: at / text.length }
    at = skipBlanks(text, at)
    const code = text.charCodeAt(at)

    if (expected === 'more') {
      if (open.length === 0) return at === text.length ? ok(tape) : unexpected('the end of the file')
      if (code === 44) {
        at += 1
        expected = inObject ? 'key' : 'value'
        continue
      }
      if (code !== (inObject ? 125 : 93)) return unexpected(inObject ? 'a comma or }' : 'a comma or ]')
    }
    if ((code === 125 || code === 93) && (expected === 'more' || expected === (code === 125 ? 'firstKey' : 'first'))) {
      at += 1
      next.set(open.pop() ?? 0, start.length)
      const outer = open.at(-1)
      inObject = outer !== undefined && text.charCodeAt(start.at(outer)) === 123
      expected = 'more'
      continue
    }

    if (start.length >= mostValues) return refuse('too-large', `the file has more than ${mostValues} values`, 'split the drawing')
    const value = start.length
    if (expected === 'key' || expected === 'firstKey') {
      if (code !== 34) return unexpected('a name in double quotes')
      const end = stringEnd(text, at)
      if (end < 0) return badString(-end - 1)
      start.push(at)
      next.push(value + 1)
      at = skipBlanks(text, end)
      if (text.charCodeAt(at) !== 58) return unexpected('a colon')
      at += 1
      expected = 'value'
      continue
    }

    if (code === 123 || code === 91) {
      if (open.length >= deepest) return refuse('too-deep', `values are nested more than ${deepest} deep`, 'export the file again')
      open.push(value)
      start.push(at)
      next.push(0)
      inObject = code === 123
      expected = inObject ? 'firstKey' : 'first'
      at += 1
      continue
    }
    let end: number
    if (code === 34) {
      end = stringEnd(text, at)
      if (end < 0) return badString(-end - 1)
    } else if (code === 45 || (code >= 48 && code <= 57)) {
      end = numberEnd(text, at)
      if (!isNumber.test(text.slice(at, end))) return unexpected('a number')
    } else {
      const word = /^(true|false|null)\b/.exec(text.slice(at, at + 6))
      if (word === null) return unexpected('a value')
      end = at + word[0].length
    }
    start.push(at)
    next.push(value + 1)
    at = end
    expected = 'more'
  }

  function badString(offset: number): { ok: false; problem: Problem } {
    if (offset >= text.length) {
      return refuse('cut-off', 'the file ends inside a text in double quotes', 'it may be cut off: export it again')
    }
    return refuse('not-json', `a text in double quotes holds ${quoted(text.slice(offset, offset + 6))}`, 'export the file again', offset)
  }
}

const isNumber = /^-?(0|[1-9]\d*)(\.\d+)?([eE][+-]?\d+)?$/

function skipBlanks(text: string, from: number): number {
  let at = from
  for (;;) {
    const code = text.charCodeAt(at)
    if (code !== 32 && code !== 10 && code !== 13 && code !== 9) return at
    at += 1
  }
}

/** Index after the characters of a number. */
function numberEnd(text: string, from: number): number {
  let at = from
  for (;;) {
    const code = text.charCodeAt(at)
    // Digits, sign, point, e and E; also letters, so that 12abc is one wrong word.
    const isSign = code === 45 || code === 43 || code === 46
    const isLetter = (code >= 65 && code <= 90) || (code >= 97 && code <= 122)
    if (!isSign && !isLetter && !(code >= 48 && code <= 57)) return at
    at += 1
  }
}

/** Index after the closing quote of the string that starts here; -1 - (index of what may not be in it) where it is none. */
function stringEnd(text: string, from: number): number {
  let at = from + 1
  for (;;) {
    const code = text.charCodeAt(at)
    if (code === 34) return at + 1
    if (code === 92) {
      const escaped = text[at + 1] ?? ''
      if (escaped === 'u') {
        if (!/^[0-9a-fA-F]{4}$/.test(text.slice(at + 2, at + 6))) return -1 - (at + 6 > text.length ? text.length : at)
        at += 6
      } else if (escaped !== '' && '"\\/bfnrt'.includes(escaped)) at += 2
      else return -1 - (escaped === '' ? text.length : at)
    } else if (code < 32) return -1 - at
    else if (at >= text.length) return -1 - text.length
    else at += 1
  }
}
