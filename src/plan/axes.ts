/**
 * Building axes: the straight lines of joints and rim that cross the plan from rim to rim in its two main directions, named
 * as on building drawings: numbers along the longer side, letters along the shorter, I and O left out, since they read as
 * 1 and 0 (common practice, no source). A plan that is not drawn on such lines has none.
 */
import { nearlyStraight, pointWithin_mm, runSine, snap_mm } from '../base/geometry/tolerance.ts'
import { conversion } from '../base/length.ts'
import { finish } from '../base/steps.ts'
import { runsOf } from './runs.ts'
import type { Plan } from './plan.ts'

/** A named line, in the plan's unit and place. `from` is its upper or left end, where its name stands. */
export interface Axis {
  readonly name: string
  readonly from: readonly [x: number, y: number]
  readonly to: readonly [x: number, y: number]
}

/** Share of the length of all edges that lies on axes before a plan counts as drawn on them. */
const leastShare = 0.5

/** An axis shorter than this share of the longest beside it is the side of a notch. */
const leastLength = 1 / 3

/** Sine of the angle that parts the second main direction from the first: 30 degrees. */
const leastAngle = 0.5

/** A straight run of edges from rim to rim: its end nodes, unit direction and length in the plan's unit. */
interface Line {
  readonly a: number
  readonly b: number
  readonly dx: number
  readonly dy: number
  readonly length: number
}

/** Axes by name: numbers first, each kind in the order of its names; none where the plan is not regular. */
export function axesOfPlan(plan: Plan): Axis[] {
  const off = (nearlyStraight * snap_mm) / conversion(plan.unit, 'mm')
  const { lines, total } = straightLines(plan, off)
  const first = mainDirection(lines)
  if (first === null) return []
  const second = mainDirection(lines.filter((line) => Math.abs(cross(first, line)) >= leastAngle))
  const families = [first, second].flatMap((main) => (main === null ? [] : [family(plan, lines, main, off)])).filter(({ axes }) => axes.length > 1)
  if (families.reduce((sum, { drawn }) => sum + drawn, 0) < leastShare * total) return []
  // Numbers where the axes are spread over more of the plan; of two equals, where they go from left to right.
  families.sort((f, g) => (Math.abs(f.spread - g.spread) > off ? g.spread - f.spread : Number(g.upright) - Number(f.upright)))
  return families.flatMap(({ axes }, kind) => axes.map(([from, to], i) => ({ name: kind === 0 ? String(i + 1) : axisLetter(i), from, to })))
}

/** Letters of axis i = 0, 1, ..: A .. Z without I and O, then AA, AB, .. */
export function axisLetter(i: number): string {
  const letters = 'ABCDEFGHJKLMNPQRSTUVWXYZ'
  let text = ''
  for (let n = i + 1; n > 0; n = Math.floor((n - 1) / letters.length)) text = letters[(n - 1) % letters.length] + text
  return text
}

/** Nodes of the plan on an axis, in order from its `from` to its `to`: within a hand's breadth of the line and between its ends. */
export function runOfAxis(plan: Plan, { from, to }: Axis): number[] {
  const within = pointWithin_mm / conversion(plan.unit, 'mm')
  const length = Math.hypot(to[0] - from[0], to[1] - from[1])
  const dx = (to[0] - from[0]) / length
  const dy = (to[1] - from[1]) / length
  const found: { node: number; along: number }[] = []
  for (let node = 0; node < plan.nodeCount; node += 1) {
    const x = plan.x[node] - from[0]
    const y = plan.y[node] - from[1]
    const along = x * dx + y * dy
    if (Math.abs(x * dy - y * dx) <= within && along >= -within && along <= length + within) found.push({ node, along })
  }
  return found.sort((p, q) => p.along - q.along).map(({ node }) => node)
}

/** Straight runs, single edges too, that begin and end on a rim; and the length of all edges. */
function straightLines(plan: Plan, off: number): { lines: Line[]; total: number } {
  const { start, node } = finish(runsOf(plan))
  const { x, y, origin, rimPasses } = plan
  const lines: Line[] = []
  const add = (nodes: Int32Array): void => {
    const a = nodes[0]
    const b = nodes[nodes.length - 1]
    const length = Math.hypot(x[b] - x[a], y[b] - y[a])
    if (length === 0 || rimPasses[a] === 0 || rimPasses[b] === 0) return
    const line = { a, b, dx: (x[b] - x[a]) / length, dy: (y[b] - y[a]) / length, length }
    if (nodes.every((n) => Math.abs(offset(plan, line, n)) <= off)) lines.push(line)
  }
  // Edges on runs are known by both ends, which follow one another there.
  const onRun = new Set<number>()
  for (let r = 0; r + 1 < start.length; r += 1) {
    for (let k = start[r]; k + 1 < start[r + 1]; k += 1) onRun.add(key(plan, node[k], node[k + 1]))
    add(node.subarray(start[r], start[r + 1]))
  }
  let total = 0
  for (let e = 0; e < plan.edgeCount; e += 1) {
    const a = origin[2 * e]
    const b = origin[2 * e + 1]
    total += Math.hypot(x[b] - x[a], y[b] - y[a])
    if (!onRun.has(key(plan, a, b))) add(Int32Array.of(a, b))
  }
  return { lines, total }
}

const key = ({ nodeCount }: Plan, a: number, b: number): number => Math.min(a, b) * nodeCount + Math.max(a, b)

const cross = (p: Pick<Line, 'dx' | 'dy'>, q: Pick<Line, 'dx' | 'dy'>): number => p.dx * q.dy - p.dy * q.dx

/** Distance of a node from a line, left of it positive. */
const offset = ({ x, y }: Plan, { a, dx, dy }: Line, node: number): number => dx * (y[node] - y[a]) - dy * (x[node] - x[a])

/** The line to which the most length is parallel within 3 degrees; null without lines. */
function mainDirection(lines: readonly Line[]): Line | null {
  // By angle in [0, 180) a window of 3 degrees either side slides over the lines, twice round so that it may pass 0.
  const angle = (line: Line): number => (Math.atan2(line.dy, line.dx) + Math.PI) % Math.PI
  const sorted = [...lines].sort((p, q) => angle(p) - angle(q))
  const n = sorted.length
  const angles = [...sorted.map(angle), ...sorted.map((line) => angle(line) + Math.PI), ...sorted.map((line) => angle(line) + 2 * Math.PI)]
  let best: Line | null = null
  let most = 0
  let low = 0
  let high = 0
  let sum = 0
  for (let i = n; i < 2 * n; i += 1) {
    while (high < 3 * n && angles[high] <= angles[i] + runSine) sum += sorted[high++ % n].length
    while (angles[low] < angles[i] - runSine) sum -= sorted[low++ % n].length
    // Equal sums differ by rounding: the first stays, so that the order of panels does not matter.
    if (sum > most * (1 + 1e-9)) {
      most = sum
      best = sorted[i % n]
    }
  }
  return best
}

type End = readonly [number, number]

interface Family {
  readonly axes: readonly (readonly [from: End, to: End])[]
  /** Length of edges on the axes, and how far the outermost axes lie apart. */
  readonly drawn: number
  readonly spread: number
  /** The axes run up the sheet rather than across it. */
  readonly upright: boolean
}

/** Lines in one direction, those on one line joined (a void parts them), in order from the left or from below. */
function family(plan: Plan, lines: readonly Line[], main: Line, off: number): Family {
  const { x, y } = plan
  const upright = Math.abs(main.dy) > Math.abs(main.dx)
  // Up the sheet, or to the right; positions grow to the right, or up.
  const sign = (upright ? main.dy : main.dx) < 0 ? -1 : 1
  const dx = sign * main.dx
  const dy = sign * main.dy
  const [px, py] = upright ? [dy, -dx] : [-dy, dx]
  const position = ({ a, b }: Line): number => ((x[a] + x[b]) / 2 - plan.frame.centreX) * px + ((y[a] + y[b]) / 2 - plan.frame.centreY) * py
  const along = (node: number): number => (x[node] - plan.frame.centreX) * dx + (y[node] - plan.frame.centreY) * dy
  const parallel = lines.filter((line) => Math.abs(cross(main, line)) <= runSine).map((line) => ({ line, at: position(line) })).sort((p, q) => p.at - q.at)
  const groups: { lines: Line[]; at: number }[] = []
  for (const { line, at } of parallel) {
    const last = groups[groups.length - 1]
    const longest = last?.lines.reduce((best, other) => (other.length > best.length ? other : best))
    if (longest !== undefined && [line.a, line.b].every((node) => Math.abs(offset(plan, longest, node)) <= off)) last.lines.push(line)
    else groups.push({ lines: [line], at })
  }
  const made = groups.map((group) => {
    const nodes = group.lines.flatMap(({ a, b }) => [a, b]).sort((m, n) => along(m) - along(n))
    const ends = [nodes[0], nodes[nodes.length - 1]] as const
    const [from, to] = upright ? [ends[1], ends[0]] : ends
    return { from, to, at: group.at, length: along(ends[1]) - along(ends[0]), drawn: group.lines.reduce((sum, { length }) => sum + length, 0) }
  })
  const longest = made.reduce((most, { length }) => Math.max(most, length), 0)
  const kept = made.filter(({ length }) => length >= leastLength * longest)
  return {
    axes: kept.map(({ from, to }) => [[x[from], y[from]], [x[to], y[to]]] as const),
    drawn: kept.reduce((sum, { drawn }) => sum + drawn, 0),
    spread: kept.length === 0 ? 0 : kept[kept.length - 1].at - kept[0].at,
    upright,
  }
}
