/** One row a plan: the list over all plans of a run. */
import { metres } from '../base/length.ts'
import type { Problem } from '../base/result.ts'
import { sentence } from '../base/result.ts'
import type { Column, Table } from '../base/table.ts'
import type { Summary } from '../roof/answer/answer.ts'
import type { ExitCode } from './exit-code.ts'

export interface OverviewRow {
  readonly plan: string
  readonly folder: string
  readonly exit: ExitCode
  /** null where the plan had a problem. */
  readonly summary: Summary | null
  readonly problem: Problem | null
}

export function overview(rows: readonly OverviewRow[]): Table {
  const text = (title: string, value: (row: OverviewRow) => string): Column => ({ kind: 'text', title, values: rows.map(value) })
  const number = (title: string, digits: Extract<Column, { kind: 'number' }>['digits'], value: (summary: Summary) => number | null | undefined): Column => ({
    kind: 'number',
    title,
    digits,
    values: Float64Array.from(rows, ({ summary }) => (summary === null ? NaN : (value(summary) ?? NaN))),
  })
  const inMetres = (length: number | undefined, summary: Summary): number => (length ?? NaN) * metres[summary.plan.unit]
  return {
    rows: rows.length,
    columns: [
      text('plan', ({ plan }) => plan),
      text('folder', ({ folder }) => folder),
      { kind: 'number', title: 'exit', digits: 'shortest', values: Int32Array.from(rows, ({ exit }) => exit) },
      text('verdict', ({ summary }) => summary?.verdict ?? ''),
      number('panels', 'shortest', ({ plan }) => plan.panels),
      number('joints', 'shortest', ({ plan }) => plan.joints),
      number('freedom', 'shortest', ({ stress }) => stress.freedom),
      number('freedom_left', 'shortest', ({ stress }) => stress.freedomLeft),
      number('rise_m', { decimals: 6 }, (summary) => inMetres(summary.roof?.rise, summary)),
      number('rim_variation_m', { decimals: 6 }, (summary) => inMetres(summary.roof?.rimVariation, summary)),
      number('corner_max_mm', { decimals: 6 }, ({ roof }) => roof?.cornerMax_mm),
      number('flatness_max_mm', { decimals: 6 }, ({ roof }) => roof?.flatnessMax_mm),
      text('reason', ({ summary, problem }) => summary?.reason ?? (problem === null ? '' : sentence(problem))),
    ],
  }
}
