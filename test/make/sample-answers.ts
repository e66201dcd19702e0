/** Figures of every sample's roof, kept in test/sample-answers.csv so that a change of the core shows in a diff. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { ask } from './ask.ts'
import { briefName, samples } from './samples.ts'

const folder = join(import.meta.dirname, '../../samples')

export const answerColumns = ['sample', 'verdict', 'rise', 'lowest', 'highest', 'mean', 'rms', 'squares_of_density', 'corner_mm'] as const

/** One row a sample: lengths in the plan's unit, form densities squared and summed, all as found, not rounded. */
export async function sampleAnswers(): Promise<(readonly [string, string, ...number[]])[]> {
  const rows: (readonly [string, string, ...number[]])[] = []
  for (const { name, brief, options } of samples()) {
    const wishes = brief === null ? null : readFileSync(join(folder, briefName(name)), 'utf8')
    const { answer } = await ask({ name, text: readFileSync(join(folder, name), 'utf8'), brief: wishes, options })
    const { roof, summary } = answer
    if (roof === null) throw new Error(`${name} has no roof`)
    let lowest = Infinity, highest = -Infinity, sum = 0, squares = 0
    for (const height of roof.heights) {
      lowest = Math.min(lowest, height)
      highest = Math.max(highest, height)
      sum += height
      squares += height * height
    }
    const densities = roof.stress.reduce((total, s) => total + s * s, 0)
    rows.push([name, summary.verdict, summary.roof?.rise ?? 0, lowest, highest, sum / roof.heights.length, Math.sqrt(squares / roof.heights.length), densities, summary.roof?.cornerMax_mm ?? 0])
  }
  return rows
}

export async function sampleAnswersText(): Promise<string> {
  return `${[answerColumns, ...(await sampleAnswers())].map((row) => row.join(',')).join('\n')}\n`
}
