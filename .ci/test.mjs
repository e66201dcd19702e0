/**
 * `npm test`: type check, lint and all tests; all three run even when one fails. Ends with "N passed, N failed", alone on
 * a line. Type check and lint count as one test each.
 */
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { eslint, tool, tsc, vitest } from './tools.mjs'

let passed = 0
let failed = 0

/** Counts one check by its exit code. */
function check(name, status) {
  process.stdout.write(`${name}: ${status === 0 ? 'passed' : 'failed'}\n`)
  if (status === 0) passed += 1
  else failed += 1
}

check('Type check', tool(tsc, ['--noEmit']))
check('Lint', tool(eslint, ['src', 'test', '--max-warnings', '0']))

const room = mkdtempSync(join(tmpdir(), 'panewise-results-'))
const results = join(room, 'results.json')
const status = tool(vitest, ['run', '--reporter=default', '--reporter=json', `--outputFile.json=${results}`, ...process.argv.slice(2)])
let counted = null
try {
  counted = JSON.parse(readFileSync(results, 'utf8'))
} catch {
  process.stdout.write('The tests left no results.\n')
}
rmSync(room, { recursive: true, force: true })
const { numPassedTests = 0, numFailedTests = 0, numFailedTestSuites = 0 } = counted ?? {}
passed += numPassedTests
failed += numFailedTests
// A test file that does not load has no test that fails, an unhandled error neither: both count as one.
if (status !== 0 && numFailedTests === 0) failed += Math.max(1, numFailedTestSuites)

process.stdout.write(`\n${passed} passed, ${failed} failed\n`)
process.exitCode = failed === 0 && status === 0 ? 0 : 1
