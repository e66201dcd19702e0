// Writes the samples folder again from samples.ts: node test/make/write-samples.mjs
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { runnerImport } from 'vite'

const { module } = await runnerImport(join(import.meta.dirname, 'samples.ts'), { configFile: false, logLevel: 'error' })
const { module: cures } = await runnerImport(join(import.meta.dirname, 'sample-cures.ts'), { configFile: false, logLevel: 'error' })
for (const [name, text] of module.sampleFiles()) writeFileSync(join(import.meta.dirname, '../../samples', name), text)
// Last, since it asks the program about the files that were just written.
writeFileSync(join(import.meta.dirname, '../../samples/cures.md'), await cures.cureTable())
const { module: answers } = await runnerImport(join(import.meta.dirname, 'sample-answers.ts'), { configFile: false, logLevel: 'error' })
writeFileSync(join(import.meta.dirname, '../sample-answers.csv'), await answers.sampleAnswersText())
