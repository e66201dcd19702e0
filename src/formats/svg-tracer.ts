/**
 * The pen that draws shapes into the plane of the paper: mm, y up. Points go through the map of the element, curves
 * become chords there. Holds the subpaths of one element at a time: connected pieces without points repeated in a row; of
 * a ring the first point is not repeated.
 */
import { closesWithin } from '../base/geometry/tolerance.ts'
import { interiorPoints, mostChords, type Curve } from './chords.ts'
import { Doubles, Integers } from '../base/growing.ts'
import { ellipticArc, isStraight, mappedArc } from './svg-curves.ts'
import type { Pen } from './svg-path.ts'
import { identity, type Affine } from './svg-transform.ts'
import { farthest } from './text-number.ts'

/** More points than a plan of a hundred thousand panels has, at about 60 bytes each. */
export const mostPoints = 3_000_000

export class Tracer implements Pen {
  /** Why the element cannot be taken, null while it can. */
  fault: string | null = null
  /** Curves and chords of all elements so far. */
  curveCount = 0
  chordCount = 0
  /** Where the curves start, x y x y .. */
  readonly curveStart = new Doubles()
  private readonly sagitta: number
  private map: Affine = identity
  /** Points of all subpaths of the element, x y x y .. */
  readonly xy = new Doubles()
  /** Where each subpath starts in `xy`, and where the one under way does. */
  private readonly starts = new Integers()
  private readonly rings = new Integers()
  private chainStart = 0
  private readonly control = new Float64Array(8)
  // The pen's place in the user's plane, and the point that Z goes back to.
  private x = 0
  private y = 0
  private startX = 0
  private startY = 0

  private pointCount = 0

  /** `sagitta` in mm of paper. */
  constructor(sagitta: number) {
    this.sagitta = sagitta
  }

  /** A new element with this map from its user units to the paper. */
  begin(map: Affine): void {
    this.map = map
    this.xy.length = this.starts.length = this.rings.length = this.chainStart = 0
    this.fault = null
    this.x = this.y = this.startX = this.startY = 0
  }

  /** Ends the element; how many subpaths it has. Those of a single point draw nothing and are not among them. */
  end(): number {
    this.finishChain(false)
    return this.starts.length
  }

  /** Where a subpath starts in `xy`. */
  start(subpath: number): number {
    return subpath < this.starts.length ? this.starts.at(subpath) : this.chainStart
  }

  /** Whether a subpath comes back to its start: by the command Z, or by a last point on the first. */
  isRing(subpath: number): boolean {
    return this.rings.at(subpath) === 1
  }

  /** The points as two arrays. */
  columns(): { x: Float64Array; y: Float64Array } {
    const { xy } = this
    const count = xy.length / 2
    const x = new Float64Array(count)
    const y = new Float64Array(count)
    for (let i = 0; i < count; i += 1) {
      x[i] = xy.at(2 * i)
      y[i] = xy.at(2 * i + 1)
    }
    return { x, y }
  }

  move(x: number, y: number): void {
    this.finishChain(false)
    this.x = this.startX = x
    this.y = this.startY = y
  }

  line(x: number, y: number): void {
    this.openChain()
    this.put(this.mapX(x, y), this.mapY(x, y))
    this.x = x
    this.y = y
  }

  quadratic(x1: number, y1: number, x: number, y: number): void {
    // The same curve as a cubic: its control points lie two thirds of the way to the quadratic's.
    this.cubic(this.x + (2 / 3) * (x1 - this.x), this.y + (2 / 3) * (y1 - this.y), x + (2 / 3) * (x1 - x), y + (2 / 3) * (y1 - y), x, y)
  }

  cubic(x1: number, y1: number, x2: number, y2: number, x: number, y: number): void {
    const p = this.control
    this.setControl(0, this.x, this.y)
    this.setControl(2, x1, y1)
    this.setControl(4, x2, y2)
    this.setControl(6, x, y)
    const points = [p[0], p[1], 0, p[2], p[3], 0, p[4], p[5], 0, p[6], p[7], 0]
    if (!isStraight(p)) this.chorded({ kind: 'bezier', points, weights: null })
    this.line(x, y)
  }

  arc(rx: number, ry: number, turn: number, large: boolean, sweep: boolean, x: number, y: number): void {
    const arc = ellipticArc(this.x, this.y, rx, ry, turn, large, sweep, x, y)
    if (arc !== null) this.chorded(mappedArc(arc, this.map))
    this.line(x, y)
  }

  /** A whole ellipse with axes along x and y, as a subpath of its own. */
  ellipse(cx: number, cy: number, rx: number, ry: number): void {
    this.move(cx + rx, cy)
    this.chorded(mappedArc({ kind: 'arc', centre: [cx, cy, 0], a: [rx, 0, 0], b: [0, ry, 0], from: 0, to: 2 * Math.PI }, this.map))
    this.close()
  }

  close(): void {
    this.finishChain(true)
    this.x = this.startX
    this.y = this.startY
  }

  /** The points between the ends of a curve on the paper, from the pen's place. */
  private chorded(curve: Curve): void {
    if (this.fault !== null) return
    const points = interiorPoints(curve, this.sagitta)
    if (points === null) {
      this.fault = `a curve would take more than ${mostChords} chords: allow a larger sagitta (--sagitta)`
      return
    }
    this.openChain()
    this.curveCount += 1
    this.chordCount += points.length / 3 + 1
    this.curveStart.push(this.mapX(this.x, this.y))
    this.curveStart.push(this.mapY(this.x, this.y))
    for (let i = 0; i < points.length; i += 3) this.put(points[i], points[i + 1])
  }

  private mapX(x: number, y: number): number {
    return this.map[0] * x + this.map[2] * y + this.map[4] + 0
  }

  private mapY(x: number, y: number): number {
    return this.map[1] * x + this.map[3] * y + this.map[5] + 0
  }

  private setControl(at: number, x: number, y: number): void {
    this.control[at] = this.mapX(x, y)
    this.control[at + 1] = this.mapY(x, y)
  }

  /** Starts a subpath at the pen's place, unless one is under way. After Z that place is the last start. */
  private openChain(): void {
    if (this.xy.length === this.chainStart) this.put(this.mapX(this.x, this.y), this.mapY(this.x, this.y))
  }

  private put(x: number, y: number): void {
    if (!(Math.abs(x) <= farthest && Math.abs(y) <= farthest)) {
      this.fault ??= 'a coordinate is beyond 1e12 mm on the paper'
      return
    }
    if (this.pointCount >= mostPoints) {
      this.fault ??= `the drawing has more than ${mostPoints} points`
      return
    }
    const { xy } = this
    const last = xy.length - 2
    if (last >= this.chainStart && xy.at(last) === x && xy.at(last + 1) === y) return
    xy.push(x)
    xy.push(y)
    this.pointCount += 1
  }

  private finishChain(closed: boolean): void {
    const { xy, chainStart } = this
    const back = this.returns()
    if (back && xy.length - chainStart > 4) xy.length -= 2
    if (xy.length - chainStart >= 4) {
      this.starts.push(chainStart)
      this.rings.push(closed || back ? 1 : 0)
    } else xy.length = chainStart
    this.chainStart = xy.length
  }

  /** Whether the chain under way ends where it starts, to within `closesWithin` of its size. */
  private returns(): boolean {
    const { xy, chainStart } = this
    const end = xy.length - 2
    if (end - chainStart < 4) return false
    let [left, right, low, high] = [Infinity, -Infinity, Infinity, -Infinity]
    for (let i = chainStart; i <= end; i += 2) {
      left = Math.min(left, xy.at(i))
      right = Math.max(right, xy.at(i))
      low = Math.min(low, xy.at(i + 1))
      high = Math.max(high, xy.at(i + 1))
    }
    const gap = Math.hypot(xy.at(end) - xy.at(chainStart), xy.at(end + 1) - xy.at(chainStart + 1))
    return gap <= closesWithin * Math.hypot(right - left, high - low)
  }
}
