/** The bundled command line, built once for a test file and run as a process of its own. */
import { spawn, spawnSync, type ChildProcess } from 'node:child_process'
import { mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { build } from 'vite'

const root = join(import.meta.dirname, '../..')

export interface Ran {
  readonly code: number | null
  readonly out: string
  readonly err: string
}

export interface Program {
  /** Folder for the test's own files; the processes run in it. */
  readonly room: string
  run(words: readonly string[], options?: { input?: string | Uint8Array; env?: Record<string, string> }): Ran
  /** Standard input stays open, and nothing comes. */
  start(words: readonly string[]): ChildProcess
  /** Writes a file into the room and returns its name. */
  file(name: string, content: string | Uint8Array): string
  readonly path: string
  close(): void
}

export async function program(): Promise<Program> {
  const room = mkdtempSync(join(tmpdir(), 'panewise-cli-'))
  const built = join(room, 'built')
  await build({ root, mode: 'cli', logLevel: 'error', build: { outDir: built, emptyOutDir: true } })
  // What the bundle leaves outside is found where the project has it.
  symlinkSync(join(root, 'node_modules'), join(built, 'node_modules'))
  const path = join(built, 'panewise.mjs')
  const desk = join(room, 'desk')
  spawnSync('mkdir', [desk])
  return {
    room: desk,
    path,
    run(words, { input, env } = {}) {
      const done = spawnSync(process.execPath, [path, ...words], { cwd: desk, encoding: 'utf8', input, env: { ...process.env, ...env }, maxBuffer: 1 << 28 })
      return { code: done.status, out: done.stdout, err: done.stderr }
    },
    start: (words) => spawn(process.execPath, [path, ...words], { cwd: desk, stdio: ['pipe', 'pipe', 'pipe'] }),
    file(name, content) {
      writeFileSync(join(desk, name), content)
      return name
    },
    close: () => rmSync(room, { recursive: true, force: true }),
  }
}

/** m x n square bays as OBJ faces, z as a function of the place. */
export function gridObj(m: number, n: number, bay: number, z: (x: number, y: number) => number = () => 0): string {
  const lines: string[] = []
  for (let j = 0; j <= n; j += 1) for (let i = 0; i <= m; i += 1) lines.push(`v ${i * bay} ${j * bay} ${z(i * bay, j * bay)}`)
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      const a = j * (m + 1) + i + 1
      lines.push(`f ${a} ${a + 1} ${a + m + 2} ${a + m + 1}`)
    }
  }
  return `${lines.join('\n')}\n`
}
