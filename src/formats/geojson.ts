/**
 * GeoJSON (RFC 7946): polygons are outlines, their interior rings bound voids, line strings are segments, points are
 * marks. A third coordinate is a height. The layer of a feature is its property "layer" where that is a text.
 *
 * RFC 7946 means degrees, but plans are written in the units of the site: the numbers are taken as they are, and the
 * file states no unit.
 */
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Drawing } from '../plan/drawing.ts'
import type { Format, FormatOptions, Source } from './format.ts'
import { jsonTape, type JsonTape } from './geojson-tape.ts'
import { LayerChoice } from './layer-choice.ts'
import { Sketch } from './sketch.ts'
import { farthest } from './text-number.ts'

export const geojson: Format = { title: 'GeoJSON', extensions: ['geojson', 'json'], recognises, read }

const geometryTypes = ['Point', 'MultiPoint', 'LineString', 'MultiLineString', 'Polygon', 'MultiPolygon', 'GeometryCollection'] as const
const types = ['FeatureCollection', 'Feature', ...geometryTypes] as const
type GeometryType = (typeof geometryTypes)[number]

const isType = (text: string): text is (typeof types)[number] => (types as readonly string[]).includes(text)

const typeMember = new RegExp(String.raw`"type"\s*:\s*"(${types.join('|')})"`)

/** An object with a member "type" whose value is one of the format's nine. */
function recognises(head: string): boolean {
  return /^\ufeff?\s*\{/.test(head) && typeMember.test(head)
}

function* read(text: string, _source: Source, options: FormatOptions): Steps<Result<Drawing>> {
  const tape = yield* jsonTape(text)
  if (!tape.ok) return tape
  const reader = new GeoJsonReader(tape.value, options)
  yield* reader.document()
  return reader.drawing()
}

/** Positions between two turns: about a millisecond. */
const slice = 1 << 13

/** Drawings narrower than this, with numbers that can be degrees, are degrees: 0.02 degrees are 2 km, 0.02 m are a hand. */
const degreesWithin = 0.02

class GeoJsonReader {
  private readonly tape: JsonTape
  private readonly sketch = new Sketch()
  private readonly choice: LayerChoice
  private readonly layers = new Set<string>([''])
  private layer = ''
  private problem: Problem | null = null
  private sinceTurn = 0

  constructor(tape: JsonTape, options: FormatOptions) {
    this.tape = tape
    this.choice = new LayerChoice(options.layers)
  }

  drawing(): Result<Drawing> {
    const { sketch } = this
    const problem = this.problem ?? this.choice.missing(this.layers)
    if (problem !== null) return { ok: false, problem }
    if (sketch.outlines.length + sketch.segmentCount + sketch.markCount === 0) {
      const other = sketch.leftOut.map(({ kind, count }) => `${count} x ${kind}`)
      const message = `the file has no geometry that can be taken${other.length > 0 ? `, only ${other.slice(0, 6).join(', ')}` : ''}`
      return fail('nothing-drawn', message, null, 'export the panels as Polygon or their edges as LineString')
    }
    this.noteDegrees()
    return ok(sketch.drawing('GeoJSON', null, false))
  }

  *document(): Steps<void> {
    const { tape } = this
    const type = this.type(0, types)
    if (type === null) return
    if (tape.member(0, 'crs') !== -1) this.sketch.leaveOut('crs', '')
    if (type !== 'FeatureCollection') {
      yield* type === 'Feature' ? this.feature(0) : this.geometry(0, type)
      return
    }
    const features = tape.member(0, 'features')
    if (features === -1) this.refuse(0, 'a FeatureCollection needs a member "features"')
    else if (!tape.isArray(features)) this.refuse(features, `a list of features is expected in place of ${tape.shown(features)}`)
    else {
      for (let at = features + 1; at < tape.next.at(features) && this.problem === null; at = tape.next.at(at)) {
        const inner = this.type(at, ['Feature'])
        if (inner !== null) yield* this.feature(at)
        if (this.turnIsDue(1)) yield this.progress(at)
      }
    }
  }

  private *feature(feature: number): Steps<void> {
    const { tape } = this
    const properties = tape.member(feature, 'properties')
    const named = properties === -1 || tape.kind(properties) !== 'object' ? -1 : tape.member(properties, 'layer')
    this.layer = (named === -1 ? null : tape.string(named)) ?? ''
    this.layers.add(this.layer)
    const geometry = tape.member(feature, 'geometry')
    if (geometry === -1) this.refuse(feature, 'a Feature needs a member "geometry"')
    else if (tape.kind(geometry) === 'null') this.sketch.leaveOut('Feature without geometry', this.layer)
    else {
      const type = this.type(geometry, geometryTypes)
      if (type !== null) yield* this.geometry(geometry, type)
    }
  }

  private *geometry(object: number, type: GeometryType): Steps<void> {
    const { tape, sketch } = this
    if (type === 'GeometryCollection') {
      const geometries = tape.member(object, 'geometries')
      if (geometries === -1 || !tape.isArray(geometries)) {
        this.refuse(geometries === -1 ? object : geometries, 'a GeometryCollection needs a list "geometries"')
        return
      }
      for (let at = geometries + 1; at < tape.next.at(geometries) && this.problem === null; at = tape.next.at(at)) {
        const inner = this.type(at, geometryTypes)
        if (inner !== null) yield* this.geometry(at, inner)
      }
      return
    }
    const coordinates = tape.member(object, 'coordinates')
    if (coordinates === -1 || !tape.isArray(coordinates)) {
      this.refuse(coordinates === -1 ? object : coordinates, `a ${type} needs a list "coordinates"`)
      return
    }
    if (!this.choice.takes(this.layer)) sketch.leaveOut(`${type}, layer not chosen`, this.layer)
    else if (tape.next.at(coordinates) === coordinates + 1) sketch.leaveOut(`${type}, empty`, this.layer)
    else yield* this.coordinates(coordinates, type, tape.line(object))
  }

  private *coordinates(coordinates: number, type: Exclude<GeometryType, 'GeometryCollection'>, line: number): Steps<void> {
    switch (type) {
      case 'Point':
        this.mark(coordinates)
        return
      case 'MultiPoint':
        return yield* this.each(coordinates, 'a position', (at) => this.mark(at))
      case 'LineString':
        return yield* this.lineString(coordinates, line)
      case 'MultiLineString':
        return yield* this.eachOf(coordinates, 'a list of positions', (at) => this.lineString(at, line))
      case 'Polygon':
        return yield* this.polygon(coordinates, line)
      case 'MultiPolygon':
        return yield* this.eachOf(coordinates, 'a list of rings', (at) => this.polygon(at, line))
    }
  }

  private *polygon(rings: number, line: number): Steps<void> {
    let loops = this.sketch.outlines
    yield* this.eachOf(rings, 'a ring (a list of positions)', (at) => {
      const into = loops
      loops = this.sketch.holes
      return this.ring(at, into, line)
    })
  }

  /** RFC 7946, section 3.1.6: a closed line of four or more positions, the last one equal to the first. */
  private *ring(positions: number, into: Sketch['outlines'], line: number): Steps<void> {
    const { sketch } = this
    const points: number[] = []
    yield* this.each(positions, 'a position', (at) => {
      const point = this.position(at)
      if (point !== -1) points.push(point)
    })
    if (this.problem !== null) return
    const [first] = points
    const last = points[points.length - 1]
    if (points.length === 0) this.refuse(positions, 'a ring needs four positions or more, it has 0')
    else if (sketch.x(first) !== sketch.x(last) || sketch.y(first) !== sketch.y(last) || sketch.z(first) !== sketch.z(last)) {
      this.refuse(positions, 'the ring is not closed', 'repeat its first position at its end')
    } else {
      points.pop()
      const corners = points.filter((point, i) => {
        const before = points[(i + points.length - 1) % points.length]
        return sketch.x(point) !== sketch.x(before) || sketch.y(point) !== sketch.y(before) || sketch.z(point) !== sketch.z(before)
      })
      // What is left of an islet when a map is simplified: there and back.
      if (corners.length < 3) sketch.leaveOut('ring without area', this.layer)
      else into.add(corners, sketch.layer(this.layer), line)
    }
  }

  private *lineString(positions: number, line: number): Steps<void> {
    const { sketch } = this
    let before = -1
    let count = 0
    yield* this.each(positions, 'a position', (at) => {
      const point = this.position(at)
      if (point === -1) return
      count += 1
      if (before !== -1) sketch.segment(before, point, sketch.layer(this.layer), line)
      before = point
    })
    if (this.problem === null && count < 2) this.refuse(positions, `a line needs two positions or more, it has ${count}`)
  }

  private mark(position: number): void {
    const point = this.position(position)
    if (point !== -1) this.sketch.mark(point, this.sketch.layer(this.layer))
  }

  /** Index of the new point of a position; -1 where it cannot be read. Numbers after the third are ignored, as the RFC allows. */
  private position(array: number): number {
    const { tape } = this
    if (!tape.isArray(array)) return this.refuse(array, `a position (a list of numbers) is expected in place of ${tape.shown(array)}`)
    const end = tape.next.at(array)
    if (end - array < 3) return this.refuse(array, 'a position needs two numbers or more')
    for (let at = array + 1; at < end; at = tape.next.at(at)) {
      const value = tape.number(at)
      if (Number.isNaN(value) || Math.abs(value) > farthest) return this.wrongNumber(at)
    }
    const hasHeight = end - array > 3
    return this.sketch.point(tape.number(array + 1) + 0, tape.number(array + 2) + 0, hasHeight ? tape.number(array + 3) + 0 : 0, hasHeight)
  }

  private wrongNumber(value: number): -1 {
    if (this.tape.kind(value) !== 'number') return this.refuse(value, `a number is expected in place of ${this.tape.shown(value)}`)
    return this.refuse(value, 'the coordinate is beyond 1e12', 'move the drawing nearer to its origin')
  }

  /** Calls `take` with each item of a list. */
  private *each(list: number, of: string, take: (item: number) => void): Steps<void> {
    const { tape } = this
    if (!tape.isArray(list)) {
      this.refuse(list, `a list of which each is ${of} is expected in place of ${tape.shown(list)}`)
      return
    }
    for (let at = list + 1; at < tape.next.at(list) && this.problem === null; at = tape.next.at(at)) {
      take(at)
      if (this.turnIsDue(1)) yield this.progress(at)
    }
  }

  /** Runs `take` with each item of a list. */
  private *eachOf(list: number, of: string, take: (item: number) => Steps<void>): Steps<void> {
    const { tape } = this
    if (!tape.isArray(list)) {
      this.refuse(list, `a list of which each is ${of} is expected in place of ${tape.shown(list)}`)
      return
    }
    for (let at = list + 1; at < tape.next.at(list) && this.problem === null; at = tape.next.at(at)) yield* take(at)
  }

  /** The type of an object, one of `allowed`; null where it is none. */
  private type<T extends string>(value: number, allowed: readonly T[]): T | null {
    const { tape } = this
    const what = allowed.length === 1 ? allowed[0] : 'GeoJSON object'
    if (tape.kind(value) !== 'object') {
      this.refuse(value, `a ${what} is expected in place of ${tape.shown(value)}`)
      return null
    }
    const member = tape.member(value, 'type')
    const text = member === -1 ? null : tape.string(member)
    const found = allowed.find((each) => each === text)
    if (found !== undefined) return found
    if (member === -1) this.refuse(value, 'the member "type" is missing')
    else if (text !== null && isType(text)) this.refuse(member, `a ${text} cannot stand here`)
    else this.refuse(member, `${tape.shown(member)} is no type of GeoJSON`, 'types are written as in RFC 7946, e.g. "Polygon"')
    return null
  }

  private refuse(value: number, message: string, cure = 'correct it, or export the file again'): -1 {
    const field = this.tape.path(value)
    const where = field === '' ? { line: this.tape.line(value) } : { line: this.tape.line(value), field }
    this.problem ??= fail('not-geojson', message, where, cure).problem
    return -1
  }

  private turnIsDue(work: number): boolean {
    this.sinceTurn += work
    if (this.sinceTurn < slice) return false
    this.sinceTurn = 0
    return true
  }

  private progress(at: number): { stage: string; done: number } {
    return { stage: 'Reading', done: at / this.tape.start.length }
  }

  private noteDegrees(): void {
    const { sketch } = this
    let [left, right, low, high] = [Infinity, -Infinity, Infinity, -Infinity]
    for (let i = 0; i < sketch.pointCount; i += 1) {
      left = Math.min(left, sketch.x(i))
      right = Math.max(right, sketch.x(i))
      low = Math.min(low, sketch.y(i))
      high = Math.max(high, sketch.y(i))
    }
    const size = Math.max(right - left, high - low)
    if (size === 0 || size > degreesWithin || left < -180 || right > 180 || low < -90 || high > 90) return
    const message =
      `The drawing is ${Number(size.toPrecision(2))} wide, as if in degrees of longitude and latitude; ` +
      'the numbers are read as lengths: export it in a projected system'
    sketch.repair({ code: 'unit-assumed', state: 'applied', count: 1, message, where: [] })
  }
}

