/**
 * What is nearly regular in a plan: proposals with their misfits, and the plan in which they are taken. Straight runs first,
 * then right angles, equal bays, symmetry; what holds already, as drawn or since it was taken, holds after each.
 */
import { nearlyStraight, straight_mm } from '../../base/geometry/tolerance.ts'
import type { Repair } from '../../base/repair.ts'
import type { Steps } from '../../base/steps.ts'
import { counted, inMillimetres, mostPlaces } from '../lines/words.ts'
import { nodeName } from '../names.ts'
import { withinBound, type Moved } from '../regular/bounded.ts'
import { equalBays, evenNodesOff, type EqualBays } from '../regular/equal.ts'
import { nodesOff, straightness } from '../regular/lines.ts'
import { takes } from './reduced.ts'
import { runsOf } from '../runs.ts'
import { squareRuns } from '../regular/square.ts'
import { nearlyStraightRuns } from '../regular/straight.ts'
import { nearlySymmetric } from '../regular/symmetric.ts'
import { roundsForOffer, together, type Kept } from '../regular/together.ts'
import type { Plan } from '../plan.ts'
import type { ReadOptions } from '../read-plan.ts'
import { planFromFaces } from '../subdivision.ts'

export interface Regular {
  /** The plan with the proposals that were taken; its nodes, panels and edges keep their numbers. */
  readonly plan: Plan
  readonly repairs: readonly Repair[]
  /** How far off straight the worst node of a run is, in mm; 0 where all are as straight as they are written. */
  readonly straight_mm: number
}

/** A kind of regularity that a plan nearly has. */
interface Finding {
  readonly code: 'straighten' | 'square' | 'equalise' | 'symmetric'
  /** "5 runs are off a right angle by up to 3 mm", what taking it is called and was, and what may stay as it is. */
  readonly what: string
  readonly taking: string
  readonly taken: string
  readonly stays: string
  readonly nodes: readonly number[]
  readonly moved: Moved
}

/** `tolerance_mm`: the plan tolerance, which bounds every move. */
export function* regular(plan: Plan, tolerance_mm: number, mmPerUnit: number, options: ReadOptions): Steps<Regular> {
  const { span } = plan.frame
  const drawn = plan.work.map((w) => w * span)
  const bound = tolerance_mm / mmPerUnit, silent = straight_mm / mmPerUnit
  const mm = (length: number): string => inMillimetres(length * mmPerUnit)
  const beyond = `, since nodes would move by more than the plan tolerance of ${inMillimetres(tolerance_mm)} (--plan-tolerance)`
  const repairs: Repair[] = []
  let at: Float64Array = drawn
  let isTaken = false
  const offer = ({ code, what, taking, taken, stays, nodes, moved: { moved, largest, movedNodes } }: Finding): void => {
    const where = nodes.slice(0, mostPlaces).map((n): [number, number] => [plan.x[n], plan.y[n]])
    const state = movedNodes > 0 && takes(options, code) ? 'accepted' : 'proposed'
    const moves = movedNodes === 0 ? '' : `moves ${counted(movedNodes, 'node', 'nodes')} by up to ${mm(largest)}`
    const then = moves === '' ? '' : state === 'accepted' ? `; ${taken}, which ${moves}` : `; ${taking} ${moves}`
    repairs.push({ code, state, count: nodes.length, message: `${what}${then}${stays}.`, where })
    if (state === 'proposed') return
    at = moved
    isTaken = true
  }

  const runs = yield* runsOf(plan)
  const bent = runs.areMeant ? yield* nearlyStraightRuns(drawn, runs, bound, silent, !takes(options, 'straighten')) : null
  if (bent !== null) {
    const what = `${counted(bent.nodes.length, 'node', 'nodes')} of ${counted(bent.runs, 'run', 'runs')} ${bent.nodes.length === 1 ? 'is' : 'are'} off straight by up to ${mm(bent.misfit)}`
    const stays = bent.runsThatStay === 0 ? '' : `; ${counted(bent.runsThatStay, 'run stays', 'runs stay')} as drawn${beyond}`
    offer({ code: 'straighten', what, taking: 'straightening', taken: 'straightened', stays, nodes: bent.nodes, moved: bent })
  }

  const count = runs.start.length - 1
  const weight = new Uint8Array(runs.node.length).fill(1)
  // What is straight stays straight; what is nearly straight has a direction and bays too.
  const isStraight = new Uint8Array(count), isNearly = new Uint8Array(count)
  if (runs.areMeant) {
    const off = straightness(at, runs, weight)
    for (let r = 0; r < count; r += 1) {
      isStraight[r] = off[r] <= silent ? 1 : 0
      isNearly[r] = off[r] <= nearlyStraight * bound ? 1 : 0
    }
  }
  const kept = { runs, takes: isStraight, weight }
  const solve = (code: Finding['code'], also: Partial<Kept>): Steps<Float64Array> => together(at, { ...kept, ...also }, takes(options, code) ? undefined : roundsForOffer)

  const square = squareRuns(at, runs, isNearly, weight, bound, silent)
  const isSquare = new Uint8Array(count), skew = new Uint8Array(count)
  for (let r = 0; r < count; r += 1) {
    if (Number.isNaN(square.angle[r])) continue
    isSquare[r] = square.off[r] <= silent ? 1 : 0
    skew[r] = 1 - isSquare[r]
  }
  const angleWhere = (...lists: readonly Uint8Array[]): Float64Array => square.angle.map((angle, r) => (lists.some((list) => list[r] === 1) ? angle : NaN))
  const skewed = skew.reduce((sum, is) => sum + is, 0)
  if (skewed > 0) {
    const taken = skew.slice()
    const nodes = nodesOff(at, runs, weight, square.angle, skew, silent)
    const misfit = square.off.reduce((most, off) => Math.max(most, off), 0)
    const moved = yield* withinBound(drawn, at, { start: runs.start, node: runs.node, takes: taken, off: square.off }, silent, bound, () =>
      solve('square', { takes: isStraight.map((is, r) => is | taken[r]), angle: angleWhere(isSquare, taken) }))
    const left = skewed - taken.reduce((sum, is) => sum + is, 0)
    const stays = left === 0 ? '' : `; ${counted(left, 'run stays', 'runs stay')} as drawn${beyond}`
    offer({ code: 'square', what: `${counted(skewed, 'run is', 'runs are')} off a right angle by up to ${mm(misfit)}`, taking: 'squaring', taken: 'squared', stays, nodes, moved })
    if (at === moved.moved) {
      for (let r = 0; r < count; r += 1) {
        isSquare[r] |= taken[r]
        isStraight[r] |= taken[r]
      }
    }
  }
  const angle = angleWhere(isSquare)

  const bays = yield* equalBays(plan, at, runs, isNearly, bound, silent)
  const groups = bays.run.length
  const evenBays = Uint8Array.from(bays.off, (off) => (off <= silent ? 1 : 0))
  const uneven = Array.from(bays.run.keys()).filter((g) => evenBays[g] === 0)
  if (uneven.length > 0) {
    const taken = evenBays.map((is) => 1 - is)
    const moved = yield* withinBound(drawn, at, { start: bays.start, node: bays.node, takes: taken, off: bays.off }, silent, bound, () =>
      solve('equalise', { angle, bays: { groups: bays, takes: evenBays.map((is, g) => is | taken[g]) } }))
    const left = uneven.length - taken.reduce((sum, is) => sum + is, 0)
    const stays = left === 0 ? '' : `; those of ${counted(left, 'run stay', 'runs stay')} as drawn${beyond}`
    offer({ code: 'equalise', what: bayWords(bays, uneven, mm), taking: 'equalising', taken: 'equalised', stays, nodes: unevenNodes(at, bays, uneven, silent), moved })
    if (at === moved.moved) for (let g = 0; g < groups; g += 1) evenBays[g] |= taken[g]
  }

  const near = yield* nearlySymmetric(plan, at, nearlyStraight * bound, bound, silent, [...new Set(angle.filter((a) => !Number.isNaN(a))), 0])
  if (near !== null) {
    // Symmetry holds as a whole or not at all.
    const all = { start: Int32Array.of(0, plan.nodeCount), node: Int32Array.from({ length: plan.nodeCount }, (_, n) => n), takes: Uint8Array.of(1), off: Float64Array.of(near.misfit) }
    const moved = yield* withinBound(drawn, at, all, silent, bound, () =>
      solve('symmetric', { angle, bays: { groups: bays, takes: evenBays }, mirrors: all.takes[0] === 1 ? near.mirrors : [] }))
    const isLeft = all.takes[0] === 0
    const what = `${counted(near.nodes.length, 'node is', 'nodes are')} off ${near.nodes.length === 1 ? 'its mirror image' : 'their mirror images'} by up to ${mm(near.misfit)}${near.mirrors.length === 1 ? '' : `, about ${near.mirrors.length} lines`}`
    offer({ code: 'symmetric', what, taking: 'making them symmetric', taken: 'made symmetric', stays: isLeft ? `; they stay as drawn${beyond}` : '', nodes: near.nodes, moved })
  }

  const off_mm = bent === null ? 0 : bent.misfit * mmPerUnit
  if (!isTaken) return { plan, repairs, straight_mm: off_mm }
  const shifted = (axis: 0 | 1, as: Float64Array): Float64Array => as.map((value, n) => {
    const move = [0, 1].map((k) => at[2 * n + k] - drawn[2 * n + k])
    // Nodes that were regular as written keep their digits.
    return Math.hypot(move[0], move[1]) <= silent / 1000 ? value : value + move[axis]
  })
  const made = keepsShape(plan, at)
    ? planFromFaces({ unit: plan.unit, x: shifted(0, plan.x), y: shifted(1, plan.y), start: plan.panelStart, corner: plan.corner, ordered: true })
    : null
  if (made === null || !made.ok) {
    const left = repairs.map((repair): Repair => (repair.state !== 'accepted' ? repair : { ...repair, state: 'proposed', message: `${repair.message.replace(/\.$/, '')}; not done, since panels would overlap.` }))
    return { plan, repairs: left, straight_mm: off_mm }
  }
  return { plan: made.value.plan, repairs, straight_mm: off_mm }
}

/** "11 bays of the run N4 to N92 differ by up to 3 mm", the worst of several named. */
function bayWords({ start, node, differ }: EqualBays, uneven: readonly number[], mm: (length: number) => string): string {
  const worst = uneven.reduce((most, g) => (differ[g] > differ[most] ? g : most))
  const one = `${start[worst + 1] - start[worst] - 1} bays of the run ${nodeName(node[start[worst]])} to ${nodeName(node[start[worst + 1] - 1])}`
  if (uneven.length === 1) return `${one} differ by up to ${mm(differ[worst])}`
  return `Bays that are nearly equal differ by up to ${mm(differ[worst])} in ${uneven.length} runs, most in the ${one}`
}

function unevenNodes(at: Float64Array, bays: EqualBays, uneven: readonly number[], silent: number): number[] {
  const nodes = new Set<number>()
  for (const g of uneven) for (const n of evenNodesOff(at, bays, g, silent)) nodes.add(n)
  return [...nodes].sort((m, n) => m - n)
}

/** Whether moved nodes leave every edge its direction and every panel most of its area, so that none turns over or crosses itself. */
function keepsShape({ panelStart, corner, origin, work, frame }: Plan, at: Float64Array): boolean {
  for (let h = 0; h < origin.length; h += 2) {
    const a = origin[h], b = origin[h + 1]
    const ux = (work[2 * b] - work[2 * a]) * frame.span, uy = (work[2 * b + 1] - work[2 * a + 1]) * frame.span
    if (ux * (at[2 * b] - at[2 * a]) + uy * (at[2 * b + 1] - at[2 * a + 1]) < (ux * ux + uy * uy) / 2) return false
  }
  const area = (xy: Float64Array, p: number): number => {
    const o = corner[panelStart[p]]
    let twice = 0
    for (let k = panelStart[p]; k < panelStart[p + 1]; k += 1) {
      const a = corner[k], b = corner[k + 1 < panelStart[p + 1] ? k + 1 : panelStart[p]]
      twice += (xy[2 * a] - xy[2 * o]) * (xy[2 * b + 1] - xy[2 * o + 1]) - (xy[2 * a + 1] - xy[2 * o + 1]) * (xy[2 * b] - xy[2 * o])
    }
    return twice
  }
  for (let p = 0; p + 1 < panelStart.length; p += 1) if (area(at, p) < (area(work, p) * frame.span ** 2) / 2) return false
  return true
}
