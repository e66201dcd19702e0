/**
 * Several plans in one run of `raise`: a folder each and an overview, going on after a bad one, as many at a time as the
 * machine has cores. What is written and said does not depend on how many.
 */
import { availableParallelism } from 'node:os'
import { fail, ok, type Result } from '../base/result.ts'
import { finish } from '../base/steps.ts'
import { writeCsv, type CsvStyle } from '../formats/write-csv.ts'
import type { OutputFile } from '../job/files.ts'
import { nodePool, type Pool } from '../job/worker/node-pool.ts'
import { eachPlan, type Run } from './each-plan.ts'
import { badUse, type ExitCode } from './exit-code.ts'
import { overview, type OverviewRow } from './overview.ts'
import { overviewName } from './plan-folders.ts'
import { raisedPlan, type RaisedPlan, type RaiseTask } from './raised-plan.ts'
import type { Output } from './write-safely.ts'

/** How many plans are worked on at a time. */
export function plansAtOnce(asked: number | null, plans: number): number {
  return Math.max(1, Math.min(asked ?? availableParallelism(), plans))
}

export async function raiseSeveral(
  run: Run, folders: readonly string[], output: Output, atOnce: number, putAll: (output: Output, folder: string, made: readonly OutputFile[]) => Result<null>,
): Promise<ExitCode> {
  const { plans, values } = run.args
  const cures = values.get('cure') ?? []
  const rows: (OverviewRow | null)[] = plans.map(() => null)
  let csv: CsvStyle = 'comma'
  const pool: Pool<RaiseTask, Result<RaisedPlan>> | null = atOnce > 1 ? nodePool(run.script, atOnce) : null
  const stop = (): void => void pool?.close()
  run.signal.addEventListener('abort', stop)
  try {
    return await eachPlan(
      run,
      async (request, at, drive) => {
        csv = request.options.csv
        const task = { request, cures }
        // A fault of ours on one plan is that plan's; the others are worked on all the same.
        const raised = await (pool === null ? raisedPlan(task, drive) : pool.ask(task, drive.onProgress)).catch((error: unknown) =>
          run.signal.aborted ? fail('cancelled', 'stopped before the end')
            : fail('fault', `this is a fault of panewise, not of the plan: ${error instanceof Error ? error.message : String(error)}`, null, 'please report it with the plan'))
        if (!raised.ok) return raised
        const { record, report, exit, summary, files } = raised.value
        const put = putAll(output, folders[at], files)
        if (!put.ok) return put
        rows[at] = { plan: plans[at], folder: folders[at], exit, summary, problem: null }
        return ok({ record: { folder: folders[at], ...record }, report, exit })
      },
      {
        failed: (at, problem) => (rows[at] = { plan: plans[at], folder: '', exit: badUse, summary: null, problem }),
        conclude: () => {
          const put = output.put(overviewName, finish(writeCsv(overview(rows.filter((row) => row !== null)), csv)))
          return put.ok ? output.commit() : put
        },
      },
      atOnce,
    )
  } finally {
    run.signal.removeEventListener('abort', stop)
    await pool?.close()
  }
}
