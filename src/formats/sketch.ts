/**
 * A Drawing in the making: readers put points, outlines, segments and marks into it as they come. Layers are named by
 * index in order of first use; what is not taken is counted per kind and layer.
 */
import type { Unit } from '../base/length.ts'
import type { LeftOut, Repair } from '../base/repair.ts'
import type { DrawnCircle, DrawnText, Drawing, Look, Loops, PlacedBlock } from '../plan/drawing.ts'
import { Doubles, Integers } from '../base/growing.ts'

/** Closed polygons being collected; see Loops. */
class LoopList {
  private readonly start = new Integers()
  private readonly point = new Integers()
  private readonly layer = new Integers()
  private readonly line = new Integers()
  private readonly look = new Integers()
  private seesLooks = false

  constructor() {
    this.start.push(0)
  }

  get length(): number {
    return this.layer.length
  }

  /** Adds a list of point indices as one loop. */
  add(points: readonly number[] | Int32Array, layer: number, line: number, look = 0): void {
    for (let i = 0; i < points.length; i += 1) this.point.push(points[i])
    this.start.push(this.point.length)
    this.layer.push(layer)
    this.line.push(line)
    this.look.push(look)
    if (look > 0) this.seesLooks = true
  }

  loops(): Loops {
    return { start: this.start.array(), point: this.point.array(), layer: this.layer.array(), line: this.line.array(), ...(this.seesLooks ? { look: this.look.array() } : {}) }
  }
}

export class Sketch {
  private readonly coordinates = new Doubles()
  private readonly heights = new Integers()
  private readonly layerNames: string[] = []
  private readonly layerIndex = new Map<string, number>()
  private readonly segmentEnds = new Integers()
  private readonly segmentLayer = new Integers()
  private readonly segmentLine = new Integers()
  private readonly segmentLook = new Integers()
  private readonly looks: Look[] = []
  private readonly lookIndex = new Map<string, number>()
  private readonly texts: DrawnText[] = []
  private readonly circles: DrawnCircle[] = []
  private readonly blocks: PlacedBlock[] = []
  private readonly markPoint = new Integers()
  private readonly markLayer = new Integers()
  private readonly leftOutCounts = new Map<string, { kind: string; layer: string; count: number }>()
  private readonly repairs: Repair[] = []
  readonly outlines = new LoopList()
  readonly holes = new LoopList()

  get pointCount(): number {
    return this.heights.length
  }

  get segmentCount(): number {
    return this.segmentLayer.length
  }

  get markCount(): number {
    return this.markLayer.length
  }

  /** Index of the layer of this name. Names that differ only in case are one layer, spelt as first met. */
  layer(name: string): number {
    const key = name.toLowerCase()
    const known = this.layerIndex.get(key)
    if (known !== undefined) return known
    const index = this.layerNames.length
    this.layerNames.push(name)
    this.layerIndex.set(key, index)
    return index
  }

  /** Index of a new point. */
  point(x: number, y: number, z: number, hasHeight: boolean): number {
    this.coordinates.push(x)
    this.coordinates.push(y)
    this.coordinates.push(z)
    this.heights.push(hasHeight ? 1 : 0)
    return this.heights.length - 1
  }

  x(point: number): number {
    return this.coordinates.at(3 * point)
  }

  y(point: number): number {
    return this.coordinates.at(3 * point + 1)
  }

  z(point: number): number {
    return this.coordinates.at(3 * point + 2)
  }

  segment(from: number, to: number, layer: number, line: number, look = 0): void {
    this.segmentEnds.push(from)
    this.segmentEnds.push(to)
    this.segmentLayer.push(layer)
    this.segmentLine.push(line)
    this.segmentLook.push(look)
  }

  /** Index of the look; formats that say nothing of looks never ask. */
  look(kind: string, colour: string, lineType: string): number {
    const key = `${kind}\n${colour}\n${lineType}`
    const known = this.lookIndex.get(key)
    if (known !== undefined) return known
    this.lookIndex.set(key, this.looks.length)
    return this.looks.push({ kind, colour, lineType }) - 1
  }

  text(text: DrawnText): void {
    this.texts.push(text)
  }

  block(block: PlacedBlock): void {
    this.blocks.push(block)
  }

  circle(circle: DrawnCircle): void {
    this.circles.push(circle)
  }

  mark(point: number, layer: number): void {
    this.markPoint.push(point)
    this.markLayer.push(layer)
  }

  /** States or unsays that the point's z is a height. */
  stateHeight(point: number, stated: boolean): void {
    this.heights.set(point, stated ? 1 : 0)
  }

  /** Counts something of the file that is not taken. */
  leaveOut(kind: string, layer: string, count = 1): void {
    const key = `${kind}\n${layer.toLowerCase()}`
    const entry = this.leftOutCounts.get(key)
    if (entry === undefined) this.leftOutCounts.set(key, { kind, layer, count })
    else entry.count += count
  }

  repair(repair: Repair): void {
    this.repairs.push(repair)
  }

  /** The kinds left out so far, in order of first meeting. */
  get leftOut(): LeftOut[] {
    return [...this.leftOutCounts.values()]
  }

  /** `outlines` in the place of those collected, when the reader has made others of them. */
  drawing(format: string, unit: Unit | null, onPaper: boolean, outlines: Loops = this.outlines.loops()): Drawing {
    return {
      format,
      unit,
      onPaper,
      points: this.coordinates.array(),
      hasHeight: Uint8Array.from(this.heights.array()),
      layers: this.layerNames.length > 0 ? this.layerNames : [''],
      outlines,
      holes: this.holes.loops(),
      segments: this.segmentEnds.array(),
      segmentLayer: this.segmentLayer.array(),
      segmentLine: this.segmentLine.array(),
      marks: this.markPoint.array(),
      markLayer: this.markLayer.array(),
      ...(this.looks.length === 0 ? {} : { looks: this.looks, segmentLook: this.segmentLook.array() }),
      ...(this.texts.length === 0 ? {} : { texts: this.texts }),
      ...(this.circles.length === 0 ? {} : { circles: this.circles }),
      ...(this.blocks.length === 0 ? {} : { blocks: this.blocks }),
      leftOut: this.leftOut,
      repairs: this.repairs,
    }
  }
}
