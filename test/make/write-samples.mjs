// Writes the samples folder again from samples.ts: node test/make/write-samples.mjs
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { runnerImport } from 'vite'

const { module } = await runnerImport(join(import.meta.dirname, 'samples.ts'), { configFile: false, logLevel: 'error' })
for (const [name, text] of module.sampleFiles()) writeFileSync(join(import.meta.dirname, '../../samples', name), text)
