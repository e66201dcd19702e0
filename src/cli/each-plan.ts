/** One plan after the other through the same work, going on after a bad one; the worst exit code is the run's. */
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import type { DriveOptions, Progress } from '../base/steps.ts'
import type { Request } from '../job/request.ts'
import { reportText, reportUnder } from '../paper/report/report-text.ts'
import type { Report } from '../paper/report/report.ts'
import type { Arguments } from './arguments.ts'
import { asked } from './asked.ts'
import { badUse, stopped, worst, type ExitCode } from './exit-code.ts'
import { stdinName, readInput } from './read-input.ts'
import { problemRecord, type Screen } from './screen.ts'

/** What became of one plan: a record for --json, a report for people, its exit code. */
export interface Outcome {
  readonly record: unknown
  readonly report: Report
  readonly exit: ExitCode
}

export type Work = (request: Request, at: number, drive: DriveOptions) => Promise<Result<Outcome>>

export interface Run {
  readonly args: Arguments
  readonly screen: Screen
  readonly signal: AbortSignal
  /** The program's own file, which threads run too. */
  readonly script: URL
}

export interface Hearing {
  /** Hears of each plan that had a problem. */
  failed?(at: number, problem: Problem): void
  /** Called once, after the last plan and before several plans' records are printed: a problem here is the run's. */
  conclude?(): Result<null>
}

/** Plans that are begun before the one whose turn it is to be printed has ended, for each that is worked on at a time. */
const begunAhead = 2

/**
 * Works through all plans and prints what became of them. A run that was stopped prints nothing more, and a folder that
 * cannot be written ends it.
 */
export async function eachPlan({ args, screen, signal }: Run, work: Work, hearing: Hearing = {}, atOnce = 1): Promise<ExitCode> {
  const { plans } = args
  const useless = badWords(args)
  if (useless !== null) return gaveUp(screen, useless)
  const request = await asked(args)
  if (signal.aborted) return stopped
  if (!request.ok) return gaveUp(screen, request.problem)
  const records: unknown[] = []
  const exits: ExitCode[] = []
  let caution: string | null = null
  let shown: { at: number; bar: ReturnType<Screen['bar']> } | null = null
  const begun: ReturnType<typeof begin>[] = []
  const begin = async (at: number) => {
    const source = await readInput(plans[at])
    const onProgress = (progress: Progress): void => {
      if (shown?.at === at) shown.bar.show(progress)
    }
    return { source, outcome: source.ok ? await work({ ...request.value, source: source.value }, at, { signal, onProgress }) : source }
  }
  for (const [at, path] of plans.entries()) {
    const bar = screen.bar()
    shown = { at, bar }
    // Those that run ahead may fail before they are waited for; that is heard of when their turn comes.
    while (begun.length < plans.length && begun.length < at + (atOnce > 1 ? begunAhead * atOnce : 1)) begun.push(begin(begun.length))
    for (const each of begun.slice(at)) each.catch(() => {})
    const { source, outcome } = await begun[at]
    bar.clear()
    if (signal.aborted || (!outcome.ok && outcome.problem.code === 'cancelled')) return stopped
    if (outcome.ok) {
      const { record, report, exit } = outcome.value
      records.push(record)
      exits.push(exit)
      caution = report.caution ?? caution
      const strong = (text: string): string => screen.strong(text)
      screen.say(plans.length === 1 ? reportText(report, strong) : reportUnder(path, report, strong))
    } else {
      if (outcome.problem.code === 'cannot-write') return gaveUp(screen, outcome.problem)
      screen.complain(outcome.problem)
      hearing.failed?.(at, outcome.problem)
      const input = plans.length === 1 ? {} : { input: { name: source.ok ? source.value.name : path } }
      records.push({ ...input, ...problemRecord(outcome.problem) })
      exits.push(badUse)
    }
  }
  const concluded = hearing.conclude?.() ?? ok(null)
  if (!concluded.ok) return gaveUp(screen, concluded.problem)
  if (plans.length > 1 && caution !== null) screen.say(`\n${caution}\n`)
  screen.give(plans.length === 1 ? records[0] : { plans: records })
  return worst(exits)
}

/** Says why nothing was begun. */
export function gaveUp(screen: Screen, problem: Problem): ExitCode {
  screen.complain(problem)
  screen.give(problemRecord(problem))
  return badUse
}

function badWords({ command, plans, values }: Arguments): Problem | null {
  if (plans.length === 0) return fail('no-plan', `${command} needs a plan`, null, `write panewise ${command} PLAN, or panewise ${command} --help`).problem
  const fromStdin = [...plans, ...['brief', 'target', 'levels'].flatMap((name) => values.get(name) ?? [])].filter((path) => path === '-')
  if (fromStdin.length > 1) return fail('stdin-twice', `${stdinName} can be read once only`, null, 'write "-" for one file and name the others').problem
  return null
}
