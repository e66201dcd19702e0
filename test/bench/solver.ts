/**
 * Times the sparse solver beside CHOLMOD (one thread) and scipy's splu on the same matrices, interleaved, each run in a
 * process of its own, and keeps the medians as rows of solver.csv. What is not installed is "missing".
 *
 *   node test/bench/run.mjs solver [panels ...] [--runs 5] [--keep]
 *
 * Wall seconds say what one waits for; ratios are taken from processor seconds, which other work on the machine disturbs less
 * (they count what the engine's helper threads do as well).
 */
import { execFileSync, spawnSync } from 'node:child_process'
import { appendFileSync, existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { cpus, tmpdir } from 'node:os'
import { join } from 'node:path'
import { analyse } from '../../src/base/sparse/analyse.ts'
import { factor, refactor } from '../../src/base/sparse/factor.ts'
import { inertia } from '../../src/base/sparse/inertia.ts'
import type { SymmetricMatrix } from '../../src/base/sparse/matrix.ts'
import { residual } from '../../src/base/sparse/multiply.ts'
import { dissection } from '../../src/base/sparse/order.ts'
import { solve } from '../../src/base/sparse/solve.ts'
import { finish } from '../../src/base/steps.ts'
import { cliquesOf, flatnessForm } from '../base/sparse/plans.ts'
import { benchPlan, kinds, type Kind } from './solver-plans.ts'

interface Run {
  readonly unknowns: number
  readonly entries: number
  readonly operations: number
  /** Wall seconds of order, analyse, factor, solve, and of a second factorisation in the same room. */
  readonly wall: readonly number[]
  readonly refactor: number
  readonly eight: number
  /** Processor seconds of the first four together. */
  readonly processor: number
  readonly residual: number
  readonly lifts: number
  readonly megabytes: number
}

/** One cold run, in this process. */
function run(kind: Kind, panels: number): Run {
  const plan = benchPlan(kind, panels)
  const cliques = cliquesOf(plan)
  const matrix = flatnessForm(plan, 1e-8, cliques)
  const size = matrix.pattern.size
  const right = new Float64Array(size).fill(1)
  const processor = process.cpuUsage()
  const marks = [performance.now()]
  const ordering = finish(dissection(matrix.pattern, plan.coordinates))
  marks.push(performance.now())
  const analysis = analyse(matrix.pattern, ordering)
  marks.push(performance.now())
  const f = finish(factor(analysis, matrix.values))
  marks.push(performance.now())
  const x = solve(f, right)
  marks.push(performance.now())
  const used = process.cpuUsage(processor)
  const error = residual(matrix, x, right)
  const shifted = flatnessForm(plan, -1e-13, cliques)
  const begin = performance.now()
  finish(refactor(f, shifted.values))
  const middle = performance.now()
  solve(f, new Float64Array(8 * size).fill(1), 8)
  const end = performance.now()
  return {
    unknowns: size, entries: analysis.panel[analysis.fronts]!, operations: analysis.operations,
    wall: marks.slice(1).map((mark, k) => (mark - marks[k]!) / 1000),
    refactor: (middle - begin) / 1000, eight: (end - middle) / 1000,
    processor: (used.user + used.system) / 1e6, residual: error, lifts: inertia(f).negative,
    megabytes: process.resourceUsage().maxRSS / 1024,
  }
}

function matrixMarket({ pattern: { size, start, row }, values }: SymmetricMatrix): string {
  const lines = ['%%MatrixMarket matrix coordinate real symmetric', `${size} ${size} ${row.length}`]
  for (let j = 0; j < size; j++) for (let p = start[j]!; p < start[j + 1]!; p++) lines.push(`${row[p]! + 1} ${j + 1} ${values[p]!}`)
  return `${lines.join('\n')}\n`
}

const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1]!

/** Standard output of a command as JSON, null if it fails. */
function output<T>(command: string, args: readonly string[]): T | null {
  const { status, stdout } = spawnSync(command, args, { encoding: 'utf8', env: { ...process.env, OPENBLAS_NUM_THREADS: '1' } })
  return status === 0 ? (JSON.parse(stdout) as T) : null
}

const header = [
  'date', 'commit', 'processor', 'plan', 'panels', 'unknowns', 'entries_of_L', 'operations',
  'order_s', 'analyse_s', 'factor_s', 'solve_s', 'total_s', 'refactor_s', 'solve_8_columns_s', 'gflops',
  'processor_s', 'cholmod_processor_s', 'to_cholmod', 'to_splu', 'residual', 'count_below_1e-13', 'megabytes',
]

function compare(sizes: readonly number[], runs: number, here: string, keep: boolean): void {
  const folder = mkdtempSync(join(tmpdir(), 'solver-'))
  const cholmod = join(folder, 'cholmod')
  spawnSync('cc', ['-O2', join(here, 'solver-cholmod.c'), '-o', cholmod, '-lcholmod'])
  const commit = spawnSync('git', ['rev-parse', '--short', 'HEAD'], { encoding: 'utf8' }).stdout.trim()
  const rows: string[] = []
  for (const panels of sizes) {
    for (const kind of kinds) {
      const plan = benchPlan(kind, panels)
      const file = join(folder, `${kind}.mtx`)
      writeFileSync(file, matrixMarket(flatnessForm(plan, 1e-8)))
      const own: Run[] = []
      const theirs: number[][] = []
      let splu: number[] | null = null
      for (let k = 0; k < runs; k++) {
        own.push(JSON.parse(execFileSync(process.execPath, [process.argv[1]!, '--one', kind, String(panels)], { encoding: 'utf8' })) as Run)
        const times = existsSync(cholmod) ? output<number[]>(cholmod, [file]) : null
        if (times !== null) theirs.push(times)
        if (k === 0) splu = output<number[]>('python3', [join(here, 'solver-splu.py'), file])
      }
      const first = own[0]!
      const wall = [0, 1, 2, 3].map((stage) => median(own.map((r) => r.wall[stage]!)))
      const total = median(own.map((r) => r.wall.reduce((a, b) => a + b, 0)))
      const processor = median(own.map((r) => r.processor))
      const other = theirs.length > 0 ? median(theirs.map((t) => t[3]!)) : null
      const row = [
        new Date().toISOString().slice(0, 10), commit, (cpus()[0]?.model ?? 'unknown').replaceAll(',', ' '),
        kind, panels, first.unknowns, first.entries, first.operations.toExponential(3),
        ...wall.map((s) => s.toFixed(3)), total.toFixed(3),
        median(own.map((r) => r.refactor)).toFixed(3), median(own.map((r) => r.eight)).toFixed(3),
        (first.operations / wall[2]! / 1e9).toFixed(2), processor.toFixed(3), other?.toFixed(3) ?? 'missing',
        other === null ? 'missing' : (processor / other).toFixed(2), splu === null ? 'missing' : (processor / splu[2]!).toFixed(2),
        first.residual.toExponential(1), first.lifts, Math.round(median(own.map((r) => r.megabytes))),
      ].join(',')
      rows.push(row)
      process.stdout.write(`${header.slice(3).map((name, k) => `${name} ${row.split(',')[k + 3]}`).join('  ')}\n\n`)
    }
  }
  rmSync(folder, { recursive: true })
  if (!keep) return
  const csv = join(here, 'solver.csv')
  appendFileSync(csv, `${existsSync(csv) ? '' : `${header.join(',')}\n`}${rows.join('\n')}\n`)
}

const words = process.argv.slice(2)
if (words[0] === '--one') process.stdout.write(JSON.stringify(run(words[1] as Kind, Number(words[2]))))
else {
  const runs = words.includes('--runs') ? Number(words[words.indexOf('--runs') + 1]) : 5
  const sizes = words.filter((word, k) => /^\d+$/.test(word) && words[k - 1] !== '--runs').map(Number)
  compare(sizes.length > 0 ? sizes : [2000, 10000, 100000], runs, process.env['BENCH_FOLDER'] ?? '.', words.includes('--keep'))
}
