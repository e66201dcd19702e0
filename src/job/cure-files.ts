/** The files of an answer with cures applied: those of every answer, and the plan where a cure made another one of it. */
import { fail, ok, type Result } from '../base/result.ts'
import { cancelled, drive, type DriveOptions, type Steps } from '../base/steps.ts'
import { jsonText } from '../formats/write-json.ts'
import { writeObj } from '../formats/write-obj.ts'
import type { Summary } from '../roof/answer/answer.ts'
import { fileNames, filesOf, summaryWithFiles, type OutputFile } from './files.ts'
import type { Solved } from './solve.ts'

/** Every name that raise may write into its folder. */
export const solvedFileNames: readonly string[] = ['plan.obj', ...fileNames]

/** What `summary.json` holds. */
export function solvedSummary({ checked, planChanged }: Solved): Summary & { readonly files: readonly string[] } {
  const { files, ...summary } = summaryWithFiles(checked)
  return { ...summary, files: planChanged ? ['plan.obj', ...files] : files }
}

export function* filesOfSolved(solved: Solved): Steps<OutputFile[]> {
  const made = yield* filesOf(solved.checked)
  if (!solved.planChanged) return made
  const { plan, summary } = solved.checked.answer
  const done = solved.applied.map(({ message }) => message)
  const comments = [`Panewise ${summary.version}, from ${summary.input.name}: the plan with its cures`, ...done]
  const drawn = yield* writeObj({ plan, x: plan.x, y: plan.y, z: new Float64Array(plan.nodeCount), decimals: null, comments })
  const text = new TextEncoder().encode(`${jsonText(solvedSummary(solved))}\n`)
  return [{ name: 'plan.obj', bytes: drawn }, ...made.map((file) => (file.name === 'summary.json' ? { ...file, bytes: text } : file))]
}

/** The same, driven: code "cancelled" when the signal was aborted. */
export async function solvedFiles(solved: Solved, options: DriveOptions = {}): Promise<Result<OutputFile[]>> {
  const made = await drive(filesOfSolved(solved), options)
  return made === cancelled ? fail('cancelled', 'stopped before the end') : ok(made)
}
