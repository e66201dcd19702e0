/** What propagation found, in words: why all panels are held, and what contradicts. */
import { clashHeight } from '../../base/geometry/tolerance.ts'
import { metres, type Unit } from '../../base/length.ts'
import { nodeName, panelName } from '../../plan/names.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Held } from './condition-rows.ts'
import type { Contradiction, Propagation } from './propagation.ts'

/** How many names a sentence carries before "and 12 more". */
const longestList = 6

/**
 * The reason why no panel can move, as a clause without a full stop; null where propagation does not reach all panels.
 * `held` are the conditions that the rows index. Example: "P1, P12, P85 and P96 have two edges on the level rim, so they
 * are level; that makes all 96 panels level".
 */
export function forcedReason(plan: Plan, held: readonly Held[], found: Propagation): string | null {
  if (!found.forced) return null
  const level = allLevel(found.height)
  const begins = startPanels(found.panelStep)
  const one = begins.length === 1
  const state = level ? (one ? 'it is level' : 'they are level') : one ? 'its plane is fixed' : 'their planes are fixed'
  const why = `${startWords(plan, held, found, begins, level)}, so ${begins.length === plan.panelCount && !one ? state.replace('they are', 'all of them are') : state}`
  if (begins.length === plan.panelCount) return why
  return `${why}; that ${level ? `makes all ${plan.panelCount} panels level` : `fixes all ${plan.panelCount} panels`}`
}

/** The contradiction as a clause without a full stop. Levels are in the plan's unit, from the same zero as `datum`. */
export function contradictionReason(plan: Plan, held: readonly Held[], found: Propagation, contradiction: Contradiction, datum: number): string {
  const { panel, node, given, has, misfit, support, conditions } = contradiction
  const level = (height: number): string => levelWords(height * plan.frame.span + datum, plan.unit)
  const figure = millimetres(misfit * plan.frame.span * metres[plan.unit] * 1000)
  const by = conditionWords(held, conditions)
  const direct = panel >= 0 && [node, ...support].every((n) => found.nodeStep[n] === 0)
  if (direct) {
    const corners = Array.from(plan.corner.subarray(plan.panelStart[panel], plan.panelStart[panel + 1]))
      .filter((n) => n === node || support.includes(n))
    return `${panelName(panel)} has corners held at ${words(corners.map((n) => level(found.height[n])), corners.length)} by ${by}: ${figure} off one plane`
  }
  const place = panel >= 0 ? `${nodeName(node)}, a corner of ${panelName(panel)},` : nodeName(node)
  return `by ${by} ${place} would lie at ${level(given)} and at ${level(has)}: ${figure} apart`
}

/** The worst of the contradictions, the first of them in a tie; null: none. */
export function worstContradiction(found: Propagation): Contradiction | null {
  let worst: Contradiction | null = null
  for (const next of found.contradictions) if (worst === null || next.misfit > worst.misfit * (1 + clashHeight)) worst = next
  return worst
}

/** "a, b and c", or "a, b, c, d, e, f and 12 more". */
export function words(list: readonly string[], most = longestList): string {
  // One more name takes no more room than "and 1 more".
  if (list.length <= most + 1) return list.length < 2 ? list.join('') : `${list.slice(0, -1).join(', ')} and ${list[list.length - 1]}`
  return `${list.slice(0, most).join(', ')} and ${list.length - most} more`
}

function conditionWords(held: readonly Held[], conditions: readonly number[]): string {
  return words(conditions.map((index) => `"${held[index]?.name ?? index + 1}"`))
}

function allLevel(height: Float64Array): boolean {
  return height.every((h) => Math.abs(h - height[0]) <= clashHeight)
}

/** The panels that are known first. */
function startPanels(panelStep: Int32Array): number[] {
  const first = panelStep.reduce((least, step) => (step >= 0 ? Math.min(least, step) : least), Infinity)
  const begins: number[] = []
  panelStep.forEach((step, p) => {
    if (step === first) begins.push(p)
  })
  return begins
}

function startWords(plan: Plan, held: readonly Held[], found: Propagation, begins: readonly number[], level: boolean): string {
  const all = begins.length === plan.panelCount && begins.length > 1
  const names = all ? `All ${begins.length} panels` : words(begins.map(panelName))
  const have = begins.length === 1 ? 'has' : 'have'
  const conditions = found.conditionsOf(begins)
  const by = conditionWords(held, conditions)
  const held0 = (n: number): boolean => found.nodeStep[n] === 0
  if (!begins.every((p) => heldCorners(plan, p, held0) >= 3)) {
    return `${begins.length === 1 ? 'The corners' : 'Corners'} of ${all ? 'all panels' : names} follow from ${by}`
  }
  if (conditions.length === 1 && begins.every((p) => heldRimEdges(plan, p, held0) >= 2)) {
    const only = held[conditions[0]]
    return `${names} ${have} two edges on the ${level ? 'level ' : ''}${level && only?.kind === 'level' ? 'rim' : `rim, held by ${by}`}`
  }
  return `${names} ${have} three or more corners held ${level ? 'at one level ' : ''}by ${by}`
}

function heldCorners(plan: Plan, p: number, is: (n: number) => boolean): number {
  let count = 0
  for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) if (is(plan.corner[c])) count += 1
  return count
}

/** Edges of the panel without a panel beyond them, both ends held. */
function heldRimEdges(plan: Plan, p: number, is: (n: number) => boolean): number {
  let count = 0
  for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
    const half = plan.cornerHalf[c]
    if (plan.panelOf[half ^ 1] < 0 && is(plan.origin[half]) && is(plan.origin[half ^ 1])) count += 1
  }
  return count
}

/** A level with its sign, to about a millimetre: "+3.250 m". */
function levelWords(level: number, unit: Unit): string {
  const decimals = { mm: 0, cm: 1, m: 3, in: 2, ft: 3 }[unit]
  const rounded = level.toFixed(decimals)
  const zero = Number(rounded) === 0
  return `${level < 0 && !zero ? '' : '+'}${zero ? rounded.replace('-', '') : rounded}${unit === 'm' ? '' : ` ${unit}`}`
}

function millimetres(mm: number): string {
  if (mm < 0.01) return 'less than 0.01 mm'
  return `${mm >= 10 ? mm.toFixed(0) : String(Number(mm.toPrecision(2)))} mm`
}
