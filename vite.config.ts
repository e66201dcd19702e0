import { defineConfig } from 'vitest/config'
import packageJson from './package.json' with { type: 'json' }

/** Two builds from one source: `--mode cli` bundles the command line into one file; the page comes with its own mode. */
export default defineConfig(({ mode }) => ({
  define: { __VERSION__: JSON.stringify(packageJson.version) },
  build: {
    ssr: 'src/cli/panewise.ts',
    outDir: 'dist',
    emptyOutDir: false,
    target: 'node20',
    rolldownOptions: { output: { entryFileNames: '[name].mjs' } },
  },
  ssr: { noExternal: true },
  test: {
    include: mode === 'fuzz' ? ['test/**/*.fuzz.ts'] : ['test/**/*.test.ts'],
    testTimeout: 60_000,
  },
}))
