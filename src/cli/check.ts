/** `panewise check`: whether the roof can be had; writes nothing. */
import { ok } from '../base/result.ts'
import { run as job } from '../job/run.ts'
import { answerReport } from '../paper/report/report.ts'
import { eachPlan, type Run } from './each-plan.ts'
import { exitCodeOf, type ExitCode } from './exit-code.ts'

export function checkPlans(run: Run): Promise<ExitCode> {
  return eachPlan(run, async (request, _at, drive) => {
    const checked = await job(request, drive)
    if (!checked.ok) return checked
    const { answer } = checked.value
    return ok({ record: answer.summary, report: answerReport(answer), exit: exitCodeOf(answer.summary.verdict) })
  })
}
