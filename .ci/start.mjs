/**
 * `npm start`: builds the program, runs the main job on a sample and says where roof and lists are; then builds the page and
 * serves it with the sample open. `npm start -- --once` stops after the sample.
 */
import { spawnSync } from 'node:child_process'
import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { servePage } from './serve-page.mjs'
import { root, tool, vite } from './tools.mjs'

/** The sample that is shown; without it the first plan among the samples. */
const preferred = 'tern-yard-court.geojson'
const out = join('out', 'sample')

if (tool(vite, ['build', '--mode', 'cli', '--logLevel', 'warn']) !== 0) {
  process.stderr.write('The program could not be built; the message is above.\n')
  process.exit(1)
}
const plans = readdirSync(join(root, 'samples')).filter((name) => /\.(dxf|obj|svg|geojson)$/i.test(name)).sort()
const sample = plans.includes(preferred) ? preferred : plans[0]
if (sample === undefined) {
  process.stderr.write('There is no plan in the folder samples.\n')
  process.exit(1)
}
const words = ['raise', join('samples', sample), '--out', out, '--overwrite']
process.stdout.write(`\n> panewise ${words.join(' ')}\n\n`)
const done = spawnSync(process.execPath, [join(root, 'dist', 'panewise.mjs'), ...words], { cwd: root, stdio: 'inherit' })
if (done.status !== 2 && done.status !== null) process.stdout.write(`\nThe roof is in ${join(out, 'roof.obj')}, the lists are panels.csv, joints.csv and nodes.csv beside it.\n`)
// Verdicts other than "lifts" have codes of their own; here they are no failure.
process.exitCode = done.status === 2 || done.status === null ? 1 : 0

if (!process.argv.includes('--once') && process.exitCode !== 1) {
  if (tool(vite, ['build', '--mode', 'page', '--logLevel', 'warn']) !== 0) {
    process.stderr.write('The page could not be built; the message is above.\n')
    process.exit(1)
  }
  await servePage(sample)
}
