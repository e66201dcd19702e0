/** The page as it is built, on a local address. */
import { spawn } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { extname, join, normalize } from 'node:path'

const types: Record<string, string> = { '.html': 'text/html', '.js': 'text/javascript', '.css': 'text/css', '.woff2': 'font/woff2', '.wasm': 'application/wasm' }

export interface Site {
  readonly address: string
  /** Where it was built. */
  readonly folder: string
  close(): void
}

/** Builds into a folder of its own and serves it below a path, to show that the site's addresses are relative. */
export async function builtSite(): Promise<Site> {
  const folder = mkdtempSync(join(tmpdir(), 'panewise-page-'))
  // In a process of its own, as the build runs for users: within the test runner its helper functions come out rewritten.
  const root = join(import.meta.dirname, '..', '..')
  const words = [join(root, 'node_modules', 'vite', 'bin', 'vite.js'), 'build', '--mode', 'page', '--outDir', folder, '--emptyOutDir', '--logLevel', 'error']
  const env = { ...process.env, NODE_ENV: 'production' }
  const code = await new Promise<number | null>((resolve) => spawn(process.execPath, words, { cwd: root, env, stdio: ['ignore', 'ignore', 'inherit'] }).on('close', resolve))
  if (code !== 0) throw new Error('The page could not be built.')
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
    folder,
    address: `http://127.0.0.1:${(server.address() as AddressInfo).port}/some/folder/`,
    close() {
      server.close()
      rmSync(folder, { recursive: true, force: true })
    },
  }
}
