/** What the scripts beside this one share: where the project is, and how to run a tool that it has installed. */
import { spawnSync } from 'node:child_process'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

export const root = join(dirname(fileURLToPath(import.meta.url)), '..')

/** Runs a script of an installed package with this Node; returns its exit code. */
export function tool(script, words, options = {}) {
  const done = spawnSync(process.execPath, [join(root, 'node_modules', script), ...words], { cwd: root, stdio: 'inherit', ...options })
  return done.status ?? 1
}

export const vite = 'vite/bin/vite.js'
export const vitest = 'vitest/vitest.mjs'
export const tsc = 'typescript/bin/tsc'
export const eslint = 'eslint/bin/eslint.js'
