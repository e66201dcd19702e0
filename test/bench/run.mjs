// Bundles a bench and runs it: node test/bench/run.mjs NAME [its arguments]; NAME.ts stands beside this file.
import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { build } from 'vite'

const here = import.meta.dirname
const [name, ...words] = process.argv.slice(2)
if (!/^[a-z-]+$/.test(name ?? '')) {
  process.stderr.write('Name a bench: npm run bench -- solver | path | answers | counts | adjust | counting-rule | page\n')
  process.exit(2)
}
// Within reach of the packages: what drives a browser is not bundled.
const outDir = mkdtempSync(join(here, '../../node_modules/.bench-'))
await build({
  configFile: false,
  root: join(here, '../..'),
  logLevel: 'error',
  build: { ssr: join(here, `${name}.ts`), outDir, emptyOutDir: false, target: 'node20', rolldownOptions: { output: { entryFileNames: 'bench.mjs' } } },
  ssr: { noExternal: true, external: ['playwright-core'] },
})
const { status } = spawnSync(process.execPath, [join(outDir, 'bench.mjs'), ...words], { stdio: 'inherit', env: { ...process.env, BENCH_FOLDER: here, BENCH_NAME: name } })
rmSync(outDir, { recursive: true })
process.exit(status ?? 1)
