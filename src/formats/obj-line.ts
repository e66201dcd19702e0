/** The statements of an OBJ file, one after the other, with their words as ranges of the text. */
import { integerIn } from './text-number.ts'

const space = 32
const hash = 35
const slash = 47
const backslash = 92
const minus = 45

export class ObjLine {
  /** What `from` and `to` refer to: the file, or a statement that was continued over several lines. */
  text: string
  /** The current word is text[from, to). */
  from = 0
  to = 0
  /** 1-based line at which the current statement begins. */
  number = 0
  private end = 0
  private position = 0
  private lines = 0

  constructor(private readonly file: string) {
    this.text = file
  }

  /** Share of the file that is read. */
  get share(): number {
    return this.position / Math.max(1, this.file.length)
  }

  /** Goes to the next statement; false at the end of the file. */
  advance(): boolean {
    const { file } = this
    if (this.position >= file.length) return false
    const start = this.position
    let end = this.lineEnd()
    this.number = this.lines
    this.text = file
    this.to = start
    this.end = end
    if (!this.continues(start, end) || isComment(file, start, end)) return true
    // Backslash and line feed become blanks. Rare, so a string of its own is no cost.
    const pieces = [file.slice(start, end - 1)]
    while (this.continues(start, end) && this.position < file.length) {
      const from = this.position
      end = this.lineEnd()
      pieces.push(file.slice(from, this.continues(from, end) ? end - 1 : end))
    }
    this.text = pieces.join(' ')
    this.to = 0
    this.end = this.text.length
    return true
  }

  private lineEnd(): number {
    const found = this.file.indexOf('\n', this.position)
    const end = found < 0 ? this.file.length : found
    this.position = end + 1
    this.lines += 1
    return end
  }

  private continues(start: number, end: number): boolean {
    return end > start && this.file.charCodeAt(end - 1) === backslash
  }

  /** Goes to the next word of the statement; false when there is none, or only a comment. */
  token(): boolean {
    const { text, end } = this
    let at = this.to
    while (at < end && text.charCodeAt(at) <= space) at += 1
    this.from = at
    if (at < end && text.charCodeAt(at) === hash) {
      this.to = end
      this.from = end
      return false
    }
    while (at < end && text.charCodeAt(at) > space) at += 1
    this.to = at
    return at > this.from
  }

  /** The current word. */
  word(): string {
    return this.text.slice(this.from, this.to)
  }

  /** All that follows the current word. */
  rest(): string {
    return this.text.slice(this.to, this.end).trim()
  }

  /** The vertex of a word v, v/vt, v//vn or v/vt/vn; NaN when it is none of these. */
  reference(): number {
    const { text, to } = this
    let at = this.from
    while (at < to && text.charCodeAt(at) !== slash) at += 1
    const index = integerIn(text, this.from, at)
    for (let slashes = 0; at < to; at += 1) {
      const code = text.charCodeAt(at)
      if (code === slash ? ++slashes > 2 : code !== minus && (code < 48 || code > 57)) return NaN
    }
    return index
  }
}

function isComment(text: string, start: number, end: number): boolean {
  let at = start
  while (at < end && text.charCodeAt(at) <= space) at += 1
  return text.charCodeAt(at) === hash
}
