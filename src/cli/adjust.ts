/** `panewise adjust`: the nearest plan that lifts, its roof and what moved, into a folder, all files together at the end. */
import { fail, ok } from '../base/result.ts'
import { adjustFileNames, adjustSummary } from '../job/adjust-files.ts'
import { adjustedFiles, adjustPlan } from '../job/run.ts'
import { adjustReport } from '../paper/report/adjust-report.ts'
import { eachPlan, gaveUp, type Run } from './each-plan.ts'
import { exitCodeOf, type ExitCode } from './exit-code.ts'
import { openOutput } from './write-safely.ts'

/** One plan a run. The exit code is the verdict on the plan that was written, or on the plan as drawn where there is none. */
export async function adjustPlans(run: Run): Promise<ExitCode> {
  const { args, screen } = run
  const folder = args.values.get('out')?.[0]
  if (folder === undefined) return gaveUp(screen, fail('no-out', 'adjust needs a folder to write into', null, 'add --out DIR').problem)
  if (args.plans.length > 1) return gaveUp(screen, fail('one-plan', 'adjust takes one plan', null, 'run it once for each').problem)
  const output = openOutput(folder, { overwrite: args.values.has('overwrite'), owned: [...adjustFileNames] })
  if (!output.ok) return gaveUp(screen, output.problem)
  try {
    return await eachPlan(run, async (request, _at, drive) => {
      const adjusted = await adjustPlan(request, drive)
      if (!adjusted.ok) return adjusted
      const made = await adjustedFiles(adjusted.value, drive)
      if (!made.ok) return made
      for (const { name, bytes } of made.value) {
        const put = output.value.put(name, bytes)
        if (!put.ok) return put
      }
      const written = output.value.commit()
      if (!written.ok) return written
      const { after, facts } = adjusted.value
      const report = adjustReport(after.answer, facts)
      const names = made.value.map(({ name }) => name).join(', ')
      return ok({
        record: adjustSummary(adjusted.value),
        report: { ...report, sentences: [...report.sentences, `Written to ${folder}: ${names}.`] },
        exit: exitCodeOf(after.answer.summary.verdict),
      })
    })
  } finally {
    output.value.discard()
  }
}
