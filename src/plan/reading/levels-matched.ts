/** Levels that a drawing states, at the nodes of its plan: those of points and blocks hold, those in words are on offer. */
import { NearPoints } from '../../base/geometry/near-points.ts'
import { heightsAgree_mm } from '../../base/geometry/tolerance.ts'
import { significant } from '../../base/decimal.ts'
import type { Repair } from '../../base/repair.ts'
import type { DrawnLevel, DrawnLevels } from './levels-drawn.ts'
import { counted, inMillimetres, mostPlaces } from '../lines/words.ts'
import { leaves, takes } from './reduced.ts'
import type { Plan } from '../plan.ts'
import type { NodeLevel, ReadOptions } from '../read-plan.ts'

export interface MatchedLevels {
  /** Levels that hold. */
  readonly levels: readonly NodeLevel[]
  readonly repairs: readonly Repair[]
}

/** `within`: how far a level may lie from its node, in the plan's unit. */
export function matchedLevels({ marks, words }: DrawnLevels, plan: Plan, within: number, mmPerUnit: number, options: ReadOptions): MatchedLevels {
  const levels = new Map<number, NodeLevel>()
  const repairs: Repair[] = []
  const near = new NearPoints(within, plan.nodeCount)
  for (let n = 0; n < plan.nodeCount; n += 1) near.add(plan.x[n], plan.y[n])
  const put = (list: readonly DrawnLevel[], what: readonly [one: string, many: string], state: Repair['state'], then: string): void => {
    const { at, missed } = matched(list, plan, near, mmPerUnit)
    if (at.size === 0 && missed.length === 0) return
    if (state !== 'proposed') for (const [node, level] of at) if (!levels.has(node)) levels.set(node, level)
    const heights = [...at.values()].map(({ level }) => level)
    const range = heights.length === 0 ? '' : `, ${rangeOf(Math.min(...heights), Math.max(...heights), plan.unit)}`
    const first = missed[0]
    const rest = first === undefined ? '' : ` ${missed.length === 1 ? '1 lies' : `${missed.length} lie`} at no node within ${inMillimetres(within * mmPerUnit)}: ${first.name === null ? '' : `"${first.name}" `}at ${placeOf(first)}${missed.length > 1 ? ' and others' : ''} (--levels-within).`
    repairs.push({
      code: 'levels', state, count: at.size, message: `${counted(at.size, ...what)} ${at.size === 1 ? 'is' : 'are'} at ${counted(at.size, 'node', 'nodes')}${range}${then}.${rest}`,
      where: [...[...at.values()].map((level) => level.at), ...missed.map((level) => level.at[0])].slice(0, mostPlaces),
    })
  }
  if (marks.length > 0) put(marks, ['level of points and blocks', 'levels of points and blocks'], leaves(options, 'levels') ? 'proposed' : 'applied', leaves(options, 'levels') ? '; left as they are' : '; they are held')
  // Words without a sign count only at a node: they may be anything else.
  const sure = words.filter((level) => level.isSure || level.at.some(([x, y]) => near.nearest(x, y) >= 0))
  if (sure.length > 0) put(sure, ['level is written in words: it', 'levels are written in words: they'], takes(options, 'levels') ? 'accepted' : 'proposed', takes(options, 'levels') ? '; they are held' : '; --accept levels holds them')
  return { levels: [...levels].sort(([m], [n]) => m - n).map(([, level]) => level), repairs }
}

/** The levels by node, and those at none. A node that several name has the first; one that another contradicts keeps it too, and clashes. */
function matched(list: readonly DrawnLevel[], plan: Plan, near: NearPoints, mmPerUnit: number): { at: Map<number, NodeLevel>; missed: DrawnLevel[] } {
  const at = new Map<number, NodeLevel>()
  const missed: DrawnLevel[] = []
  for (const level of list) {
    const node = level.at.map(([x, y]) => near.nearest(x, y)).find((n) => n >= 0)
    if (node === undefined) {
      missed.push(level)
      continue
    }
    const known = at.get(node)
    if (known === undefined) at.set(node, { node, name: level.name, at: [plan.x[node], plan.y[node]], level: level.level })
    else if (Math.abs(known.level - level.level) * mmPerUnit > heightsAgree_mm) missed.push(level)
  }
  return { at, missed }
}

const rangeOf = (low: number, high: number, unit: string): string => (low === high ? `at ${figure(low)} ${unit}` : `from ${figure(low)} to ${figure(high)} ${unit}`)

const figure = (value: number): string => significant(value, 7)

const placeOf = ({ at: [[x, y]] }: DrawnLevel): string => `${significant(x, 6)}, ${significant(y, 6)}`
