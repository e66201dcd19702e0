/** `panewise check`: whether the roof can be had, and what it takes where not; writes nothing. */
import { ok } from '../base/result.ts'
import { solve } from '../job/run.ts'
import { solvedReport } from '../paper/report/cure-report.ts'
import { eachPlan, type Run } from './each-plan.ts'
import { exitCodeOf, type ExitCode } from './exit-code.ts'

export function checkPlans(run: Run): Promise<ExitCode> {
  const cures = run.args.values.get('cure') ?? []
  return eachPlan(run, async (request, _at, drive) => {
    const solved = await solve(request, cures, drive)
    if (!solved.ok) return solved
    const { answer } = solved.value.checked
    return ok({ record: answer.summary, report: solvedReport(answer), exit: exitCodeOf(answer.summary.verdict) })
  })
}
