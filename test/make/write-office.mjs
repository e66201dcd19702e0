// Writes test/corpus/office again from office.ts: node test/make/write-office.mjs
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { runnerImport } from 'vite'

const { module } = await runnerImport(join(import.meta.dirname, 'office.ts'), { configFile: false, logLevel: 'error' })
for (const [name, text] of module.officeFiles()) writeFileSync(join(import.meta.dirname, '../corpus/office', name), text)
