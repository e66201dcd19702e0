/** `panewise read`: what a drawing holds, what was repaired, what is open; with --out as a page for the person who drew it. */
import { join } from 'node:path'
import { ok } from '../base/result.ts'
import { read, type ReadAnswer } from '../job/run.ts'
import { drawingHtml } from '../paper/report/drawing-html.ts'
import { drawingMarkdown } from '../paper/report/drawing-markdown.ts'
import { drawingPage } from '../paper/report/drawing-page.ts'
import { drawingSheet } from '../paper/report/drawing-sheet.ts'
import { readReport } from '../paper/report/report.ts'
import { eachPlan, gaveUp, type Run } from './each-plan.ts'
import type { ExitCode } from './exit-code.ts'
import { planFolders } from './plan-folders.ts'
import { inputAmong, putAll, withSentence } from './raise.ts'
import { openOutput, type Output } from './write-safely.ts'

/** Files of a report. */
const reportNames = ['reading.html', 'reading.md', 'reading.svg'] as const

/** Exit 0 when a plan was read, also one with open questions: reading is where they are asked. */
export async function readPlans(run: Run): Promise<ExitCode> {
  const { args, screen } = run
  const folder = args.values.get('out')?.[0]
  if (folder === undefined) return readEach(run, null)
  const folders = args.plans.length <= 1 ? [''] : planFolders(args.plans)
  const owned = folders.flatMap((each) => reportNames.map((name) => join(each, name)))
  const inTheWay = inputAmong(args, owned.map((path) => join(folder, path)))
  if (inTheWay !== null) return gaveUp(screen, inTheWay)
  const output = openOutput(folder, { overwrite: args.values.has('overwrite'), owned })
  if (!output.ok) return gaveUp(screen, output.problem)
  try {
    return await readEach(run, { folder, folders, output: output.value })
  } finally {
    output.value.discard()
  }
}

interface Out {
  readonly folder: string
  readonly folders: readonly string[]
  readonly output: Output
}

function readEach(run: Run, out: Out | null): Promise<ExitCode> {
  let isFilled = false
  const work: Parameters<typeof eachPlan>[1] = async (request, at, drive) => {
    const answer = await read(request, drive)
    if (!answer.ok) return answer
    const { summary } = answer.value
    const report = readReport(summary)
    if (out === null) return ok({ record: summary, report, exit: 0 })
    const put = putAll(out.output, out.folders[at], reportFiles(answer.value))
    if (!put.ok) return put
    isFilled = true
    const written = `Written to ${join(out.folder, out.folders[at])}: ${reportNames.join(', ')}.`
    return ok({ record: { ...summary, files: reportNames.map((name) => join(out.folders[at], name)) }, report: withSentence(report, written), exit: 0 })
  }
  return out === null ? eachPlan(run, work) : eachPlan(run, work, { conclude: () => (isFilled ? out.output.commit() : ok(null)) })
}

function reportFiles({ summary, readPlan }: ReadAnswer): { name: string; bytes: Uint8Array }[] {
  const page = drawingPage(summary, readPlan)
  const { svg, numbers } = drawingSheet(readPlan)
  const texts = [drawingHtml(page, svg, numbers), drawingMarkdown(page, reportNames[2]), svg]
  return reportNames.map((name, i) => ({ name, bytes: new TextEncoder().encode(texts[i]) }))
}
