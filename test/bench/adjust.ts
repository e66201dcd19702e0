/**
 * How long adjusting takes: Voronoi cells moved by 1 % of their size, as processes from file to files, beside a plain SciPy
 * script of ours for the same conditions. node test/bench/run.mjs adjust [panels ..]; rows are added to adjust.csv.
 */
import { spawnSync } from 'node:child_process'
import { appendFileSync, existsSync, mkdtempSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import { cpus, tmpdir } from 'node:os'
import { join } from 'node:path'
import { jittered } from '../make/jittered.ts'
import { cells } from '../make/plans.ts'

const here = process.env['BENCH_FOLDER'] ?? '.'
const root = join(here, '../..')
const file = join(here, 'adjust.csv')
const counts = process.argv.length > 2 ? process.argv.slice(2).map(Number) : [400, 2000, 10000]
const room = mkdtempSync(join(tmpdir(), 'adjust-'))
spawnSync('npx', ['vite', 'build', '--mode', 'cli', '--outDir', join(room, 'built')], { cwd: root })
symlinkSync(join(root, 'node_modules'), join(room, 'built/node_modules'))

/** Processor seconds (user and system) and elapsed seconds of the fastest run, and the text of the last. */
function timed(runs: number, command: string, words: readonly string[]): { seconds: number; elapsed: number; megabytes: number; out: string } {
  let seconds = Infinity, elapsed = Infinity, megabytes = 0, out = ''
  for (let k = 0; k < runs; k += 1) {
    const ran = spawnSync('/usr/bin/time', ['-f', '@%U %S %M %e', command, ...words], { encoding: 'utf8', maxBuffer: 1 << 28 })
    const [user, system, kilobytes, wall] = (/@([\d.]+) ([\d.]+) (\d+) ([\d.]+)/.exec(ran.stderr) ?? []).slice(1).map(Number)
    seconds = Math.min(seconds, (user ?? NaN) + (system ?? NaN))
    elapsed = Math.min(elapsed, wall ?? NaN)
    megabytes = Math.round((kilobytes ?? NaN) / 1024)
    out = ran.stdout
  }
  return { seconds, elapsed, megabytes, out }
}

if (!existsSync(file)) {
  writeFileSync(file, 'commit,processor,panels,check_s,adjust_s,adjust_mb,iterations,rms_mm,limits,scipy_s,scipy_mb,scipy_iterations,scipy_rms_mm,to_scipy,adjust_elapsed_s,scipy_elapsed_s,to_scipy_elapsed\n')
}
const commit = spawnSync('git', ['rev-parse', '--short', 'HEAD'], { cwd: root, encoding: 'utf8' }).stdout.trim()
for (const count of counts) {
  const { plan } = jittered(cells(count, 11), 0.01, 5)
  const rise = 0.07 * plan.frame.span
  const path = join(room, `cells-${count}.obj`)
  const nodes = [...plan.x.keys()].map((n) => `v ${plan.x[n]} ${plan.y[n]} ${rise * (1 - (plan.work[2 * n]! ** 2 + plan.work[2 * n + 1]! ** 2) / 0.36)}`)
  const faces = Array.from({ length: plan.panelCount }, (_, p) => `f ${Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (n) => n + 1).join(' ')}`)
  writeFileSync(path, `# unit: m\n${nodes.join('\n')}\n${faces.join('\n')}\n`)
  const program = join(room, 'built/panewise.mjs')
  const check = timed(3, process.execPath, [program, 'check', path, '--plan-tolerance', '0', '--json'])
  const ours = timed(3, process.execPath, [program, 'adjust', path, '--out', join(room, 'out'), '--overwrite', '--json'])
  const { adjusted } = JSON.parse(ours.out) as { adjusted: { iterations: number; rms_mm: number; held: { limits: number } } }
  const theirs = timed(2, 'python3', [join(here, 'adjust-scipy.py'), path, join(room, 'scipy.obj')])
  const [iterations, rms] = theirs.out.split(',')
  const row = [
    commit, cpus()[0]?.model.split(' ').slice(0, 2).join(' ') ?? '', plan.panelCount, check.seconds.toFixed(2), ours.seconds.toFixed(2), ours.megabytes,
    adjusted.iterations, adjusted.rms_mm.toFixed(4), adjusted.held.limits, theirs.seconds.toFixed(2), theirs.megabytes, iterations, rms,
    (ours.seconds / theirs.seconds).toFixed(2), ours.elapsed.toFixed(2), theirs.elapsed.toFixed(2), (ours.elapsed / theirs.elapsed).toFixed(2),
  ].join(',')
  appendFileSync(file, `${row}\n`)
  process.stdout.write(`${row}\n`)
}
process.stdout.write(readFileSync(file, 'utf8').split('\n')[0] + '\n')
rmSync(room, { recursive: true })
