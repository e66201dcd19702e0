/**
 * An ASCII DXF as records. The file is pairs of lines: a group code and a value. A record is a pair with code 0 (its
 * value is the record's kind) and all pairs up to the next one; that is what tables, blocks and entities are made of.
 *
 * The pairs of the current record are ranges of the text, in arrays that are used again for the next one; numbers are
 * read only when asked for. A value that cannot be read is kept as `problem` (the first one) and read as 0, so that the
 * readers of entities stay short; whoever advances looks at it.
 *
 * Source: DXF reference, releases 12 to 2018, "Group codes in numerical order" and "ASCII DXF files".
 */
import { fail, type Problem } from '../base/result.ts'
import { dxfText } from './dxf-text.ts'
import { decimalIn, farthest, integerIn } from './text-number.ts'
import { printable, quoted } from './text-quote.ts'

/** Group code of data that belongs to an embedded object, not to the entity; it ends what is of use here. */
const embeddedObject = 101

export const damaged = 'the file is damaged; export it again'

export class DxfRecords {
  /** Kind of the current record, e.g. "LINE". */
  kind = ''
  /** 1-based line of the current record's code 0. */
  line = 0
  /** Pairs of the current record after its code 0; pair i has codes[i] and the value text[from[i], to[i]). */
  count = 0
  codes: Int32Array = new Int32Array(64)
  problem: Problem | null = null
  private from: Int32Array = new Int32Array(64)
  private to: Int32Array = new Int32Array(64)
  private position = 0
  /** Lines read so far. */
  private lines = 0
  private code = 0
  private start = 0
  private stop = 0

  constructor(private readonly text: string) {
    // A file may begin with comments (code 999); the first record begins at the first code 0.
    while (this.pair()) if (this.code === 0) return
  }

  get share(): number {
    return this.position / Math.max(1, this.text.length)
  }

  /** Goes to the next record; false at EOF or when there is a problem. */
  advance(): boolean {
    if (this.problem !== null) return false
    this.kind = printable(this.text.slice(this.start, this.stop).toUpperCase(), 32)
    this.line = this.lines - 1
    this.count = 0
    if (this.kind === 'EOF') return false
    let embedded = false
    while (this.pair()) {
      if (this.code === 0) return true
      if (this.code === embeddedObject) embedded = true
      if (!embedded && this.code !== 999) this.keep()
    }
    return false
  }

  private keep(): void {
    if (this.count === this.codes.length) {
      this.codes = enlarged(this.codes)
      this.from = enlarged(this.from)
      this.to = enlarged(this.to)
    }
    this.codes[this.count] = this.code
    this.from[this.count] = this.start
    this.to[this.count] = this.stop
    this.count += 1
  }

  /** Reads a code line and a value line. False, with a problem, at the end of the text or where the code is none. */
  private pair(): boolean {
    const { text } = this
    if (this.position >= text.length) return this.cutOff()
    let end = this.lineEnd()
    const code = integerIn(text, this.start, this.stop)
    if (Number.isNaN(code)) {
      if (this.start === this.stop && text.slice(this.position).trim() === '') return this.cutOff()
      const message = `${quoted(text.slice(this.start, this.stop))} stands where a group code should be`
      this.problem = fail('not-a-group-code', message, { line: this.lines, ...this.entity() }, damaged).problem
      return false
    }
    this.code = code
    if (this.position >= text.length && text.charCodeAt(end) !== 10) return this.cutOff()
    end = this.lineEnd()
    return true
  }

  /** Moves over one line and sets its trimmed range; returns where it ends. */
  private lineEnd(): number {
    const { text } = this
    const found = text.indexOf('\n', this.position)
    const end = found < 0 ? text.length : found
    let start = this.position
    let stop = end
    while (start < stop && text.charCodeAt(start) <= 32) start += 1
    while (stop > start && text.charCodeAt(stop - 1) <= 32) stop -= 1
    this.start = start
    this.stop = stop
    this.position = end + 1
    this.lines += 1
    return end
  }

  private cutOff(): false {
    const inside = this.kind === '' || this.kind === 'ENDSEC' ? 'before its EOF mark' : `in the middle of ${this.name}`
    this.problem ??= fail('cut-off', `the file ends ${inside}`, { line: this.lines }, 'it was cut off; export it again').problem
    return false
  }

  /** "LINE 2F": kind and handle of the current record. */
  get name(): string {
    const handle = this.find(5)
    return handle < 0 || this.kind === '' ? this.kind : `${this.kind} ${printable(this.value(handle), 20)}`
  }

  private entity(): { entity?: string } {
    return this.kind === '' ? {} : { entity: this.name }
  }

  /** Index of the first pair from `start` on with this code, -1 when there is none. */
  find(code: number, start = 0): number {
    for (let i = start; i < this.count; i += 1) if (this.codes[i] === code) return i
    return -1
  }

  /** The value of pair i as it stands, without blanks round it. */
  value(i: number): string {
    return this.text.slice(this.from[i], this.to[i])
  }

  /** A name with its escapes undone; `missing` where the record has no such code. */
  word(code: number, missing = ''): string {
    const i = this.find(code)
    return i < 0 ? missing : dxfText(this.value(i))
  }

  /** The number of pair i: finite and at most 1e12 in size. */
  numberAt(i: number): number {
    const value = decimalIn(this.text, this.from[i], this.to[i])
    if (Number.isNaN(value)) this.trouble(i, 'not-a-number', `${quoted(this.value(i))} is not a number`, 'export the file again')
    else if (Math.abs(value) <= farthest) return value
    else this.trouble(i, 'too-far', `the number ${quoted(this.value(i))} is beyond 1e12`, 'move the drawing nearer to its origin')
    return 0
  }

  /** The number with this code, `missing` where the record has none. */
  number(code: number, missing: number): number {
    const i = this.find(code)
    return i < 0 ? missing : this.numberAt(i)
  }

  integerAt(i: number): number {
    const value = decimalIn(this.text, this.from[i], this.to[i])
    if (Number.isInteger(value) && Math.abs(value) <= 2147483647) return value
    this.trouble(i, 'not-a-number', `${quoted(this.value(i))} is not a whole number`, 'export the file again')
    return 0
  }

  integer(code: number, missing: number): number {
    const i = this.find(code)
    return i < 0 ? missing : this.integerAt(i)
  }

  /** x y z of the codes c, c + 10, c + 20; null where the record has no x. */
  point(code: number): [x: number, y: number, z: number] | null {
    if (this.find(code) < 0) return null
    return [this.number(code, 0), this.number(code + 10, 0), this.number(code + 20, 0)]
  }

  /** The same, for points that the entity cannot be without. */
  needed(code: number): [x: number, y: number, z: number] {
    const point = this.point(code)
    if (point !== null && this.find(code + 10) >= 0) return point
    this.refuse('incomplete', `it has no point of codes ${code} and ${code + 10}`)
    return [0, 0, 0]
  }

  /** Notes a problem of the current record as a whole. */
  refuse(code: string, message: string, cure = 'export the file again', line = this.line): void {
    this.problem ??= fail(code, message, { line, ...this.entity() }, cure).problem
  }

  private trouble(i: number, code: string, message: string, cure: string): void {
    this.problem ??= fail(code, message, { line: this.line + 2 * i + 3, ...this.entity() }, cure).problem
  }
}

function enlarged(array: Int32Array): Int32Array {
  const larger = new Int32Array(2 * array.length)
  larger.set(array)
  return larger
}
