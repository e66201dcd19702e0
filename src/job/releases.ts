/** What letting go of one condition gives, for conditions that clash or that leave a roof without a fold. */
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { withoutConditions } from '../plan/project/edits.ts'
import { answerTo, type Checked, type PlanQuestion } from './check.ts'
import type { Verdict } from '../roof/answer/answer.ts'

export interface Release {
  /** The condition that is let go, by name. */
  readonly name: string
  readonly verdict: Verdict
  /** As in the summary of an answer without it. */
  readonly freedomLeft: number | null
}

/** More would hold up the worker: each is an answer of its own. */
const mostTried = 8

/**
 * The answers with one condition less: of the clashing conditions where some clash, of all hard ones where no joint folds.
 * None where joints fold or nothing is held.
 */
export function* releasesOf(question: PlanQuestion, last: Checked): Steps<Result<readonly Release[]>> {
  const names = worthTrying(last).slice(0, mostTried)
  const releases: Release[] = []
  for (const name of names) {
    yield { stage: 'Letting conditions go', done: releases.length / names.length }
    const made = yield* answerTo({ ...question, brief: withoutConditions(question, [name]).brief, free: last.free })
    if (!made.ok) return made
    const { verdict, stress } = made.value.answer.summary
    releases.push({ name, verdict, freedomLeft: stress.freedomLeft })
  }
  return ok(releases)
}

function worthTrying({ answer, wishes }: Checked): string[] {
  const { clashes, frozenJoints } = answer.summary.held
  if (clashes.length > 0) return [...new Set(clashes.flatMap(({ conditions }) => conditions))]
  const hard = wishes.conditions.filter(({ soft }) => soft === null)
  return frozenJoints === answer.plan.jointCount && answer.summary.stress.freedom > 0 ? hard.map(({ name }) => name) : []
}
