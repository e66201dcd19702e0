/** `panewise raise`: the roof and its lists into a folder, all files together at the end. */
import { realpathSync } from 'node:fs'
import { join } from 'node:path'
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import { solvedFileNames, solvedFiles, solvedSummary } from '../job/cure-files.ts'
import { fileNames, type OutputFile } from '../job/files.ts'
import { solve } from '../job/run.ts'
import { solvedReport } from '../paper/report/cure-report.ts'
import type { Report } from '../paper/report/report.ts'
import type { Arguments } from './arguments.ts'
import { eachPlan, gaveUp, type Run } from './each-plan.ts'
import { exitCodeOf, type ExitCode } from './exit-code.ts'
import { overviewName, planFolders } from './plan-folders.ts'
import { plansAtOnce, raiseSeveral } from './raise-several.ts'
import { typedCount } from './typed-values.ts'
import { openOutput, type Output } from './write-safely.ts'

/** More threads than this are a slip of the keyboard. */
const mostAtOnce = 256

/** One plan: into DIR. Several: into DIR/NAME, with an overview in DIR, going on after a plan that cannot be read. */
export async function raisePlans(run: Run): Promise<ExitCode> {
  const { args, screen } = run
  const folder = args.values.get('out')?.[0]
  if (folder === undefined) return gaveUp(screen, fail('no-out', 'raise needs a folder to write into', null, 'add --out DIR').problem)
  const atOnceText = args.values.get('at-once')?.[0]
  const atOnce = atOnceText === undefined ? ok(null) : typedCount(atOnceText, mostAtOnce, '--at-once')
  if (!atOnce.ok) return gaveUp(screen, atOnce.problem)
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
    return await (isOne ? raiseOne(run, folder, output.value) : raiseSeveral(run, folders, output.value, plansAtOnce(atOnce.value, args.plans.length), putAll))
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

export function putAll(output: Output, folder: string, made: readonly OutputFile[]): Result<null> {
  for (const { name, bytes } of made) {
    const put = output.put(join(folder, name), bytes)
    if (!put.ok) return put
  }
  return ok(null)
}

export const withSentence = (report: Report, sentence: string): Report => ({ ...report, sentences: [...report.sentences, sentence] })
