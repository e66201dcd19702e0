/** `panewise read`: what a drawing holds, what was repaired, what is open. */
import { ok } from '../base/result.ts'
import { read } from '../job/run.ts'
import { readReport } from '../paper/report/report.ts'
import { eachPlan, type Run } from './each-plan.ts'
import type { ExitCode } from './exit-code.ts'

/** Exit 0 when a plan was read, also one with open questions: reading is where they are asked. */
export function readPlans(run: Run): Promise<ExitCode> {
  return eachPlan(run, async (request, _at, drive) => {
    const answer = await read(request, drive)
    if (!answer.ok) return answer
    const { summary } = answer.value
    return ok({ record: summary, report: readReport(summary), exit: 0 })
  })
}
