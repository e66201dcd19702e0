/** The job "check" with its cures: reads, asks, applies the cures that were chosen, and says what else would help. */
import { fail, ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { cureCodes, type CureCode } from '../plan/project/cure-weights.ts'
import type { Cure } from '../roof/answer/cure.ts'
import { answerTo, type Checked } from './check.ts'
import { cured, curesOf, summaryWith } from './cures.ts'
import { planQuestion, type PlanQuestion } from './question.ts'
import type { Request } from './request.ts'

export interface Solved {
  readonly checked: Checked
  /** The question that `checked` answers: of the plan as drawn, or with cures applied. */
  readonly question: PlanQuestion
  /** Whether a cure made another plan of it. */
  readonly planChanged: boolean
  readonly applied: readonly Cure[]
}

/** "add-diagonals" or "release:south gutter". Fails with "no-such-cure" on another word. */
export function cureNamed(text: string): Result<{ code: CureCode; name: string | null }> {
  const colon = text.indexOf(':')
  const word = (colon < 0 ? text : text.slice(0, colon)).trim().toLowerCase()
  const code = cureCodes.find((each) => each === word)
  if (code === undefined) return fail('no-such-cure', `"${word}" is not a kind of cure`, { field: '--cure' }, `write one of ${cureCodes.join(', ')}`)
  return ok({ code, name: colon < 0 ? null : text.slice(colon + 1).trim() })
}

/** The answer with these cures applied one after another, each as it is found then. */
export function* solvedWith(request: Request, version: string, sha256: string, cures: readonly string[]): Steps<Result<Solved>> {
  const asked = yield* planQuestion(request, version, sha256)
  if (!asked.ok) return asked
  let question = asked.value
  let checked = yield* answerTo(question)
  if (!checked.ok) return checked
  const applied: Cure[] = []
  let planChanged = false
  for (const text of cures) {
    const named = cureNamed(text)
    if (!named.ok) return named
    const found = yield* cured(question, checked.value, named.value.code, named.value.name)
    if (!found.ok) return found
    const { next, cure, attempt } = found.value
    applied.push(cure)
    planChanged ||= attempt.changesPlan
    if (attempt.next === null) continue
    question = next
    checked = yield* answerTo(question)
    if (!checked.ok) return checked
  }
  return ok({ checked: checked.value, question, planChanged, applied })
}

/** The same with the cures that are left in its summary. */
export function* withCures(solved: Solved): Steps<Result<Solved>> {
  const { checked, question, applied } = solved
  const found = yield* curesOf(question, checked)
  if (!found.ok) return found
  const { caution, ...summary } = summaryWith(checked.answer.summary, found.value)
  const whole = { ...summary, ...(applied.length === 0 ? {} : { cured: applied }), caution }
  return ok({ ...solved, checked: { ...checked, answer: { ...checked.answer, summary: whole } } })
}
