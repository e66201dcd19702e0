/** A report as plain text for a terminal; lines are as long as their sentences, the terminal breaks them. */
import { printable } from './printable.ts'
import type { Report } from './report.ts'

/** `strong` marks the first sentence where something can be marked. */
export function reportText({ headline, verdict, sentences, facts, caution }: Report, strong: (text: string) => string = (text) => text): string {
  const width = Math.max(...facts.map(([label]) => label.length))
  const lines = [...(verdict === null ? [] : [`Verdict: ${verdict}.`]), ...sentences].map(printable)
  const table = facts.map(([label, value]) => `  ${label.padEnd(width)}  ${printable(value)}`)
  const blocks = [[strong(printable(headline)), ...lines].join('\n'), table.join('\n'), ...(caution === null ? [] : [caution])]
  return `${blocks.join('\n\n')}\n`
}
