/** From a request to the question about a plan: files opened, the drawing read. */
import type { Question } from '../base/repair.ts'
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import type { Brief } from '../plan/project/brief.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import type { FreeRim } from '../roof/stress/free-rim.ts'
import type { LiftSpace } from '../roof/stress/lift-space.ts'
import { levelsOnPlan } from './levels-on-plan.ts'
import { withLevels } from './levels.ts'
import { reading } from './reading.ts'
import type { Request } from './request.ts'

/**
 * A plan that has been read and what is asked of it. `free`: of the same plan, from an earlier answer; `space`: of it, or of one
 * whose nodes lie elsewhere; null or absent: not known.
 */
export interface PlanQuestion {
  readonly request: Request
  readonly version: string
  readonly sha256: string
  readonly read: ReadPlan
  readonly brief: Brief
  /** Heights set by hand (length nodeCount, NaN: none), in the place of the drawing's and of the brief's shape; null or absent: none. */
  readonly target?: Float64Array | null
  readonly free: FreeRim | null
  readonly space?: LiftSpace | null
}

/** A question of the reader that the answer depends on: it ends the job, and the questions go with it. */
export interface OpenQuestion extends Problem {
  readonly questions: readonly Question[]
}

/** What a request asks of its drawing; fails where the reader has a question of its own. */
export function* planQuestion(request: Request, version: string, sha256: string): Steps<Result<PlanQuestion>> {
  const options = yield* withLevels(request)
  if (!options.ok) return options
  const made = yield* reading({ ...request, options: options.value })
  if (!made.ok) return made
  const { brief, target } = made.value
  const levels = levelsOnPlan(options.value, made.value.read.plan)
  const asked = { ...request, options: levels.options }
  const read = { ...made.value.read, notices: [...made.value.read.notices, ...levels.notices] }
  return read.questions.length > 0 ? openQuestion(request, read.questions) : ok({ request: asked, version, sha256, read, brief, target, free: null })
}

function openQuestion(request: Request, questions: readonly Question[]): { ok: false; problem: OpenQuestion } {
  const { code, message, options } = questions[0]
  const { problem } = fail(code, message, { file: request.source.name }, `answer with ${options.join(' or ')}`)
  return { ok: false, problem: { ...problem, questions } }
}

/** Plans that cures, moves and balancing give are judged as they stand: a tolerance of the plan is a cure of its own. */
export function withoutTolerance(question: PlanQuestion): PlanQuestion {
  return { ...question, request: { ...question.request, options: { ...question.request.options, planTolerance_mm: 0 } } }
}
