/** Readings of panels: slope, flatness, flat group, freedom. */
import type { Answer } from '../../roof/answer/answer.ts'
import type { Plan } from '../../plan/plan.ts'
import { slopeOf } from './fall.ts'
import { classOf, range, tally, type Hatch, type PanelClass, type Reading } from './reading.ts'
import type { Tone } from './display-list.ts'

/** Spacing of batter strokes by class, px: steeper is closer. */
const batter: readonly number[] = [11, 8.6, 7, 5.8, 4.8, 4]
const cool: readonly Tone[] = ['cool1', 'cool2', 'cool3', 'cool4', 'cool5', 'cool6']

/** Classes of 5 degrees; below the least slope asked (null: none) a class of its own that is flagged. */
export function slopeReading(answer: Answer, leastSlope: number | null): Reading {
  const { plan, roof } = answer
  const value = new Float64Array(plan.panelCount)
  if (roof !== null) for (let p = 0; p < value.length; p += 1) value[p] = slopeOf(roof.gradient, p)
  const steps = [5, 10, 15, 20, 25, Infinity]
  const least = leastSlope !== null && leastSlope > 0 ? leastSlope : null
  const kept = steps.map((upTo, k) => ({ upTo, k })).filter(({ upTo }) => least === null || upTo > least)
  const limits = [...(least === null ? [] : [least]), ...kept.map(({ upTo }) => upTo)]
  const panelClass = Int8Array.from(value, (slope) => classOf(slope, limits))
  const counts = tally(panelClass, limits.length)
  const classes: PanelClass[] = []
  if (least !== null) classes.push({ tone: 'warm1', hatch: { kind: 'water' }, upTo: least, count: counts[0], flagged: true })
  for (const { upTo, k } of kept) {
    classes.push({ tone: cool[k], hatch: { kind: 'batter', spacing: batter[k] }, upTo, count: counts[classes.length], flagged: false })
  }
  return {
    name: 'slope', note: least === null ? 'Slope of each panel; strokes run down the fall.' : `Slope of each panel; water dashes under ${least}°.`,
    unit: '°', decimals: 0, panelClass, panelClasses: classes, jointClass: null, jointClasses: [], value, ...range(value),
    limit: least === null ? null : { at: least, after: 1 },
  }
}

/** Minimum zone of each panel against the tolerance in mm: three classes within it, three over it. */
export function flatnessReading(answer: Answer, tolerance_mm: number): Reading {
  const { plan, roof } = answer
  const value = roof === null ? new Float64Array(plan.panelCount) : roof.flatness_mm
  const limits = [0.1, 0.5, 1, 2, 3, Infinity].map((times) => times * tolerance_mm)
  // A panel exactly on the tolerance is within it, so the classes are closed above.
  const panelClass = Int8Array.from(value, (mm) => limits.findIndex((limit) => mm <= limit))
  const counts = tally(panelClass, limits.length)
  const hatches: (Hatch | null)[] = [null, null, null, { kind: 'lines', spacing: 7, angle: 45 }, { kind: 'cross', spacing: 6 }, { kind: 'cross', spacing: 4.5 }]
  const tones: Tone[] = ['cool1', 'cool2', 'cool3', 'warm1', 'warm2', 'warm3']
  return {
    name: 'flatness', note: `Minimum zone of each panel as written; the tolerance is ${tolerance_mm} mm.`,
    unit: ' mm', decimals: 1, panelClass,
    panelClasses: limits.map((upTo, k) => ({ tone: tones[k], hatch: hatches[k], upTo, count: counts[k], flagged: k > 2 })),
    jointClass: null, jointClasses: [], value, ...range(value), limit: { at: tolerance_mm, after: 3 },
  }
}

/** Flat groups of two panels and more in four washes so that neighbours differ; single panels stay paper. */
export function groupReading(answer: Answer): Reading {
  const { plan, flatGroup } = answer
  const { wash, letterOf, groups } = groupWashes(plan, flatGroup)
  const hatches: Hatch[] = [0, 45, 90, 135].map((angle) => ({ kind: 'lines', spacing: 9, angle }))
  const tones: Tone[] = ['group1', 'group2', 'group3', 'group4']
  const counts = tally(wash, 4)
  return {
    name: 'group', note: groups === 0 ? 'Every panel can fold against its neighbours.' : `${groups} flat ${groups === 1 ? 'group' : 'groups'} of two panels and more, lettered by area.`,
    unit: '', decimals: 0, panelClass: wash,
    panelClasses: tones.map((tone, k) => ({ tone, hatch: hatches[k], upTo: k + 1, count: counts[k], flagged: false, name: `wash ${k + 1}` })),
    jointClass: null, jointClasses: [], value: letterOf, smallest: 0, largest: groups, limit: null,
  }
}

/**
 * Share of each panel's joints that can fold in some roof under the conditions, in steps of a fifth; none is double hatched.
 */
export function freedomReading(answer: Answer): Reading {
  const { plan, frozenHeld } = answer
  const value = new Float64Array(plan.panelCount)
  for (let p = 0; p < plan.panelCount; p += 1) {
    let all = 0
    let live = 0
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const edge = plan.cornerHalf[c] >> 1
      if (edge >= plan.jointCount) continue
      all += 1
      live += 1 - frozenHeld[edge]
    }
    value[p] = all === 0 ? 100 : (100 * live) / all
  }
  const limits = [Number.MIN_VALUE, 20, 40, 60, 80, Infinity]
  const panelClass = Int8Array.from(value, (share) => classOf(share, limits))
  const counts = tally(panelClass, limits.length)
  const classes: PanelClass[] = limits.map((upTo, k) => ({
    tone: k === 0 ? 'warm1' : cool[k - 1], upTo: k === 0 ? 0 : Math.min(upTo, 100), count: counts[k], flagged: false,
    hatch: k === 0 ? { kind: 'double', spacing: 9 } : { kind: 'dots', spacing: [0, 26, 20, 16, 13.5, 12][k] },
    ...(k === 0 ? { name: 'none' } : {}),
  }))
  return {
    name: 'freedom', note: 'Share of a panel\u2019s joints that can fold under the conditions.', unit: '\u202f%', decimals: 0, panelClass,
    panelClasses: classes, jointClass: null, jointClasses: [], value, ...range(value), limit: null,
  }
}

/**
 * Washes 0 to 3 by greedy colouring of the groups in order of area (Welsh and Powell 1967 order by degree; by area the
 * large groups keep their wash while the plan is edited); a group whose neighbours use all four repeats the rarest.
 */
function groupWashes(plan: Plan, flatGroup: Int32Array): { wash: Int8Array; letterOf: Float64Array; groups: number } {
  const size = new Map<number, { panels: number; area: number }>()
  for (let p = 0; p < plan.panelCount; p += 1) {
    const entry = size.get(flatGroup[p]) ?? { panels: 0, area: 0 }
    entry.panels += 1
    entry.area += panelArea(plan, p)
    size.set(flatGroup[p], entry)
  }
  const order = [...size].filter(([, entry]) => entry.panels > 1).sort((a, b) => b[1].area - a[1].area || a[0] - b[0]).map(([group]) => group)
  const neighbours = new Map<number, Set<number>>(order.map((group) => [group, new Set<number>()]))
  for (let j = 0; j < plan.jointCount; j += 1) {
    const a = flatGroup[plan.panelOf[2 * j]]
    const b = flatGroup[plan.panelOf[2 * j + 1]]
    if (a === b) continue
    neighbours.get(a)?.add(b)
    neighbours.get(b)?.add(a)
  }
  const washOf = new Map<number, number>()
  for (const group of order) {
    const used = [0, 0, 0, 0]
    for (const other of neighbours.get(group) ?? []) {
      const wash = washOf.get(other)
      if (wash !== undefined) used[wash] += 1
    }
    washOf.set(group, used.indexOf(Math.min(...used)))
  }
  const rank = new Map(order.map((group, i) => [group, i + 1]))
  return {
    wash: Int8Array.from(flatGroup, (group) => washOf.get(group) ?? -1),
    letterOf: Float64Array.from(flatGroup, (group) => rank.get(group) ?? 0),
    groups: order.length,
  }
}

/** Plan area of panel p in the plan's unit squared: half the sum of cross products about its first corner. */
export function panelArea(plan: Plan, p: number): number {
  const first = plan.corner[plan.panelStart[p]]
  let twice = 0
  for (let c = plan.panelStart[p] + 1; c + 1 < plan.panelStart[p + 1]; c += 1) {
    const a = plan.corner[c]
    const b = plan.corner[c + 1]
    twice += (plan.x[a] - plan.x[first]) * (plan.y[b] - plan.y[first]) - (plan.y[a] - plan.y[first]) * (plan.x[b] - plan.x[first])
  }
  return twice / 2
}

/** Letters for flat groups by rank 1, 2, ...: A .. Z, AA, AB ... */
export function groupLetter(rank: number): string {
  let text = ''
  for (let n = rank; n > 0; n = Math.floor((n - 1) / 26)) text = String.fromCharCode(65 + ((n - 1) % 26)) + text
  return text
}
