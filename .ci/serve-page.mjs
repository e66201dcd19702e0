/** Serves the built page on this computer only; the next free port is taken when the usual one is not. */
import { join } from 'node:path'
import { preview } from 'vite'
import { root } from './tools.mjs'

/** Prints where the page is, last of all, and serves until it is stopped. The bare address opens the sample. */
export async function servePage(sample) {
  const opensSample = {
    name: 'opens-sample',
    configurePreviewServer(server) {
      server.middlewares.use((request, response, next) => {
        if (request.url !== '/') return next()
        response.writeHead(302, { location: `/?sample=${encodeURIComponent(sample)}` }).end()
      })
    },
  }
  const server = await preview({
    root, configFile: false, logLevel: 'silent', plugins: [opensSample], build: { outDir: join('dist', 'page') },
    preview: { host: 'localhost', port: 4173, strictPort: false },
  })
  const address = server.httpServer.address()
  process.stdout.write(`\nready at http://localhost:${typeof address === 'object' && address !== null ? address.port : 4173}\n`)
}
