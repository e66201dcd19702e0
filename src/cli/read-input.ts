/** Files and standard input as bytes, with a sentence for everything that can go wrong. */
import nodeFs from 'node:fs'
import { basename } from 'node:path'
import { fail, ok, type Result } from '../base/result.ts'
import type { Source } from '../formats/format.ts'
import { osCode, osReason } from './os-reason.ts'

/** How standard input is called in sentences, summaries and folders. */
export const stdinName = 'stdin'

/** Larger inputs are refused before they fill the memory (a text longer than 512 MiB is none to the engine); a plan of 100,000 panels is 8 MB. */
export const largestInput = 400 * 2 ** 20

const chunk = 1 << 20

export type ReadCalls = Pick<typeof nodeFs, 'openSync' | 'readSync' | 'fstatSync' | 'closeSync'>

/**
 * The bytes of a file; `path` "-" is standard input. The name is the path's last part. Fails with code "cannot-read",
 * "is-a-folder", "too-large" or "file-changed" (it grew, shrank or was written while it was read).
 */
export async function readInput(path: string, fs: ReadCalls = nodeFs, most = largestInput): Promise<Result<Source>> {
  return path === '-' ? await readStdin(most) : readFile(path, fs, most)
}

function readFile(path: string, fs: ReadCalls, most: number): Result<Source> {
  const name = basename(path)
  const place = { file: path }
  let file: number | null = null
  try {
    file = fs.openSync(path, 'r')
    const before = fs.fstatSync(file)
    if (before.isDirectory()) return fail('is-a-folder', 'this is a folder, not a plan', place, 'name a file in it')
    if (before.size > most) return tooLarge(path, most)
    const parts: Uint8Array[] = []
    let length = 0
    for (;;) {
      // One byte more than expected shows a file that grows.
      const part = new Uint8Array(Math.max(chunk, before.size - length + 1))
      const count = fs.readSync(file, part, 0, part.length, null)
      if (count === 0) break
      parts.push(part.subarray(0, count))
      length += count
      if (length > most) return tooLarge(path, most)
    }
    const after = fs.fstatSync(file)
    if (before.isFile() && (after.size !== length || after.mtimeMs !== before.mtimeMs)) {
      return fail('file-changed', 'the file changed while it was read', place, 'run it again when nothing writes to it')
    }
    return ok({ name, bytes: joined(parts, length) })
  } catch (error) {
    if (osCode(error) === 'EISDIR') return fail('is-a-folder', 'this is a folder, not a plan', place, 'name a file in it')
    return fail('cannot-read', `the file cannot be read, since ${osReason(error)}`, place, osCode(error) === 'ENOENT' ? 'check its name' : null)
  } finally {
    if (file !== null) fs.closeSync(file)
  }
}

async function readStdin(most: number): Promise<Result<Source>> {
  const parts: Uint8Array[] = []
  let length = 0
  try {
    for await (const part of process.stdin as AsyncIterable<Uint8Array>) {
      parts.push(part)
      length += part.length
      if (length > most) return tooLarge(stdinName, most)
    }
  } catch (error) {
    return fail('cannot-read', `standard input cannot be read, since ${osReason(error)}`, { file: stdinName })
  }
  return ok({ name: stdinName, bytes: joined(parts, length) })
}

const tooLarge = (file: string, most: number): Result<never> =>
  fail('too-large', `this is more than ${Math.round(most / 2 ** 20)} MiB`, { file }, 'export only the panels')

function joined(parts: readonly Uint8Array[], length: number): Uint8Array {
  if (parts.length === 1) return parts[0]
  const bytes = new Uint8Array(length)
  let at = 0
  for (const part of parts) {
    bytes.set(part, at)
    at += part.length
  }
  return bytes
}
