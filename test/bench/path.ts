/**
 * Times the whole path, file to files: `raise` as a process of its own beside an outside yardstick on the same plan,
 * interleaved, and a further answer on the factor that the first one found. Medians are kept as rows of path.csv.
 *
 *   node test/bench/run.mjs path [panels ...] [--runs 5] [--keep] [--beside FILE.py]
 *
 * FILE.py PLAN.obj --no-modes --out DIR must do the same job with general-purpose libraries and write the same lists; where
 * none is named or its needs are missing, its cells say "missing". Ratios are taken from processor seconds (user and
 * system, of the process and all it starts), which other work on the machine disturbs less than wall seconds.
 */
import { spawnSync } from 'node:child_process'
import { appendFileSync, existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { cpus, tmpdir } from 'node:os'
import { join } from 'node:path'
import { answers, planText, share } from './answers.ts'
import { kinds, type Kind } from './solver-plans.ts'

const head = 'date,commit,processor,plan,panels,wall_s,processor_s,peak_megabytes,yardstick_wall_s,yardstick_processor_s,to_yardstick,first_answer_s,further_answer_s,further_share,other_target_share,other_level_share'

interface Used {
  readonly wall: number
  readonly processor: number
  readonly megabytes: number
}

/** One run of a command under GNU time; null when it fails. */
function timed(command: readonly string[]): Used | null {
  const done = spawnSync('/usr/bin/time', ['-f', '@ %e %U %S %M', ...command], { encoding: 'utf8', env: { ...process.env, OPENBLAS_NUM_THREADS: '1', OMP_NUM_THREADS: '1' } })
  const figures = /@ ([\d.]+) ([\d.]+) ([\d.]+) (\d+)\s*$/.exec(done.stderr ?? '')
  // Exit codes 0, 1 and 3 are verdicts.
  if (figures === null || done.status === null || done.status === 2 || done.status > 3) return null
  const [wall, user, system, kilobytes] = figures.slice(1).map(Number) as [number, number, number, number]
  return { wall, processor: user + system, megabytes: kilobytes / 1000 }
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted.length === 0 ? NaN : sorted[sorted.length >> 1]!
}

function main(): void {
  const words = process.argv.slice(2)
  const option = (name: string): string | null => (words.includes(name) ? (words[words.indexOf(name) + 1] ?? null) : null)
  const beside = option('--beside')
  const runs = Number(option('--runs') ?? 5)
  const sizes = words.filter((word, i) => /^\d+$/.test(word) && words[i - 1] !== '--runs').map(Number)
  const here = process.env['BENCH_FOLDER'] ?? '.'
  const program = join(here, '../../dist/panewise.mjs')
  if (!existsSync(program)) throw new Error('build first: npm run build')
  const room = mkdtempSync(join(tmpdir(), 'path-bench-'))
  const commit = spawnSync('git', ['rev-parse', '--short', 'HEAD'], { encoding: 'utf8', cwd: here }).stdout.trim()
  const date = new Date().toISOString().slice(0, 10)
  const processor = (cpus()[0]?.model ?? 'unknown').replace(/[^A-Za-z0-9 ]/g, '').trim()
  const growth = new Map<Kind, [number, number][]>()
  process.stdout.write(`${head}\n`)
  for (const panels of sizes.length > 0 ? sizes : [2000, 10000, 100000]) {
    for (const kind of kinds) {
      const plan = join(room, `${kind}.obj`)
      const text = planText(kind, panels)
      writeFileSync(plan, text)
      const count = text.split('\nf ').length - 1
      const ours: Used[] = [], theirs: Used[] = []
      for (let run = 0; run < runs; run += 1) {
        const a = timed([process.execPath, program, 'raise', plan, '--out', join(room, 'ours'), '--overwrite', '--quiet'])
        if (a !== null) ours.push(a)
        const b = beside === null ? null : timed(['python3', beside, plan, '--no-modes', '--out', join(room, 'theirs')])
        if (b !== null) theirs.push(b)
      }
      const { first, rise, target, held, level } = answers(new TextEncoder().encode(text))
      const further = share(rise, first)
      const at = (list: readonly Used[], key: keyof Used): number => median(list.map((used) => used[key]))
      const cell = (value: number, digits: number): string => (Number.isNaN(value) ? 'missing' : value.toFixed(digits))
      const row = [
        date, commit, processor, kind, count, cell(at(ours, 'wall'), 2), cell(at(ours, 'processor'), 2), cell(at(ours, 'megabytes'), 0),
        cell(at(theirs, 'wall'), 2), cell(at(theirs, 'processor'), 2), cell(at(ours, 'processor') / at(theirs, 'processor'), 2),
        first.seconds.toFixed(3), (further * first.seconds).toFixed(3), further.toFixed(3), share(target, first).toFixed(3), share(level, held).toFixed(3),
      ].join(',')
      growth.set(kind, [...(growth.get(kind) ?? []), [count, at(ours, 'processor')]])
      process.stdout.write(`${row}\n`)
      if (!words.includes('--keep')) continue
      const file = join(here, 'path.csv')
      appendFileSync(file, existsSync(file) ? `${row}\n` : `${head}\n${row}\n`)
    }
  }
  for (const [kind, points] of growth) {
    const [a, b] = points.slice(-2)
    if (a !== undefined && b !== undefined) process.stdout.write(`growth exponent of ${kind} from ${a[0]} to ${b[0]} panels: ${(Math.log(b[1] / a[1]) / Math.log(b[0] / a[0])).toFixed(2)}\n`)
  }
  rmSync(room, { recursive: true })
}

main()
