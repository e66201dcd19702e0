/** The files of a balanced plan, as bytes: those of an adjusted one, with what balancing did in the summary. */
import type { Steps } from '../base/steps.ts'
import { jsonText } from '../formats/write-json.ts'
import type { Summary } from '../roof/answer/answer.ts'
import type { BalanceFacts } from '../roof/answer/balance-facts.ts'
import { adjustFileNames, adjustFiles } from './adjust-files.ts'
import type { BalanceAnswer } from './balance.ts'
import { namesOfFiles, type OutputFile } from './files.ts'

export function balanceSummary({ after, facts }: BalanceAnswer): Summary & { readonly balanced: BalanceFacts; readonly files: readonly string[] } {
  const files = facts.outcome === 'balanced' ? [...adjustFileNames.slice(0, 3), ...namesOfFiles(after)] : ['summary.json']
  return { ...after.answer.summary, balanced: facts, files }
}

/** A plan that would cross has its summary alone. */
export function* balanceFiles(balanced: BalanceAnswer): Steps<OutputFile[]> {
  const { facts } = balanced
  const summary = { name: 'summary.json', bytes: new TextEncoder().encode(`${jsonText(balanceSummary(balanced))}\n`) }
  if (facts.outcome === 'crossed') return [summary]
  const files = yield* adjustFiles({
    ...balanced,
    facts: {
      ...facts, outcome: 'moved', code: null, reason: null, cure: null, planVerdict: balanced.after.answer.summary.verdict,
      cornerBefore_mm: null, cornerAfter_mm: null, heightError: null, held: null, iterations: 0,
    },
  })
  return [...files.slice(0, -1), summary]
}
