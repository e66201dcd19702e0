/** What letting go of one condition gives, for conditions that clash or that leave a roof without a fold, whether it helps or not. */
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Verdict } from '../roof/answer/answer.ts'
import { answerTo, type Checked } from './check.ts'
import { attempts, foldsNothing } from './cure-kinds.ts'
import type { PlanQuestion } from './question.ts'

export interface Release {
  /** The condition that is let go, by name. */
  readonly name: string
  readonly verdict: Verdict
  /** As in the summary of an answer without it. */
  readonly freedomLeft: number | null
}

/** The answers with one condition less, of those that the cure "release" tries. None where joints fold or nothing is held. */
export function* releasesOf(question: PlanQuestion, last: Checked): Steps<Result<readonly Release[]>> {
  const tried = foldsNothing(last) ? yield* attempts('release', question, last) : ok([])
  if (!tried.ok) return tried
  const releases: Release[] = []
  for (const { figures: { name }, next } of tried.value) {
    if (name === null || next === null) continue
    yield { stage: 'Letting conditions go', done: releases.length / tried.value.length }
    const made = yield* answerTo({ ...next, free: last.free })
    if (!made.ok) return made
    const { verdict, stress } = made.value.answer.summary
    releases.push({ name, verdict, freedomLeft: stress.freedomLeft })
  }
  return ok(releases)
}
