/** The files of an adjusted plan, as bytes: the plan, the roof and its lists, and what moved. */
import type { Table } from '../base/table.ts'
import type { Steps } from '../base/steps.ts'
import { writeCsv } from '../formats/write-csv.ts'
import { jsonText } from '../formats/write-json.ts'
import { writeObj } from '../formats/write-obj.ts'
import { shiftDrawing } from '../paper/drawing/shift-drawing.ts'
import { toSvg } from '../paper/drawing/svg.ts'
import { themes } from '../paper/drawing/theme.ts'
import type { Summary } from '../roof/answer/answer.ts'
import type { AdjustFacts } from '../roof/answer/adjust-facts.ts'
import type { AdjustAnswer } from './adjust.ts'
import { fileNames, filesOf, namesOfFiles, type OutputFile } from './files.ts'

/** Every name that adjust may write into its folder; the summary is the last to be there. */
export const adjustFileNames: readonly string[] = ['plan.obj', 'shifts.csv', 'shifts.svg', ...fileNames]

/** What `summary.json` holds: the answer on the adjusted plan, what was moved, and the names of the files. */
export function adjustSummary(adjusted: AdjustAnswer): Summary & { readonly adjusted: AdjustFacts; readonly files: readonly string[] } {
  const done = adjusted.facts.outcome === 'moved' || adjusted.facts.outcome === 'lifts'
  const files = done ? [...adjustFileNames.slice(0, 3), ...namesOfFiles(adjusted.after)] : adjustFileNames.slice(-1)
  return { ...adjusted.after.answer.summary, adjusted: adjusted.facts, files }
}

/** A plan that could not be adjusted has its summary alone. */
export function* adjustFiles(adjusted: AdjustAnswer): Steps<OutputFile[]> {
  const { after, drawn, facts } = adjusted
  const summary = adjustSummary(adjusted)
  const written: OutputFile[] = []
  if (facts.outcome === 'moved' || facts.outcome === 'lifts') {
    const { plan } = after.answer
    const comments = [`Panewise ${summary.version}, from ${summary.input.name}: the plan with its nodes moved`]
    written.push({ name: 'plan.obj', bytes: yield* writeObj({ plan, x: plan.x, y: plan.y, z: new Float64Array(plan.nodeCount), decimals: null, comments }) })
    written.push({ name: 'shifts.csv', bytes: yield* writeCsv(shiftTable(adjusted), after.wishes.csv) })
    const drawing = shiftDrawing({ before: drawn, after: plan })
    written.push({ name: 'shifts.svg', bytes: new TextEncoder().encode(toSvg(drawing, themes.day)) })
    written.push(...(yield* filesOf(after)).slice(0, -1))
  }
  written.push({ name: 'summary.json', bytes: new TextEncoder().encode(`${jsonText(summary)}\n`) })
  return written
}

function shiftTable({ dx_mm, dy_mm }: AdjustAnswer): Table {
  return {
    rows: dx_mm.length,
    columns: [
      { kind: 'name', title: 'node', letter: 'N', index: Int32Array.from(dx_mm, (_, n) => n) },
      { kind: 'number', title: 'dx_mm', digits: { decimals: 6 }, values: dx_mm },
      { kind: 'number', title: 'dy_mm', digits: { decimals: 6 }, values: dy_mm },
      { kind: 'number', title: 'shift_mm', digits: { decimals: 6 }, values: dx_mm.map((dx, n) => Math.hypot(dx, dy_mm[n])) },
    ],
  }
}
