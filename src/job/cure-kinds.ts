/**
 * The kinds of cures, each as attempts: what it would change, with the figures of the change. Whether an attempt helps is not
 * decided here: `cures.ts` asks the changed question and offers what was measured to help.
 */
import { conversion } from '../base/length.ts'
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { jointName, nodeName, panelName } from '../plan/names.ts'
import type { Condition } from '../plan/project/condition.ts'
import type { Cure, CureCode } from '../roof/answer/cure.ts'
import { addedDiagonals } from '../roof/cures/joints/diagonals.ts'
import { dividedPlan } from '../roof/cures/joints/diagonals-plan.ts'
import { packedRim, type PackedRim } from '../roof/cures/rim/pack-rim.ts'
import { withoutFrozen } from '../roof/cures/joints/remove-joints.ts'
import { conditionsThatFlatten } from '../roof/cures/clash/smallest-clash.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import { wishOf } from '../roof/raise/raise.ts'
import { outerRimNodes, riseOf } from '../roof/raise/rise.ts'
import { moveOutcome } from './adjust.ts'
import { questionOf, type Checked } from './check.ts'
import type { PlanQuestion } from './question.ts'
import { withConditionsOf, withPlan } from './cure-question.ts'
import { keepsOf } from './keeps.ts'
import { defaultPlanTolerance_mm } from './plan-tolerance.ts'
import { targetOf } from './target.ts'

export type CureFigures = Pick<Cure, 'code' | 'name' | 'largest_mm' | 'rms_mm' | 'count' | 'where' | 'withinTolerance' | 'diagonals' | 'packing' | 'least_mm' | 'panels'>

export interface Attempt {
  readonly figures: CureFigures
  /** The question with the cure applied; null: nothing changes (the deviation is accepted). */
  readonly next: PlanQuestion | null
  /** Whether the plan itself is another one then. */
  readonly changesPlan: boolean
}

/** Names that a cure carries at most: the count says how many there are. */
const mostNamed = 100
/** Shifts and packings below this, in mm, are none that anybody could set out. */
const counted_mm = 1

/** Above this many panels nodes are moved when that is asked for, not to find out whether it would help: it costs several answers. */
const mostMoved = 20_000

/** `notices`: takes up what is not tried, and why; null: this kind was asked for by name, so it is tried. */
export function* attempts(code: CureCode, question: PlanQuestion, checked: Checked, notices: string[] | null = null): Steps<Result<readonly Attempt[]>> {
  switch (code) {
    case 'accept-deviation': return ok(acceptDeviation(checked))
    case 'move-nodes': return yield* moveNodes(question, checked, notices)
    case 'pack-rim': return yield* packRim(question, checked, notices)
    case 'add-diagonals': return yield* addDiagonals(question, checked)
    case 'remove-joints': return removeJoints(question, checked)
    case 'release': return yield* releases(question, checked)
  }
}

/** Only within the tolerance that was stated: beyond it nobody has said that bent panels may be. */
function acceptDeviation({ answer, wishes }: Checked): readonly Attempt[] {
  const { roof, summary } = answer
  if (roof === null || !roof.isNear || summary.roof === null || !(summary.roof.flatnessMax_mm <= wishes.flat_mm)) return []
  const worst = [...roof.corner_mm.keys()].sort((a, b) => roof.corner_mm[b] - roof.corner_mm[a]).slice(0, 10)
  return [{
    figures: {
      code: 'accept-deviation', name: null, largest_mm: summary.roof.cornerMax_mm, rms_mm: rms(roof.corner_mm),
      count: roof.flatness_mm.reduce((n, zone) => n + (zone > wishes.flat_mm ? 1 : 0), 0), where: worst.map(panelName),
    },
    next: null, changesPlan: false,
  }]
}

function* moveNodes(question: PlanQuestion, checked: Checked, notices: string[] | null): Steps<Result<readonly Attempt[]>> {
  const { read, request } = question
  const { plan } = read
  if (notices !== null && plan.panelCount > mostMoved) {
    notices.push(`Whether moving nodes helps was not tried on ${plan.panelCount} panels: panewise adjust PLAN --out DIR does it.`)
    return ok([])
  }
  const keeps = keepsOf(plan, request.options, question.brief)
  if (!keeps.ok) return keeps
  const found = yield* moveOutcome(request, read, question.target ?? null, checked, keeps.value)
  if (!found.ok) return found
  if (found.value.kind !== 'moved') return ok([])
  const { moved } = found.value
  const mm = conversion(plan.unit, 'mm')
  const shift = Float64Array.from(plan.x, (x, n) => Math.hypot(moved.plan.x[n] - x, moved.plan.y[n] - plan.y[n]) * mm)
  const sizes = sizesOf(shift)
  const tolerance_mm = request.options.planTolerance_mm ?? defaultPlanTolerance_mm
  return ok([{
    figures: { code: 'move-nodes', name: null, ...sizes, where: largestFirst(shift).map(nodeName), withinTolerance: sizes.largest_mm <= tolerance_mm },
    next: { ...question, read: { ...read, plan: moved.plan }, free: null, space: checked.under.space }, changesPlan: true,
  }])
}

/** Where nothing folds, or the asked rise cannot be had: levels held at the rim become the packed ones, node by node. */
function* packRim(question: PlanQuestion, checked: Checked, notices: string[] | null): Steps<Result<readonly Attempt[]>> {
  const { plan } = question.read
  const { wishes, rows, free } = checked
  const asked = yield* askedOf(question, checked)
  if (!asked.ok) return asked
  if (wishes.pitch !== null || !(foldsNothing(checked) || missesRise(checked))) return ok([])
  const { wish, rise } = wishOf(plan, asked.value)
  const names = wishes.conditions.map(({ name }) => name)
  const { rule } = asked.value
  const whole = rise ?? riseOf(wish, outerRimNodes(plan), rule)
  const rim = { plan, free, hard: rows.hard, names, areas: nodeAreas(plan), wish, rule }
  // Levels that clash are packed until they do not, where nobody asked for a rise; a roof that folds nothing then is no cure.
  const rises = checked.under.start === null && wishes.rise === null ? [null, whole] : [whole]
  const tried: Attempt[] = []
  for (const each of rises) {
    const found = yield* packedRim({ ...rim, rise: each })
    if (found === null) continue
    if ('lifts' in found) notices?.push(`Whether packing the rim helps was not tried: ${found.nodes} nodes and ${found.lifts} dimensions are too many for it.`)
    else tried.push(packing(question, checked, found))
  }
  return ok(tried)
}

function packing(question: PlanQuestion, checked: Checked, found: PackedRim): Attempt {
  const { plan } = question.read
  const { wishes, rows } = checked
  const names = wishes.conditions.map(({ name }) => name)
  const { span } = plan.frame
  const datum = wishes.datum ?? 0
  const taken = new Set(found.conditions)
  const levels: Condition[] = []
  const packed = new Set<number>()
  for (const index of found.conditions) {
    for (const node of rows.held[index].nodes) {
      if (packed.has(node)) continue
      packed.add(node)
      levels.push({
        name: `${names[index]}, ${nodeName(node)}`, soft: null, kind: 'level', at: { nodes: [nodeName(node)] }, level: found.heights[node] * span + datum,
      })
    }
  }
  const by_mm = found.corrections.map((value) => value * span * conversion(plan.unit, 'mm'))
  const order = largestFirst(by_mm.map(Math.abs), 0)
  return {
    figures: {
      code: 'pack-rim', name: null, ...sizesOf(by_mm), where: order.map((k) => nodeName(found.nodes[k])),
      packing: [...by_mm.keys()].sort((a, b) => Math.abs(by_mm[b]) - Math.abs(by_mm[a]) || a - b).map((k) => ({ node: nodeName(found.nodes[k]), by_mm: by_mm[k] })),
      least_mm: found.least * span * conversion(plan.unit, 'mm'),
    },
    next: withConditionsOf(question, checked, [...wishes.conditions.filter((_, index) => !taken.has(index)), ...levels]), changesPlan: false,
  }
}

/** Where nothing folds, or the asked rise cannot be had. */
function* addDiagonals(question: PlanQuestion, checked: Checked): Steps<Result<readonly Attempt[]>> {
  const { plan } = question.read
  const { wishes, under } = checked
  if (wishes.pitch !== null || under.rowClashes.length > 0 || !(foldsNothing(checked) || missesRise(checked))) return ok([])
  const asked = yield* askedOf(question, checked)
  if (!asked.ok) return asked
  const { wish } = wishOf(plan, asked.value)
  const found = yield* addedDiagonals({ space: under.space, start: under.start, wish, down: wishes.down })
  if (found === null) return ok([])
  const { diagonals } = found
  const changed = dividedPlan(plan, diagonals)
  if (!changed.ok) return ok([])
  const corner = (panel: number, c: number): string => nodeName(plan.corner[plan.panelStart[panel] + c])
  return ok([{
    figures: {
      code: 'add-diagonals', name: null, largest_mm: null, rms_mm: null, count: diagonals.length,
      where: [...new Set(diagonals.map(({ panel }) => panelName(panel)))].slice(0, mostNamed),
      diagonals: diagonals.map(({ panel, from, to }) => ({ panel: panelName(panel), from: corner(panel, from), to: corner(panel, to) })),
      panels: changed.value.plan.panelCount,
    },
    next: withPlan(question, checked, changed.value), changesPlan: true,
  }])
}

/** Frozen joints left out, where others fold: see `remove-joints.ts` for why no others are. */
function removeJoints(question: PlanQuestion, checked: Checked): Result<readonly Attempt[]> {
  const { plan } = question.read
  const { under, rows } = checked
  if (foldsNothing(checked)) return ok([])
  const keep = new Uint8Array(plan.nodeCount)
  for (const { nodes, kind } of rows.held) if (kind !== 'plane' && kind !== 'coplanar' && kind !== 'flush') for (const node of nodes) keep[node] = 1
  const made = withoutFrozen(plan, under.frozen, keep)
  if (!made.ok || made.value === null) return ok([])
  const { joints } = made.value
  return ok([{
    figures: {
      code: 'remove-joints', name: null, largest_mm: null, rms_mm: null, count: joints.length, where: joints.slice(0, mostNamed).map(jointName),
      panels: made.value.plan.panelCount,
    },
    next: withPlan(question, checked, made.value), changesPlan: true,
  }])
}

/**
 * Hard conditions, one at a time. Where they clash, or fold nothing, only members of an irreducible such set can help: the
 * others leave the set as it is. Soft ones never do: a wish does not narrow the roofs there are, so letting it go adds none.
 */
function* releases(question: PlanQuestion, checked: Checked): Steps<Result<readonly Attempt[]>> {
  const { wishes, rows } = checked
  const names = yield* worthReleasing(question, checked)
  return ok(names.map((name) => ({
    figures: { code: 'release', name, largest_mm: null, rms_mm: null, count: 1, where: [name] },
    next: withConditionsOf(question, checked, wishes.conditions.filter((each, index) => each.name !== name || rows.held[index].soft)), changesPlan: false,
  })))
}

/** More would be more than anybody reads; each is an answer of its own. */
const mostReleased = 8

function* worthReleasing({ read }: PlanQuestion, checked: Checked): Steps<readonly string[]> {
  const { answer, rows, free, wishes } = checked
  const { clashes } = answer.summary.held
  if (clashes.length > 0) return clashes[0].conditions.slice(0, mostReleased)
  const names = wishes.conditions.map(({ name }) => name)
  if (foldsNothing(checked)) {
    const { conditions } = yield* conditionsThatFlatten(read.plan, free, rows, names, nodeAreas(read.plan))
    return conditions.map((index) => names[index]).slice(0, mostReleased)
  }
  return [...new Set(rows.hard.condition)].sort((a, b) => a - b).map((index) => names[index]).slice(0, mostReleased)
}

/** No roof, or none with a fold where there are joints. */
export function foldsNothing({ answer: { summary: { verdict } } }: Checked): boolean {
  return verdict !== 'lifts' && verdict !== 'lifts in part'
}

const leastMissing = 1e-3

/** A rise that was asked for, and is not had. */
export function missesRise({ answer: { summary: { roof } }, wishes }: Checked): boolean {
  return wishes.rise !== null && roof !== null && roof.riseAsked !== null && Math.abs(roof.rise - roof.riseAsked) > leastMissing * roof.riseAsked
}

function* askedOf(question: PlanQuestion, { wishes, rows }: Checked): Steps<Result<ReturnType<typeof questionOf>>> {
  const { plan } = question.read
  const target = yield* targetOf(question.request, wishes, question.read, question.target ?? null)
  return target.ok ? ok(questionOf(plan, wishes, rows, target.value.heights)) : target
}

function sizesOf(values_mm: Float64Array): { largest_mm: number; rms_mm: number; count: number } {
  return {
    largest_mm: values_mm.reduce((most, value) => Math.max(most, Math.abs(value)), 0), rms_mm: rms(values_mm),
    count: values_mm.reduce((n, value) => n + (Math.abs(value) > counted_mm ? 1 : 0), 0),
  }
}

const rms = (values: Float64Array): number => Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / Math.max(1, values.length))

/** Indices of the values over `least`, largest first, at most a hundred. */
function largestFirst(values: Float64Array, least = counted_mm): number[] {
  return [...values.keys()].filter((k) => values[k] > least).sort((a, b) => values[b] - values[a] || a - b).slice(0, mostNamed)
}
