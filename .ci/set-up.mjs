/**
 * Sets the project up: installs the packages of the lock file when they are missing or the lock has changed. Plain Node,
 * since nothing is installed yet when this runs. A stamp inside node_modules holds the hash of the lock it was made from.
 */
import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

const root = join(dirname(fileURLToPath(import.meta.url)), '..')
const stamp = join(root, 'node_modules', '.set-up-of-lock')
const leastNode = 20

/** Ends with a sentence instead of a trace. */
function giveUp(sentence) {
  process.stderr.write(`${sentence}\n`)
  process.exit(1)
}

const node = Number(process.versions.node.split('.')[0])
if (node < leastNode) giveUp(`Node ${process.versions.node} is too old: install Node ${leastNode} or newer from nodejs.org and try again.`)

const lock = createHash('sha256').update(readFileSync(join(root, 'package-lock.json'))).digest('hex')
const made = existsSync(stamp) ? readFileSync(stamp, 'utf8') : ''
if (made !== lock) {
  process.stdout.write('Installing the packages (npm ci), once ...\n')
  // The shell finds npm under its own name on every system; the words are fixed.
  const done = spawnSync('npm ci --no-audit --no-fund --loglevel=error', { cwd: root, stdio: 'inherit', shell: true })
  if (done.status !== 0) {
    giveUp('The packages could not be installed. "npm ci" needs the package registry: look at its message above, check the connection or proxy, and try again.')
  }
  writeFileSync(stamp, lock)
}
