/** The samples that do not plainly lift, and what it takes for each: one table, written into samples/cures.md. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { solve } from '../../src/job/run.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import type { AsDrawn, Cure } from '../../src/roof/answer/cure.ts'
import type { Summary } from '../../src/roof/answer/answer.ts'
import { briefName, samples, type Sample } from './samples.ts'

const folder = join(import.meta.dirname, '../../samples')

/** The answer with its cures. */
export async function solvedSample({ name, brief, options }: Sample): Promise<Summary> {
  const made = await solve({
    command: 'check', source: { name, bytes: new Uint8Array(readFileSync(join(folder, name))) }, options: { ...noOptions, ...options },
    brief: brief === null ? null : { name: briefName(name), text: readFileSync(join(folder, briefName(name)), 'utf8') }, levels: null, given: {},
  }, [])
  if (!made.ok) throw new Error(made.problem.message)
  return made.value.checked.answer.summary
}

/** Two digits: what a reader compares, and the same on every machine. */
const figure = (mm: number | null | undefined): string => (mm === null || mm === undefined ? '-' : mm < 0.005 ? '< 0.01' : String(Number(mm.toPrecision(2))))

const before = (asDrawn: AsDrawn | undefined, { held, plan, verdict }: Summary): string =>
  asDrawn === undefined ? `${verdict}: ${held.frozenJoints} of ${plan.joints} joints unfolded` : `${verdict}: corners up to ${figure(asDrawn.cornerMax_mm)} mm, ${asDrawn.over} of ${plan.panels} panels over ${figure(asDrawn.flat_mm)} mm`

function change({ code, name, count, largest_mm, rms_mm, panels }: Cure, { plan }: Summary): string {
  const sizes = `${figure(largest_mm)} mm at most, RMS ${figure(rms_mm)} mm`
  switch (code) {
    case 'accept-deviation': return `none: corners ${sizes}`
    case 'move-nodes': return `nodes by ${sizes}`
    case 'pack-rim': return `rim levels by ${sizes}`
    case 'add-diagonals': return `${count} diagonals`
    case 'remove-joints': return `${count} joints fewer, ${plan.panels} panels become ${panels ?? ''}`
    case 'release': return `"${name ?? ''}" missed by ${sizes}`
  }
}

function after({ code, verdict, freedomLeft, frozenJoints }: Cure): string {
  if (code === 'accept-deviation') return 'within the tolerance'
  const unfolded = frozenJoints === 0 ? 'every joint folds' : `${frozenJoints} joints unfolded`
  return `${verdict}: ${unfolded}, freedom left ${freedomLeft ?? '-'}`
}

/** The text of samples/cures.md. */
export async function cureTable(): Promise<string> {
  const rows: string[] = []
  for (const sample of samples()) {
    if (sample.expected.verdict === 'lifts') continue
    const summary = await solvedSample(sample)
    const cures = summary.cures ?? []
    const first = `| \`${sample.name}\` | ${before(summary.asDrawn, summary)} |`
    if (cures.length === 0) rows.push(`${first} - | - | - |`)
    cures.forEach((cure, k) => rows.push(`${k === 0 ? first : '| | |'} \`${cure.option}\` | ${change(cure, summary)} | ${after(cure)} |`))
  }
  return [
    '# What it takes', '',
    'The samples that are no plain yes: what stands before, each cure that was measured to help with what it changes, and the answer',
    'after it. Written by `node test/make/write-samples.mjs`; `test/sample-cures.test.ts` holds every figure.', '',
    '| plan | before | cure | what changes | after |', '| --- | --- | --- | --- | --- |', ...rows, '',
  ].join('\n')
}
