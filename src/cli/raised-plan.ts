/** One plan of a run over several, from request to files: the work that a thread does too. */
import { ok, type Result } from '../base/result.ts'
import type { DriveOptions } from '../base/steps.ts'
import { solvedFiles, solvedSummary } from '../job/cure-files.ts'
import type { OutputFile } from '../job/files.ts'
import type { Request } from '../job/request.ts'
import { solve } from '../job/run.ts'
import { solvedReport } from '../paper/report/cure-report.ts'
import type { Report } from '../paper/report/report.ts'
import type { Summary } from '../roof/answer/answer.ts'
import { exitCodeOf, type ExitCode } from './exit-code.ts'

export interface RaiseTask {
  readonly request: Request
  readonly cures: readonly string[]
}

export interface RaisedPlan {
  readonly record: ReturnType<typeof solvedSummary>
  readonly report: Report
  readonly exit: ExitCode
  readonly summary: Summary
  readonly files: readonly OutputFile[]
}

export async function raisedPlan({ request, cures }: RaiseTask, drive: DriveOptions): Promise<Result<RaisedPlan>> {
  const solved = await solve(request, cures, drive)
  if (!solved.ok) return solved
  const made = await solvedFiles(solved.value, drive)
  if (!made.ok) return made
  const { answer } = solved.value.checked
  return ok({ record: solvedSummary(solved.value), report: solvedReport(answer), exit: exitCodeOf(answer.summary.verdict), summary: answer.summary, files: made.value })
}
