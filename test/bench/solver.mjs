// Bundles solver.ts and runs it: node test/bench/solver.mjs [panels ...] [--runs 5] [--keep]
import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { build } from 'vite'

const here = import.meta.dirname
const outDir = mkdtempSync(join(tmpdir(), 'solver-bench-'))
await build({
  configFile: false,
  root: join(here, '../..'),
  logLevel: 'error',
  build: {
    ssr: join(here, 'solver.ts'), outDir, emptyOutDir: false, target: 'node20',
    rolldownOptions: { output: { entryFileNames: 'solver.mjs' } },
  },
  ssr: { noExternal: true },
})
const { status } = spawnSync(process.execPath, [join(outDir, 'solver.mjs'), ...process.argv.slice(2)], {
  stdio: 'inherit', env: { ...process.env, BENCH_FOLDER: here },
})
rmSync(outDir, { recursive: true })
process.exit(status ?? 1)
