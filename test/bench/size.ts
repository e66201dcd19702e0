/**
 * Large drawings read in processes of their own: 200,000 segments of which 5,000 are the roof, with its layer named and
 * without. Seconds, peak memory, and the longest time between two reports of progress, in size.csv.
 */
import { spawnSync } from 'node:child_process'
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { read } from '../../src/job/run.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import { clutteredDxf } from '../make/cluttered.ts'

const cases: readonly (readonly [name: string, segments: number, layers: readonly string[] | null])[] = [
  ['20,000 segments, layer named', 20_000, ['ROOF']],
  ['20,000 segments, guessed', 20_000, null],
  ['200,000 segments, layer named', 200_000, ['ROOF']],
  ['200,000 segments, guessed', 200_000, null],
]

const one = process.argv[2]
if (one === undefined) {
  const rows = ['case,file_MB,panels,seconds,peak_MB,longest_silence_ms']
  for (const k of cases.keys()) {
    const { stdout } = spawnSync(process.execPath, [process.argv[1]!, String(k)], { encoding: 'utf8' })
    process.stdout.write(stdout)
    rows.push(stdout.trim())
  }
  writeFileSync(join(process.env.BENCH_FOLDER ?? '.', 'size.csv'), `${rows.join('\n')}\n`)
} else {
  const [name, segments, layers] = cases[Number(one)]!
  const bytes = new TextEncoder().encode(segments > 100_000 ? clutteredDxf(50, 49, segments) : clutteredDxf(20, 15, segments))
  const begun = performance.now()
  let last = begun, silence = 0
  const answer = await read({ command: 'read', source: { name: 'cluttered.dxf', bytes }, options: { ...noOptions, layers }, brief: null, levels: null, given: {} }, {
    onProgress: () => {
      const now = performance.now()
      silence = Math.max(silence, now - last)
      last = now
    },
  })
  const seconds = (performance.now() - begun) / 1000
  const panels = answer.ok ? answer.value.summary.plan.panels : answer.problem.code
  process.stdout.write(`"${name}",${(bytes.length / 1e6).toFixed(1)},${panels},${seconds.toFixed(2)},${(process.resourceUsage().maxRSS / 1024).toFixed(0)},${silence.toFixed(0)}\n`)
}
