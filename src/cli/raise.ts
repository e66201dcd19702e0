/** `panewise raise`: the roof and its lists into a folder, all files together at the end. */
import { realpathSync } from 'node:fs'
import { join } from 'node:path'
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import { finish } from '../base/steps.ts'
import { writeCsv, type CsvStyle } from '../formats/write-csv.ts'
import { solvedFileNames, solvedFiles, solvedSummary } from '../job/cure-files.ts'
import { fileNames, type OutputFile } from '../job/files.ts'
import { solve } from '../job/run.ts'
import { solvedReport } from '../paper/report/cure-report.ts'
import type { Report } from '../paper/report/report.ts'
import type { Arguments } from './arguments.ts'
import { eachPlan, gaveUp, type Run } from './each-plan.ts'
import { badUse, exitCodeOf, type ExitCode } from './exit-code.ts'
import { overview, type OverviewRow } from './overview.ts'
import { overviewName, planFolders } from './plan-folders.ts'
import { openOutput, type Output } from './write-safely.ts'

/** One plan: into DIR. Several: into DIR/NAME, with an overview in DIR, going on after a plan that cannot be read. */
export async function raisePlans(run: Run): Promise<ExitCode> {
  const { args, screen } = run
  const folder = args.values.get('out')?.[0]
  if (folder === undefined) return gaveUp(screen, fail('no-out', 'raise needs a folder to write into', null, 'add --out DIR').problem)
  const isOne = args.plans.length <= 1
  const folders = isOne ? [''] : planFolders(args.plans)
  // A plan.obj is ours only where a cure may write one: it is what people call their drawings.
  const names = args.values.has('cure') ? solvedFileNames : fileNames
  const owned = [...folders.flatMap((each) => names.map((name) => join(each, name))), ...(isOne ? [] : [overviewName])]
  const inTheWay = inputAmong(args, owned.map((path) => join(folder, path)))
  if (inTheWay !== null) return gaveUp(screen, inTheWay)
  const output = openOutput(folder, { overwrite: args.values.has('overwrite'), owned })
  if (!output.ok) return gaveUp(screen, output.problem)
  try {
    return await (isOne ? raiseOne(run, folder, output.value) : raiseSeveral(run, folders, output.value))
  } finally {
    output.value.discard()
  }
}

/** The problem of an input that lies where a file is to be written: not even --overwrite may lose a drawing. */
export function inputAmong({ plans, values }: Arguments, written: readonly string[]): Problem | null {
  const inputs = [...plans, ...['brief', 'target', 'levels'].flatMap((name) => values.get(name) ?? [])]
  const places = new Set<string | null>(written.map(placeOf))
  places.delete(null)
  const input = inputs.find((path) => path !== '-' && places.has(placeOf(path)))
  if (input === undefined) return null
  return fail('input-in-the-way', 'the output would replace this input', { file: input }, 'name another folder with --out').problem
}

/** The true path of a file that is there. */
function placeOf(path: string): string | null {
  try {
    return realpathSync(path)
  } catch {
    return null
  }
}

function raiseOne(run: Run, folder: string, output: Output): Promise<ExitCode> {
  return eachPlan(run, async (request, _at, drive) => {
    const solved = await solve(request, run.args.values.get('cure') ?? [], drive)
    if (!solved.ok) return solved
    const made = await solvedFiles(solved.value, drive)
    if (!made.ok) return made
    const put = putAll(output, '', made.value)
    const written = put.ok ? output.commit() : put
    if (!written.ok) return written
    const { answer } = solved.value.checked
    const names = made.value.map(({ name }) => name).join(', ')
    return ok({
      record: solvedSummary(solved.value),
      report: withSentence(solvedReport(answer), `Written to ${folder}: ${names}.`),
      exit: exitCodeOf(answer.summary.verdict),
    })
  })
}

function raiseSeveral(run: Run, folders: readonly string[], output: Output): Promise<ExitCode> {
  const { plans } = run.args
  const rows: OverviewRow[] = []
  let csv: CsvStyle = 'comma'
  return eachPlan(
    run,
    async (request, at, drive) => {
      csv = request.options.csv
      const solved = await solve(request, run.args.values.get('cure') ?? [], drive)
      if (!solved.ok) return solved
      const made = await solvedFiles(solved.value, drive)
      if (!made.ok) return made
      const put = putAll(output, folders[at], made.value)
      if (!put.ok) return put
      const { answer } = solved.value.checked
      const exit = exitCodeOf(answer.summary.verdict)
      rows.push({ plan: plans[at], folder: folders[at], exit, summary: answer.summary, problem: null })
      return ok({ record: { folder: folders[at], ...solvedSummary(solved.value) }, report: solvedReport(answer), exit })
    },
    {
      failed: (at, problem) => rows.push({ plan: plans[at], folder: '', exit: badUse, summary: null, problem }),
      conclude: () => {
        const put = output.put(overviewName, finish(writeCsv(overview(rows), csv)))
        return put.ok ? output.commit() : put
      },
    },
  )
}

export function putAll(output: Output, folder: string, made: readonly OutputFile[]): Result<null> {
  for (const { name, bytes } of made) {
    const put = output.put(join(folder, name), bytes)
    if (!put.ok) return put
  }
  return ok(null)
}

export const withSentence = (report: Report, sentence: string): Report => ({ ...report, sentences: [...report.sentences, sentence] })
