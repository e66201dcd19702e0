/** The files of a raised roof, as bytes: the same for the command line and the page. */
import { fail, ok, type Result } from '../base/result.ts'
import { cancelled, drive, type DriveOptions, type Steps } from '../base/steps.ts'
import { writeCsv } from '../formats/write-csv.ts'
import { jsonText } from '../formats/write-json.ts'
import { writeObj } from '../formats/write-obj.ts'
import { caution } from '../roof/answer/caution.ts'
import type { Summary } from '../roof/answer/answer.ts'
import { lists } from '../roof/panels/lists.ts'
import type { Checked } from './check.ts'
import { writtenCoordinates } from './written.ts'

export interface OutputFile {
  readonly name: string
  readonly bytes: Uint8Array
}

/** Every name that a run may write into its folder; the summary is the last to be there. */
export const fileNames = ['roof.obj', 'one-way.obj', 'panels.csv', 'joints.csv', 'nodes.csv', 'summary.json'] as const

/** Which of them this answer has: a roof that does not lift is written only when the near one was asked for. */
export function namesOfFiles({ answer, wishes }: Checked): readonly string[] {
  const hasRoof = answer.roof !== null && (answer.summary.verdict !== 'does not lift' || wishes.near)
  const names = hasRoof ? fileNames : fileNames.slice(-1)
  return (answer.oneWayHeights ?? null) === null ? names.filter((name) => name !== 'one-way.obj') : names
}

/** What `summary.json` holds: the summary and the names of the files. */
export function summaryWithFiles(checked: Checked): Summary & { readonly files: readonly string[] } {
  return { ...checked.answer.summary, files: namesOfFiles(checked) }
}

export function* filesOf(checked: Checked): Steps<OutputFile[]> {
  const { answer, wishes } = checked
  const { plan, roof, summary } = answer
  const files: OutputFile[] = []
  if (roof !== null && namesOfFiles(checked).length > 1) {
    const comments = [
      `Panewise ${summary.version}, from ${summary.input.name}`,
      ...(roof.isNear ? ['The nearest roof: its panels are not exactly flat.'] : []),
      caution,
    ]
    const { writtenX: x, writtenY: y, written: z } = roof
    files.push({ name: 'roof.obj', bytes: yield* writeObj({ plan, x, y, z, decimals: wishes.decimals, comments }) })
    const { oneWayHeights = null } = answer
    if (oneWayHeights !== null) {
      const oneWay = yield* writtenCoordinates(plan, oneWayHeights, wishes.decimals)
      const about = [`The roof in which the weakest of the chosen joints folds most: ${summary.oneWay?.joints ?? 0} joints, all ridges.`, caution]
      files.push({ name: 'one-way.obj', bytes: yield* writeObj({ plan, ...oneWay, decimals: wishes.decimals, comments: [comments[0], ...about] }) })
    }
    const { panels, joints, nodes } = yield* lists(plan, roof, answer.barWidth ?? null)
    files.push({ name: 'panels.csv', bytes: yield* writeCsv(panels, wishes.csv) })
    files.push({ name: 'joints.csv', bytes: yield* writeCsv(joints, wishes.csv) })
    files.push({ name: 'nodes.csv', bytes: yield* writeCsv(nodes, wishes.csv) })
  }
  files.push({ name: 'summary.json', bytes: new TextEncoder().encode(`${jsonText(summaryWithFiles(checked))}\n`) })
  return files
}

/** The same, driven: code "cancelled" when the signal was aborted. */
export async function files(checked: Checked, options: DriveOptions = {}): Promise<Result<OutputFile[]>> {
  const made = await drive(filesOf(checked), options)
  return made === cancelled ? fail('cancelled', 'stopped before the end') : ok(made)
}
