/** The samples that do not plainly lift, and what it takes for each: one table, written into samples/cures.md. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { conversion } from '../../src/base/length.ts'
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
  asDrawn === undefined ? `${verdict}: every panel flat, ${held.frozenJoints} of ${plan.joints} joints never fold` : `${verdict}: corners out of plane up to ${figure(asDrawn.cornerMax_mm)} mm, ${asDrawn.over} of ${plan.panels} panels over ${figure(asDrawn.flat_mm)} mm`

function change({ code, name, count, largest_mm, rms_mm, panels }: Cure, { plan }: Summary): string {
  const sizes = `${figure(largest_mm)} mm at most, RMS ${figure(rms_mm)} mm`
  switch (code) {
    case 'accept-deviation': return `nothing: corners stay out of plane by ${sizes}`
    case 'move-nodes': return `nodes shift by ${sizes}`
    case 'pack-rim': return `rim packed up or down by ${sizes}`
    case 'add-diagonals': return `${count} diagonals, ${plan.panels} panels become ${panels ?? ''}`
    case 'remove-joints': return `${count} joints that never fold left out, ${plan.panels} panels become ${panels ?? ''}`
    case 'release': return (largest_mm ?? 0) < 0.005 ? `"${name ?? ''}" is not asked for; this roof keeps it all the same` : `"${name ?? ''}" is not asked for; this roof misses it by ${sizes}`
  }
}

function after({ code, verdict, freedomLeft, frozenJoints, rise }: Cure, { plan }: Summary): string {
  const high = rise === null ? '' : `, rise ${Number((rise * conversion(plan.unit, 'm')).toPrecision(3))} m`
  if (code === 'accept-deviation') return `as drawn, within the tolerance${high}`
  const unfolded = frozenJoints === 0 ? 'every joint folds' : `${frozenJoints} joints never fold`
  const left = freedomLeft === 0 ? 'one roof' : freedomLeft === 1 ? '1 way left to shape it' : `${freedomLeft ?? '-'} ways left to shape it`
  return `${verdict}: ${unfolded}, ${left}${high}`
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
    cures.forEach((cure, k) => rows.push(`${k === 0 ? first : '| | |'} \`${cure.option}\` | ${change(cure, summary)} | ${after(cure, summary)} |`))
  }
  return [
    '# What it takes', '',
    'The samples that are no plain yes: what stands before, each cure that was measured to help with what it changes, and the answer',
    'after it. The cures of a plan stand in the order of what they usually cost; each is applied by its option, and each row is for',
    'that cure alone.', '',
    '- *lifts*: every panel is exactly flat and every joint folds. *lifts in part*: every panel is exactly flat, and panels on both',
    '  sides of a joint that never folds lie in one plane; that roof can be built as drawn, and leaving such joints out saves them.',
    '- *does not lift*: the only exact roof is flat, so corners stand out of the plane of their panels by what is given.',
    '- *lifts within plan tolerance*: it lifts once nodes shift by less than the 1 mm that a drawing is exact to. *lifts within tolerance*:',
    '  the nearest roof bends its panels by less than their flatness tolerance.',
    '- *ways left to shape it*: how many heights may still be chosen freely with every panel flat, tilting the whole roof among them;',
    '  *one roof*: none.',
    '- *rise*: the highest node above the lowest of the rim, or above the stated datum.', '',
    'Written by `node test/make/write-samples.mjs`; `test/sample-cures.test.ts` holds every figure.', '',
    '| plan | before | cure | what changes | after |', '| --- | --- | --- | --- | --- |', ...rows, '',
  ].join('\n')
}
