/** `panewise balance`: the plan whose nodes stand where their edges balance, and its roof, into a folder. */
import { fail, ok, type Result } from '../base/result.ts'
import { adjustFileNames } from '../job/adjust-files.ts'
import type { Densities } from '../job/balance.ts'
import { balanceSummary } from '../job/balance-files.ts'
import { balancedFiles, balancePlan } from '../job/run.ts'
import { balanceReport } from '../paper/report/balance-report.ts'
import { eachPlan, gaveUp, type Run } from './each-plan.ts'
import { exitCodeOf, type ExitCode } from './exit-code.ts'
import { readInput } from './read-input.ts'
import { openOutput } from './write-safely.ts'

/** One plan a run. The exit code is the verdict on the balanced plan, 1 where panels would cross. */
export async function balancePlans(run: Run): Promise<ExitCode> {
  const { args, screen } = run
  const folder = args.values.get('out')?.[0]
  if (folder === undefined) return gaveUp(screen, fail('no-out', 'balance needs a folder to write into', null, 'add --out DIR').problem)
  if (args.plans.length > 1) return gaveUp(screen, fail('one-plan', 'balance takes one plan', null, 'run it once for each').problem)
  const densities = await densitiesFrom(args.values.get('densities')?.[0] ?? 'fit')
  if (!densities.ok) return gaveUp(screen, densities.problem)
  const output = openOutput(folder, { overwrite: args.values.has('overwrite'), owned: [...adjustFileNames] })
  if (!output.ok) return gaveUp(screen, output.problem)
  try {
    return await eachPlan(run, async (request, _at, drive) => {
      const balanced = await balancePlan(request, densities.value, drive)
      if (!balanced.ok) return balanced
      const made = await balancedFiles(balanced.value, drive)
      if (!made.ok) return made
      for (const { name, bytes } of made.value) {
        const put = output.value.put(name, bytes)
        if (!put.ok) return put
      }
      const written = output.value.commit()
      if (!written.ok) return written
      const { after, facts } = balanced.value
      const report = balanceReport(after.answer, facts)
      const names = made.value.map(({ name }) => name).join(', ')
      return ok({
        record: balanceSummary(balanced.value),
        report: { ...report, sentences: [...report.sentences, `Written to ${folder}: ${names}.`] },
        exit: facts.outcome === 'crossed' ? 1 : exitCodeOf(after.answer.summary.verdict),
      })
    })
  } finally {
    output.value.discard()
  }
}

async function densitiesFrom(text: string): Promise<Result<Densities>> {
  const word = text.trim().toLowerCase()
  if (word === 'uniform' || word === 'fit' || word === 'length') return ok(word)
  const file = await readInput(text)
  if (file.ok) return file
  return { ok: false, problem: { ...file.problem, where: { ...file.problem.where, field: '--densities' }, cure: 'write uniform, fit, length, or the name of a list (joint,density)' } }
}
