/** The page as it is built, on a local address. */
import { mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { extname, join, normalize } from 'node:path'
import { build } from 'vite'

const types: Record<string, string> = { '.html': 'text/html', '.js': 'text/javascript', '.css': 'text/css', '.woff2': 'font/woff2', '.wasm': 'application/wasm' }

export interface Site {
  readonly address: string
  close(): void
}

/** Builds into a folder of its own and serves it below a path, to show that the site's addresses are relative. */
export async function builtSite(): Promise<Site> {
  const folder = mkdtempSync(join(tmpdir(), 'panewise-page-'))
  await build({ root: join(import.meta.dirname, '..', '..'), mode: 'page', logLevel: 'error', build: { outDir: folder, emptyOutDir: true } })
  const server = createServer((request, response) => {
    const path = decodeURIComponent(new URL(request.url ?? '/', 'http://x').pathname)
    const file = normalize(join(folder, path.replace(/^\/some\/folder\//, '').replace(/^$/, 'index.html')))
    if (!path.startsWith('/some/folder/') || !file.startsWith(folder) || !statSync(file, { throwIfNoEntry: false })?.isFile()) {
      response.writeHead(404).end()
      return
    }
    response.writeHead(200, { 'content-type': types[extname(file)] ?? 'application/octet-stream' }).end(readFileSync(file))
  })
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  return {
    address: `http://127.0.0.1:${(server.address() as AddressInfo).port}/some/folder/`,
    close() {
      server.close()
      rmSync(folder, { recursive: true, force: true })
    },
  }
}
