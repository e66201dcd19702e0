/**
 * Answers about one plan in one process, first and further ones on the same factor: processor seconds (order to flatness, no
 * reading and no writing), and the longest stretch between two yields, with the stage that it ended.
 *
 *   node test/bench/run.mjs answers [panels ...]
 */
import type { Steps } from '../../src/base/steps.ts'
import { answerTo, type Checked } from '../../src/job/check.ts'
import { reading } from '../../src/job/reading.ts'
import type { Brief } from '../../src/plan/project/brief.ts'
import { noOptions, type Options } from '../../src/plan/project/options.ts'
import { benchPlan, kinds, type Kind } from './solver-plans.ts'

export interface Timed<T> {
  readonly value: T
  readonly seconds: number
  /** Milliseconds, of the clock or of the processor, whichever is less: others run on the machine too. */
  readonly longest: number
  readonly stage: string
}

/** Runs to the end; processor seconds of the process, helper threads of the engine included. */
export function timed<T>(steps: Steps<T>): Timed<T> {
  const from = process.cpuUsage()
  let last = performance.now(), used = from, longest = 0, stage = '', before = 'start'
  for (;;) {
    const step = steps.next()
    const now = performance.now(), spent = process.cpuUsage()
    const after = step.done === true ? 'end' : step.value.stage
    const stretch = Math.min(now - last, (spent.user + spent.system - used.user - used.system) / 1000)
    if (stretch > longest) {
      longest = stretch
      stage = `${before} to ${after}`
    }
    before = after
    last = now
    used = spent
    if (step.done !== true) continue
    const { user, system } = process.cpuUsage(from)
    return { value: step.value, seconds: (user + system) / 1e6, longest, stage }
  }
}

/** The plan as faces, all digits. */
export function planText(kind: Kind, panels: number): string {
  const { coordinates, start, index } = benchPlan(kind, panels)
  const lines: string[] = []
  for (let i = 0; i < coordinates.length; i += 2) lines.push(`v ${coordinates[i]} ${coordinates[i + 1]} 0`)
  for (let p = 0; p + 1 < start.length; p += 1) lines.push(`f ${Array.from(index.subarray(start[p], start[p + 1]), (node) => node + 1).join(' ')}`)
  return `${lines.join('\n')}\n`
}

export interface Answers {
  readonly reading: Timed<unknown>
  readonly first: Timed<Checked>
  /** With another rise, with another target, and with one level moved; three of each. */
  readonly rise: readonly Timed<Checked>[]
  readonly target: readonly Timed<Checked>[]
  /** The first answer under the level. */
  readonly held: Timed<Checked>
  readonly level: readonly Timed<Checked>[]
}

export function answers(bytes: Uint8Array): Answers {
  const request = (options: Options) => ({ command: 'check', source: { name: 'plan.obj', bytes }, options, brief: null, levels: null, given: {} }) as const
  const made = timed(reading(request(noOptions)))
  if (!made.value.ok) throw new Error(made.value.problem.message)
  const { read, brief } = made.value.value
  let known: Checked | null = null
  const { plan } = read
  const target = (k: number): Float64Array => Float64Array.from(plan.x, (_, i) => (plan.frame.span / 8) * (1 - 4 * ((plan.work[2 * i]! - k / 10) ** 2 + plan.work[2 * i + 1]! ** 2)))
  const level = (height: number): Brief => ({ ...brief, conditions: [{ name: 'corner', kind: 'level', at: { nodes: ['N1'] }, level: height, soft: null }] })
  const answer = (options: Options, asked: Brief = brief, heights: Float64Array | null = null): Timed<Checked> => {
    const run = timed(answerTo({ request: request(options), version: '', sha256: '', read, brief: asked, target: heights, free: known?.free ?? null, space: known?.under.space ?? null }))
    if (!run.value.ok) throw new Error(run.value.problem.message)
    known = run.value.value
    return { ...run, value: known }
  }
  return {
    reading: made,
    first: answer(noOptions),
    rise: [2, 3, 4].map((rise) => answer({ ...noOptions, rise })),
    target: [1, 2, 3].map((k) => answer(noOptions, brief, target(k))),
    held: answer(noOptions, level(0.1)),
    level: [2, 3, 4].map((k) => answer(noOptions, level(k / 10))),
  }
}

/** Median share of the first answer's processor time. */
export function share(further: readonly Timed<unknown>[], first: Timed<unknown>): number {
  return further.map(({ seconds }) => seconds).sort((a, b) => a - b)[further.length >> 1]! / first.seconds
}

if (process.argv[1]?.endsWith('bench.mjs') === true && process.env['BENCH_NAME'] === 'answers') {
  const sizes = process.argv.slice(2).filter((word) => /^\d+$/.test(word)).map(Number)
  for (const panels of sizes.length > 0 ? sizes : [10_000, 100_000]) {
    for (const kind of kinds) {
      const all = answers(new TextEncoder().encode(planText(kind, panels)))
      process.stdout.write(`${kind} ${panels}\n`)
      const line = (name: string, run: Timed<unknown>, first: Timed<unknown> | null): void => {
        process.stdout.write(`  ${name.padEnd(18)} ${(1000 * run.seconds).toFixed(0).padStart(6)} ms  ${first === null ? '      ' : `${(100 * run.seconds / first.seconds).toFixed(1)} %`}  longest stretch ${run.longest.toFixed(0)} ms (${run.stage})\n`)
      }
      line('reading', all.reading, null)
      line('first', all.first, null)
      for (const run of all.rise) line('another rise', run, all.first)
      for (const run of all.target) line('another target', run, all.first)
      line('a level held', all.held, null)
      for (const run of all.level) line('the level moved', run, all.held)
    }
  }
}
