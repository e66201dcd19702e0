/**
 * OBJ: faces (f) are outlines, line elements (l) are segments, point elements (p) are marks. A group (g), or an object
 * (o) where no group is open, is a layer. The format has no unit. Materials, normals and texture points carry no
 * geometry; free-form curves and surfaces are counted as left out.
 *
 * The text is scanned in place: at 100,000 faces, splitting lines into strings cost more than all the rest.
 *
 * Source: the published text of the OBJ format, version 3.0 (appendix B1, Object Files).
 */
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Drawing } from '../plan/drawing.ts'
import type { Format, FormatOptions, Source } from './format.ts'
import { LayerChoice } from './layer-choice.ts'
import { ObjLine } from './obj-line.ts'
import { Sketch } from './sketch.ts'
import { decimalIn, farthest } from './text-number.ts'
import { quoted } from './text-quote.ts'

export const obj: Format = { title: 'OBJ', extensions: ['obj'], recognises, read }

/** Statements that say nothing about where things are. */
const silent = new Set([
  'vt', 'vn', 'vp', 's', 'mtllib', 'usemtl', 'maplib', 'usemap', 'mg', 'bevel', 'c_interp', 'd_interp', 'lod',
  'shadow_obj', 'trace_obj', 'ctech', 'stech',
  'cstype', 'deg', 'bmat', 'step', 'parm', 'trim', 'hole', 'scrv', 'sp', 'end', 'con',
])

/** Lines between two yields; about 10 ms. */
const linesPerStep = 20_000

/** The first statement that is no comment: a vertex, an element, a group or a material library. */
function recognises(head: string): boolean {
  const statement = /^(?:[ \t]*(?:#[^\n]*)?\n)*[ \t]*([a-z]+)[ \t]+(\S)/.exec(head)
  if (statement === null) return false
  const [, keyword, next] = statement
  if (keyword === 'v' || keyword === 'vt' || keyword === 'vn' || keyword === 'f' || keyword === 'l') return /[-+.\d]/.test(next)
  return keyword === 'mtllib' || keyword === 'o' || keyword === 'g' || keyword === 'usemtl'
}

function* read(text: string, _source: Source, options: FormatOptions): Steps<Result<Drawing>> {
  const reader = new ObjReader(options)
  const line = new ObjLine(text)
  let count = 0
  while (line.advance()) {
    const problem = reader.statement(line)
    if (problem !== null) return { ok: false, problem }
    if (++count % linesPerStep === 0) yield { stage: 'Reading', done: line.share }
  }
  return reader.drawing()
}

class ObjReader {
  private readonly sketch = new Sketch()
  private readonly choice: LayerChoice
  private readonly layers = new Set<string>([''])
  private object = ''
  private group = ''
  private layer = 0
  private taken: boolean
  /** The largest vertex named so far and the line that names it: vertices may follow the faces. */
  private highest = -1
  private highestLine = 0
  private corners: number[] = []

  constructor(options: FormatOptions) {
    this.choice = new LayerChoice(options.layers)
    this.taken = this.choice.takes('')
    if (this.taken) this.layer = this.sketch.layer('')
  }

  statement(line: ObjLine): Problem | null {
    if (!line.token()) return null
    const keyword = line.word()
    switch (keyword) {
      case 'v': return this.vertex(line)
      case 'f': case 'fo': return this.face(line)
      case 'l': return this.lines(line)
      case 'p': return this.marks(line)
      case 'g': this.group = line.rest(); return this.openLayer()
      case 'o': this.object = line.rest(); this.group = ''; return this.openLayer()
    }
    if (!silent.has(keyword)) this.sketch.leaveOut(`statement ${quoted(keyword)}`, this.group)
    return null
  }

  /** v x y [z [w]], or with a colour: v x y z r g b. */
  private vertex(line: ObjLine): Problem | null {
    let x = 0
    let y = 0
    let z = 0
    let count = 0
    while (count < 3 && line.token()) {
      const value = decimalIn(line.text, line.from, line.to)
      if (Number.isNaN(value)) return notANumber(line)
      if (Math.abs(value) > farthest) {
        return trouble(line, 'too-far', `the coordinate ${quoted(line.word())} is beyond 1e12`, 'move the drawing nearer to its origin')
      }
      if (count === 0) x = value
      else if (count === 1) y = value
      else z = value
      count += 1
    }
    if (count < 2) return trouble(line, 'too-few-numbers', 'a vertex has fewer than two coordinates', 'give x, y and z')
    this.sketch.point(x, y, z, count === 3)
    return null
  }

  private face(line: ObjLine): Problem | null {
    const problem = this.references(line)
    if (problem !== null) return problem
    const { corners } = this
    while (corners.length > 1 && corners[corners.length - 1] === corners[0]) corners.pop()
    if (corners.length < 3) {
      return trouble(line, 'too-few-corners', 'a face has fewer than three different corners', 'give it three or more, or leave it out')
    }
    if (this.taken) this.sketch.outlines.add(corners, this.layer, line.number)
    else this.sketch.leaveOut('face, layer not chosen', this.group)
    return null
  }

  private lines(line: ObjLine): Problem | null {
    const problem = this.references(line)
    if (problem !== null) return problem
    const { corners } = this
    if (corners.length < 2) {
      return trouble(line, 'too-few-corners', 'a line has fewer than two different points', 'give it two or more, or leave it out')
    }
    if (!this.taken) this.sketch.leaveOut('line, layer not chosen', this.group)
    else for (let i = 1; i < corners.length; i += 1) this.sketch.segment(corners[i - 1], corners[i], this.layer, line.number)
    return null
  }

  private marks(line: ObjLine): Problem | null {
    const problem = this.references(line)
    if (problem !== null) return problem
    if (!this.taken) this.sketch.leaveOut('point, layer not chosen', this.group, this.corners.length)
    else for (const point of this.corners) this.sketch.mark(point, this.layer)
    return null
  }

  /** Vertices named by the rest of the line, into `corners`; the same one twice in a row is taken once. */
  private references(line: ObjLine): Problem | null {
    const { corners } = this
    corners.length = 0
    const count = this.sketch.pointCount
    while (line.token()) {
      const index = line.reference()
      if (Number.isNaN(index)) return notANumber(line)
      const point = index < 0 ? count + index : index - 1
      if (index === 0 || point < 0) return outOfRange(line.word(), count, line.number)
      if (point > this.highest) {
        this.highest = point
        this.highestLine = line.number
      }
      if (corners.length === 0 || corners[corners.length - 1] !== point) corners.push(point)
    }
    return null
  }

  private openLayer(): null {
    const name = this.group === '' ? this.object : this.group
    this.layers.add(name)
    this.taken = this.choice.takes(name)
    if (this.taken) this.layer = this.sketch.layer(name)
    return null
  }

  drawing(): Result<Drawing> {
    const { sketch, highest } = this
    if (highest >= sketch.pointCount) return { ok: false, problem: outOfRange(String(highest + 1), sketch.pointCount, this.highestLine) }
    const missing = this.choice.missing(this.layers)
    if (missing !== null) return { ok: false, problem: missing }
    if (sketch.outlines.length + sketch.segmentCount + sketch.markCount === 0) {
      const other = sketch.leftOut.map(({ kind, count }) => `${count} x ${kind}`)
      const message = `the file has no faces (f) and no lines (l)${other.length > 0 ? `, only ${other.slice(0, 6).join(', ')}` : ''}`
      return fail('nothing-drawn', message, null, 'export the panels as faces or their edges as lines')
    }
    return ok(sketch.drawing('OBJ', null, false))
  }
}

function trouble(line: ObjLine, code: string, message: string, cure: string): Problem {
  return fail(code, message, { line: line.number }, cure).problem
}

function notANumber(line: ObjLine): Problem {
  const word = line.word()
  const cure = /^[-+]?\d+,\d+$/.test(word) ? 'write decimals with a point' : 'export the file again'
  return trouble(line, 'not-a-number', `${quoted(word)} is not a number`, cure)
}

function outOfRange(reference: string, count: number, line: number): Problem {
  const have = count === 0 ? 'there are no vertices' : count === 1 ? 'there is one vertex' : `there are ${count} vertices`
  return fail('index-out-of-range', `vertex ${reference} is named, but ${have}`, { line }, 'export the file again').problem
}
