import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { defineConfig } from 'vitest/config'
import react from '@vitejs/plugin-react'
import type { Plugin } from 'vite'
import packageJson from './package.json' with { type: 'json' }

/** The development server writes styles into the page, which the page's own policy forbids: it is served without one. */
const withoutPolicy: Plugin = {
  name: 'without-policy',
  apply: 'serve',
  transformIndexHtml: (html) => html.replace(/<meta http-equiv="Content-Security-Policy"[^>]*>/, ''),
}

/** The solver's WebAssembly beside the command line's chunk that loads it: builds for Node leave assets where they are. */
const solverBesideCli: Plugin = {
  name: 'solver-beside-cli',
  apply: 'build',
  generateBundle() {
    const file = createRequire(import.meta.url).resolve('highs/runtime')
    this.emitFile({ type: 'asset', fileName: 'highs.wasm', source: readFileSync(file) })
  },
}

/** Two builds from one source: `--mode cli` bundles the command line into one file, any other mode makes the page. */
export default defineConfig(({ mode }) => ({
  define: { __VERSION__: JSON.stringify(packageJson.version) },
  // Relative paths: the page works from any folder of any server.
  base: './',
  plugins: [react(), withoutPolicy, ...(mode === 'cli' ? [solverBesideCli] : [])],
  worker: { format: 'es' },
  build: mode === 'page' ? { outDir: 'dist/page', emptyOutDir: true, target: 'es2022', assetsInlineLimit: 0, chunkSizeWarningLimit: 1200 } : {
    ssr: 'src/cli/panewise.ts',
    outDir: 'dist',
    emptyOutDir: false,
    target: 'node20',
    rolldownOptions: { output: { entryFileNames: '[name].mjs', chunkFileNames: '[name].mjs' } },
  },
  ssr: { noExternal: true },
  test: {
    include: mode === 'fuzz' ? ['test/**/*.fuzz.ts'] : ['test/**/*.test.ts'],
    testTimeout: 60_000,
  },
}))
