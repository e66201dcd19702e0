/** A report as plain text for a terminal; lines are as long as their sentences, the terminal breaks them. */
import { printable } from './printable.ts'
import type { Report } from './report.ts'

/** Puts a mark on text where the terminal has one. */
export type Mark = (text: string) => string

const unmarked: Mark = (text) => text

/** `strong` marks the first sentence. */
export function reportText(report: Report, strong: Mark = unmarked): string {
  const { facts, caution, cures } = report
  const width = Math.max(...facts.map(([label]) => label.length))
  const table = facts.map(([label, value]) => `  ${label.padEnd(width)}  ${printable(value)}`)
  const ways = cures === undefined ? [] : [[strong(printable(cures.heading)), ...cures.lines.map((line) => `  ${printable(line)}`)].join('\n')]
  const blocks = [sentences(report, strong).join('\n'), ...ways, table.join('\n'), ...(caution === null ? [] : [caution])]
  return `${blocks.join('\n\n')}\n`
}

/** The sentences alone, under a name: for a plan among several. */
export function reportUnder(name: string, report: Report, strong: Mark = unmarked): string {
  const { cures } = report
  const ways = cures === undefined ? [] : [printable(cures.heading), ...cures.lines.map((line) => `  ${printable(line)}`)]
  return `${[printable(name), ...[...sentences(report, strong), ...ways].map((line) => `  ${line}`)].join('\n')}\n`
}

function sentences({ headline, verdict, sentences: others }: Report, strong: Mark): string[] {
  return [strong(printable(headline)), ...(verdict === null ? [] : [`Verdict: ${verdict}.`]), ...others.map(printable)]
}
