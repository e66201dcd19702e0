/**
 * What it takes to make a plan lift: every kind of cure tried, each measured on the plan with it applied, those that help
 * offered in the order of what they cost an office: accept the deviation within the tolerance, move nodes within the plan
 * tolerance, pack the rim, move nodes, add diagonals, remove joints, release a hard condition; within a kind by its figure.
 */
import { conversion } from '../base/length.ts'
import { fail, ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { cureSentence, leavesClause } from '../paper/report/cure-sentences.ts'
import type { Summary } from '../roof/answer/answer.ts'
import { cureCodes, type CureCode, type CureWeights } from '../plan/project/cure-weights.ts'
import type { AnswerWord, AsDrawn, Blocking, Cure } from '../roof/answer/cure.ts'
import { conditionsThatFlatten } from '../roof/cures/clash/smallest-clash.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import { answerTo, type Checked } from './check.ts'
import { attempts, foldsNothing, missesRise, type Attempt } from './cure-kinds.ts'
import { withoutTolerance, type PlanQuestion } from './question.ts'

export interface FoundCure {
  readonly cure: Cure
  readonly attempt: Attempt
}

export interface CuresFound {
  readonly answer: AnswerWord
  readonly asDrawn: AsDrawn | null
  readonly blocking: Blocking | null
  readonly cures: readonly FoundCure[]
  /** Kinds that were not tried, and why. */
  readonly notices: readonly string[]
}

/** All cures of an answer that is not a plain yes. */
export function* curesOf(asked: PlanQuestion, checked: Checked): Steps<Result<CuresFound>> {
  // Cures that leave the plan as it is do not ask again what it can do.
  const question = { ...asked, free: checked.free }
  if (checked.answer.summary.verdict === 'lifts') return ok({ answer: 'yes', asDrawn: null, blocking: null, cures: [], notices: [] })
  const found: FoundCure[] = []
  const notices: string[] = []
  for (const code of cureCodes) {
    const some = yield* curesOfKind(code, question, checked, notices)
    if (!some.ok) return some
    found.push(...some.value)
  }
  const cures = inOrder(found, question.brief.cures ?? {})
  const answer = checked.answer.summary.verdict === 'does not lift' && cures.length === 0 ? 'no, because' : 'yes, if'
  return ok({ answer, asDrawn: asDrawnOf(checked), blocking: yield* blockingOf(question, checked), cures, notices: [...new Set(notices)] })
}

/** The cures of one kind that help; `notices` as `attempts` takes them. */
export function* curesOfKind(code: CureCode, question: PlanQuestion, checked: Checked, notices: string[] | null = null): Steps<Result<readonly FoundCure[]>> {
  yield { stage: stages[code], done: 0 }
  const tried = yield* attempts(code, question, checked, notices)
  if (!tried.ok) return tried
  const found: FoundCure[] = []
  for (const attempt of tried.value) {
    const after = attempt.next === null ? ok(checked) : yield* answerTo(withoutTolerance(attempt.next))
    // A change that the job refuses (a place that is gone) is no cure.
    if (!after.ok || !(attempt.next === null || helps(code, checked, after.value))) continue
    found.push({ cure: cureOf(checked, attempt, after.value), attempt })
    // The rim is packed in one way: the first that helps.
    if (code === 'pack-rim') break
  }
  return ok(found)
}

/** One cure applied: the question that follows, and the cure as it was offered. Fails where it is not one that helps. */
export function* cured(question: PlanQuestion, checked: Checked, code: CureCode, name: string | null): Steps<Result<FoundCure & { next: PlanQuestion }>> {
  const found = yield* curesOfKind(code, question, checked)
  if (!found.ok) return found
  const chosen = found.value.filter(({ cure }) => name === null || cure.name === name)
  const words = name === null ? code : `${code}:${name}`
  if (chosen.length === 0) {
    const others = found.value.length === 0 ? 'panewise check PLAN lists those that do' : `these do: ${found.value.map(({ cure }) => cure.option).join(', ')}`
    return fail('no-such-cure', `"${words}" does not help here`, { field: '--cure' }, others)
  }
  if (chosen.length > 1) return fail('which-cure', `"${code}" could be one of ${chosen.length}`, { field: '--cure' }, `write one of ${chosen.map(({ cure }) => cure.option).join(', ')}`)
  const [one] = chosen
  return ok({ ...one, next: one.attempt.next ?? question })
}

/** The summary with the answer's form and the cures; the caution stays last. */
export function summaryWith({ caution, ...summary }: Summary, { answer, asDrawn, blocking, cures, notices }: CuresFound): Summary {
  return {
    ...summary, notices: [...summary.notices, ...notices], answer, cures: cures.map(({ cure }) => cure),
    ...(asDrawn === null ? {} : { asDrawn }), ...(blocking === null ? {} : { held: { ...summary.held, blocking } }), caution,
  }
}

const stages: Readonly<Record<CureCode, string>> = {
  'accept-deviation': 'Measuring', 'move-nodes': 'Moving nodes', 'pack-rim': 'Packing the rim', 'add-diagonals': 'Looking for diagonals',
  'remove-joints': 'Joining panels', release: 'Letting conditions go',
}

/**
 * A roof that folds where none did. Where some joints fold: the rise that could not be had, or all joints; letting a condition go and
 * leaving joints out help as far as fewer stay unfolded.
 */
function helps(code: CureCode, before: Checked, after: Checked): boolean {
  if (foldsNothing(after)) return false
  if (foldsNothing(before)) return true
  const [a, b] = [before.answer.summary, after.answer.summary]
  const lessFrozen = (code === 'release' || code === 'remove-joints') && b.held.frozenJoints < a.held.frozenJoints
  return b.verdict === 'lifts' || lessFrozen || (missesRise(before) && !missesRise(after))
}

function cureOf(before: Checked, { figures }: Attempt, after: Checked): Cure {
  const { summary } = after.answer
  const measured = {
    ...figures, ...(figures.code === 'release' ? missOf(before, after, figures.name ?? '') : {}),
    verdict: summary.verdict, freedomLeft: summary.stress.freedomLeft, frozenJoints: summary.held.frozenJoints, rise: summary.roof?.rise ?? null,
  }
  const { code, name, largest_mm, rms_mm, count, where, ...more } = measured
  const words = { before: before.answer.summary, after: summary, riseMissed: missesRise(after) }
  const spelt = name === null ? code : `${code}:${name}`
  return {
    code, name, option: `--cure ${/^[\w:.-]+$/.test(spelt) ? spelt : `"${spelt.replace(/["\\$`]/g, '\\$&')}"`}`, message: cureSentence(measured, words),
    largest_mm, rms_mm, count, where, leaves: leavesClause(measured, words), ...more,
  }
}

/** By how much the roof without the condition misses it: largest and RMS over its rows, which are heights in spans. */
function missOf({ rows, wishes, answer }: Checked, after: Checked, name: string): { largest_mm: number | null; rms_mm: number | null } {
  const heights = after.answer.roof?.heights
  if (heights === undefined) return { largest_mm: null, rms_mm: null }
  const { span } = answer.plan.frame
  const datum = wishes.datum ?? 0
  const { hard } = rows
  let largest = 0, squares = 0, count = 0
  hard.condition.forEach((index, r) => {
    if (rows.held[index].name !== name) return
    let value = -hard.value[r]
    for (let k = hard.start[r]; k < hard.start[r + 1]; k += 1) value += (hard.weight[k] * (heights[hard.node[k]] - datum)) / span
    largest = Math.max(largest, Math.abs(value))
    squares += value * value
    count += 1
  })
  const mm = span * conversion(answer.plan.unit, 'mm')
  return { largest_mm: largest * mm, rms_mm: Math.sqrt(squares / Math.max(1, count)) * mm }
}

/** Place of each kind; moving nodes stands twice, within the plan tolerance and beyond it. 3, releasing a soft condition, never helps. */
const ranks: Readonly<Record<CureCode, number>> = {
  'accept-deviation': 1, 'pack-rim': 4, 'move-nodes': 5, 'add-diagonals': 6, 'remove-joints': 7, release: 8,
}
const withinToleranceRank = 2

/** The place of a kind times its weight in the brief (1 where there is none): a lighter kind comes sooner. */
function inOrder(found: readonly FoundCure[], weights: CureWeights): FoundCure[] {
  const rank = ({ cure }: FoundCure): number => (weights[cure.code] ?? 1) * (cure.withinTolerance === true ? withinToleranceRank : ranks[cure.code])
  const figure = ({ cure }: FoundCure): number => cure.largest_mm ?? cure.count
  return [...found].sort((a, b) => rank(a) - rank(b) || ranks[a.cure.code] - ranks[b.cure.code] || figure(a) - figure(b))
}

function asDrawnOf({ answer: { roof, summary }, wishes }: Checked): AsDrawn | null {
  if (roof === null || !roof.isNear || summary.roof === null) return null
  return {
    cornerMax_mm: summary.roof.cornerMax_mm, cornerRms_mm: Math.sqrt(roof.corner_mm.reduce((sum, mm) => sum + mm * mm, 0) / roof.corner_mm.length),
    over: roof.flatness_mm.reduce((n, zone) => n + (zone > wishes.flat_mm ? 1 : 0), 0), flat_mm: wishes.flat_mm,
  }
}

function* blockingOf({ read: { plan } }: PlanQuestion, checked: Checked): Steps<Blocking | null> {
  const { held } = checked.answer.summary
  const { frozenJoints, flatGroups } = held
  if (held.clashes.length > 0) {
    const [{ conditions, misfit_mm }] = held.clashes
    return { conditions, leaves: 'no roof', misfit_mm, frozenJoints, flatGroups }
  }
  if (!foldsNothing(checked)) return null
  const names = checked.wishes.conditions.map(({ name }) => name)
  const { conditions } = yield* conditionsThatFlatten(plan, checked.free, checked.rows, names, nodeAreas(plan))
  return conditions.length === 0 ? null : { conditions: conditions.map((index) => names[index]), leaves: 'no fold', misfit_mm: 0, frozenJoints, flatGroups }
}
